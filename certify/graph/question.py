"""The question in normal form: is there a Hamiltonian cycle that uses R?

Every structure is turned into one *question*: has the graph Q a Hamiltonian
cycle that uses every edge of R, the *required* edges? A path question gets one
more vertex, the *apex*, joined to every vertex that may be an end of the path;
deleting the apex from a Hamiltonian cycle of Q leaves a Hamiltonian path of the
graph, and back. So finders know cycles only.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

from certify.graph.graph import Edge, Graph, edge_between


@dataclass(frozen=True)
class Question:
    """A graph and its required edges, in normal form.

    n: number of vertices, the apex included.
    edges: pairs (u, v), u < v, sorted, without repeats.
    required: the edges a cycle has to use, a subset of `edges`.
    apex: the number of the apex (n - 1), or None for a cycle question.
    absent: an end or a required edge named by the claim is not in the graph, so
    the answer is impossible whatever the rest says.
    """

    n: int
    edges: tuple[Edge, ...]
    required: frozenset[Edge] = frozenset()
    apex: int | None = None
    absent: bool = False

    @property
    def m(self) -> int:
        """Return the number of edges."""
        return len(self.edges)

    @property
    def is_one_vertex_path(self) -> bool:
        """Return whether this asks for a path on one vertex, which exists."""
        return self.apex == 1 and not self.absent

    @cached_property
    def neighbours(self) -> tuple[tuple[int, ...], ...]:
        """Return for each vertex its neighbours, sorted."""
        lists: list[list[int]] = [[] for _ in range(self.n)]
        for u, v in self.edges:
            lists[u].append(v)
            lists[v].append(u)
        return tuple(tuple(sorted(at_v)) for at_v in lists)

    @cached_property
    def edge_set(self) -> frozenset[Edge]:
        """Return the edges as a set."""
        return frozenset(self.edges)

    def has_edge(self, u: int, v: int) -> bool:
        """Return whether u and v are joined."""
        return edge_between(u, v) in self.edge_set

    def assume(self, used: Iterable[Edge], removed: Iterable[Edge]) -> Question:
        """Return the question in which `used` are required too and `removed` are gone."""
        gone = frozenset(removed)
        kept = tuple(e for e in self.edges if e not in gone)
        return Question(self.n, kept, self.required | frozenset(used), self.apex, self.absent)


@dataclass(frozen=True)
class Ends:
    """The prescribed ends of a path: none, one or two vertex numbers.

    `absent` says that the claim names an end that is not in the graph.
    """

    vertices: tuple[int, ...] = ()
    absent: bool = False


def build_cycle_question(
    graph: Graph,
    *,
    required: Iterable[Edge] = (),
    forbidden: Iterable[Edge] = (),
    absent: bool = False,
) -> Question:
    """Build the question "has the graph a Hamiltonian cycle?".

    required, forbidden: edges as pairs (u, v), u < v. A required edge that the
    graph lacks, or that is forbidden, makes the question absent; a forbidden
    edge that the graph lacks is ignored.
    Cost: O(n + m).
    """
    gone = frozenset(forbidden)
    edges = tuple(e for e in graph.edges if e not in gone)
    present = frozenset(edges)
    wanted = frozenset(required)
    return Question(
        n=graph.n,
        edges=edges,
        required=wanted & present,
        absent=absent or not wanted <= present,
    )


def build_path_question(
    graph: Graph,
    *,
    ends: Ends = Ends(),
    required: Iterable[Edge] = (),
    forbidden: Iterable[Edge] = (),
    absent: bool = False,
) -> Question:
    """Build the question "has the graph a Hamiltonian path?", with an apex.

    Free ends: the apex is joined to every vertex. One end s: joined to every
    vertex, and {s, apex} is required. Two ends: joined to these alone, both
    edges required (two equal ends leave the apex one edge: only the path on one
    vertex has them).
    Cost: O(n + m).
    """
    inner = build_cycle_question(graph, required=required, forbidden=forbidden, absent=absent)
    apex = graph.n
    targets = set(ends.vertices) if len(ends.vertices) == 2 else range(graph.n)
    return Question(
        n=graph.n + 1,
        edges=tuple(sorted([*inner.edges, *((v, apex) for v in targets)])),
        required=inner.required | {(v, apex) for v in ends.vertices},
        apex=apex,
        absent=inner.absent or ends.absent,
    )


BUILDERS = {"hamiltonian-cycle": build_cycle_question, "hamiltonian-path": build_path_question}
"""How each structure becomes a question; a new structure is added here."""
