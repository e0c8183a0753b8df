"""The rule language, as the checker reads it (FORMAT.md, 3.1).

Python's parser gives a tree; each kind of node that the language knows is
turned into a small function of the *values*, a list that holds the parameters
and coordinates at fixed places. A node that the language does not know is an
error. No text is ever executed.
"""

from __future__ import annotations

import ast
import operator
import re
import warnings
from collections.abc import Callable, Mapping
from contextlib import suppress
from typing import Any

from .predicates import FUNCTIONS, PREDICATES
from .strict import BadClaim

Values = list[int]
Evaluate = Callable[[Values], Any]
INTEGER, TRUTH, SET, LISTED = "an integer", "a truth value", "a set", "a list"

MOST_CHARACTERS, MOST_NODES, MOST_LEVELS = 2000, 500, 40
MOST_LITERAL, MOST_RESULT = 10**12, 2**53
# Spaces, tabs, line ends, and printable ASCII but for # \ " ' and `.
_TEXT = re.compile(r"[\t\n !$-&(-\[\]-_a-~]*")


def _power(base: int, exponent: int) -> int:
    if exponent < 0:
        raise BadClaim("a negative exponent")
    if abs(base) > 1 and exponent > 53:
        raise BadClaim("a result is beyond 2^53")
    return int(base**exponent)


def _divisor(value: int) -> int:
    if value == 0:
        raise BadClaim("a division by zero")
    return value


_ARITHMETIC: dict[type[ast.operator], Callable[[int, int], int]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.FloorDiv: lambda x, y: x // _divisor(y),
    ast.Mod: lambda x, y: x % _divisor(y),
    ast.Pow: _power,
}
_COMPARISON: dict[type[ast.cmpop], Callable[[Any, Any], bool]] = {
    ast.Eq: operator.eq,
    ast.NotEq: operator.ne,
    ast.Lt: operator.lt,
    ast.LtE: operator.le,
    ast.Gt: operator.gt,
    ast.GtE: operator.ge,
    ast.In: lambda x, y: x in y,
    ast.NotIn: lambda x, y: x not in y,
}


def compile_rule(text: object, places: Mapping[str, int], sort: str) -> Evaluate:
    """Turn a text into a function of the values; `places` says where each name's value is."""
    if not isinstance(text, str):
        raise BadClaim("an expression, a text in quotes, is needed")
    if len(text) > MOST_CHARACTERS or not _TEXT.fullmatch(text):
        raise BadClaim(f"more than 2,000 characters, or strange ones, in {text!r}")
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error")
            tree = ast.parse(text.strip(), mode="eval").body
    except (SyntaxError, ValueError, RecursionError, MemoryError, Warning):
        raise BadClaim(f"this is not an expression: {text!r}") from None
    _limit_size(tree)
    found, evaluate = Compiler(places).compile(tree)
    if found != sort:
        raise BadClaim(f"{text!r} is {found} and not {sort}")
    return evaluate


def _limit_size(tree: ast.expr) -> None:
    """Refuse a large tree; after this, recursion over it is at most 40 deep."""
    waiting, nodes = [(tree, 1)], 0
    while waiting:
        node, level = waiting.pop()
        nodes += 1
        if nodes > MOST_NODES or level > MOST_LEVELS:
            raise BadClaim("the expression has more than 500 nodes or 40 levels")
        children = ast.iter_child_nodes(node)
        waiting += [(child, level + 1) for child in children if isinstance(child, ast.expr)]


