"""Rows of a table, said in the language of claims.

The instances of a claim are the rows of nested loops that satisfy a condition
(FORMAT.md, section 2). Here it goes the other way: rows are given, and ranges and a
condition are written that hold for these rows and no others. What a condition may
be long is bounded, so many rows without a pattern are cut into several *boxes*.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import prod

from certify.claim.instances import MAX_INSTANCES, MAX_ROWS_TRIED, Row
from certify.claim.language import MAX_LITERAL, TRUTH, read_expression
from certify.claim.names import Scope
from certify.errors import ClaimError

_SHORTEST_RUN = 3


@dataclass(frozen=True)
class Box:
    """Ranges, one for each parameter, and a condition that leaves exactly the rows.

    rows: sorted, as the loops meet them. where: None when all of the box is meant.
    """

    ranges: tuple[tuple[int, int], ...]
    where: str | None
    rows: tuple[Row, ...]


def cut_into_boxes(parameters: Sequence[str], rows: Sequence[Row]) -> list[Box]:
    """Cover different rows by as few boxes as going through them in order gives.

    A single row is always a box, so this ends. Cost: the rows, times the logarithm of
    their number, for each box.
    """
    left, boxes = sorted(rows), []
    while left:
        size = len(left)
        while (box := _try_box(parameters, left[:size])) is None:
            size = size * 3 // 4
        boxes.append(box)
        left = left[size:]
    return boxes


def _try_box(parameters: Sequence[str], rows: Sequence[Row]) -> Box | None:
    """Return the box of all these rows; None if a claim cannot say that."""
    columns = list(zip(*rows, strict=True))
    ranges = tuple((min(column), max(column)) for column in columns)
    sizes = [high - low + 1 for low, high in ranges]
    if any(low < high and max(-low, high) > MAX_LITERAL for low, high in ranges):
        return None
    loops = sum(prod(sizes[: k + 1]) for k in range(len(sizes)))
    if len(rows) > 1 and (loops > MAX_ROWS_TRIED or len(rows) > MAX_INSTANCES):
        return None
    if prod(sizes) == len(rows):
        return Box(ranges, None, tuple(rows))
    where = render_condition(parameters, rows)
    try:
        read_expression(where, sort=TRUTH, scope=Scope(tuple(parameters)), where="where")
    except ClaimError:
        return None  # too long
    return Box(ranges, where, tuple(rows))


def render_condition(parameters: Sequence[str], rows: Sequence[Row]) -> str:
    """Return a condition that holds exactly for these rows, of one parameter or more."""
    if len(parameters) == 1:
        return " or ".join(_render_values(parameters[0], [row[0] for row in rows]))
    tails: dict[int, list[Row]] = {}
    for row in rows:
        tails.setdefault(row[0], []).append(row[1:])
    heads: dict[tuple[Row, ...], list[int]] = {}
    for head, tail in tails.items():
        heads.setdefault(tuple(tail), []).append(head)
    terms = []
    for rest, values in heads.items():
        first = _bracket(" or ".join(_render_values(parameters[0], values)))
        terms.append(f"{first} and {_bracket(render_condition(parameters[1:], rest))}")
    return " or ".join(terms)


def _bracket(text: str) -> str:
    return f"({text})" if " or " in text else text


def _render_values(name: str, values: Sequence[int]) -> Iterator[str]:
    """Yield conditions of which one holds exactly for these values, in ascending order."""
    single: list[int] = []
    for low, high in _runs(values):
        if high - low + 1 >= _SHORTEST_RUN:
            yield f"{low} <= {name} <= {high}"
        else:
            single += range(low, high + 1)
    if len(single) == 1:
        yield f"{name} == {single[0]}"
    elif single:
        yield f"{name} in {{{', '.join(map(str, single))}}}"


def _runs(values: Sequence[int]) -> Iterator[tuple[int, int]]:
    """Yield the first and last of each run of consecutive values."""
    low = high = values[0]
    for value in values[1:]:
        if value != high + 1:
            yield low, high
            low = value
        high = value
    yield low, high
