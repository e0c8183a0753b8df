"""A counting argument in the language of the graph: scores, end values, need and offer.

A cycle is told as FORMAT.md has it: the scores along a Hamiltonian cycle add up
to at least the need, and the edges offer less. For a path the apex is translated:

* the score of an edge from v to the apex becomes the *end value* of v, the weight
  of v and of the sets that contain v (sets are written without the apex, which leaves
  the same edges);
* a Hamiltonian path, its two ends counted once more, has every vertex twice, and
  at each set at least two edges that leave it or ends inside it;
* the weight of the apex drops out: it only bounded the sum of two end values, and
  here the two largest are taken, which is at most that bound.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.report.structure import certain_ends, inner_edges, possible_ends


@dataclass(frozen=True)
class CrossedSet:
    """A set without the apex and its weight z.

    vertices: sorted. marked: an odd number of edges that leave the set, sorted, and
    `marked_ends`, vertices of the set; both empty for a plain cut.
    """

    name: str
    vertices: tuple[int, ...]
    weight: int
    marked: tuple[Edge, ...] = ()
    marked_ends: tuple[int, ...] = ()

    @property
    def is_cut(self) -> bool:
        """Return whether nothing is marked."""
        return self.odd == 0

    @property
    def odd(self) -> int:
        """Return the number of marked edges and ends."""
        return len(self.marked) + len(self.marked_ends)

    @property
    def least(self) -> int:
        """Return what every Hamiltonian path or cycle adds to the sum at this set, at least."""
        return 2 * self.weight if self.is_cut else (1 - self.odd) * self.weight


@dataclass(frozen=True)
class Balance:
    """A counting argument in the language of the graph.

    need: what a Hamiltonian path or cycle adds up to at least. score: for every
    edge of the graph. end_value: for every vertex where a path may end. offer: what
    the edges bring at most. ends: the vertices whose end values are largest among what is
    allowed, and what they bring; () for a cycle.
    """

    weight: dict[int, int]
    sets: tuple[CrossedSet, ...]
    need: int
    score: dict[Edge, int]
    end_value: dict[int, int]
    offer: int
    ends: tuple[int, ...]

    @property
    def end_offer(self) -> int:
        """Return what the two ends bring at most, 0 for a cycle."""
        return sum(self.end_value[v] for v in self.ends)


def weigh(question: Question, body: dict[str, Any]) -> Balance:
    """Return the balance of a counting body. Cost: O(m) for each set."""
    weight = {v: y for v, y in body["vertex"] if v != question.apex}
    sets = _name_sets(question, body)
    edges = inner_edges(question)
    score = {(u, v): weight.get(u, 0) + weight.get(v, 0) for u, v in edges}
    end_value = {v: weight.get(v, 0) for v in possible_ends(question)}
    for item in sets:
        inside, flipped, ended = set(item.vertices), set(item.marked), set(item.marked_ends)
        for e in edges:
            if (e[0] in inside) != (e[1] in inside):
                score[e] += -item.weight if e in flipped else item.weight
        for v in end_value:
            if v in inside:
                end_value[v] += -item.weight if v in ended else item.weight
    need = 2 * sum(weight.values()) + sum(item.least for item in sets)
    offer = sum(s if e in question.required else max(0, s) for e, s in score.items())
    certain = certain_ends(question)
    free = sorted((v for v in end_value if v not in certain), key=lambda v: (-end_value[v], v))
    ends = (*certain, *free)[: 2 if question.apex is not None else 0]
    return Balance(weight, sets, need, score, end_value, offer, ends)


def list_decisive(
    question: Question, original: Question, body: dict[str, Any]
) -> tuple[set[Edge], set[Edge]]:
    """Return the used and the removed edges without which the argument would not hold.

    question: in a case of `original`, with used edges required and removed ones gone.
    Used edges count when their score is negative, removed ones when theirs would be
    positive; edges at the apex always.
    """
    balance = weigh(question, body)
    before = weigh(original, body)
    used = {e for e in question.required if e[1] == question.apex or balance.score[e] < 0}
    gone = (
        e
        for e in original.edges
        if e not in question.edge_set and (e[1] == question.apex or before.score[e] > 0)
    )
    return used, set(gone)


def _name_sets(question: Question, body: dict[str, Any]) -> tuple[CrossedSet, ...]:
    """Return the sets as a reader sees them: without the apex, or the smaller side."""
    found: list[CrossedSet] = []
    for vertices, odd, z in [
        *((s, [], z) for s, z in body["cut"]),
        *((s, f, z) for s, f, z in body["parity"]),
    ]:
        side = _choose_side(question, set(vertices))
        if not odd and question.apex is not None and len(side) == question.apex:
            # The edges at the apex: "two ends", which the two largest end values say.
            continue
        marked = [(u, v) for u, v in odd]
        found.append(
            CrossedSet(
                name=_letter(len(found)),
                vertices=tuple(sorted(side)),
                weight=z,
                marked=tuple(e for e in marked if e[1] != question.apex),
                marked_ends=tuple(u for u, v in marked if v == question.apex),
            )
        )
    return tuple(found)


def _choose_side(question: Question, side: set[int]) -> set[int]:
    other = set(range(question.n)) - side
    if question.apex is not None:
        return other if question.apex in side else side
    return min(side, other, key=lambda chosen: (len(chosen), sorted(chosen)))


def _letter(index: int) -> str:
    letters = "ABCDEFGHIJKLMNOPQRSTUVWXYZ"
    return letters[index % 26] + (str(index // 26) if index >= 26 else "")