class Compiler:
    """Turns nodes into functions; each method returns the sort and the function."""

    def __init__(self, places: Mapping[str, int]) -> None:
        self.places = places

    def compile(self, node: ast.expr) -> tuple[str, Evaluate]:
        """Return the sort of a node and the function that evaluates it."""
        method = getattr(self, "on_" + type(node).__name__, None)
        if method is None:
            raise BadClaim(f"{type(node).__name__} is not part of the language")
        compiled: tuple[str, Evaluate] = method(node)
        return compiled

    def want(self, sort: str, node: ast.expr) -> Evaluate:
        """Return the function of a node that must have this sort."""
        found, evaluate = self.compile(node)
        if found != sort:
            raise BadClaim(f"{ast.unparse(node)!r} is {found} and not {sort}")
        return evaluate

    def on_Constant(self, node: ast.Constant) -> tuple[str, Evaluate]:
        value = node.value
        if type(value) is bool:
            return TRUTH, lambda values: value
        if type(value) is not int or value > MOST_LITERAL:
            raise BadClaim("a literal is not an integer up to 10^12")
        return INTEGER, lambda values: value

    def on_Name(self, node: ast.Name) -> tuple[str, Evaluate]:
        if node.id in self.places:
            return INTEGER, operator.itemgetter(self.places[node.id])
        if node.id in ("true", "false"):
            return TRUTH, lambda values, truth=node.id == "true": truth
        raise BadClaim(f"unknown name {node.id!r}")

    def on_Attribute(self, node: ast.Attribute) -> tuple[str, Evaluate]:
        name = f"{node.value.id}.{node.attr}" if isinstance(node.value, ast.Name) else "?"
        if name not in self.places:
            raise BadClaim(f"unknown name {name!r}")
        return INTEGER, operator.itemgetter(self.places[name])

    def on_UnaryOp(self, node: ast.UnaryOp) -> tuple[str, Evaluate]:
        if isinstance(node.op, ast.Not):
            truth = self.want(TRUTH, node.operand)
            return TRUTH, lambda values: not truth(values)
        number = self.want(INTEGER, node.operand)
        if isinstance(node.op, ast.USub):
            return INTEGER, lambda values: -number(values)
        if isinstance(node.op, ast.UAdd):
            return INTEGER, number
        raise BadClaim("'~' is not part of the language")

    def on_BinOp(self, node: ast.BinOp) -> tuple[str, Evaluate]:
        apply = _ARITHMETIC.get(type(node.op))
        if apply is None:
            raise BadClaim(f"{type(node.op).__name__} is not part of the language")
        left = self.want(INTEGER, node.left)
        right = self.want(INTEGER, node.right)

        def evaluate(values: Values) -> int:
            result = apply(left(values), right(values))
            if -MOST_RESULT <= result <= MOST_RESULT:
                return result
            raise BadClaim("a result is beyond 2^53")

        return INTEGER, evaluate

    def on_BoolOp(self, node: ast.BoolOp) -> tuple[str, Evaluate]:
        parts = [self.want(TRUTH, part) for part in node.values]
        stop = isinstance(node.op, ast.Or)

        def evaluate(values: Values) -> bool:
            for part in parts:
                if bool(part(values)) is stop:
                    return stop
            return not stop

        return TRUTH, evaluate

    def on_IfExp(self, node: ast.IfExp) -> tuple[str, Evaluate]:
        test = self.want(TRUTH, node.test)
        sort, then = self.compile(node.body)
        other = self.want(sort, node.orelse)
        return sort, lambda values: then(values) if test(values) else other(values)

    def on_Compare(self, node: ast.Compare) -> tuple[str, Evaluate]:
        sides = [self.side(node.left)]
        steps = []
        for op, right in zip(node.ops, node.comparators, strict=True):
            sides.append(self.side(right, member=isinstance(op, ast.In | ast.NotIn)))
            (sort, _), (other, evaluate) = sides[-2:]
            if isinstance(op, ast.In | ast.NotIn):
                fits = sort == INTEGER and other in (SET, LISTED)
            elif isinstance(op, ast.Eq | ast.NotEq):
                fits = sort == other and sort != LISTED
            else:
                fits = type(op) in _COMPARISON and sort == other == INTEGER
            if not fits:
                raise BadClaim(f"{ast.unparse(node)!r} compares {sort} with {other}")
            steps.append((_COMPARISON[type(op)], evaluate))
        first = sides[0][1]
        if len(steps) == 1:
            compare, second = steps[0]
            return TRUTH, lambda values: compare(first(values), second(values))

        def evaluate_chain(values: Values) -> bool:
            left = first(values)
            for compare, side in steps:
                right = side(values)
                if not compare(left, right):
                    return False
                left = right
            return True

        return TRUTH, evaluate_chain

    def side(self, node: ast.expr, *, member: bool = False) -> tuple[str, Evaluate]:
        """Return one side of a comparison, which may be a display of integers.

        A tuple or list display is one only right of `in`, and not a set. A display
        without names is built once, unless that is an error.
        """
        if not isinstance(node, ast.Set) and not (
            member and isinstance(node, ast.Tuple | ast.List)
        ):
            return self.compile(node)
        if not node.elts:
            raise BadClaim("a set without an integer in it")
        parts = [self.want(INTEGER, part) for part in node.elts]
        sort = SET if isinstance(node, ast.Set) else LISTED
        if not any(isinstance(part, ast.Name) for part in ast.walk(node)):
            with suppress(BadClaim):
                constant = {part([]) for part in parts}
                return sort, lambda values: constant
        return sort, lambda values: {part(values) for part in parts}

    def on_Call(self, node: ast.Call) -> tuple[str, Evaluate]:
        name = node.func.id if isinstance(node.func, ast.Name) else "?"
        if node.keywords or not node.args:
            raise BadClaim(f"{name!r} is called without an integer")
        parts = [self.want(INTEGER, part) for part in node.args]
        first, count = parts[0], len(parts)
        if name in PREDICATES and count == 1:
            holds = PREDICATES[name]
            return TRUTH, lambda values: holds(first(values))
        if name == "abs" and count == 1:
            return INTEGER, lambda values: abs(first(values))
        if name in FUNCTIONS and count >= 2:
            apply = FUNCTIONS[name]
            return INTEGER, lambda values: apply(*[part(values) for part in parts])
        raise BadClaim(f"{name!r} is not a function of {count} integers")
