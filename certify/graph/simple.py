"""What the readers of all formats share: the limit of size, and the clean-up of edges."""

from __future__ import annotations

from collections.abc import Iterable
from functools import lru_cache

from certify.errors import GraphFileError
from certify.graph.graph import Edge, Graph, Label, edge_between

MAX_VERTICES = 10_000
MAX_EDGES = 1 << 23


def check_size(n: int, where: str) -> None:
    """Refuse a graph of more than 10,000 vertices.

    Errors: GraphFileError.
    """
    if n > MAX_VERTICES:
        raise GraphFileError(
            f"{where}: the graph has more than {MAX_VERTICES:,} vertices, the most that is allowed"
        )


def edge_of(u: int, v: int, where: str) -> Edge:
    """Return the edge of two vertices; a loop is refused.

    Errors: GraphFileError.
    """
    if u == v:
        raise GraphFileError(f"{where}: a loop, an edge from a vertex to itself; remove it")
    return edge_between(u, v)


def simple_graph(labels: Iterable[Label], edges: Iterable[Edge]) -> Graph:
    """Return the graph with these edges, each once.

    Errors: GraphFileError when there are more than 2^23. Cost: O(n + m log m).
    """
    distinct = sorted(set(edges))
    if len(distinct) > MAX_EDGES:
        raise GraphFileError(f"the graph has more than {MAX_EDGES:,} edges, the most allowed")
    return Graph(tuple(labels), tuple(distinct))


@lru_cache(maxsize=64)
def numbers(first: int, n: int) -> tuple[int, ...]:
    """Return the labels first, first + 1, ...; remembered, for lists of many graphs."""
    return tuple(range(first, first + n))
