"""A graph, and the question about it in normal form (FORMAT.md, section 4)."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field

from .strict import Rejected

Edge = tuple[int, int]


@dataclass
class Graph:
    """Vertices 0..n-1 with their names, and sorted edges (u, v), u < v."""

    names: list[object]
    edges: list[Edge]


@dataclass
class Question:
    """Has the graph on 0..n-1 a Hamiltonian cycle through all required edges?

    `order_length` is the number of vertices of the graph asked about: n for a
    cycle, n - 1 for a path, whose apex is the vertex n - 1.
    """

    n: int
    edges: set[Edge]
    required: set[Edge]
    path: bool = False
    absent: bool = False
    near: list[set[int]] = field(default_factory=list)

    def __post_init__(self) -> None:
        self.near = [set() for _ in range(self.n)]
        for u, v in self.edges:
            self.near[u].add(v)
            self.near[v].add(u)

    @property
    def order_length(self) -> int:
        return self.n - 1 if self.path else self.n

    @property
    def is_one_vertex_path(self) -> bool:
        return self.path and self.n == 2 and not self.absent

    def is_forced(self, u: int, v: int) -> bool:
        """Return whether {u, v} is an edge that every Hamiltonian cycle here uses.

        Because it is required, or because one of its ends has no third edge.
        """
        return edge(u, v) in self.edges and (
            edge(u, v) in self.required or len(self.near[u]) == 2 or len(self.near[v]) == 2
        )

    def leaving(self, vertices: Iterable[int]) -> list[Edge]:
        """Return the edges with exactly one end among the vertices, sorted."""
        inside = set(vertices)
        return sorted(edge(u, v) for u in inside for v in self.near[u] if v not in inside)


def edge(u: int, v: int) -> Edge:
    """Return the pair with the smaller number first."""
    return (u, v) if u < v else (v, u)


def make_question(
    graph: Graph,
    path: bool,
    ends: list[int | None],
    required: list[Edge | None],
    forbidden: list[Edge | None],
) -> Question:
    """Turn a graph and what the claim demands into the question.

    None stands for an end or an edge of vertices that the graph has not.
    """
    edges = set(graph.edges) - {e for e in forbidden if e is not None}
    absent = None in ends or any(e is None or e not in edges for e in required)
    wanted = {e for e in required if e is not None and e in edges}
    n = len(graph.names)
    places = tuple(v for v in ends if v is not None)
    if not path:
        return Question(n, edges, wanted, absent=absent)
    # The apex n is joined to each vertex where the path may end; a cycle through
    # the apex, without it, is such a path, and the other way round.
    targets = set(places) if len(places) == 2 else set(range(n))
    at_ends = {(v, n) for v in places}
    return Question(n + 1, edges | {(v, n) for v in targets}, wanted | at_ends, True, absent)


def is_automorphism(question: Question, image: list[int]) -> bool:
    """Return whether a permutation maps edges to edges and required to required ones.

    image: a permutation of the vertices. It is injective on pairs, and there are
    finitely many, so mapping each edge to an edge is enough.
    """
    return all(edge(image[u], image[v]) in question.edges for u, v in question.edges) and all(
        edge(image[u], image[v]) in question.required for u, v in question.required
    )


def count_components(question: Question, without: set[int]) -> int:
    """Return how many connected pieces are left without some vertices."""
    seen = set(without)
    pieces = 0
    for start in range(question.n):
        if start in seen:
            continue
        pieces += 1
        seen.add(start)
        stack = [start]
        while stack:
            fresh = question.near[stack.pop()] - seen
            seen |= fresh
            stack.extend(fresh)
    return pieces


def need_question_of_cycle(question: Question) -> None:
    """Refuse a question that has no graph to argue about."""
    if question.absent or question.n < 3:
        raise Rejected("the question is absent or has fewer than three vertices: use its own form")
