"""Ranges of a claim, the rows of its table, and the cells of a rule (FORMAT.md, section 2)."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from itertools import product
from typing import Any

from .rules import INTEGER, MOST_RESULT, TRUTH, Evaluate, Values, compile_rule
from .strict import BadClaim

MOST_ROWS, MOST_INSTANCES = 1_000_000, 100_000
MOST_CANDIDATES, MOST_VERTICES = 100_000, 4_000

Bounds = Callable[[Values], tuple[int, int]]


def read_integer(value: object, places: Mapping[str, int]) -> Evaluate:
    """Return the function of the parameters that an integer, or an expression, stands for."""
    if type(value) is int:
        if abs(value) > MOST_RESULT:
            raise BadClaim("an integer of the claim is beyond 2^53")
        return lambda row: value
    return compile_rule(value, places, INTEGER)


def read_range(value: object, places: Mapping[str, int]) -> Bounds:
    """Return the function of the parameters that gives both bounds of a range."""
    if isinstance(value, str):
        parts = value.split("..")
        if len(parts) != 2:
            raise BadClaim(f"{value!r} is not a range 'lo..hi'")
        low, high = (read_integer(part, places) for part in parts)
        return lambda row: (low(row), high(row))
    one = read_integer(value, places)
    return lambda row: (one(row), one(row))


def _is_open(value: object) -> bool:
    """Return whether a range is `lo..`, without an end."""
    return isinstance(value, str) and value.count("..") == 1 and value.rstrip().endswith("..")


class Table:
    """The rows of the parameters: nested loops, of which `where` keeps some.

    growing: the parameter of an endless claim whose range is `lo..`; a row has its lo.
    """

    def __init__(self, entries: Mapping[str, Any]) -> None:
        names = [name for name in entries if name != "where"]
        self.at = {name: place for place, name in enumerate(names)}
        endless = [name for name in names if _is_open(entries[name])]
        if len(endless) > 1:
            raise BadClaim(f"two ranges have no end, those of {endless[0]} and {endless[1]}")
        self.growing = endless[0] if endless else None
        # No other range, nor `where`, may name the growing parameter.
        known = {name: place for name, place in self.at.items() if name not in endless}
        self.ranges = []
        for name, place in self.at.items():
            before = {other: at for other, at in known.items() if at < place}
            value = entries[name]
            if name in endless:
                value = value.rstrip()[:-2]
                value = f"{value}..{value}"
            self.ranges.append(read_range(value, before))
        self.keep: Evaluate | None = None
        if "where" in entries:
            self.keep = compile_rule(entries["where"], known, TRUTH)

    def rows(self) -> list[list[int]]:
        """Return the rows, of which there are 1 to 100,000."""
        rows: list[list[int]] = [[]]
        begun = 0
        for bounds in self.ranges:
            longer: list[list[int]] = []
            for row in rows:
                low, high = bounds(row)
                begun += max(0, high - low + 1)
                if begun > MOST_ROWS:
                    raise BadClaim(f"the ranges have more than {MOST_ROWS} rows")
                longer += [[*row, value] for value in range(low, high + 1)]
            rows = longer
        if self.keep is not None:
            keep = self.keep
            rows = [row for row in rows if keep(row)]
        if not 1 <= len(rows) <= MOST_INSTANCES:
            raise BadClaim(f"there are {len(rows)} instances, not 1 to {MOST_INSTANCES}")
        return rows


def list_cells(row: list[int], ranges: list[Bounds], keep: Evaluate | None) -> list[list[int]]:
    """Return the vertices of a row's graph, each as the list of its coordinates."""
    spans: list[tuple[int, int]] = []
    candidates = 1
    for bounds in ranges:
        low, high = bounds(row)
        if high < low - 1:
            raise BadClaim(f"the vertex range {low}..{high} is empty")
        candidates *= high - low + 1
        spans.append((low, high))
    if candidates > MOST_CANDIDATES:
        raise BadClaim(f"more than {MOST_CANDIDATES} vertices before 'where'")
    # With an empty range the others may be of any length: no loop over them.
    loops = [range(low, high + 1) for low, high in spans] if candidates else [range(0)]
    cells = [list(cell) for cell in product(*loops)]
    if keep is not None:
        cells = [cell for cell in cells if keep(row + cell)]
    if len(cells) > MOST_VERTICES:
        raise BadClaim(f"more than {MOST_VERTICES} vertices")
    return cells
