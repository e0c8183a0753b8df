"""The few facts about a question that the wording needs.

A *piece* is a connected component of what is left of the graph when some vertices
are removed; for a path question the graph is the one asked about, without the
apex. The *inner* edges are those of the graph. Everything is recomputed from
the question, so that a text says only what is so.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any

from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question

Piece = tuple[int, ...]


def inner_edges(question: Question) -> tuple[Edge, ...]:
    """Return the edges of the graph asked about, sorted."""
    return tuple(e for e in question.edges if e[1] != question.apex)


def inner_neighbours(question: Question, v: int) -> tuple[int, ...]:
    """Return the neighbours of v in the graph asked about, sorted."""
    return tuple(w for w in question.neighbours[v] if w != question.apex)


def possible_ends(question: Question) -> tuple[int, ...]:
    """Return the vertices where the path may end, sorted; none for a cycle."""
    return () if question.apex is None else question.neighbours[question.apex]


def certain_ends(question: Question) -> tuple[int, ...]:
    """Return the vertices where the path is required to end, sorted; none for a cycle."""
    return tuple(sorted(u for u, v in question.required if v == question.apex))


def is_end(question: Question, v: int) -> bool:
    """Return whether the path may end at v."""
    return question.apex is not None and question.has_edge(v, question.apex)


def inner_required(question: Question) -> tuple[Edge, ...]:
    """Return the required edges of the graph asked about, sorted."""
    return tuple(e for e in sorted(question.required) if e[1] != question.apex)


def find_pieces(question: Question, without: Iterable[int]) -> list[Piece]:
    """Return the pieces that are left, by size and then by members."""
    seen = set(without)
    if question.apex is not None:
        seen.add(question.apex)
    pieces: list[Piece] = []
    for start in range(question.n):
        if start in seen:
            continue
        seen.add(start)
        piece, stack = [start], [start]
        while stack:
            for w in question.neighbours[stack.pop()]:
                if w not in seen:
                    seen.add(w)
                    piece.append(w)
                    stack.append(w)
        pieces.append(tuple(sorted(piece)))
    return sorted(pieces, key=lambda piece: (len(piece), piece))


def is_forced(question: Question, u: int, v: int) -> bool:
    """Return whether the edge {u, v} is required or one of its ends has only two edges."""
    near = question.neighbours
    edge = edge_between(u, v)
    return edge in question.edge_set and (
        edge in question.required or len(near[u]) == 2 or len(near[v]) == 2
    )


@dataclass(frozen=True)
class Separation:
    """What removing a set of vertices leaves.

    removed: the set without the apex, sorted. pieces: all pieces left. must: the
    pieces that the parts counted by `parts` must visit. joined: required inner
    edges inside the set. ends: required ends inside it. parts: into how many parts
    a Hamiltonian cycle or path can fall at most when the set is removed; for a
    path whose ends stay outside the count (`inside`), how many parts it has
    between two removed vertices.
    """

    removed: tuple[int, ...]
    pieces: list[Piece]
    must: list[Piece]
    joined: tuple[Edge, ...]
    ends: tuple[int, ...]
    inside: bool
    parts: int

    @property
    def holds(self) -> bool:
        """Return whether the pieces are more than the parts, so that nothing fits."""
        if not self.removed:
            return bool(self.must) and (self.inside or len(self.pieces) > 1)
        return (self.inside or bool(self.pieces)) and len(self.must) > self.parts


def separate(question: Question, chosen: Iterable[int]) -> Separation:
    """Return what removing a set of vertices, perhaps with the apex, leaves.

    A cycle falls into at most as many parts as vertices are removed; a path into
    one more; a required edge between two removed vertices, or a required end among
    them, costs one part (Chvátal, Discrete Mathematics 5 (1973) 215-228). If the apex
    is not in the set, only the parts between two removed vertices count, and the
    pieces without a possible end, which no other part can visit.
    Cost: O(n + m).
    """
    whole = set(chosen)
    removed = tuple(sorted(whole - {question.apex}))
    pieces = find_pieces(question, removed)
    joined = tuple(e for e in inner_required(question) if whole.issuperset(e))
    ends: tuple[int, ...] = ()
    parts = len(removed) - len(joined)
    must, inside = pieces, False
    if question.apex is not None and question.apex in whole:
        ends = tuple(v for v in certain_ends(question) if v in whole)
        parts += 1 - len(ends)
    elif question.apex is not None:
        must = [piece for piece in pieces if not any(is_end(question, v) for v in piece)]
        inside = True
        parts -= 1
    return Separation(removed, pieces, must, joined, ends, inside, parts)


@dataclass(frozen=True)
class Independence:
    """Pairwise not joined vertices, and how many of them a path or cycle has room for.

    chosen: the vertices, without the apex. others: the number of other vertices.
    joined: required inner edges between others. ends: required ends among the
    others. inside: no chosen vertex may be an end of the path. room: how many
    gaps the others leave for them at most. bipartite: the others are pairwise not joined
    either.
    """

    chosen: tuple[int, ...]
    others: int
    joined: tuple[Edge, ...]
    ends: tuple[int, ...]
    inside: bool
    room: int
    bipartite: bool

    @property
    def holds(self) -> bool:
        """Return whether the vertices are more than there is room for."""
        return len(self.chosen) > self.room


def measure_independent(question: Question, chosen: Iterable[int]) -> Independence | None:
    """Return the room for a set of vertices, perhaps with the apex; None if two are joined.

    On a cycle k other vertices leave k gaps, on a path k + 1, or k - 1 when no
    chosen vertex may be an end; each gap takes one chosen vertex at most, none where
    two others are joined by a required edge or one is a required end.
    Cost: O(n + m).
    """
    whole = set(chosen)
    if any(u in whole and v in whole for u, v in question.edges):
        return None
    members = tuple(sorted(whole - {question.apex}))
    order = question.n - (question.apex is not None)
    others = order - len(members)
    joined = tuple(e for e in inner_required(question) if whole.isdisjoint(e))
    ends: tuple[int, ...] = ()
    room = others - len(joined)
    inside = False
    if question.apex is not None and question.apex in whole:
        inside = True
        room -= 1
    elif question.apex is not None:
        ends = tuple(v for v in certain_ends(question) if v not in whole)
        room += 1 - len(ends)
    bipartite = all((u in whole) != (v in whole) for u, v in inner_edges(question))
    return Independence(members, others, joined, ends, inside, room, bipartite)


def list_supporting(
    question: Question, original: Question, body: dict[str, Any]
) -> frozenset[Edge]:
    """Return the used and removed edges without which an obstruction would not hold.

    question: in a case of `original`, with used edges required and removed ones gone.
    Enough of them, perhaps more than needed.
    """
    near = original.neighbours
    gone = {e for e in original.edges if e not in question.edge_set}
    match body["form"]:
        case "leaf":
            at = {body["vertex"]}
            return frozenset(e for e in gone if not at.isdisjoint(e))
        case "crowded":
            pairs = [(body["vertex"], w) for w in body["neighbours"]]
        case "ring":
            ring = body["vertices"]
            pairs = list(zip(ring, [*ring[1:], ring[0]], strict=True))
        case "separator":
            chosen = set(body["set"])
            joined = {e for e in question.required if chosen.issuperset(e)}
            return frozenset(joined | {e for e in gone if chosen.isdisjoint(e)})
        case _:
            chosen = set(body["set"])
            joined = {e for e in question.required if chosen.isdisjoint(e)}
            return frozenset(joined | {e for e in gone if chosen.issuperset(e)})
    found: set[Edge] = set()
    for u, v in pairs:
        edge = edge_between(u, v)
        if edge in question.required:
            found.add(edge)
            continue
        for w in (u, v):
            if len(question.neighbours[w]) == 2:
                found |= {edge_between(w, x) for x in near[w]} & gone
    return frozenset(found)
