"""Claims of which the instances are exactly the rows of a table.

The evidence of a recheck is stored as that of any claim, so that everything that reads
evidence reads it. So the claim that is stored has the graphs of the rule that was given, and as
its instances the rows: ranges and a condition (module `rows`), or, for a list, the graphs of
the rows in a list of their own. It has no answers: what the table says may be wrong, and
evidence for the opposite has to be accepted all the same. Where one claim cannot
name all rows, several folders `part-1`, `part-2`, ... hold them.
"""

from __future__ import annotations

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Any

from certify.claim.claim import Claim, read_claim
from certify.claim.hints import shown
from certify.claim.parts import FORMATS, GraphList
from certify.claim.toml import Document, read_document
from certify.errors import ClaimError, InputError
from certify.graph.files import format_of, read_sources
from certify.recheck.rows import Box, cut_into_boxes
from certify.recheck.table import Row, Sheet, Table, read_table

CLAIM = "claim.toml"

_WORD = re.compile(r"(?<!\w)(?<!\w\.)[A-Za-z][A-Za-z0-9_]*", re.ASCII)
_PLAIN = re.compile(r"[A-Za-z0-9_-]+", re.ASCII)
_KEPT = ("structure", "ends", "required", "forbidden")


@dataclass(frozen=True)
class Part:
    """A claim to be stored. name: of its folder, "" when it is the only one.

    text: of the claim file. files: further files beside it. rows: in the order of its instances.
    """

    name: str
    text: str
    files: Mapping[str, bytes]
    rows: tuple[Row, ...]


@dataclass(frozen=True)
class Plan:
    """A table that was read, and the claims that its rows make."""

    table: Table
    claim_path: Path
    structure: str
    parts: tuple[Part, ...]


def make_plan(sheet: Sheet, claim_path: Path, column: str) -> Plan:
    """Read the table as one of the instances that a claim speaks of.

    claim_path: a claim; its [answers] are not looked at. Its [instances], if it has them,
    name the parameters and say which rows there may be; otherwise the parameters are
    those columns whose names the rule uses, and every row is taken.
    column: the one with what is claimed.
    Errors: InputError for the table (with file and line) and for the claim.
    """
    document = read_document(claim_path)
    graph = document.data.get("graph")
    if isinstance(graph, dict) and "list" in graph:
        claim = read_claim(claim_path)
        table = read_table(sheet, None, column)
        parts = [_part_of_list(claim, document, claim_path, table)]
    else:
        bounded = "instances" in document.data
        bounds = read_claim(claim_path) if bounded else None
        used = _find_used(document, sheet, column)
        table = read_table(sheet, used if bounds is None else bounds.parameters, column)
        claim = _read_with_first_row(claim_path, document, table) if bounds is None else bounds
        if bounds is not None:
            _check_bounds(bounds, claim_path, table)
        parts = list(_parts_of_rule(document, table))
    return Plan(table, claim_path, claim.structure, tuple(parts))


def _find_used(document: Document, sheet: Sheet, column: str) -> tuple[str, ...]:
    """Return the columns whose names the rule uses, in their order."""
    graph = document.data.get("graph")
    vertices = graph.get("vertices") if isinstance(graph, dict) else None
    coordinates = set(vertices) if isinstance(vertices, dict) else set()
    texts = _texts({name: document.data.get(name) for name in (*_KEPT[1:], "graph")})
    words = {word for text in texts for word in _WORD.findall(text)} - coordinates
    return tuple(name for name in sheet.columns if name in words and name != column)


def _texts(value: Any) -> Iterator[str]:
    if isinstance(value, str):
        yield value
    elif isinstance(value, dict | list):
        for part in value.values() if isinstance(value, dict) else value:
            yield from _texts(part)


def _read_with_first_row(path: Path, document: Document, table: Table) -> Claim:
    """Read a claim without [instances] as if it had the first row, to find its errors.

    The rest of the file stays as it is, so that they name its lines.
    """
    key = table.rows[0].key
    entries = [f"{name} = {value}" for name, value in key.items()] if isinstance(key, dict) else []
    added = "\n".join(["", "[instances]", *entries, ""]) if entries else ""
    with TemporaryDirectory() as folder:
        copy = Path(folder) / path.name
        copy.write_bytes(document.raw + added.encode())
        try:
            return read_claim(copy)
        except ClaimError as error:
            text = str(error).replace(str(copy), str(path))
            raise ClaimError(
                f"{text}\n  the parameters are those columns of {table.shown} that the rule "
                f"uses: {', '.join(map(shown, table.parameters)) or 'none'}"
            ) from None


