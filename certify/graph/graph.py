"""A graph of an instance: vertices with names, numbered from 0.

A *label* is what a reader calls a vertex: an integer (numbers 1..n), a tuple of
integers (the cells of a board), or a string (a name from a file). Everything
after this module speaks of vertex numbers 0..n-1 only; labels come back where
something is shown to a reader.
"""

from __future__ import annotations

from dataclasses import dataclass

Label = int | str | tuple[int, ...]
Edge = tuple[int, int]


@dataclass(frozen=True)
class Graph:
    """A simple undirected graph.

    labels: one for each vertex, all different.
    edges: pairs (u, v) of vertex numbers with u < v, sorted, without repeats.
    """

    labels: tuple[Label, ...]
    edges: tuple[Edge, ...]

    @property
    def n(self) -> int:
        """Return the number of vertices."""
        return len(self.labels)

    @property
    def m(self) -> int:
        """Return the number of edges."""
        return len(self.edges)


def edge_between(u: int, v: int) -> Edge:
    """Return the edge that joins two different vertices, smaller number first."""
    return (u, v) if u < v else (v, u)
