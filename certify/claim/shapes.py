"""The functions that a rule is put together from, in the shapes that occur most.

`a - b` as one function instead of three, `... <= 7` with the 7 inside, `... in
{4, 7}` with the set inside: each saves a call or two for every pair of
vertices. Rarer shapes take the general form.
"""

from __future__ import annotations

import ast
import operator
from collections.abc import Callable, Mapping
from typing import Any

# Vertices are integers or tuples of integers, by the scope of the rule: Any.
Run = Callable[[Any, Any], int]
Leaf = tuple[str, int | None]
"""A part that is just a vertex, or one coordinate of it: "a" or "b", and which."""


def leaf(vertex: str, index: int | None) -> Run:
    """Return the function for a vertex (index None) or one of its coordinates."""
    if vertex == "a":
        return (lambda a, b: a) if index is None else (lambda a, b: a[index])
    return (lambda a, b: b) if index is None else (lambda a, b: b[index])


def of_leaves(op: type[ast.operator], left: Leaf, right: Leaf) -> Run | None:
    """Return a + b or a - b of whole vertices or equal coordinates, None for other shapes."""
    index = left[1]
    if (left[0], right[0]) != ("a", "b") or index != right[1]:
        return None
    if op is ast.Sub:
        return (lambda a, b: a - b) if index is None else (lambda a, b: a[index] - b[index])
    if op is ast.Add:
        return (lambda a, b: a + b) if index is None else (lambda a, b: a[index] + b[index])
    return None


def distance(index: int | None) -> Run:
    """Return abs(a - b), of whole vertices or of one coordinate."""
    if index is None:
        return lambda a, b: abs(a - b)
    return lambda a, b: abs(a[index] - b[index])


COMBINE: Mapping[type[ast.operator], Callable[[int, int], int]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
}

COMBINED: Mapping[type[ast.operator], Callable[[Run, Run], Run]] = {
    ast.Add: lambda f, g: lambda a, b: f(a, b) + g(a, b),
    ast.Sub: lambda f, g: lambda a, b: f(a, b) - g(a, b),
    ast.Mult: lambda f, g: lambda a, b: f(a, b) * g(a, b),
}

COMBINED_WITH: Mapping[type[ast.operator], Callable[[Run, int], Run]] = {
    ast.Add: lambda f, c: lambda a, b: f(a, b) + c,
    ast.Sub: lambda f, c: lambda a, b: f(a, b) - c,
    ast.Mult: lambda f, c: lambda a, b: f(a, b) * c,
}

COMPARE: Mapping[type[ast.cmpop], Callable[[Any, Any], bool]] = {
    ast.Eq: operator.eq,
    ast.NotEq: operator.ne,
    ast.Lt: operator.lt,
    ast.LtE: operator.le,
    ast.Gt: operator.gt,
    ast.GtE: operator.ge,
    ast.In: lambda value, values: value in values,
    ast.NotIn: lambda value, values: value not in values,
}

COMPARED_WITH: Mapping[type[ast.cmpop], Callable[[Callable[[Any, Any], Any], Any], Run]] = {
    ast.Eq: lambda f, c: lambda a, b: f(a, b) == c,
    ast.NotEq: lambda f, c: lambda a, b: f(a, b) != c,
    ast.Lt: lambda f, c: lambda a, b: f(a, b) < c,
    ast.LtE: lambda f, c: lambda a, b: f(a, b) <= c,
    ast.Gt: lambda f, c: lambda a, b: f(a, b) > c,
    ast.GtE: lambda f, c: lambda a, b: f(a, b) >= c,
    ast.In: lambda f, c: lambda a, b: f(a, b) in c,
    ast.NotIn: lambda f, c: lambda a, b: f(a, b) not in c,
}
