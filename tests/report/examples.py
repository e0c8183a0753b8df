"""Small known graphs and hand-built records for the tests of the texts."""

from __future__ import annotations

from math import isqrt
from typing import Any

from certify.graph.graph import Edge, Graph

PETERSEN_EDGES = (
    *((0, 1), (0, 4), (0, 5), (1, 2), (1, 6), (2, 3), (2, 7), (3, 4)),
    *((3, 8), (4, 9), (5, 7), (5, 8), (6, 8), (6, 9), (7, 9)),
)
HERSCHEL_EDGES = (
    *((0, 1), (0, 3), (0, 4), (1, 2), (1, 5), (1, 6), (2, 3), (2, 7), (3, 8)),
    *((3, 9), (4, 5), (4, 9), (5, 10), (6, 7), (6, 10), (7, 8), (8, 10), (9, 10)),
)


def squares(n: int) -> Graph:
    """Return 1..n, two numbers joined when their sum is a square."""
    numbers = range(1, n + 1)
    edges = [
        (a - 1, b - 1) for a in numbers for b in numbers if a < b and isqrt(a + b) ** 2 == a + b
    ]
    return Graph(tuple(numbers), tuple(edges))


def knights(m: int, n: int) -> Graph:
    """Return the cells of an m by n board, joined by the moves of a knight."""
    cells = [(x, y) for x in range(1, m + 1) for y in range(1, n + 1)]
    edges: list[Edge] = []
    for i, (x, y) in enumerate(cells):
        edges += [
            (i, j) for j, (u, v) in enumerate(cells) if i < j and {abs(x - u), abs(y - v)} == {1, 2}
        ]
    return Graph(tuple(cells), tuple(edges))


def petersen() -> Graph:
    """Return the Petersen graph on 1..10: outer 1..5, inner 6..10."""
    return Graph(tuple(range(1, 11)), PETERSEN_EDGES)


def herschel() -> Graph:
    """Return the Herschel graph with vertices a..k."""
    return Graph(tuple("abcdefghijk"), HERSCHEL_EDGES)


def record(
    graph: Graph, instance: object, kind: str, body: dict[str, Any], answer: str = "impossible"
) -> dict[str, Any]:
    """Return a record as it is read from a line."""
    return {
        "instance": instance,
        "vertices": graph.n,
        "edges": graph.m,
        "answer": answer,
        "kind": kind,
        "evidence": body,
        "length": 1,
    }
