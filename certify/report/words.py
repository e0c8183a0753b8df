"""Shared wording: names of vertices and edges, lists, numbers, path or cycle.

Every module of a kind speaks through `Words`, which knows the labels and whether
the question is about a path or a cycle. Names come out marked (blocks.py).
"""

from __future__ import annotations

import json
import re
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from certify.errors import ContradictionError
from certify.graph.graph import Edge, Graph, Label
from certify.graph.question import Question
from certify.report.blocks import mark
from certify.report.structure import Piece, certain_ends, inner_required

_NUMBERS = (
    *("no", "one", "two", "three", "four", "five", "six"),
    *("seven", "eight", "nine", "ten", "eleven", "twelve"),
)
_PLURALS = {"vertex": "vertices", "is": "are", "has": "have", "contains": "contain"}
_BARE = re.compile(r"[^\s,;{}()\"-]+|-?\d+|\(-?\d+(, ?-?\d+)*,?\)")
HOW_TO_CHECK = (
    f"{mark('`certify check FOLDER`')}, or without the rest of the program "
    f"{mark('`python -m certify.checker FOLDER`')}"
)
"""The commands that check a folder; the blanks inside a command do not break a line."""

_SHORT_PIECE, _MOST_MEMBERS = 8, 60
_MOST_NAMED = 12


def number(count: int) -> str:
    """Return a number as prose has it: in words up to twelve, 0 as "no"."""
    return _NUMBERS[count] if 0 <= count < len(_NUMBERS) else str(count)


def plural(noun: str, count: int) -> str:
    """Return a noun, or "is", "has" and "contains", in the number that the count asks for."""
    return noun if count == 1 else _PLURALS.get(noun, f"{noun}s")


def count_of(count: int, noun: str) -> str:
    """Return a count with its noun: "two vertices"."""
    return f"{number(count)} {plural(noun, count)}"


def join(parts: Sequence[str], last: str = "and") -> str:
    """Return a list as prose has it: "3, 9 and 17"."""
    if len(parts) < 2:
        return "".join(parts)
    return f"{', '.join(parts[:-1])} {last} {parts[-1]}"


def capital(text: str) -> str:
    """Return a sentence with a capital; a name in front stays as it is."""
    return text[:1].upper() + text[1:]


def name_label(label: Label, *, short: bool = False) -> str:
    """Return what a reader calls a vertex; `short` without blanks, for an edge."""
    if isinstance(label, tuple):
        return f"({(',' if short else ', ').join(map(str, label))})"
    if isinstance(label, str) and not (label.isprintable() and _BARE.fullmatch(label)):
        return json.dumps(label)
    return str(label).replace(" ", "") if short else str(label)


def name_edge(u: Label, v: Label) -> str:
    """Return the name of an edge: 3-6, (1,2)-(3,3), or {-1, 2} where a dash misleads."""
    left, right = name_label(u, short=True), name_label(v, short=True)
    if any(text[0] in '-"' for text in (left, right)):
        return f"{{{left}, {right}}}"
    return f"{left}-{right}"


