"""What the readers of all lists share: simple graphs of bounded size."""

from __future__ import annotations

from collections.abc import Iterable

from .graphs import Edge, Graph, edge
from .strict import BadClaim

MOST_VERTICES, MOST_EDGES = 10_000, 1 << 23


def build_graph(names: Iterable[object], pairs: Iterable[Edge]) -> Graph:
    """Return the graph; a repeated pair counts once, a loop is an error.

    The names are looked at after the last pair.
    """
    edges: set[Edge] = set()
    for u, v in pairs:
        if u == v:
            raise BadClaim("a graph has a loop")
        edges.add(edge(u, v))
        if len(edges) > MOST_EDGES:
            raise BadClaim(f"a graph has more than {MOST_EDGES} edges")
    return Graph(list(names), sorted(edges))


def limit_vertices(count: int) -> None:
    """Refuse a graph with too many vertices."""
    if count > MOST_VERTICES:
        raise BadClaim(f"a graph has more than {MOST_VERTICES} vertices")
