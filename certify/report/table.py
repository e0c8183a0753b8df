"""The table of a claim: which instances exist, which are impossible, and on what evidence."""

from __future__ import annotations

import io
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass

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


@dataclass
class _Run:
    """Instances of one answer whose parameter grows by 1."""

    first: int
    last: int
    answer: str
    contradicts: bool
    kinds: set[str]


class Tally:
    """The table of a claim, made from its instances as they come in.

    One parameter: a line for each run of instances with one answer. Two: a grid,
    first parameter down, second across. Otherwise, as for a list: counts alone, and
    nothing is kept of an instance.
    """

    def __init__(self, parameters: Sequence[str]) -> None:
        self.answers: Counter[str] = Counter()
        self._parameters = tuple(parameters)
        self._kinds: Counter[str] = Counter()
        self._against = 0
        self._runs: list[_Run] = []
        self._marks: dict[tuple[int, int], str] = {}

    def add(self, row: Row) -> None:
        """Take the next instance."""
        self.answers[row.answer] += 1
        self._kinds[row.kind] += row.answer == "impossible"
        self._against += row.contradicts
        if len(self._parameters) == 1:
            self._add_to_run(row, _value(row.key, self._parameters[0]))
        elif len(self._parameters) == 2:
            down, across = (_value(row.key, name) for name in self._parameters)
            self._marks[down, across] = MARKS[row.answer] + ("!" if row.contradicts else "")

    def _add_to_run(self, row: Row, value: int) -> None:
        run = self._runs[-1] if self._runs else None
        if (
            run is None
            or run.last + 1 != value
            or (run.answer, run.contradicts) != (row.answer, row.contradicts)
        ):
            run = _Run(value, value, row.answer, row.contradicts, set())
            self._runs.append(run)
        run.last = value
        run.kinds.add(row.kind)

    def render(self) -> str:
        """Return the table as text, and a line that counts."""
        table = ""
        if len(self._parameters) == 1:
            table = self._render_runs()
        elif len(self._parameters) == 2:
            table = self._render_grid()
        return table + self.render_counts()

    def _render_runs(self) -> str:
        table = Table(self._parameters[0], "answer", "evidence", box=box.SIMPLE)
        for run in self._runs:
            span = f"{run.first}" if run.first == run.last else f"{run.first}..{run.last}"
            note = " (not as claimed)" if run.contradicts else ""
            table.add_row(span, run.answer + note, ", ".join(sorted(run.kinds)))
        return _text(table)

    def _render_grid(self) -> str:
        down, across = self._parameters
        heads = sorted({value for _, value in self._marks})
        if len(heads) > MOST_COLUMNS:
            return ""
        table = Table(f"{down} \\ {across}", *map(str, heads), box=box.SIMPLE, padding=(0, 1, 0, 0))
        for value in sorted({value for value, _ in self._marks}):
            table.add_row(str(value), *(self._marks.get((value, head), "") for head in heads))
        return _text(table) + "  + exists   - impossible   ? open   ! not as claimed\n"

    def render_counts(self, noun: str = "instance") -> str:
        """Return the line that counts."""
        total = self.answers.total()
        answers = self.answers
        text = f"{total} {noun if total == 1 else noun + 's'}: {answers['exists']} exist, "
        text += f"{answers['impossible']} impossible"
        kinds = [f"{count} {kind}" for kind, count in sorted(self._kinds.items()) if count]
        if kinds:
            text += f" ({', '.join(kinds)})"
        if answers["open"]:
            text += f", {answers['open']} open"
        return text + (f"; {self._against} not as claimed" if self._against else "")


def render_endless_table(rows: Sequence[tuple[str, str]]) -> str:
    """Return the table of an endless claim: for each row for which values the object exists.

    rows: the name of each row and the set, in words.
    """
    table = Table("instance", "exists for", box=box.SIMPLE)
    for name, exists in rows:
        table.add_row(name, exists)
    return _text(table).rstrip()


def _value(key: Key, name: str) -> int:
    return key[name] if isinstance(key, dict) else key


def _text(table: Table) -> str:
    out = io.StringIO()
    Console(file=out, width=200, color_system=None).print(table)
    return "\n".join(line.rstrip() for line in out.getvalue().splitlines() if line.strip()) + "\n"
