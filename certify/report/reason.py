"""What a figure shows of a reason: which vertices, edges and sets, and how it is told below it."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from certify.graph.graph import Edge, Graph, edge_between
from certify.graph.question import Question
from certify.report.balance import weigh
from certify.report.classical import name_classical
from certify.report.structure import (
    Piece,
    certain_ends,
    inner_edges,
    inner_neighbours,
    measure_independent,
    separate,
)
from certify.report.words import capital, count_of, join, name_label, number, plural
from certify.search.forced import Frame, State

_MOST_CUTS = 3


@dataclass(frozen=True)
class Reason:
    """What is to be seen. All vertices are of the graph; the apex is not drawn.

    shapes: of the vertices that are no plain circles. pieces: shaded, or named by letters.
    cuts: sets with their names, outlined or told by letters. weights: written at
    vertices. gone: forbidden edges, not drawn. caption, told: for those who see the
    figure, and who do not.
    """

    caption: str
    told: str
    title: str
    shapes: dict[int, str] = field(default_factory=dict)
    pieces: tuple[Piece, ...] = ()
    cuts: tuple[tuple[str, Piece], ...] = ()
    weights: dict[int, int] = field(default_factory=dict)
    thick: frozenset[Edge] = frozenset()
    dashed: frozenset[Edge] = frozenset()
    gone: frozenset[Edge] = frozenset()


@dataclass(frozen=True)
class _Finder:
    graph: Graph
    question: Question

    @property
    def gone(self) -> frozenset[Edge]:
        return frozenset(e for e in self.graph.edges if e not in self.question.edge_set)

    def names(self, vertices: tuple[int, ...] | list[int]) -> str:
        return join([name_label(self.graph.labels[v]) for v in vertices])

    def obstruction(self, body: dict[str, Any]) -> Reason | None:
        match body["form"]:
            case "separator":
                return self.separator(body["set"])
            case "independent":
                return self.independent(body["set"])
            case "crowded":
                return self.crowded(body["vertex"], body["neighbours"])
            case "ring":
                return self.ring(body["vertices"])
        return None

    def separator(self, chosen: list[int]) -> Reason:
        found = separate(self.question, chosen)
        removed = set(found.removed)
        dashed = {e for e in inner_edges(self.question) if not removed.isdisjoint(e)}
        pieces = count_of(len(found.pieces), "piece")
        if removed:
            size = len(removed)
            them = f"the {count_of(size, 'vertex')} drawn as {plural('black square', size)}"
            if size == 1:
                them = "the vertex drawn as a black square"
            caption = f"Without {them}, {pieces} {plural('is', len(found.pieces))} left."
            told = (
                f"{count_of(size, 'vertex')} {plural('is', size)} removed, "
                f"{self.names(found.removed)}, and {pieces} "
                f"{plural('is', len(found.pieces))} left: "
            )
        else:
            caption = f"The graph has {pieces}."
            told = f"It has {pieces}: "
        told += "; ".join(self.names(piece) for piece in found.pieces) + "."
        return Reason(
            caption,
            told[:1].upper() + told[1:],
            "Removed vertices and the pieces they leave" if removed else "A disconnected graph",
            shapes=dict.fromkeys(sorted(removed), "square"),
            pieces=tuple(found.pieces),
            dashed=frozenset(dashed),
            gone=self.gone,
        )

    def independent(self, chosen: list[int]) -> Reason | None:
        found = measure_independent(self.question, chosen)
        if found is None:
            return None
        members = set(found.chosen)
        others = [v for v in range(self.graph.n) if v not in members]
        return Reason(
            f"No two of the {number(len(members))} vertices drawn as circles are joined; there "
            f"{plural('is', len(others))} only {number(len(others))} of the others (squares).",
            f"No two of these {len(members)} vertices are joined: {self.names(found.chosen)}.",
            "Vertices of which no two are joined",
            shapes=dict.fromkeys(others, "square"),
            gone=self.gone,
        )

    def crowded(self, v: int, three: list[int]) -> Reason:
        apex = self.question.apex
        if v == apex:
            edges = {
                edge_between(w, inner_neighbours(self.question, w)[0])
                for w in three
                if len(inner_neighbours(self.question, w)) == 1
            }
            return Reason(
                "Every Hamiltonian path would have to end at each of the three vertices drawn as "
                "double circles.",
                f"The vertices {self.names(three)} would all be ends of a path.",
                "Three vertices that would be ends",
                shapes=dict.fromkeys(three, "double"),
                thick=frozenset(edges),
                gone=self.gone,
            )
        inner = [w for w in three if w != apex]
        return Reason(
            "The thick edges would all be used, at the vertex drawn as a double circle.",
            f"At {self.names([v])} the edges to {self.names(inner)} would all be used.",
            "Too many forced edges at a vertex",
            shapes={v: "double"},
            thick=frozenset(edge_between(v, w) for w in inner),
            gone=self.gone,
        )

    def ring(self, ring: list[int]) -> Reason:
        pairs = zip(ring, [*ring[1:], ring[0]], strict=True)
        thick = frozenset(edge_between(u, v) for u, v in pairs if self.question.apex not in (u, v))
        members = [v for v in ring if v != self.question.apex]
        return Reason(
            "The thick edges are forced.",
            f"The edges along {self.names(members)} are forced.",
            "Forced edges that close too early",
            thick=thick,
            gone=self.gone,
        )

    def counting(self, body: dict[str, Any]) -> Reason | None:
        classical = name_classical(self.question, body)
        if classical is not None:
            return self.obstruction(classical)
        balance = weigh(self.question, body)
        if len(balance.sets) > _MOST_CUTS:
            return None
        shapes = {v: "square" if y < 0 else "double" for v, y in balance.weight.items()}
        cuts = tuple((item.name, item.vertices) for item in balance.sets if item.vertices)
        cuts = tuple(sorted(cuts, key=lambda cut: (-len(cut[1]), cut[0])))
        thick = frozenset(e for item in balance.sets for e in item.marked)
        signs = {y > 0 for y in balance.weight.values()}
        shown = ["the weights"] if balance.weight else []
        if cuts:
            shown.append(f"the {plural('set', len(cuts))} {join(sorted(name for name, _ in cuts))}")
        said = [f"{capital(' and '.join(shown))}.", _say_signs(set(balance.weight.values()))]
        caption = " ".join(part for part in said if part)
        if thick:
            caption += " The marked edges are thick."
        told = "; ".join(
            f"{self.names([v])} has weight {y}" for v, y in sorted(balance.weight.items())
        )
        told += "".join(f"; the set {name} is {self.names(members)}" for name, members in cuts)
        return Reason(
            caption,
            f"{told[:1].upper()}{told[1:]}.",
            "Weights on the vertices",
            shapes=shapes,
            cuts=cuts,
            weights=balance.weight if len(set(balance.weight.values())) > len(signs) else {},
            thick=thick,
            gone=self.gone,
        )

    def cases(self, body: dict[str, Any]) -> Reason | None:
        state = State.first(Frame(self.question), record=True)
        apex = self.question.apex
        forced = frozenset(e for e in state.used_edges() if e[1] != apex)
        shapes: dict[int, str] = {}
        caption, told = [], []
        name, *parts = body["nodes"][0]
        if name == "vertex" and parts[0] != apex:
            shapes[parts[0]] = "double"
            caption.append("The cases begin at the vertex drawn as a double circle.")
            told.append(f"The cases begin at {self.names([parts[0]])}.")
        elif name == "edge" and parts[1] != apex:
            shapes |= dict.fromkeys(parts, "double")
            caption.append("The cases begin with the edge between the two double circles.")
            told.append(f"The cases begin with the edge between {self.names(parts)}.")
        if forced:
            caption.append("The thick edges are forced.")
            listed = [self.names(list(e)).replace(" and ", "-") for e in sorted(forced)]
            told.append(f"The forced edges are {join(listed)}.")
        for v in certain_ends(self.question):
            shapes.setdefault(v, "double")
        if not caption:
            caption = ["The graph of these cases."]
        return Reason(
            " ".join(caption),
            " ".join(told),
            "The graph of a proof by cases",
            shapes=shapes,
            thick=forced,
            gone=self.gone,
        )


def _say_signs(values: set[int]) -> str:
    """Return what the shapes say; with one weight of each sign that is all."""
    negative, positive = (sorted(y for y in values if (y > 0) == sign) for sign in (False, True))
    said = [
        f"{shape} have weight {listed[0]}" if len(listed) == 1 else f"{shape} have {sign} weight"
        for shape, sign, listed in (
            ("squares", "negative", negative),
            ("double circles", "positive", positive),
        )
        if listed
    ]
    text = ", ".join([*said, "single circles weight 0"] if said else [])
    return f"{text[:1].upper()}{text[1:]}." if text else ""


def find_reason(graph: Graph, question: Question, kind: str, body: dict[str, Any]) -> Reason | None:
    """Return what a figure shows of the evidence of an impossible instance.

    None: the evidence is of a kind that shows nothing in the graph, or that a sentence tells
    as well. Cost: O(n + m) for each set.
    """
    finder = _Finder(graph, question)
    match kind:
        case "obstruction":
            return finder.obstruction(body)
        case "counting":
            return finder.counting(body)
        case "cases":
            return finder.cases(body)
    return None