@dataclass(frozen=True)
class Words:
    """The language of one question.

    graph: whose labels are used. question: what is asked, or what is left of it
    in a case of a proof. instance: how the instance is called ("n = 18"; empty when
    there is only one). in_case: whether the text stands inside a case, where
    edges are used and unused by assumption.
    """

    graph: Graph
    question: Question
    instance: str = ""
    in_case: bool = False

    def inside(self, question: Question) -> Words:
        """Return the same language for what is left of the question in a case."""
        return replace(self, question=question, in_case=True)

    @property
    def apex(self) -> int | None:
        """Return the apex, which no text names."""
        return self.question.apex

    @property
    def is_path(self) -> bool:
        """Return whether the question is about a path."""
        return self.question.apex is not None

    @property
    def thing(self) -> str:
        """Return "path" or "cycle"."""
        return "path" if self.is_path else "cycle"

    @property
    def order(self) -> int:
        """Return the number of vertices of the graph."""
        return self.graph.n

    @property
    def demanded(self) -> str:
        """Return the word for an edge that must be used."""
        return "used" if self.in_case else "required"

    @property
    def left(self) -> str:
        """Return " left" inside a case, where some edges are unused."""
        return " left" if self.in_case else ""

    def name(self, v: int) -> str:
        """Return the name of a vertex."""
        return mark(name_label(self.graph.labels[v]))

    def vertex(self, v: int) -> str:
        """Return "vertex 3"."""
        return f"vertex {self.name(v)}"

    def names(self, vertices: Iterable[int]) -> str:
        """Return "3, 9 and 17"."""
        return join([self.name(v) for v in vertices])

    def vertices(self, vertices: Sequence[int]) -> str:
        """Return "vertex 3" or "vertices 3, 9 and 17"."""
        return f"{plural('vertex', len(vertices))} {self.names(vertices)}"

    def sequence(self, vertices: Iterable[int]) -> str:
        """Return the vertices with commas, in the order given."""
        return ", ".join(self.name(v) for v in vertices)

    def members(self, vertices: Iterable[int]) -> str:
        """Return a set: "{3, 9, 17}"."""
        return f"{{{self.sequence(vertices)}}}"

    def edge(self, edge: Edge) -> str:
        """Return the name of an edge of the graph, always the same way round."""
        labels = self.graph.labels
        return mark(name_edge(labels[min(edge)], labels[max(edge)]))

    def edge_names(self, edges: Iterable[Edge], last: str = "and") -> str:
        """Return "3-6, 6-10 and 10-15"."""
        return join([self.edge(e) for e in edges], last)

    def edges(self, edges: Sequence[Edge]) -> str:
        """Return "edge 3-6" or "edges 3-6 and 6-10"."""
        return f"{plural('edge', len(edges))} {self.edge_names(edges)}"

    def pieces(self, pieces: Sequence[Piece]) -> str:
        """Return pieces by size, with their members where there are few."""
        single = [piece[0] for piece in pieces if len(piece) == 1]
        small = [piece for piece in pieces if 1 < len(piece) <= _SHORT_PIECE]
        if len(single) + sum(map(len, small)) > _MOST_MEMBERS:
            single, small = [], []
        parts = []
        if single:
            parts.append(f"the single {self.vertices(single)}")
        parts += [
            mark(f"{{{', '.join(name_label(self.graph.labels[v]) for v in piece)}}}")
            for piece in small
        ]
        told = {1} if single else set()
        told |= {len(piece) for piece in small}
        sizes = Counter(len(piece) for piece in pieces if len(piece) not in told)
        for size in sorted(sizes):
            count = sizes[size]
            each = " each" if count > 1 else ""
            parts.append(f"{number(count)} of {count_of(size, 'vertex')}{each}")
        return f"{', '.join(parts[:-1])}, and {parts[-1]}" if len(parts) > 2 else join(parts)

    def neighbours_left(self, near: Sequence[int]) -> str:
        """Return "only the neighbours 3 and 9", "only the neighbour 3", "no neighbour"."""
        if not near:
            return f"no neighbour{self.left}"
        return f"only the {plural('neighbour', len(near))} {self.names(near)}{self.left}"

    def conditions(self) -> str:
        """Return what the path or cycle has to satisfy: " that ends at 1 and uses 3-6"."""
        question = self.question
        if question.absent:
            return " of the kind that is asked for"
        ends = certain_ends(question)
        forbidden = [e for e in self.graph.edges if e not in question.edge_set]
        parts = []
        if len(ends) == 2:
            parts.append(f"joins {self.names(ends)}")
        elif ends and len(question.neighbours[self.order]) == 1 < self.order:
            parts.append(f"begins and ends at {self.name(ends[0])}")
        elif ends:
            parts.append(f"has an end at {self.name(ends[0])}")
        for verb, word, edges in (
            ("uses", "required", inner_required(question)),
            ("avoids", "forbidden", tuple(forbidden)),
        ):
            if len(edges) > _MOST_NAMED:
                parts.append(f"{verb} the {len(edges)} {word} edges")
            elif edges:
                parts.append(f"{verb} the {self.edges(edges)}")
        return f" that {join(parts)}" if parts else ""

    def fail(self, what: str) -> ContradictionError:
        """Return the error for evidence that does not show what it should."""
        where = f"instance {self.instance}: " if self.instance else ""
        return ContradictionError(
            f"{where}the evidence does not hold ({what}), so there is nothing to explain; "
            "run: certify check FOLDER"
        )
