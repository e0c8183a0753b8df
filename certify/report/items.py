"""What an appendix speaks of: the instances of a folder that was checked, one by one.

Of an endless claim these are the small n of every row, which have evidence of
their own, and for the rest of a row one *family* (families.py).
"""

from __future__ import annotations

import json
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from certify.claim.claim import Claim
from certify.claim.endless import row_of
from certify.evidence.base import count_integers
from certify.evidence.endless import Endless
from certify.evidence.lines import read_evidence
from certify.graph.build import build_question, instances
from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.graph.strip import Strip, read_strip
from certify.report.lasting import Settled


@dataclass(frozen=True)
class Item:
    """An instance: its record, read, its graph and question, and the line of the record.

    For a small n of an endless claim the record is made from the part of the line.
    """

    record: dict[str, Any]
    graph: Graph
    question: Question
    line: int

    @property
    def settled(self) -> Settled:
        """Return what `find_lasting` asks for."""
        return Settled(self.record, self.graph)


@dataclass(frozen=True)
class Family:
    """A row of an endless claim, from `strip.first` on; below that there are items.

    record: of the whole row; open, or of kind endless. line: of the record.
    small: the items of the row.
    """

    strip: Strip
    record: dict[str, Any]
    line: int
    small: tuple[Item, ...]

    @property
    def is_open(self) -> bool:
        """Return whether nothing is known of the row."""
        return bool(self.record["answer"] == "open")

    @property
    def body(self) -> dict[str, Any]:
        """Return the evidence."""
        body: dict[str, Any] = self.record["evidence"]
        return body

    @property
    def key(self) -> dict[str, int | str]:
        """Return the key of what is beyond the items: {"m": 3, "n": "42.."}."""
        start = self.strip.low if self.is_open else self.strip.first
        return {**self.strip.key(self.strip.low), self.strip.growing: f"{start}.."}


def read_items(claim: Claim, folder: Path) -> Iterator[Item]:
    """Yield the instances of a claim that is not endless, in order.

    folder: of evidence that the checker has read to its end.
    Cost: that of building the graphs.
    """
    lines = read_evidence(folder)
    for number, (instance, line) in enumerate(zip(instances(claim, folder), lines, strict=True), 1):
        question = build_question(claim, instance.key, instance.graph)
        yield Item(json.loads(line), instance.graph, question, number)


def read_families(claim: Claim, folder: Path) -> Iterator[Family]:
    """Yield the rows of an endless claim, in order.

    folder: of evidence that the checker has read to its end.
    Cost: that of building the graphs of the small n.
    """
    for number, line in enumerate(read_evidence(folder), 1):
        record = json.loads(line)
        strip = read_strip(claim, row_of(claim, record["instance"]))
        small = _read_small(strip, record, number) if record["kind"] == Endless.kind else ()
        yield Family(strip, record, number, tuple(small))


def _read_small(strip: Strip, record: dict[str, Any], line: int) -> Iterator[Item]:
    for n, part in enumerate(record["evidence"]["small"], strip.low):
        graph = strip.graph(n)
        length = measure(part["kind"], part["evidence"])
        yield Item(
            {"instance": strip.key(n), "length": length, **part},
            graph,
            strip.question(n, graph),
            line,
        )


def measure(kind: str, body: dict[str, Any]) -> int:
    """Return the reading length of evidence for a small n (FORMAT.md, section 7)."""
    if kind == "sweep":
        return sum(body["states"])
    return count_integers(body) + len(body.get("nodes", ()))
