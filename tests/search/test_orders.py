"""Orders of the vertices: permutations, with measures that mean what they say."""

from __future__ import annotations

from itertools import combinations, permutations
from random import Random

import networkx as nx
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence.sweep import Sweep
from certify.graph.graph import Graph
from certify.graph.question import Question, build_path_question
from certify.search.budget import Budget
from certify.search.orders import (
    estimate_states,
    find_order,
    measure_degeneracy,
    measure_width,
)
from certify.search.sweep import sweep_along
from tests.brute import questions
from tests.search.known_graphs import build, petersen


def question_of(source: nx.Graph) -> Question:
    named = nx.convert_node_labels_to_integers(source, ordering="sorted")
    return build(len(named), named.edges)


def widest_frontier(question: Question, order: tuple[int, ...]) -> int:
    near = question.neighbours
    prefixes = [set(order[:i]) for i in range(1, question.n + 1)]
    return max(len({u for v in prefix for u in near[v]} - prefix) for prefix in prefixes)


@settings(deadline=None)
@given(questions(most=9), st.randoms(use_true_random=False))
def test_order_is_a_permutation_and_measured_rightly(question: Question, random: Random) -> None:
    near = question.neighbours
    order = find_order(question)
    assert sorted(order) == list(range(question.n))
    other = tuple(random.sample(range(question.n), question.n))
    for each in (order, other):
        assert measure_width(near, each) == widest_frontier(question, each)
        assert measure_degeneracy(near) <= measure_width(near, each)
    assert estimate_states(near, order) <= estimate_states(near, tuple(range(question.n)))


@settings(deadline=None)
@given(questions(most=8), st.randoms(use_true_random=False))
def test_estimate_is_an_upper_bound(question: Question, random: Random) -> None:
    order = tuple(random.sample(range(question.n), question.n))
    found = sweep_along(question, order, budget=Budget.of(600.0))
    if isinstance(found, Sweep):
        assert sum(found.states) <= estimate_states(question.neighbours, order)


@settings(deadline=None, max_examples=20)
@given(questions(least=4, most=6))
def test_small_orders_are_near_the_best(question: Question) -> None:
    near = question.neighbours
    best = min(estimate_states(near, order) for order in permutations(range(question.n)))
    assert estimate_states(near, find_order(question)) <= 1.5 * best


def test_degeneracy_of_known_graphs() -> None:
    # Lick and White, Canad. J. Math. 22 (1970) 1082-1096: forests 1, complete graphs n - 1.
    complete = Question(7, tuple(combinations(range(7), 2)))
    assert measure_degeneracy(complete.neighbours) == 6
    tree = question_of(nx.balanced_tree(2, 4))
    assert measure_degeneracy(tree.neighbours) == 1
    assert measure_degeneracy(petersen(5, 2).neighbours) == 3


def test_widths_of_boards_and_rings() -> None:
    # A k x n grid, k <= n, has pathwidth k (Ellis and Warren, Discrete Appl. Math. 156
    # (2008) 545-555); a cycle has 2; the ladder closed to a ring has 4 (from memory).
    grid = question_of(nx.grid_2d_graph(4, 30))
    assert measure_width(grid.neighbours, find_order(grid)) == 4
    tall = question_of(nx.grid_2d_graph(30, 4))
    assert measure_width(tall.neighbours, find_order(tall)) == 4
    ring = question_of(nx.cycle_graph(50))
    assert measure_width(ring.neighbours, find_order(ring)) == 2
    prism = question_of(nx.circular_ladder_graph(40))
    assert measure_width(prism.neighbours, find_order(prism)) == 4


def test_apex_costs_one_place() -> None:
    grid = question_of(nx.grid_2d_graph(4, 30))
    path = build_path_question(Graph(tuple(range(grid.n)), grid.edges))
    assert measure_width(path.neighbours, find_order(path)) == 5
    assert find_order(path)[-1] == path.apex