def _check_bounds(claim: Claim, path: Path, table: Table) -> None:
    """Refuse a row that is none of the claim's instances."""
    known = set(claim.rows)
    at = None if claim.growing is None else claim.parameters.index(claim.growing)
    lowest = {} if at is None else {_without(row, at): row[at] for row in claim.rows}
    for row in table.rows:
        values = claim.row(row.key)
        if at is None:
            inside = values in known
        else:
            inside = values[at] >= lowest.get(_without(values, at), values[at] + 1)
        if not inside:
            raise InputError(
                f"{table.shown}:{row.line}: {row.name} is not among the [instances] of {path}; "
                "correct the row, or leave [instances] out to take every row"
            )


def _without(row: tuple[int, ...], at: int) -> tuple[int, ...]:
    return row[:at] + row[at + 1 :]


def _parts_of_rule(document: Document, table: Table) -> Iterator[Part]:
    names = table.parameters
    rows = {
        tuple(row.key[name] for name in names): row
        for row in table.rows
        if not isinstance(row.key, int)
    }
    boxes = cut_into_boxes(names, list(rows)) if names else [Box((), None, ((),))]
    for number, box in enumerate(boxes, 1):
        name = "" if len(boxes) == 1 else f"part-{number}"
        text = _write_claim(document, table, document.data["graph"], _write_rows(names, box))
        yield Part(name, text, {}, tuple(rows[values] for values in box.rows))


def _write_rows(names: Sequence[str], box: Box) -> dict[str, object]:
    ranges: dict[str, object] = {
        name: low if low == high else f"{low}..{high}"
        for name, (low, high) in zip(names, box.ranges, strict=True)
    }
    return ranges | ({} if box.where is None else {"where": box.where})


def _part_of_list(claim: Claim, document: Document, path: Path, table: Table) -> Part:
    """Return the part of a list: with all of it, or with a list of the graphs of the rows."""
    graphs = claim.graphs
    if not isinstance(graphs, GraphList):
        raise ClaimError(f"{path}: this claim has no list of graphs")
    source = path.parent / graphs.name
    form = graphs.format or format_of(source)
    wanted = {row.key: row for row in table.rows if isinstance(row.key, int)}
    chosen: dict[int, bytes] = {}
    count = 0
    for _, line in read_sources(source, form):
        count += 1
        if count in wanted:
            chosen[count] = line
    for position, row in wanted.items():
        if position not in chosen:
            raise InputError(
                f"{table.shown}:{row.line}: there is no graph {position}; "
                f"{source} has {count}, counted from 1"
            )
    name = f"rows{FORMATS[form][0]}"
    text = _write_claim(document, table, {"list": name, "format": form}, {})
    return Part("", text, {name: b"".join(chosen.values())}, tuple(wanted[at] for at in chosen))


def _write_claim(
    document: Document, table: Table, graph: Mapping[str, object], rows: Mapping[str, object]
) -> str:
    """Return the text of a claim without answers."""
    name = Path(table.shown).name.encode(errors="backslashreplace").decode()
    title = f"The rows of {name}"
    given = document.data.get("title")
    top = {"title": f"{title}: {given}" if given else title}
    top |= {name: document.data[name] for name in _KEPT if name in document.data}
    lines = [*_write_entries(top), "", "[graph]", *_write_entries(graph)]
    if rows:
        lines += ["", "[instances]", *_write_entries(rows)]
    return "\n".join([*lines, ""])


def _write_entries(entries: Mapping[str, object]) -> Iterator[str]:
    for name, value in entries.items():
        yield f"{_write_key(name)} = {_write_value(value)}"


def _write_key(name: str) -> str:
    return name if _PLAIN.fullmatch(name) else _write_value(name)


def _write_value(value: object) -> str:
    """Return a value of a claim in TOML."""
    if isinstance(value, str):
        # Of what TOML refuses in a string, JSON does not escape this one.
        return json.dumps(value, ensure_ascii=False).replace("\x7f", "\\u007f")
    if isinstance(value, list):
        return f"[{', '.join(map(_write_value, value))}]"
    if isinstance(value, dict):
        return f"{{ {', '.join(_write_entries(value))} }}"
    return str(value)
