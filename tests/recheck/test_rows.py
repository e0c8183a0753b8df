"""Ranges and conditions that hold for the rows given, and for no others."""

from __future__ import annotations

import random
from itertools import product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from certify.claim.language import TRUTH, read_expression
from certify.claim.names import Scope
from certify.recheck.rows import Box, cut_into_boxes

NAMES = ("m", "n", "k")


def rows_of(box: Box, names: tuple[str, ...]) -> list[tuple[int, ...]]:
    """Return the rows of a box as a claim would have them: nested loops and a condition."""
    rows = list(product(*(range(low, high + 1) for low, high in box.ranges)))
    if box.where is None:
        return rows
    keep = read_expression(box.where, sort=TRUTH, scope=Scope(names), where="where")
    return [row for row in rows if keep.evaluate(row)]


@given(st.integers(1, 3), st.data())
def test_boxes_hold_exactly_the_rows(size: int, data: st.DataObject) -> None:
    names = NAMES[:size]
    row = st.tuples(*[st.integers(-4, 9)] * size)
    rows = data.draw(st.lists(row, min_size=1, max_size=60, unique=True))
    boxes = cut_into_boxes(names, rows)
    assert [row for box in boxes for row in rows_of(box, names)] == sorted(rows)
    assert all(list(box.rows) == rows_of(box, names) for box in boxes)


@pytest.mark.parametrize(
    ("rows", "ranges", "where"),
    [
        ([(3,), (1,), (2,)], ((1, 3),), None),
        ([(7,)], ((7, 7),), None),
        ([(1,), (2,), (3,), (5,), (9,)], ((1, 9),), "1 <= n <= 3 or n in {5, 9}"),
        ([(2,), (4,)], ((2, 4),), "n in {2, 4}"),
        ([(1,), (2,), (3,), (7,)], ((1, 7),), "1 <= n <= 3 or n == 7"),
    ],
)
def test_conditions_are_for_readers(
    rows: list[tuple[int, ...]], ranges: tuple[tuple[int, int], ...], where: str | None
) -> None:
    assert cut_into_boxes(("n",), rows) == [Box(ranges, where, tuple(sorted(rows)))]


def test_rows_without_a_pattern_are_cut_into_boxes() -> None:
    rows = [(n,) for n in sorted(random.Random(1).sample(range(100_000), 2_000))]
    boxes = cut_into_boxes(("n",), rows)
    assert 2 <= len(boxes) <= 20
    assert [row for box in boxes for row in box.rows] == rows
    assert all(rows_of(box, ("n",)) == list(box.rows) for box in boxes)


def test_large_numbers_stand_alone() -> None:
    rows = [(1,), (2**53,), (-(2**53),)]
    boxes = cut_into_boxes(("n",), rows)
    assert [box.ranges for box in boxes] == [((n, n),) for (n,) in sorted(rows)]
    assert all(box.where is None for box in boxes)
