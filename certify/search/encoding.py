"""Facts about every Hamiltonian cycle of a question, and their clauses.

A *fact* holds for every Hamiltonian cycle H that uses the required edges, for a
reason that is seen by looking at the question alone:

- `DegreeFact`: H has exactly two edges at the vertex;
- `CutFact`: H leaves the set, which is neither empty nor everything;
- `RequiredFact`: H uses the edge;
- `MirrorFact`: among all images of H under the automorphisms in use, take the
  one whose edge vector (x_1, ..., x_m) comes first lexicographically; none of
  these automorphisms maps it to an earlier one (Crawford, Ginsberg, Luks and
  Roy, KR 1996, 148-159, from memory). All mirrors compare in the one order of
  the question's edges, so they hold together.

Each fact becomes clauses by the fixed rule of FORMAT.md, section 6: variables
1..m are the edges in sorted order, further ones are numbered on from fact to
fact. A *clause* is a tuple of literals, v or -v.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from itertools import combinations

from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question
from certify.search.symmetry import is_symmetry

Clause = tuple[int, ...]

_SMALL_DEGREE = 6
"""Up to this degree "exactly two" needs no further variables."""


@dataclass(frozen=True)
class DegreeFact:
    """Exactly two edges at the vertex are used; there are at least two."""

    vertex: int


@dataclass(frozen=True)
class CutFact:
    """At least one edge that leaves the set (sorted) is used."""

    vertices: tuple[int, ...]


@dataclass(frozen=True)
class RequiredFact:
    """The required edge is used."""

    edge: Edge


@dataclass(frozen=True)
class MirrorFact:
    """The edge vector is no larger than its image, compared at the first `length` places.

    images: the automorphism p, as p(0), ..., p(n-1). Edges that p maps to
    themselves are not counted as places.
    """

    length: int
    images: tuple[int, ...]

    def shorten(self, used: Iterable[int]) -> MirrorFact:
        """Return the mirror with as few places as leave the clauses in use as they are.

        used: the positions, from 0, of the clauses in use; at least one. A place
        has three clauses, the last one only the first of them, so the clauses of a
        shorter mirror are the first ones of a longer.
        """
        return MirrorFact(max((i + 2) // 3 for i in used) + 1, self.images)


Fact = DegreeFact | CutFact | RequiredFact | MirrorFact


def build_cut(question: Question, vertices: Iterable[int]) -> CutFact:
    """Build the cut fact of a set, named by the smaller of its two sides.

    Both sides have the same leaving edges; of equal sides the one with vertex 0
    is taken, so that one cut has one name.
    vertices: neither empty nor everything.
    """
    side = sorted(vertices)
    if 2 * len(side) > question.n or (2 * len(side) == question.n and side[0] != 0):
        inside = frozenset(side)
        side = [v for v in range(question.n) if v not in inside]
    return CutFact(tuple(side))


class ClauseBuilder:
    """Turns facts into clauses, numbering further variables on from fact to fact.

    variables: how many are in use; at first the m edges.
    """

    def __init__(self, question: Question) -> None:
        self._question = question
        self._number = {edge: i for i, edge in enumerate(question.edges, start=1)}
        self.variables = question.m

    def build(self, fact: Fact) -> list[Clause]:
        """Build the clauses of the next fact.

        Errors: ValueError for a degree below two, and for a mirror that is no
        symmetry of the question.
        """
        match fact:
            case DegreeFact(vertex):
                return list(self._degree(vertex))
            case CutFact(vertices):
                return [self._cut(vertices)]
            case RequiredFact(edge):
                return [(self._number[edge],)]
            case MirrorFact(length, images):
                return list(self._mirror(length, images))

    def _new(self) -> int:
        self.variables += 1
        return self.variables

    def _cut(self, vertices: Sequence[int]) -> Clause:
        inside, near = frozenset(vertices), self._question.neighbours
        leaving = (edge_between(u, v) for u in vertices for v in near[u] if v not in inside)
        return tuple(sorted(self._number[edge] for edge in leaving))

    def _degree(self, vertex: int) -> Iterator[Clause]:
        near = self._question.neighbours[vertex]
        edges = sorted(self._number[edge_between(vertex, v)] for v in near)
        if len(edges) < 2:
            raise ValueError(f"vertex {vertex} has fewer than two edges")
        if len(edges) > _SMALL_DEGREE:
            yield from self._count_to_two(edges)
            return
        for i in range(len(edges)):
            yield (*edges[:i], *edges[i + 1 :])
        for three in combinations(edges, 3):
            yield tuple(-e for e in three)

    def _count_to_two(self, edges: Sequence[int]) -> Iterator[Clause]:
        """Yield "exactly two of these edges", by a sequential counter.

        After Sinz (CP 2005, LNCS 3709, 827-831; from memory): `one` says that one of the
        edges up to the i-th is used, `two` that two are.
        """
        one, two = edges[0], 0
        for i, edge in enumerate(edges[1:], start=2):
            one_before, two_before = one, two
            if i < len(edges):
                one = self._new()
                yield (-one_before, one)
                yield (-edge, one)
                yield (-one, one_before, edge)
            two = self._new()
            if i == 2:
                yield (-two, one_before)
                yield (-two, edge)
            else:
                yield (-two, two_before, one_before)
                yield (-two, two_before, edge)
                yield (-two_before, two)
                yield (-two_before, -edge)
            yield (-one_before, -edge, two)
        yield (two,)

    def _mirror(self, length: int, images: Sequence[int]) -> Iterator[Clause]:
        """Yield "no larger than its image" place by place; `equal` says "equal so far"."""
        sources = enumerate(self._sources(images), start=1)
        places = [(edge, source) for edge, source in sources if edge != source][:length]
        before: Clause = ()
        for i, (x, y) in enumerate(places, start=1):
            yield (*before, -x, y)
            if i < len(places):
                equal = self._new()
                yield (*before, -x, equal)
                yield (*before, y, equal)
                before = (-equal,)

    def _sources(self, images: Sequence[int]) -> list[int]:
        """Return for each edge the edge that is mapped to it, both as numbers."""
        if not is_symmetry(self._question, images):
            raise ValueError("a mirror has to be a symmetry of the question")
        sources = [0] * self._question.m
        for edge, (u, v) in enumerate(self._question.edges, start=1):
            sources[self._number[edge_between(images[u], images[v])] - 1] = edge
        return sources


def sort_facts(facts: Iterable[Fact]) -> list[Fact]:
    """Return the facts in the order of the file: by sort, then by what they say.

    Cuts go by size, then by their vertices; mirrors keep the order given.
    """

    def place(fact: Fact) -> tuple[int, int, tuple[int, ...]]:
        match fact:
            case DegreeFact(vertex):
                return (0, 0, (vertex,))
            case CutFact(vertices):
                return (1, len(vertices), vertices)
            case RequiredFact(edge):
                return (2, 0, edge)
            case MirrorFact():
                return (3, 0, ())

    return sorted(facts, key=place)


def write_cnf(question: Question, facts: Sequence[Fact]) -> bytes:
    """Write the DIMACS text: the facts as comments, the header, the clauses.

    facts: in the order of `sort_facts`. Everything below the comments follows
    from them, byte for byte.
    Cost: linear in the text.
    """
    builder = ClauseBuilder(question)
    clauses = [clause for fact in facts for clause in builder.build(fact)]
    lines = [f"c fact {_write_fact(fact)}" for fact in facts]
    lines.append(f"p cnf {builder.variables} {len(clauses)}")
    lines.extend(" ".join(map(str, (*clause, 0))) for clause in clauses)
    return ("\n".join(lines) + "\n").encode("ascii")


def _write_fact(fact: Fact) -> str:
    match fact:
        case DegreeFact(vertex):
            return f"degree {vertex}"
        case CutFact(vertices):
            return " ".join(map(str, ("cut", *vertices)))
        case RequiredFact((u, v)):
            return f"required {u} {v}"
        case MirrorFact(length, images):
            return " ".join(map(str, ("mirror", length, *images)))
