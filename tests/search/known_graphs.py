"""Graphs of which it is published whether they have a Hamiltonian cycle."""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterable

import igraph

from certify.graph.graph import Graph, edge_between
from certify.graph.question import Question, build_cycle_question, build_path_question


def build(n: int, pairs: Iterable[tuple[int, int]]) -> Question:
    return Question(n=n, edges=tuple(sorted({edge_between(*pair) for pair in pairs})))


def famous(name: str) -> Question:
    graph = igraph.Graph.Famous(name)
    return build(graph.vcount(), graph.get_edgelist())


def petersen(n: int, k: int) -> Question:
    """Return the generalised Petersen graph: outer 0..n-1, inner n..2n-1."""
    outer = [(i, (i + 1) % n) for i in range(n)]
    inner = [(n + i, n + (i + k) % n) for i in range(n)]
    return build(2 * n, [*outer, *((i, n + i) for i in range(n)), *inner])


def flower(k: int) -> Question:
    """Return the flower graph with k petals: a star a-b, a-c, a-d each; b in one ring, c and d
    in one ring that is twisted once."""
    pairs: list[tuple[int, int]] = []
    for i in range(k):
        a, b, c, d = range(4 * i, 4 * i + 4)
        after = 4 * ((i + 1) % k)
        twist = i == k - 1
        pairs += [(a, b), (a, c), (a, d), (b, after + 1)]
        pairs += [(c, after + 2 + twist), (d, after + 3 - twist)]
    return build(4 * k, pairs)


def squares(n: int) -> Graph:
    """Return the graph on 1..n in which numbers are joined whose sum is a square."""
    pairs = itertools.combinations(range(n), 2)
    return Graph(
        tuple(range(1, n + 1)),
        tuple((u, v) for u, v in pairs if math.isqrt(u + v + 2) ** 2 == u + v + 2),
    )


def knight(rows: int, columns: int) -> Question:
    cells = list(itertools.product(range(rows), range(columns)))
    pairs = [
        (i, j)
        for (i, (x, y)), (j, (z, w)) in itertools.combinations(enumerate(cells), 2)
        if {abs(x - z), abs(y - w)} == {1, 2}
    ]
    return build(len(cells), pairs)


IMPOSSIBLE = {
    "Petersen": famous("Petersen"),
    "Coxeter": famous("Coxeter"),
    "Tutte": famous("Tutte"),
    "Herschel": famous("Herschel"),
    **{f"generalised Petersen {n}, 2": petersen(n, 2) for n in (11, 17, 23)},
    **{f"flower {k}": flower(k) for k in (5, 7)},
    "squares to 31": build_cycle_question(squares(31)),
    "path of squares to 24": build_path_question(squares(24)),
    "knight 4 by 6": knight(4, 6),
    "knight 3 by 8": knight(3, 8),
}
"""No Hamiltonian cycle. Petersen (1898), Coxeter (Tutte 1960), Tutte (1946), Herschel's graph
(11 vertices, bipartite): textbook facts, from memory. Generalised Petersen graphs (n, 2), n = 5
mod 6: Alspach, J. Combin. Theory B 34 (1983) 293-312. Flower snarks: Isaacs, Amer. Math. Monthly
82 (1975) 221-239. Squares: OEIS A071984 and A078107. Knight: Schwenk, Math. Mag. 64 (1991)
325-332."""

POSSIBLE = {
    **{f"generalised Petersen {n}, 2": petersen(n, 2) for n in (6, 7, 8, 9, 10, 12, 13)},
    **{f"flower {k}": flower(k) for k in (4, 6)},
    "squares to 32": build_cycle_question(squares(32)),
    "path of squares to 25": build_path_question(squares(25)),
    "knight 3 by 10": knight(3, 10),
    "knight 6 by 6": knight(6, 6),
}
"""A Hamiltonian cycle: the other side of the same sources."""
