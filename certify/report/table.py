"""The table of a claim: which instances exist, which are impossible, and on what evidence."""

from __future__ import annotations

import io
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import groupby

from rich import box
from rich.console import Console
from rich.table import Table

from certify.claim.claim import Key

MARKS = {"exists": "+", "impossible": "-", "open": "?"}
MOST_COLUMNS = 60


@dataclass(frozen=True)
class Row:
    """One instance of the table; `contradicts` says that the claim says the opposite."""

    key: Key
    answer: str
    kind: str
    contradicts: bool


def render_table(rows: Sequence[Row]) -> str:
    """Return the table as text, and a line that counts.

    One parameter: a line for each run of instances with one answer. Two: a grid,
    first parameter down, second across. Otherwise: counts alone.
    """
    parameters = list(rows[0].key) if rows and isinstance(rows[0].key, dict) else []
    if len(parameters) == 1:
        table = _render_runs(parameters[0], rows)
    elif len(parameters) == 2:
        table = _render_grid(parameters, rows)
    else:
        table = ""
    return table + _render_counts(rows)


def render_endless_table(rows: Sequence[tuple[str, str]]) -> str:
    """Return the table of an endless claim: for each row for which values the object exists.

    rows: the name of each row and the set, in words.
    """
    table = Table("instance", "exists for", box=box.SIMPLE)
    for name, exists in rows:
        table.add_row(name, exists)
    return _text(table).rstrip()


def _render_runs(name: str, rows: Sequence[Row]) -> str:
    table = Table(name, "answer", "evidence", box=box.SIMPLE)
    place = 0
    for (answer, contradicts, _), group in groupby(
        enumerate(rows), lambda item: (item[1].answer, item[1].contradicts, _offset(item, name))
    ):
        run = [row for _, row in group]
        first, last = run[0].key, run[-1].key
        place += len(run)
        low, high = _value(first, name), _value(last, name)
        span = f"{low}" if low == high else f"{low}..{high}"
        note = " (not as claimed)" if contradicts else ""
        table.add_row(span, answer + note, ", ".join(sorted({row.kind for row in run})))
    return _text(table)


def _offset(item: tuple[int, Row], name: str) -> int:
    """Return what is constant along a run of consecutive values."""
    place, row = item
    return _value(row.key, name) - place


def _value(key: Key, name: str) -> int:
    return key[name] if isinstance(key, dict) else key


def _render_grid(parameters: Sequence[str], rows: Sequence[Row]) -> str:
    down, across = parameters
    heads = sorted({_value(row.key, across) for row in rows})
    if len(heads) > MOST_COLUMNS:
        return ""
    cells = {(_value(row.key, down), _value(row.key, across)): row for row in rows}
    table = Table(f"{down} \\ {across}", *map(str, heads), box=box.SIMPLE, padding=(0, 1, 0, 0))
    for value in sorted({value for value, _ in cells}):
        marks = [_mark(cells.get((value, head))) for head in heads]
        table.add_row(str(value), *marks)
    return _text(table) + "  + exists   - impossible   ? open   ! not as claimed\n"


def _mark(row: Row | None) -> str:
    if row is None:
        return ""
    return MARKS[row.answer] + ("!" if row.contradicts else "")


def _render_counts(rows: Sequence[Row]) -> str:
    answers = Counter(row.answer for row in rows)
    kinds = Counter(row.kind for row in rows if row.answer == "impossible")
    noun = "instance" if len(rows) == 1 else "instances"
    text = f"{len(rows)} {noun}: {answers['exists']} exist, {answers['impossible']} impossible"
    if kinds:
        text += f" ({', '.join(f'{count} {kind}' for kind, count in sorted(kinds.items()))})"
    if answers["open"]:
        text += f", {answers['open']} open"
    against = sum(row.contradicts for row in rows)
    return text + (f"; {against} not as claimed" if against else "")


def _text(table: Table) -> str:
    out = io.StringIO()
    Console(file=out, width=200, color_system=None).print(table)
    return "\n".join(line.rstrip() for line in out.getvalue().splitlines() if line.strip()) + "\n"
