"""A published table: a CSV file with the parameters of an instance and what is claimed of it.

Commas separate the columns, and the first line names them: one column for each
parameter (`position` for the graphs of a list), and one for what is claimed. Lines
without any text are passed over. What is claimed is written in one of the pairs of
WORDS, and the same one throughout: a column of counts is not taken for answers.
"""

from __future__ import annotations

import codecs
import csv
import io
import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path

from certify.claim.hints import did_you_mean, shown
from certify.claim.instances import Key, name_key
from certify.claim.predicates import BOUND
from certify.errors import InputError
from certify.evidence.disk import telling

POSITION = "position"
WORDS = (("exists", "impossible"), ("yes", "no"), ("true", "false"), ("1", "0"))
MAX_BYTES = 1 << 26
MAX_ROWS = 100_000

_INTEGER = re.compile(r"0|-?[1-9][0-9]*", re.ASCII)
_PAIRS = {word: pair for pair in WORDS for word in pair}
_CHOICE = ", ".join("/".join(pair) for pair in WORDS)


@dataclass(frozen=True)
class Sheet:
    """The cells of a file. columns: the names; lines: the number of a line and its cells."""

    shown: str
    columns: tuple[str, ...]
    lines: tuple[tuple[int, list[str]], ...]


@dataclass(frozen=True)
class Row:
    """One row. line: of the file, from 1. exists: what the table claims."""

    line: int
    key: Key
    exists: bool

    @property
    def name(self) -> str:
        """Return the instance as messages write it."""
        return name_key(self.key)

    @property
    def claimed(self) -> str:
        """Return the answer that the table gives."""
        return "exists" if self.exists else "impossible"


@dataclass(frozen=True)
class Table:
    """A table that was read: at least one row, no instance twice. notes: what was passed over."""

    shown: str
    parameters: tuple[str, ...]
    rows: tuple[Row, ...]
    notes: tuple[str, ...]


def read_sheet(path: Path) -> Sheet:
    """Read the cells of a CSV file in UTF-8, with or without a byte order mark.

    Errors: InputError with file and line.
    """
    shown_path = str(path)
    with telling(path, "be read"), path.open("rb") as file:
        data = file.read(MAX_BYTES + 1)
    if len(data) > MAX_BYTES:
        raise InputError(f"{shown_path}: the file is larger than {MAX_BYTES >> 20} MiB")
    data = data.removeprefix(codecs.BOM_UTF8)
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise InputError(
            f"{shown_path}:{line}: this line is not UTF-8; save the table as CSV in UTF-8"
        ) from None
    lines = [
        (line, cells) for line, cells in _read_cells(text, shown_path) if any(map(str.strip, cells))
    ]
    if not lines:
        raise InputError(f"{shown_path}: the file is empty; its first line names the columns")
    head, names = lines[0]
    return Sheet(shown_path, _read_header(f"{shown_path}:{head}", names), tuple(lines[1:]))


def _read_cells(text: str, shown_path: str) -> Iterable[tuple[int, list[str]]]:
    """Yield the cells of each record with the line on which it begins."""
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    before = 0
    while True:
        try:
            cells = next(reader, None)
        except csv.Error as error:
            raise InputError(f"{shown_path}:{reader.line_num}: not CSV: {error}") from None
        if cells is None:
            return
        yield before + 1, cells
        before = reader.line_num


def _read_header(where: str, cells: Sequence[str]) -> tuple[str, ...]:
    names = [cell.strip() for cell in cells]
    while not names[-1]:
        names.pop()
    for number, name in enumerate(names, 1):
        if not name:
            raise InputError(f"{where}: column {number} has no name")
        if names.count(name) > 1:
            raise InputError(f"{where}: two columns are named {shown(name)}; rename one")
    if len(names) == 1 and (";" in names[0] or "\t" in names[0]):
        raise InputError(f"{where}: there is one column; separate the columns by commas")
    return tuple(names)


