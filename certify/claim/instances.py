"""Ranges, and the rows of a claim's table.

A *row* is the tuple of the parameters' values, in the order of the claim; an
instance of a rule is one row. The *key* of an instance is what names it in the
evidence: its parameters, or for a list of graphs the position of its graph,
counted from 1.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from certify.claim.hints import shown
from certify.claim.language import INTEGER, Expression, read_expression
from certify.claim.names import Scope
from certify.claim.predicates import BOUND
from certify.errors import ClaimError

Key = dict[str, int] | int
EndlessKey = dict[str, int | str]
"""The key of a row of an endless claim; its growing parameter has the text `"4.."`."""
Row = tuple[int, ...]

MAX_INSTANCES = 100_000
MAX_ROWS_TRIED = 1_000_000
"""How many rows, finished or begun, are looked at before `where` drops some."""


@dataclass(frozen=True)
class Range:
    """Two bounds, both of them included.

    endless: there is no upper bound; `high` is the lower one again.
    """

    low: Expression | int
    high: Expression | int
    where: str
    endless: bool = False

    def bounds(self, row: Sequence[int]) -> tuple[int, int]:
        """Return the bounds for a row of the parameters they speak of.

        Errors: ClaimError when a bound has no value.
        """
        return number(self.low, row), number(self.high, row)


def number(value: Expression | int, row: Sequence[int]) -> int:
    """Return the integer that a bound or a coordinate is, for a row."""
    return value if isinstance(value, int) else value.evaluate(row)


def name_key(key: Key | EndlessKey) -> str:
    """Return the key as one word: `n=18`, `m=3,n=4` or `m=3,n=4..` (sorted by name), or `17`.

    The one instance of a claim without parameters is called `only`.
    """
    if isinstance(key, int):
        return str(key)
    return ",".join(f"{name}={key[name]}" for name in sorted(key)) or "only"


def in_instance(error: ClaimError, key: Key | EndlessKey, place: str = "") -> ClaimError:
    """Return the error with the instance, and a place in it, in which it came up."""
    parts = [f"instance {name_key(key)}" if key != {} else "", place]
    text = ", ".join(part for part in parts if part)
    return ClaimError(f"{error} ({text})" if text else str(error))


def check_integer(value: int, where: str) -> int:
    """Return an integer of the claim file, if it is within the bounds of all numbers.

    Errors: ClaimError.
    """
    if abs(value) > BOUND:
        raise ClaimError(f"{where}: {shown(value)} is beyond 2^53; smaller numbers are needed")
    return value


def read_range(
    value: object, parameters: tuple[str, ...], where: str, *, may_grow: bool = False
) -> Range:
    """Read `"lo..hi"`, or a plain integer k for k..k.

    may_grow: whether `"lo.."` is allowed.
    Errors: ClaimError.
    """
    if isinstance(value, int) and not isinstance(value, bool):
        value = check_integer(value, where)
        return Range(value, value, where)
    if not isinstance(value, str):
        raise ClaimError(f'{where}: a range is needed, such as "2..60", and this is {shown(value)}')
    parts = value.split("..")
    if len(parts) != 2:
        raise ClaimError(
            f"{where}: {shown(value)} is not a range; write its first and last value "
            'with two points between them, such as "2..60"'
        )
    endless = not parts[1].strip()
    if endless and not may_grow:
        raise ClaimError(
            f"{where}: {shown(value)} has no end; only a parameter of [instances] is endless, "
            'so write the last value too, such as "1..n"'
        )
    if not parts[0].strip():
        raise ClaimError(f"{where}: {shown(value)} has no beginning; write the first value too")
    scope = Scope(parameters=parameters)
    bounds = [
        read_expression(part, sort=INTEGER, scope=scope, where=f"{where}: {side} value")
        for part, side in zip(parts[: 2 - endless], ("first", "last"), strict=False)
    ]
    return Range(bounds[0], bounds[-1], where, endless)


def find_rows(
    parameters: tuple[str, ...], ranges: Sequence[Range], keep: Expression | None, where: str
) -> tuple[Row, ...]:
    """Return the rows of the nested loops, first parameter outermost, that `keep` keeps.

    Errors: ClaimError when a bound or `keep` has no value, and when there is no
    row, or too many.
    Cost: linear in the rows tried, of which there are at most 1,000,000.
    """
    rows: list[Row] = [()]
    tried = 0
    for k, range_ in enumerate(ranges):
        longer: list[Row] = []
        for row in rows:
            try:
                low, high = range_.bounds(row)
            except ClaimError as error:
                raise in_instance(error, dict(zip(parameters[:k], row, strict=True))) from None
            tried += max(0, high - low + 1)
            if tried > MAX_ROWS_TRIED:
                raise ClaimError(
                    f"{range_.where}: the ranges have more than {MAX_ROWS_TRIED:,} rows; "
                    "make them shorter"
                )
            longer += [(*row, value) for value in range(low, high + 1)]
        rows = longer
    kept = tuple(row for row in rows if keep is None or _holds(keep, parameters, row))
    if not kept:
        raise ClaimError(f"{where}: no instance is left; the claim needs at least one")
    if len(kept) > MAX_INSTANCES:
        raise ClaimError(
            f"{where}: there are {len(kept):,} instances; at most {MAX_INSTANCES:,} are allowed"
        )
    return kept


def _holds(keep: Expression, parameters: tuple[str, ...], row: Row) -> bool:
    try:
        return bool(keep.evaluate(row))
    except ClaimError as error:
        raise in_instance(error, dict(zip(parameters, row, strict=True))) from None
