"""A linear program that grows by rows, and answers with both sides' values.

A thin layer over HiGHS (Huangfu and Hall, Math. Programming Computation 10
(2018) 119-142): the simplex method, one thread, a fixed seed, no presolve, so the same
calls give the same answer.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import highspy
import numpy as np

from certify.search.budget import Budget

INFINITY: float = highspy.kHighsInf

Column = tuple[float, float, float, Sequence[tuple[int, float]]]
"""Lower bound, upper bound, cost, and entries (row, value)."""

Row = tuple[float, float, Sequence[tuple[int, float]]]
"""Lower bound, upper bound, and entries (column, value)."""


@dataclass(frozen=True)
class Optimum:
    """An optimal solution: the values of the columns and the prices of the rows."""

    value: float
    columns: list[float]
    prices: list[float]


class _Quiet(highspy.Highs):
    """HiGHS without the callbacks: enabling them greets on standard output."""

    def enableCallbacks(self) -> None:  # noqa: N802 - the name is the library's
        """Leave the callbacks off."""


class LinearProgram:
    """Minimise costs over columns within bounds, subject to rows within bounds."""

    def __init__(self) -> None:
        # The library's constructor carries no annotations.
        self._highs = _Quiet()  # type: ignore[no-untyped-call]
        for option, value in (
            ("output_flag", False),
            ("threads", 1),
            ("random_seed", 0),
            ("presolve", "off"),
            ("solver", "simplex"),
        ):
            self._highs.setOptionValue(option, value)

    def add_rows(self, bounds: Sequence[tuple[float, float]]) -> None:
        """Add rows without entries."""
        empty = np.empty(0, dtype=np.int32)
        starts = np.zeros(len(bounds), dtype=np.int32)
        lower, upper = _columns_of(bounds)
        self._highs.addRows(len(bounds), lower, upper, 0, starts, empty, np.empty(0))

    def add_columns(self, columns: Sequence[Column]) -> None:
        """Add columns with their entries in rows that exist."""
        starts, index, values = _pack([entries for *_, entries in columns])
        lower, upper = _columns_of([(low, high) for low, high, *_ in columns])
        costs = np.array([cost for _, _, cost, _ in columns], dtype=np.float64)
        count = len(columns)
        self._highs.addCols(count, costs, lower, upper, len(index), starts, index, values)

    def add_full_rows(self, rows: Sequence[Row]) -> None:
        """Add rows with their entries in columns that exist."""
        starts, index, values = _pack([entries for *_, entries in rows])
        lower, upper = _columns_of([(low, high) for low, high, _ in rows])
        self._highs.addRows(len(rows), lower, upper, len(index), starts, index, values)

    def set_bounds(self, columns: Sequence[tuple[int, float, float]]) -> None:
        """Change bounds: (column, lower, upper)."""
        index = np.array([j for j, _, _ in columns], dtype=np.int32)
        lower, upper = _columns_of([(low, high) for _, low, high in columns])
        self._highs.changeColsBounds(len(columns), index, lower, upper)

    def set_costs(self, costs: Sequence[float]) -> None:
        """Change the costs of the first columns."""
        index = np.arange(len(costs), dtype=np.int32)
        self._highs.changeColsCost(len(costs), index, np.array(costs, dtype=np.float64))

    def solve(self, *, budget: Budget) -> Optimum | None:
        """Return an optimum; None says that there is none, or the budget was spent."""
        highs = self._highs
        highs.setOptionValue("time_limit", highs.getRunTime() + budget.left)
        highs.run()
        if highs.getModelStatus() != highspy.HighsModelStatus.kOptimal:
            return None
        solution = highs.getSolution()
        return Optimum(highs.getObjectiveValue(), list(solution.col_value), list(solution.row_dual))


Floats = np.ndarray[tuple[int], np.dtype[np.float64]]
Ints = np.ndarray[tuple[int], np.dtype[np.int32]]


def _columns_of(pairs: Sequence[tuple[float, float]]) -> tuple[Floats, Floats]:
    return (
        np.array([low for low, _ in pairs], dtype=np.float64),
        np.array([high for _, high in pairs], dtype=np.float64),
    )


def _pack(lists: Sequence[Sequence[tuple[int, float]]]) -> tuple[Ints, Ints, Floats]:
    starts = np.zeros(len(lists), dtype=np.int32)
    np.cumsum([len(entries) for entries in lists[:-1]], out=starts[1:])
    index = np.array([i for entries in lists for i, _ in entries], dtype=np.int32)
    values = np.array([a for entries in lists for _, a in entries], dtype=np.float64)
    return starts, index, values
