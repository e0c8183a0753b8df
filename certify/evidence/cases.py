"""A tree of cases, every leaf of which is closed."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import ClassVar

from certify.evidence.base import Body, Json, count_integers
from certify.evidence.counting import Counting
from certify.evidence.obstruction import Obstruction
from certify.graph.graph import Edge


@dataclass(frozen=True)
class Forced:
    """A leaf: the forced moves contradict each other."""


@dataclass(frozen=True)
class Like:
    """A leaf: symmetry number `symmetry` maps it onto node `node`, closed before."""

    node: int
    symmetry: int


@dataclass(frozen=True)
class OnEdge:
    """A branch: the edge is used (first child) or removed (second child)."""

    edge: Edge


@dataclass(frozen=True)
class OnVertex:
    """A branch: one child for each pair of edges the vertex may use."""

    vertex: int


Node = Forced | Like | OnEdge | OnVertex | Obstruction | Counting


@dataclass(frozen=True)
class Cases:
    """A tree of cases in preorder, with the symmetries its `Like` leaves use."""

    nodes: tuple[Node, ...]
    symmetries: tuple[tuple[int, ...], ...] = ()
    kind: ClassVar[str] = "cases"

    @property
    def length(self) -> int:
        return count_integers(self.body()) + len(self.nodes)

    def body(self) -> Body:
        return {
            "nodes": [list(_write_node(node)) for node in self.nodes],
            "symmetries": [list(p) for p in self.symmetries],
        }


def _write_node(node: Node) -> Iterator[Json]:
    match node:
        case Forced():
            yield "forced"
        case Like(j, k):
            yield from ("like", j, k)
        case OnEdge((u, v)):
            yield from ("edge", u, v)
        case OnVertex(v):
            yield from ("vertex", v)
        case Obstruction() | Counting():
            yield node.kind
            yield node.body()
