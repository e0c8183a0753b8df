"""Separation of cuts and parities: misses nothing, by exhaustion on small graphs."""

from __future__ import annotations

import itertools
import random

import networkx

from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.cuts import find_cuts, find_parities
from certify.search.facts import FactMaker
from certify.search.program import LinearProgram

MINUTE = 60.0


def fractional_points(seed: int) -> tuple[int, list[Edge], list[float]]:
    """Return a cubic graph and an x in [0, 1] with sum 2 at each vertex: a mean of two vertices."""
    rng = random.Random(seed)
    n = rng.choice([6, 8, 10])
    cubic = networkx.random_regular_graph(3, n, seed=seed)
    edges = sorted((min(e), max(e)) for e in cubic.edges())
    points = []
    for _ in range(2):
        program = LinearProgram()
        program.add_rows([(2.0, 2.0)] * n)
        program.add_columns(
            [(0.0, 1.0, float(rng.randint(0, 9)), [(u, 1.0), (v, 1.0)]) for u, v in edges]
        )
        optimum = program.solve(budget=Budget.of(MINUTE))
        assert optimum is not None
        points.append(optimum.columns)
    share = rng.choice([0.0, 0.5, 0.2])
    return n, edges, [share * a + (1 - share) * b for a, b in zip(*points, strict=True)]


def all_sides(n: int) -> list[tuple[int, ...]]:
    return [(0, *s) for k in range(n - 1) for s in itertools.combinations(range(1, n), k)]


def parity_loss(x: list[float], leaving: list[int], odd: tuple[int, ...]) -> float:
    return sum(1 - x[e] if e in odd else x[e] for e in leaving)


def test_separation_misses_nothing_on_small_graphs() -> None:
    seen = {"cuts": 0, "parities": 0, "neither": 0}
    for seed in range(150):
        n, edges, x = fractional_points(seed)
        maker = FactMaker(Question(n, tuple(edges)))
        least_cut = min(sum(x[e] for e in maker.leaving(side)) for side in all_sides(n))
        cuts = find_cuts(n, edges, x)
        assert bool(cuts) == (least_cut < 2 - 1e-3)
        for side in cuts:
            assert sum(x[e] for e in maker.leaving(tuple(side))) < 2 - 1e-4
        least_loss = 9.0
        for side in all_sides(n):
            leaving = maker.leaving(side)
            likely = sorted(leaving, key=lambda e: -x[e])
            for size in range(1, len(leaving) + 1, 2):
                # For a fixed size the dearest edges are the best choice.
                least_loss = min(least_loss, parity_loss(x, leaving, tuple(likely[:size])))
        parities = find_parities(n, edges, x)
        assert bool(parities) == (least_loss < 1 - 1e-3)
        for side, odd in parities:
            assert len(odd) % 2 == 1
            assert parity_loss(x, maker.leaving(tuple(side)), tuple(odd)) < 1 - 1e-4
        seen["cuts"] += bool(cuts)
        seen["parities"] += bool(parities)
        seen["neither"] += not cuts and not parities
    assert min(seen.values()) >= 10


def test_components_are_cuts_each() -> None:
    triangles = [(0, 1), (0, 2), (1, 2), (3, 4), (3, 5), (4, 5)]
    assert find_cuts(6, triangles, [1.0] * 6) == [[0, 1, 2]]
    assert find_cuts(7, triangles, [1.0] * 6) == [[0, 1, 2], [3, 4, 5], [6]]


def test_half_triangles_joined_by_three_edges_violate_a_parity() -> None:
    prism = [(0, 1), (0, 2), (1, 2), (3, 4), (3, 5), (4, 5), (0, 3), (1, 4), (2, 5)]
    x = [0.5] * 6 + [1.0] * 3
    assert find_cuts(6, prism, x) == []
    assert find_parities(6, prism, x) == [([0, 1, 2], [6, 7, 8]), ([3, 4, 5], [6, 7, 8])]
