"""The appendix of a paper: claim, table, proofs and limits, from a folder of evidence.

The folder is checked through the checker's front door before a word is written. Then
the claim becomes a definition and a theorem (statement.py), the instances a table, every
impossible instance, or run of instances with one lasting reason, a proposition with its
proof, and the witnesses a list. Of an endless claim the instances are the small n, and
what follows for ever is told by families.py.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from itertools import islice
from pathlib import Path

from certify.checker import FolderCheck
from certify.claim.claim import read_claim
from certify.claim.parts import Rule
from certify.evidence.disk import write_given
from certify.evidence.lines import evidence_name, read_manifest
from certify.report.accepted import need_accepted
from certify.report.answers import Shown, explain_lengths, show_answers
from certify.report.blocks import Block, Paragraph, Rows, mark
from certify.report.document import Document, Heading, Part, Picture, Proof, Statement
from certify.report.drawing import draw_reason
from certify.report.families import FamilyWords
from certify.report.inline import quote_prose, refer
from certify.report.items import Family, Item, read_families, read_items
from certify.report.joint import tell_jointly
from certify.report.lasting import find_lasting
from certify.report.latex import set_latex_document
from certify.report.limits import COMPUTATIONS, say_limits
from certify.report.markdown import set_markdown_document
from certify.report.runs import find_runs, span
from certify.report.statement import ClaimWords, define_graphs, state_claim
from certify.report.words import Words, join, plural

FORMS: dict[str, Callable[[Document], str]] = {
    "latex": set_latex_document,
    "markdown": set_markdown_document,
}
MOST_WITNESSES = 400
"""More paths or cycles than these are not printed: nobody reads them."""


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
    check = need_accepted(folder, may_be_open=True)
    document = _Writer(folder, check).document()
    return Appendix(FORMS[form](document), check.left_open)


def write_text(path: Path, text: str) -> None:
    """Write a file.

    Errors: DiskError when that cannot be.
    """
    write_given(path, text.encode())


class _Writer:
    """Reads a folder that was checked, and composes the parts."""

    def __init__(self, folder: Path, check: FolderCheck) -> None:
        self.folder, self.check = folder, check
        self.claim = read_claim(folder / check.claim_name)
        self.words = ClaimWords(self.claim, check.answers.total() + check.left_open)
        self.digests: dict[str, str] = read_manifest(folder)["sha256"]
        self.file = evidence_name(folder)
        self.families: list[Family] = []
        if self.claim.growing is None:
            self.items = list(read_items(self.claim, folder))
        else:
            self.families = list(read_families(self.claim, folder))
            self.items = [item for family in self.families for item in family.small]
        digest = self.digests[self.file]
        self.endless = FamilyWords(self.words, self.families, self.file, digest)
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
        theorem = self.endless.state() if self.families else self._claim(shown)
        if theorem:
            outline = self.endless.outline() if self.families else [Paragraph(self._outline())]
            parts.append(Statement("Theorem", "claim", theorem))
            parts.append(Proof(tuple(outline)))
        if self.words.has_instances:
            parts.append(show_answers(self.words, self._with_families(shown)))
        parts += self.endless.prove()
        parts += self._impossible(groups[0])
        parts += self._witnesses()
        parts += self.endless.construct()
        parts += self._open()
        parts += say_limits(self.words, self.check, self.digests, self.items, self.families)
        return Document(self.claim.title or "The evidence", self.prefix, tuple(parts))

    def _with_families(self, shown: Sequence[Shown]) -> list[Shown]:
        """Return the instances of the table, every row of an endless claim up to its end."""
        if not self.families:
            return list(shown)
        rows, rest = [], iter(shown)
        for family in self.families:
            rows += [*islice(rest, len(family.small)), self.endless.show(family)]
        return rows

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
        kinds = [item.record["kind"] for group in groups for item in group]
        small = "The small graphs: why" if self.families else "Why"
        parts: list[Part] = [
            Heading(f"{small} there is no {thing}", 2),
            Paragraph(
                f"In this section {mark('u-v')} is the edge between {mark('u')} and {mark('v')}. A "
                f"{self.words.thing} uses an edge if it contains it. The reading length of a proof "
                f"is {explain_lengths(self.words, kinds)}."
            ),
        ]
        for number, group in enumerate(groups, 1):
            note = f"reading length {span(item.record['length'] for item in group)}"
            parts.append(Statement("Proposition", f"none:{number}", self._say_none(group), note))
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
            [self._name(item) for item in group],
            lambda name: (self.folder / name).read_bytes(),
        )
        if kind in COMPUTATIONS:
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
        place = f"line {item.line} of {mark(f'`{self.file}`')}"
        if self.families:
            place += f" (among the {mark('`small`')} ones, for {self._name(item)})"
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
        parts: list[Part] = [Heading(f"{thing}s in the small graphs", 2)]
        if not self.families:
            parts = [Heading(f"The {thing}s", 2)]
        close = "" if self.words.thing == "path" else ", and so are the last and the first"
        if len(places) > MOST_WITNESSES:
            first, last = self.items[places[0]].line, self.items[places[-1]].line
            lines = f"line {first}" if first == last else f"the lines {first} to {last}"
            where = f"{lines} of {mark(f'`{self.file}`')}"
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
            rows.append((self._name(item), words.sequence(order)))
        return [*parts, Rows(tuple(rows))]

    def _name(self, item: Item) -> str:
        return self.words.instance(item.record["instance"])

    def _open(self) -> list[Part]:
        keys = [item.record["instance"] for item in self.items]
        is_open = [item.record["answer"] == "open" for item in self.items]
        runs = [run for run in find_runs(keys, is_open.__getitem__) if is_open[run.places[0]]]
        runs = self.endless.open_runs() if self.families else runs
        if not runs:
            return []
        told = join([self.words.run(run) for run in runs]) or self.words.any_graph
        return [
            Heading("What is left open", 2),
            Paragraph(
                f"For {told} neither a {self.words.structure} nor a reason against one was found "
                "within the limits of the search. Nothing is claimed there."
            ),
        ]


def _add(block: Block, text: str) -> Block:
    return Paragraph(block.text + text, block.depth) if isinstance(block, Paragraph) else block
