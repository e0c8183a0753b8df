"""Facts about every Hamiltonian cycle, as inequalities in the edges it uses.

Let H be a Hamiltonian cycle that uses all required edges, and x_e = 1 when H
uses edge e, else 0. A *fact* says sum of c_e x_e >= bound for every H:

* degree of v: the edges at v, bound 2, and even equality; its weight may have
  any sign;
* cut of S: the edges leaving S, bound 2: H leaves S and comes back;
* parity of S and F (F an odd number of edges leaving S): the leaving edges
  outside F minus those in F, bound 1 - size of F: the number of edges in which
  H crosses a cut is even, so H does not cross it exactly in F. These are the
  blossom inequalities of Edmonds (J. Res. Nat. Bur. Standards 69B (1965)
  125-130) with the parity of S left out, since every vertex has two edges.

Edges are named by their number in the question's sorted list.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from certify.evidence.counting import Counting
from certify.graph.graph import Edge
from certify.graph.question import Question


@dataclass(frozen=True)
class Fact:
    """One fact.

    vertices: the vertex of a degree fact, or the sorted set S.
    odd: the edges F of a parity fact, sorted; empty for the others.
    terms: (edge number, +1 or -1).
    equal: whether the fact is an equation, as for a degree.
    """

    vertices: tuple[int, ...]
    odd: tuple[Edge, ...]
    terms: tuple[tuple[int, int], ...]
    bound: int
    equal: bool

    @property
    def length(self) -> int:
        """Return how many integers the fact takes in a counting argument, its weight included."""
        return 1 + len(self.vertices) + 2 * len(self.odd)


class FactMaker:
    """Makes the facts of one question.

    Looking up the edges that leave a set costs the degrees of the set.
    """

    def __init__(self, question: Question) -> None:
        self._n = question.n
        self._edges = question.edges
        self._number = {e: i for i, e in enumerate(question.edges)}
        self._at: list[list[tuple[int, int]]] = [[] for _ in range(question.n)]
        for e, (u, v) in enumerate(question.edges):
            self._at[u].append((e, v))
            self._at[v].append((e, u))

    def degrees(self) -> list[Fact]:
        """Return the degree facts, by vertex."""
        return [
            Fact((v,), (), tuple((e, 1) for e, _ in at_v), 2, True)
            for v, at_v in enumerate(self._at)
        ]

    def smaller_side(self, side: Iterable[int]) -> tuple[int, ...]:
        """Return the set or its complement, whichever reads shorter (then: comes first).

        Both have the same leaving edges, hence the same facts.
        """
        inside = tuple(sorted(side))
        if 2 * len(inside) < self._n:
            return inside
        members = set(inside)
        outside = tuple(v for v in range(self._n) if v not in members)
        return min(inside, outside, key=lambda part: (len(part), part))

    def leaving(self, side: tuple[int, ...]) -> list[int]:
        """Return the numbers of the edges that leave a set, ascending."""
        members = set(side)
        return sorted(e for v in side for e, w in self._at[v] if w not in members)

    def cut(self, side: tuple[int, ...]) -> Fact:
        """Return the cut fact of a set, neither empty nor everything."""
        return Fact(side, (), tuple((e, 1) for e in self.leaving(side)), 2, False)

    def parity(self, side: tuple[int, ...], odd: Iterable[int]) -> Fact:
        """Return the parity fact of a set and an odd number of its leaving edges."""
        flipped = set(odd)
        return Fact(
            side,
            tuple(self._edges[e] for e in sorted(flipped)),
            tuple((e, -1 if e in flipped else 1) for e in self.leaving(side)),
            1 - len(flipped),
            False,
        )

    def without(self, fact: Fact, removed: frozenset[Edge]) -> Fact | None:
        """Return the fact for the question without the removed edges.

        Terms of removed edges stay, as they are 0. Only F must be made of edges
        that are there. With an odd number of them left the fact gets stronger; with an even
        number it says (leaving outside F) - (in F) >= -(size of F), which the
        bounds on x say already: None.
        """
        odd = [e for e in fact.odd if e not in removed]
        if len(odd) == len(fact.odd):
            return fact
        if len(odd) % 2 == 0:
            return None
        return self.parity(fact.vertices, [self._number[e] for e in odd])


def write_counting(facts: Sequence[Fact], weights: Sequence[int]) -> Counting:
    """Return facts and their integer weights as evidence; weights 0 are left out."""
    chosen = [(fact, w) for fact, w in zip(facts, weights, strict=True) if w]
    return Counting(
        vertex=tuple(sorted((f.vertices[0], w) for f, w in chosen if f.equal)),
        cut=tuple(sorted((f.vertices, w) for f, w in chosen if not f.equal and not f.odd)),
        parity=tuple(sorted((f.vertices, f.odd, w) for f, w in chosen if f.odd)),
    )
