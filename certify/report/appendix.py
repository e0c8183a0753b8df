"""The appendix of a paper: claim, table, proofs and limits, from a folder of evidence.

The folder is checked through the checker's front door before a word is written. Then
the claim becomes a definition and a theorem (statement.py), the instances a table, every
impossible instance, or run of instances with one lasting reason, a proposition with its
proof, and the witnesses a list.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path
from typing import Any

from certify.checker import FolderCheck, check_folder
from certify.claim.claim import read_claim
from certify.claim.parts import Rule
from certify.errors import ContradictionError, InputError
from certify.evidence.store import EVIDENCE, MANIFEST, claim_name
from certify.graph.build import build_question, instances
from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.report.answers import Shown, show_answers
from certify.report.blocks import Block, Paragraph, Rows, mark
from certify.report.cases import MOST_NODES
from certify.report.document import Document, Heading, Part, Picture, Proof, Statement
from certify.report.drawing import draw_reason
from certify.report.inline import quote_prose, refer
from certify.report.joint import tell_jointly
from certify.report.lasting import Settled, find_lasting
from certify.report.latex import set_latex_document
from certify.report.markdown import set_markdown_document
from certify.report.runs import find_runs
from certify.report.statement import ClaimWords, define_graphs, state_claim
from certify.report.words import HOW_TO_CHECK, Words, count_of, join, plural

FORMS: dict[str, Callable[[Document], str]] = {
    "latex": set_latex_document,
    "markdown": set_markdown_document,
}
MOST_WITNESSES = 400
"""More paths or cycles than these are not printed: nobody reads them."""

_COMPUTATIONS = ("sweep", "clauses")


@dataclass(frozen=True)
class Item:
    """An instance: its record, read, its graph and question, and the line of the record."""

    record: dict[str, Any]
    graph: Graph
    question: Question
    line: int

    @property
    def settled(self) -> Settled:
        """Return what `find_lasting` asks for."""
        return Settled(self.record, self.graph)


@dataclass(frozen=True)
class Appendix:
    """An appendix, set. left_open: the number of instances that it says are open."""

    text: str
    left_open: int


def render_appendix(folder: Path, form: str) -> Appendix:
    """Return the appendix for a folder of evidence.

    form: "latex" or "markdown".
    Errors: InputError when there is no evidence; ContradictionError when the checker does
    not accept what is there, unless open instances are all that it misses.
    Cost: that of the check, and of the explanations.
    """
    check = check_folder(folder)
    complaints = [
        f"instance {v.instance}: {v.reason}"
        for v in check.verdicts()
        if not (v.accepted or v.is_open)
    ] + check.complaints
    name = claim_name(folder)
    if not (check.accepted or check.only_open):
        raise ContradictionError(
            f"{folder}: the evidence is rejected, so nothing is written: {complaints[0]}\n"
            f"  next: certify check {folder}"
        )
    document = _Writer(folder, name, check).document()
    return Appendix(FORMS[form](document), check.left_open)


def write_text(path: Path, text: str) -> None:
    """Write a file.

    Errors: InputError when that cannot be.
    """
    try:
        path.write_text(text, encoding="utf-8", newline="\n")
    except OSError as error:
        raise InputError(f"{path}: cannot write here: {error.strerror}") from None


class _Writer:
    """Reads a folder that was checked, and composes the parts."""

    def __init__(self, folder: Path, name: str, check: FolderCheck) -> None:
        self.folder, self.check = folder, check
        self.claim = read_claim(folder / name)
        if self.claim.growing is not None:
            raise InputError(
                f"{folder}: there is no appendix for endless claims yet\n"
                f"  next: certify explain {folder} INSTANCE"
            )
        self.words = ClaimWords(self.claim, check.answers.total() + check.left_open)
        self.digests: dict[str, str] = json.loads((folder / MANIFEST).read_bytes())["sha256"]
        lines = (folder / EVIDENCE).read_bytes().splitlines()
        self.items = [
            Item(
                json.loads(line),
                instance.graph,
                build_question(self.claim, instance.key, instance.graph),
                number,
            )
            for number, (instance, line) in enumerate(
                zip(instances(self.claim, folder), lines, strict=True), 1
            )
        ]
        self.prefix = f"evidence:{hashlib.sha256(self.claim.raw).hexdigest()[:8]}:"

    def document(self) -> Document:
        groups = self._group_impossible()
        shown = [
            Shown(item.record["instance"], item.record, groups[1].get(place, ""))
            for place, item in enumerate(self.items)
        ]
        parts: list[Part] = [Heading(quote_prose(self.claim.title or "The evidence"), 1)]
        if self.claim.statement:
            parts.append(Paragraph(quote_prose(" ".join(self.claim.statement.split()))))
        parts.append(Statement("Definition", "graphs", define_graphs(self.words)))
        theorem = self._claim(shown)
        if theorem:
            parts.append(Statement("Theorem", "claim", theorem))
            parts.append(Proof((Paragraph(self._outline()),)))
        if self.words.has_instances:
            parts.append(show_answers(self.words, shown))
        parts += self._impossible(groups[0])
        parts += self._witnesses()
        parts += self._open()
        parts += self._limits()
        return Document(self.claim.title or "The evidence", self.prefix, tuple(parts))

    def _places(self, answer: str) -> list[int]:
        return [i for i, item in enumerate(self.items) if item.record["answer"] == answer]

    def _claim(self, shown: Sequence[Shown]) -> str:
        keys = [item.key for item in shown]
        answers = [item.record["answer"] for item in shown]
        runs = find_runs(keys, answers.__getitem__)
        found = {
            answer: [run for run in runs if answers[run.places[0]] == answer]
            for answer in dict.fromkeys(answers)
        }
        counts = {answer: answers.count(answer) for answer in ("exists", "impossible", "open")}
        return state_claim(self.words, self.words.range(), found, counts)

    def _outline(self) -> str:
        thing = self.words.structure
        if not self.words.has_instances:
            return "The only instance is settled below."
        yes, no = bool(self._places("exists")), bool(self._places("impossible"))
        said = ["The table says how each instance is settled."]
        if yes:
            said.append(f"Where it says that a {thing} exists, one is listed below.")
        if no:
            said.append("Where it says that there is none, the proposition named there proves it.")
        return " ".join(said)

    def _group_impossible(self) -> tuple[list[list[Item]], dict[int, str]]:
        """Return the impossible instances by common reason, and the proposition of each place."""
        impossible = [self.items[i] for i in self._places("impossible")]
        place_of = {id(item.record): i for i, item in enumerate(self.items)}
        runs = {
            json.dumps(key): number
            for number, lasting in enumerate(find_lasting(item.settled for item in impossible))
            for key in lasting.keys
        }
        groups: list[list[Item]] = []
        last: int | None = None
        for item in impossible:
            number = runs.get(json.dumps(item.record["instance"]))
            if number is not None and number == last:
                groups[-1].append(item)
            else:
                groups.append([item])
            last = number
        names = {
            place_of[id(item.record)]: f"none:{number}"
            for number, group in enumerate(groups, 1)
            for item in group
        }
        return groups, names

    def _impossible(self, groups: Sequence[list[Item]]) -> list[Part]:
        if not groups:
            return []
        thing = self.words.structure
        parts: list[Part] = [
            Heading(f"Why there is no {thing}", 2),
            Paragraph(
                f"In this section {mark('u-v')} is the edge between {mark('u')} and {mark('v')}. A "
                f"{self.words.thing} uses an edge if it contains it."
            ),
        ]
        for number, group in enumerate(groups, 1):
            parts.append(Statement("Proposition", f"none:{number}", self._say_none(group)))
            parts.append(self._prove(group, number))
        return parts

    def _say_none(self, group: Sequence[Item]) -> str:
        thing = self.words.structure
        keys = [item.record["instance"] for item in group]
        if len(group) == 1:
            graph = group[0].graph
            size = f"{graph.n} {plural('vertex', graph.n)}, {graph.m} {plural('edge', graph.m)}"
            return f"The graph {self.words.graph(keys[0])} ({size}) has no {thing}."
        runs = find_runs(keys, lambda _: 0)
        told = join([self.words.run(run) for run in runs])
        return f"For {told} the graph {self.words.any_graph} has no {thing}."

    def _prove(self, group: Sequence[Item], number: int) -> Proof:
        first = group[0]
        kind, key = first.record["kind"], first.record["instance"]
        blocks = tell_jointly(
            [(item.graph, item.question, item.record) for item in group],
            [self.words.instance(item.record["instance"]) for item in group],
            lambda name: (self.folder / name).read_bytes(),
        )
        if kind in _COMPUTATIONS:
            blocks += self._point_to(first)
        rule = self.claim.graphs if isinstance(self.claim.graphs, Rule) else None
        figure = draw_reason(first.graph, first.question, kind, first.record["evidence"], rule, key)
        if figure is None:
            return Proof(tuple(blocks))
        name = f"figure:{number}"
        blocks[0] = _add(blocks[0], f" (See Figure {refer(name)}.)")
        caption = f"{self.words.graph(key)}. {figure.caption}"
        return Proof(tuple(blocks), Picture(name, figure, caption))

    def _point_to(self, item: Item) -> list[Block]:
        """Return where exactly the evidence of a computation lies."""
        body = item.record["evidence"]
        place = f"line {item.line} of {mark(f'`{EVIDENCE}`')}"
        if item.record["kind"] == "sweep":
            return [
                Paragraph(f"The order and the numbers of states are in {place}; the digest is"),
                Rows((("", mark(f"`{body['digest']}`")),)),
            ]
        files = [body["cnf"], body["lrat"], body["drat"]]
        rows = tuple(
            (mark(f"`{Path(name).name}`"), mark(f"`{self.digests[name]}`")) for name in files
        )
        return [
            Paragraph(f"The record is {place}. The SHA-256 digests of the files are:"),
            Rows(rows),
        ]

    def _witnesses(self) -> list[Part]:
        places = self._places("exists")
        if not places:
            return []
        thing = self.words.structure
        parts: list[Part] = [Heading(f"The {thing}s", 2)]
        close = "" if self.words.thing == "path" else ", and so are the last and the first"
        if len(places) > MOST_WITNESSES:
            where = f"the lines {places[0] + 1} to {places[-1] + 1} of {mark(f'`{EVIDENCE}`')}"
            return [*parts, Paragraph(f"There are {len(places)}, and they are in {where}.")]
        parts.append(
            Paragraph(
                "In each row every vertex of the graph occurs exactly once, and any two "
                f"consecutive ones are adjacent{close}."
            )
        )
        rows = []
        for item in map(self.items.__getitem__, places):
            words = Words(item.graph, item.question)
            order = item.record["evidence"]["order"]
            rows.append((self.words.instance(item.record["instance"]), words.sequence(order)))
        return [*parts, Rows(tuple(rows))]

    def _open(self) -> list[Part]:
        places = self._places("open")
        if not places:
            return []
        keys = [item.record["instance"] for item in self.items]
        is_open = [item.record["answer"] == "open" for item in self.items]
        runs = [run for run in find_runs(keys, is_open.__getitem__) if is_open[run.places[0]]]
        told = join([self.words.run(run) for run in runs]) or self.words.any_graph
        return [
            Heading("What is left open", 2),
            Paragraph(
                f"For {told} neither a {self.words.structure} nor a reason against one was found "
                "within the limits of the search. Nothing is claimed there."
            ),
        ]

    def _limits(self) -> list[Part]:
        check, total = self.check, len(self.items)
        fine = check.answers.total()
        counts = f"{check.answers['exists']} exist, {check.answers['impossible']} impossible"
        left = (
            f"; {check.left_open} {plural('is', check.left_open)} open" if check.left_open else ""
        )
        machine = sum(map(_is_for_machines, self.items))
        said = [
            "The evidence for all of this is in files. When this text was made, the checker of "
            f"certify{_version()} read them, rebuilt every graph from its definition, and accepted "
            f"{fine} of {total} {plural('instance', total)} ({counts}{left}). It shares nothing "
            "with the program that searched, and believes nothing but the files."
        ]
        if machine:
            others = len(self._places("impossible")) - machine
            printed = "; the other proofs are printed above in full" if others else ""
            said.append(
                f"For {count_of(machine, 'instance')} the proof is a computation that only a "
                f"machine repeats{printed}."
            )
        files = [
            check.claim_name,
            *([self.claim.list_name] if self.claim.list_name else []),
            EVIDENCE,
        ]
        rows = tuple((mark(f"`{name}`"), mark(f"`{self.digests[name]}`")) for name in files)
        return [
            Heading("What was checked, and what is not claimed", 2),
            Paragraph(" ".join(said)),
            Paragraph(f"To check it again: {HOW_TO_CHECK}, where FOLDER holds these files:"),
            Rows(rows),
            Paragraph(
                "(The digests are SHA-256.) What is proved is a statement about the graphs of "
                f"{_definition()} and about {self._range()} alone. It says nothing about other "
                "graphs, and whether the definition says what the paper means is for its readers "
                "to judge."
            ),
        ]

    def _range(self) -> str:
        if self.words.is_list:
            count = len(self.items)
            return f"the {count} graphs of the file" if count > 1 else "the graph of the file"
        if not self.claim.parameters:
            return "this one graph"
        return f"the {len(self.items)} {plural('instance', len(self.items))} of the table"


def _is_for_machines(item: Item) -> bool:
    """Return whether the proof is not printed: a computation, or too many cases."""
    kind, body = item.record["kind"], item.record["evidence"]
    return kind in _COMPUTATIONS or (kind == "cases" and len(body["nodes"]) > MOST_NODES)


def _add(block: Block, text: str) -> Block:
    return Paragraph(block.text + text, block.depth) if isinstance(block, Paragraph) else block


def _definition() -> str:
    return f"Definition {refer('graphs')}"


def _version() -> str:
    """Return the version as it is told, "" when the package is not installed."""
    try:
        return f" (version {version('certify')})"
    except PackageNotFoundError:
        return ""