def read_table(sheet: Sheet, parameters: tuple[str, ...] | None, column: str) -> Table:
    """Read the rows of a sheet.

    parameters: the columns that name an instance; None for a list of graphs, which has
    the column POSITION. column: the one with what is claimed.
    Errors: InputError with file, line and column: a column or a cell that is missing, what is
    no integer, no answer, or an answer in another pair of words; two different answers
    for one instance; no row, or more than MAX_ROWS.
    """
    names = (POSITION,) if parameters is None else parameters
    for name in (*names, column):
        if name not in sheet.columns:
            near = did_you_mean(name, sheet.columns)
            raise InputError(
                f"{sheet.shown}: there is no column {shown(name)}; the columns are "
                f"{', '.join(map(shown, sheet.columns))}{near}"
            )
    rows: dict[str, Row] = {}
    notes: list[str] = []
    reader = _RowReader(sheet, names, column, by_list=parameters is None)
    for line, cells in sheet.lines:
        row = reader.read(line, cells)
        other = rows.setdefault(row.name, row)
        if other.exists != row.exists:
            raise InputError(
                f"{sheet.shown}:{line}: {row.name} is {row.claimed} here, and "
                f"{other.claimed} on line {other.line}; keep one of them"
            )
        if other is not row:
            notes.append(f"{sheet.shown}:{line}: {row.name} stands on line {other.line} already")
        if len(rows) > MAX_ROWS:
            raise InputError(f"{sheet.shown}:{line}: more than {MAX_ROWS:,} rows; split the table")
    if not rows:
        raise InputError(f"{sheet.shown}: the table has a header and no rows")
    unused = [name for name in sheet.columns if name not in (*names, column)]
    if unused:
        notes.append(f"{sheet.shown}: not used: {', '.join(map(shown, unused))}")
    return Table(sheet.shown, names, tuple(rows.values()), tuple(notes))


class _RowReader:
    """Reads one row after the other, and remembers the pair of words."""

    def __init__(
        self, sheet: Sheet, parameters: tuple[str, ...], column: str, *, by_list: bool
    ) -> None:
        self._by_list = by_list
        self._sheet = sheet
        self._parameters = parameters
        self._column = column
        self._pair: tuple[str, str] | None = None

    def read(self, line: int, cells: list[str]) -> Row:
        """Return the row of a line."""
        columns = self._sheet.columns
        if len(cells) < len(columns) or any(map(str.strip, cells[len(columns) :])):
            raise InputError(
                f"{self._sheet.shown}:{line}: {len(cells)} cells, and there are "
                f"{len(columns)} columns"
            )
        at = dict(zip(columns, map(str.strip, cells), strict=False))
        values = {name: self._integer(line, name, at[name]) for name in self._parameters}
        key: Key = values[POSITION] if self._by_list else values
        return Row(line, key, self._answer(line, at[self._column]))

    def _where(self, line: int, name: str) -> str:
        return f"{self._sheet.shown}:{line}: column {shown(name)}"

    def _integer(self, line: int, name: str, text: str) -> int:
        self._need_text(line, name, text)
        if not _INTEGER.fullmatch(text) or len(text) > 20 or abs(int(text)) > BOUND:
            raise InputError(
                f"{self._where(line, name)}: {shown(text)} is not an integer written plainly"
            )
        return int(text)

    def _answer(self, line: int, text: str) -> bool:
        name = self._column
        self._need_text(line, name, text)
        pair = _PAIRS.get(text.lower())
        if pair is None:
            raise InputError(f"{self._where(line, name)}: {shown(text)} is none of {_CHOICE}")
        if self._pair not in (None, pair):
            raise InputError(
                f"{self._where(line, name)}: {shown(text)} after "
                f"{'/'.join(self._pair or ())}; write one pair of words throughout"
            )
        self._pair = pair
        return text.lower() == pair[0]

    def _need_text(self, line: int, name: str, text: str) -> None:
        if not text:
            raise InputError(
                f"{self._where(line, name)}: the cell is empty; fill it, or leave the row out"
            )
