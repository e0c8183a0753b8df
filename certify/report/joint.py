"""One reason for several instances, told once.

The reason is told for the first instance. Where the others differ in what a reader has to
see (the pieces that are left, the sums), that is added for each of them, so that
every instance is proved by what is printed.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.report.balance import weigh
from certify.report.blocks import Block, Paragraph, Rows
from certify.report.classical import name_classical
from certify.report.clauses import ReadFile
from certify.report.explain import explain
from certify.report.structure import measure_independent, separate
from certify.report.words import Words, count_of, join, number, plural

Told = tuple[Graph, Question, dict[str, Any]]


def tell_jointly(
    group: Sequence[Told], names: Sequence[str], read_file: ReadFile | None = None
) -> list[Block]:
    """Return the reason for a run of instances.

    group: graph, question and record of each. names: what the instances are called.
    Errors: ContradictionError when evidence does not hold.
    Cost: that of explaining each of them.
    """
    reasons = [_reason(told, read_file) for told in group]
    first, *others = reasons
    if all(other == first for other in others):
        return first
    blocks: list[Block] = [Paragraph(f"We write it down for {names[0]}."), *first]
    rows = []
    for told, name, reason in zip(group[1:], names[1:], others, strict=True):
        short = _shorten(told)
        if short is None:
            blocks.append(Paragraph(f"For {name}:"))
            blocks += reason
        else:
            rows.append((name, short))
    if rows:
        same = _same(group[0])
        blocks += [
            Paragraph(f"{same} in the other {plural('instance', len(rows))}:"),
            Rows(tuple(rows)),
        ]
    return blocks


def _reason(told: Told, read_file: ReadFile | None) -> list[Block]:
    """Return the reason itself, without the answer before it and the limits after it."""
    return explain(*told, read_file)[1:-1]


def _body(told: Told) -> dict[str, Any]:
    """Return the body of the obstruction that is told, or of the weights."""
    _, question, record = told
    body: dict[str, Any] = record["evidence"]
    if record["kind"] == "counting":
        return name_classical(question, body) or body
    return body


def _same(told: Told) -> str:
    form = _body(told).get("form")
    if form == "separator" and separate(told[1], _body(told)["set"]).removed:
        return "The same vertices are removed"
    if form == "separator":
        return "The pieces"
    if form == "independent":
        return "The same vertices are taken"
    return "The same weights are given"


def _shorten(told: Told) -> str | None:
    """Return what is different in another instance, in short; None if it has to be told in full."""
    graph, question, _ = told
    words, body = Words(graph, question), _body(told)
    form = body.get("form")
    if form == "separator":
        found = separate(question, body["set"])
        if found.inside or found.joined or found.ends:
            return None
        pieces = f"{count_of(len(found.pieces), 'piece')}: {words.pieces(found.pieces)}"
        if not found.removed:
            return f"{pieces}."
        return f"{pieces}; at most {count_of(found.parts, 'part')}."
    if form == "independent":
        room = measure_independent(question, body["set"])
        if room is None or room.inside or room.joined or room.ends:
            return None
        return f"{number(room.others)} others, room for {number(room.room)}."
    if form is None:
        balance = weigh(question, body)
        parts = [f"the edges bring at most {balance.offer}"]
        if balance.ends:
            parts.append(f"the two ends at most {balance.end_offer}")
        return f"the sum is at least {balance.need}; {join(parts)}."
    return None
