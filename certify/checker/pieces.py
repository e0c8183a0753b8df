"""Arithmetic of pieces: the linear forms that a part of a rule may be equal to (FORMAT.md, 8.1).

Pieces map a form (A, B, N) to an interval [low, high]: the part is A*a.x + B*b.x + N*n + k
for one of the forms and a k of its interval. Pieces of one form are made one, with the
hull of their intervals, which only says less.
"""

from __future__ import annotations

import ast
from collections.abc import Iterable

from .rules import MOST_RESULT
from .strict import BadClaim

Form = tuple[int, int, int]
Interval = tuple[int, int]
Pieces = dict[Form, Interval]

SMALL: Form = (0, 0, 0)
MOST_PIECES = 100


def one(value: int) -> Pieces:
    """Return the pieces of a constant."""
    return {SMALL: (value, value)}


def is_small(pieces: Pieces) -> bool:
    """Return whether a part has no form but (0, 0, 0)."""
    return pieces.keys() == {SMALL}


def unite(parts: Iterable[Pieces], *, most: int | None = MOST_PIECES) -> Pieces:
    """Return the pieces of all parts, those of one form made one.

    most: how many there may be; None where the parts are not one part of a rule.
    """
    return _gather((item for part in parts for item in part.items()), most)


def add(e: Pieces, f: Pieces) -> Pieces:
    """Return the pieces of e + f."""
    return _gather(
        ((a + d, b + g, c + h), (low + other_low, high + other_high))
        for (a, b, c), (low, high) in e.items()
        for (d, g, h), (other_low, other_high) in f.items()
    )


def difference(e: Pieces, f: Pieces) -> Iterable[tuple[Form, Interval]]:
    """Return the pieces of e - f, of which there may be many, one by one."""
    for (a, b, c), (low, high) in e.items():
        for (d, g, h), (other_low, other_high) in f.items():
            yield (a - d, b - g, c - h), (low - other_high, high - other_low)


def scale(e: Pieces, k: int) -> Pieces:
    """Return the pieces of k * e."""
    return _gather(
        ((k * a, k * b, k * c), (min(k * low, k * high), max(k * low, k * high)))
        for (a, b, c), (low, high) in e.items()
    )


def _gather(items: Iterable[tuple[Form, Interval]], most: int | None = MOST_PIECES) -> Pieces:
    pieces: Pieces = {}
    for form, (low, high) in items:
        known = pieces.get(form, (low, high))
        pieces[form] = min(low, known[0]), max(high, known[1])
        if most is not None and len(pieces) > most:
            raise BadClaim(f"no strip: a part of the rule has more than {most} pieces")
    return pieces


def size(interval: Interval) -> int:
    """Return the largest absolute value of an interval."""
    return max(abs(interval[0]), abs(interval[1]))


def small_result(operator: ast.operator, x: Interval, y: Interval) -> Interval:
    """Return an interval that holds all results of an operator of two small parts."""
    if isinstance(operator, ast.Mult):
        corners = [u * v for u in x for v in y]
        return min(corners), max(corners)
    if isinstance(operator, ast.FloorDiv):
        # abs(x // y) <= abs(x) for every y but 0, and 0 is an error.
        return -size(x), size(x)
    if isinstance(operator, ast.Mod):
        if y[0] == y[1] > 0:
            return 0, y[0] - 1
        return -size(y), size(y)
    # A power: a result beyond 2^53 is an error, and so is a negative exponent.
    base, exponent = size(x), max(0, y[1])
    width = 1 if base <= 1 else MOST_RESULT if exponent > 53 else min(MOST_RESULT, base**exponent)
    return -width, width
