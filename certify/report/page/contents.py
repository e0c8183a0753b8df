"""What a page shows: every instance of a folder with its record and the reason for it."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Mapping
from dataclasses import dataclass
from html import escape
from itertools import islice
from pathlib import Path
from typing import Any

from certify.claim.claim import Claim, read_claim
from certify.claim.endless import row_of
from certify.claim.instances import name_key
from certify.claim.parts import Rule
from certify.evidence.endless import exists_for
from certify.evidence.lines import MANIFEST, PACKED, PLAIN, claim_name, read_evidence
from certify.evidence.record import Record
from certify.graph.strip import read_strip
from certify.report.blocks import Block, Paragraph, mark
from certify.report.drawing import draw_reason
from certify.report.endless import Argument
from certify.report.explain import explain
from certify.report.items import Item, read_items
from certify.report.lasting import find_lasting
from certify.report.page.html import set_html, set_text
from certify.report.svg import draw_svg

MOST_TOLD = 1_000
"""The reasons of so many instances are written out; a longer page would not be read."""


@dataclass(frozen=True)
class Row:
    """An instance: its record, and the reason as HTML, "" where it is not written out.

    note: what a settled row says of all n, "" for others.
    """

    record: dict[str, Any]
    reason: str
    note: str

    @property
    def key(self) -> str:
        """Return the instance as one word, as the checkers name it."""
        return name_key(self.record["instance"])

    @property
    def name(self) -> str:
        """Return the instance as a reader reads it."""
        key = self.record["instance"]
        if isinstance(key, int):
            return f"graph {key}"
        return (
            ", ".join(
                f"{name} \u2265 {value.removesuffix('..')}"
                if isinstance(value, str)
                else f"{name} = {value}"
                for name, value in key.items()
            )
            or "the graph"
        )


@dataclass(frozen=True)
class Contents:
    """A folder, read. files: the manifest and what it lists, by name, in order."""

    claim: Claim
    rows: tuple[Row, ...]
    files: dict[str, bytes]


def read_files(folder: Path) -> dict[str, bytes]:
    """Return the files of a folder that a checker reads, by name, the manifest first.

    The folder was accepted before; so the names are those of files inside it.
    """
    manifest = (folder / MANIFEST).read_bytes()
    names = sorted(json.loads(manifest)["sha256"])
    return {MANIFEST: manifest} | {name: (folder / name).read_bytes() for name in names}


def read_contents(folder: Path) -> Contents:
    """Return what a page shows of a folder that the checker has accepted.

    Errors: ContradictionError when evidence does not show what it should.
    Cost: that of explaining each instance.
    """
    claim = read_claim(folder / claim_name(folder))
    files = read_files(folder)
    lines = list(read_evidence(folder))
    if claim.growing is not None:
        return Contents(claim, tuple(_tell_settled(claim, line) for line in lines), files)
    told = list(islice(read_items(claim, folder), MOST_TOLD))
    rule = claim.graphs if isinstance(claim.graphs, Rule) else None
    spans = {
        json.dumps(key): lasting.render()
        for lasting in find_lasting(
            item.settled for item in told if item.record["answer"] == "impossible"
        )
        for key in lasting.keys
    }
    rows = [
        Row(
            item.record,
            _tell(item, rule, files, spans.get(json.dumps(item.record["instance"]))),
            "",
        )
        for item in told
    ]
    rows += [Row(json.loads(line), "", "") for line in lines[len(told) :]]
    return Contents(claim, tuple(rows), files)


def _tell(item: Item, rule: Rule | None, files: dict[str, bytes], span: str | None) -> str:
    """Return the reason for an instance. span: of the instances with the same one."""
    record = item.record
    # The last block says what is not claimed; the page says that once, for all instances.
    blocks = explain(item.graph, item.question, record, files.__getitem__)
    if record["answer"] != "open":
        blocks = blocks[:-1]
    if span is not None:
        blocks.append(Paragraph(f"The same reason, with the same vertices, holds for {span}."))
    blocks += _point_to(item, files)
    parts = [set_html(blocks)]
    if record["answer"] == "impossible":
        figure = draw_reason(
            item.graph, item.question, record["kind"], record["evidence"], rule, record["instance"]
        )
        if figure is not None:
            parts.append(
                f"<figure>{draw_svg(figure, f'figure-{item.line}')}"
                f"<figcaption>{set_text(figure.caption)}</figcaption></figure>"
            )
    return "\n".join(parts)


def _point_to(item: Item, files: dict[str, bytes]) -> list[Block]:
    """Return where the evidence lies that only a machine reads."""
    kind, body = item.record["kind"], item.record["evidence"]
    place = f"line {item.line} of {mark(f'`{_evidence_in(files)}`')}"
    if kind == "sweep":
        digest = mark(f"`{body['digest']}`")
        return [Paragraph(f"Its record is {place}; the SHA-256 of its states is {digest}.")]
    if kind == "clauses":
        said = [
            f"{mark(f'`{name}`')}, SHA-256 {mark(f'`{digest_of(files[name])}`')}"
            for name in (body["cnf"], body["lrat"], body["drat"])
        ]
        return [Paragraph(f"Its record is {place}, and its files are {'; '.join(said)}.")]
    return []


def _evidence_in(files: Mapping[str, bytes]) -> str:
    return PACKED if PACKED in files else PLAIN


def _tell_settled(claim: Claim, line: bytes) -> Row:
    """Return a row of an endless claim, which one record settles for all n."""
    record = json.loads(line)
    note = exists_for(Record(line, record, {}))
    if note is None:
        return Row(record, "", "")
    strip = read_strip(claim, row_of(claim, record["instance"]))
    told = Argument(strip, record["evidence"]).explain_all()
    return Row(record, set_html(told), f"exists for {escape(note)}")


def digest_of(data: bytes) -> str:
    """Return the SHA-256 of a file in hexadecimal."""
    return hashlib.sha256(data).hexdigest()
