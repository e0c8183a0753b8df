"""Blocks behind small edge cuts."""

from __future__ import annotations

import math
import random

import igraph
import networkx
import pytest
from hypothesis import given
from hypothesis import strategies as st

from certify.evidence.sweep import Sweep
from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.search.blocks import _find_small_sides, find_block
from certify.search.budget import Budget
from tests.brute import has_cycle
from tests.search.known_graphs import build, petersen

PLENTY = Budget(math.inf)


def splice(host: networkx.Graph, guest: networkx.Graph) -> Question:
    """Replace vertex 0 of a cubic host by a cubic guest without its vertex 0."""
    graph = networkx.disjoint_union(host, guest)
    shift = len(host)
    ours, theirs = sorted(host[0]), sorted(v + shift for v in guest[0])
    graph.remove_nodes_from([0, shift])
    graph.add_edges_from(zip(ours, theirs, strict=True))
    relabelled = networkx.convert_node_labels_to_integers(graph, ordering="sorted")
    edges: list[Edge] = [(min(e), max(e)) for e in relabelled.edges()]
    return Question(n=len(relabelled), edges=tuple(sorted(edges)))


@pytest.mark.parametrize("size", [12, 40, 200])
def test_a_block_without_a_passage_is_found_in_a_wide_graph(size: int) -> None:
    """Petersen's graph is not Hamiltonian (Petersen 1898; from memory); so neither is this."""
    host = networkx.random_regular_graph(3, size, seed=7)
    question = splice(host, networkx.petersen_graph())
    found = find_block(question, budget=PLENTY)
    assert isinstance(found, Sweep)
    assert found.states[9:] == (0,) * (question.n - 9)


def test_a_block_with_a_passage_is_none() -> None:
    host = networkx.random_regular_graph(3, 40, seed=7)
    assert find_block(splice(host, networkx.heawood_graph()), budget=PLENTY) is None
    assert find_block(petersen(5, 2), budget=PLENTY) is None


def sides_by_exhaustion(question: Question) -> set[tuple[int, ...]]:
    """Return what the finder looks for, set by set."""
    found = set()
    for bits in range(1, 1 << question.n):
        side = tuple(v for v in range(question.n) if bits >> v & 1)
        if not 3 <= len(side) <= question.n // 2:
            continue
        inside = set(side)
        leaving = [(u, v) for u, v in question.edges if (u in inside) != (v in inside)]
        ends = {u if u in inside else v for u, v in leaving}
        graph = networkx.Graph(question.edges)
        graph.add_nodes_from(range(question.n))
        parts = [graph.subgraph(inside), graph.subgraph(set(range(question.n)) - inside)]
        whole = all(networkx.is_connected(part) for part in parts)
        if len(leaving) in (2, 3) and len(ends) == len(leaving) and whole:
            found.add(side)
    return found


@given(st.integers(0, 400))
def test_all_small_sides_are_found(seed: int) -> None:
    rng = random.Random(seed)
    n = rng.randint(6, 10)
    graph = networkx.gnm_random_graph(n, rng.randint(n, 2 * n), seed=seed)
    question = build(n, graph.edges())
    expected = sides_by_exhaustion(question)
    if len(expected) <= 40 and networkx.is_connected(graph):
        assert set(_find_small_sides(question)) == expected


@given(st.integers(0, 300))
def test_what_is_found_is_true(seed: int) -> None:
    rng = random.Random(seed)
    n = rng.choice([8, 10])
    graph = networkx.random_regular_graph(3, n, seed=seed)
    graph.remove_edge(*rng.choice(sorted(graph.edges())))
    edges = tuple(sorted((min(e), max(e)) for e in graph.edges()))
    required = frozenset(rng.sample(edges, rng.randint(0, 2)))
    question = Question(n=n, edges=edges, required=required)
    if find_block(question, budget=PLENTY) is not None:
        assert not has_cycle(question)


def test_three_blocks_with_one_exit_each_towards_one_vertex_are_found() -> None:
    """Tutte's graph is three such blocks (J. London Math. Soc. 21 (1946) 98-101)."""
    graph = igraph.Graph.Famous("Tutte")
    question = build(graph.vcount(), graph.get_edgelist())
    found = find_block(question, budget=PLENTY)
    assert isinstance(found, Sweep)
