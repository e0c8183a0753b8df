"""Witnesses: right by a plain reading of FORMAT.md, and found where published facts say so."""

from __future__ import annotations

import itertools
import random

import networkx as nx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence.witness import Witness
from certify.graph.graph import Edge, Graph, edge_between
from certify.graph.question import Ends, Question, build_cycle_question, build_path_question
from certify.search.budget import Budget
from certify.search.merging import find_by_merging
from certify.search.rotation import find_by_rotation
from certify.search.witness import (
    find_witness,
    glance_for_witness,
    is_cycle,
    write_witness,
)
from tests.brute import has_cycle, questions
from tests.search.known_graphs import IMPOSSIBLE, POSSIBLE, build, knight, petersen, squares

MINUTE = 60.0


def as_graph(question: Question) -> Graph:
    return Graph(tuple(range(question.n)), question.edges)


def find(question: Question) -> tuple[int, ...] | None:
    return find_witness(question, budget=Budget.of(MINUTE))


def is_hamiltonian(question: Question, cycle: tuple[int, ...]) -> bool:
    """Return whether the cycle is one of the question, step by step."""
    steps = [edge_between(cycle[i - 1], cycle[i]) for i in range(len(cycle))]
    return (
        len(cycle) >= 3
        and sorted(cycle) == list(range(question.n))
        and all(edge in question.edges for edge in steps)
        and all(edge in steps for edge in question.required)
    )


@st.composite
def path_questions(draw: st.DrawFn) -> tuple[Graph, tuple[int, ...], frozenset[Edge], Question]:
    base = draw(questions(least=1, most=7))
    ends = tuple(draw(st.lists(st.integers(0, base.n - 1), max_size=2)))
    graph = as_graph(base)
    question = build_path_question(graph, ends=Ends(ends), required=base.required)
    return graph, ends, base.required, question


@given(questions())
def test_a_cycle_is_found_exactly_where_there_is_one(question: Question) -> None:
    # On up to eight vertices the two methods together leave nothing out.
    cycle = find(question)
    assert (cycle is not None) == has_cycle(question)
    assert cycle is None or is_hamiltonian(question, cycle)


@given(questions())
def test_a_glance_finds_what_the_whole_search_finds_or_nothing(question: Question) -> None:
    """So that evidence does not depend on whether a glance was taken first."""
    seen = glance_for_witness(question, budget=Budget.of(MINUTE))
    assert seen is None or seen == find(question)


def test_a_glance_finds_most_cycles_of_cubic_graphs() -> None:
    graphs = [nx.random_regular_graph(3, 16, seed=seed) for seed in range(40)]
    built = [build(16, [edge_between(*edge) for edge in graph.edges]) for graph in graphs]
    seen = [glance_for_witness(question, budget=Budget.of(MINUTE)) for question in built]
    assert sum(cycle is not None for cycle in seen) > 30


@given(path_questions())
def test_a_path_is_an_order_of_the_graph(
    drawn: tuple[Graph, tuple[int, ...], frozenset[Edge], Question],
) -> None:
    graph, ends, required, question = drawn
    cycle = find(question)
    if graph.n == 1:
        assert cycle is not None
    else:
        assert (cycle is not None) == has_cycle(question)
    if cycle is None:
        return
    order = write_witness(question, cycle).order
    assert sorted(order) == list(range(graph.n))
    steps = {edge_between(*pair) for pair in itertools.pairwise(order)}
    assert required <= steps <= set(graph.edges)
    if len(ends) == 2:
        assert {order[0], order[-1]} == set(ends)
    elif ends:
        assert ends[0] in (order[0], order[-1])


@settings(max_examples=50)
@given(questions(least=5))
def test_each_method_alone_gives_right_cycles(question: Question) -> None:
    if min(map(len, question.neighbours)) < 2:
        return
    merged = find_by_merging(question, budget=Budget.of(MINUTE))
    assert merged is None or is_hamiltonian(question, merged)
    plain = build(question.n, question.edges)
    turned = find_by_rotation(plain, paths=range(3), budget=Budget.of(MINUTE))
    assert turned is None or is_hamiltonian(plain, turned)
    assert (merged is None and turned is None) or has_cycle(plain)


@pytest.mark.parametrize("name", POSSIBLE)
def test_published_cycles_are_found(name: str) -> None:
    cycle = find(POSSIBLE[name])
    assert cycle is not None
    assert is_hamiltonian(POSSIBLE[name], cycle)


@pytest.mark.parametrize("name", IMPOSSIBLE)
def test_nothing_is_found_where_nothing_is(name: str) -> None:
    assert find(IMPOSSIBLE[name]) is None


def test_paths_of_square_sums() -> None:
    # OEIS A090461: 15, 16, 17, 23 and all n >= 25.
    found = {n for n in range(2, 60) if find(build_path_question(squares(n)))}
    assert found == {15, 16, 17, 23, *range(25, 60)}


def test_cycles_of_square_sums() -> None:
    # OEIS A071984: all n >= 32.
    found = {n for n in range(3, 60) if find(build_cycle_question(squares(n)))}
    assert found == set(range(32, 60))


def test_open_knight_tours() -> None:
    # Conrad, Hindrichs, Morsy, Wegener, Discr. Appl. Math. 50 (1994) 125-134, from memory:
    # for 3 <= m <= n all boards but 3x3, 3x5, 3x6, 4x4 (Cull, De Curtins, Fibonacci Quart. 16
    # (1978) 276-285, for m >= 5).
    boards = [(m, n) for m in range(3, 8) for n in range(m, 10)]
    missing = {b for b in boards if not find(build_path_question(as_graph(knight(*b))))}
    assert missing == {(3, 3), (3, 5), (3, 6), (4, 4)}


def test_closed_knight_tours() -> None:
    # Schwenk, Math. Mag. 64 (1991) 325-332, for 3 <= m <= n.
    for m in range(3, 9):
        for n in range(m, 13):
            impossible = m * n % 2 == 1 or m == 4 or (m == 3 and n in (4, 6, 8))
            assert (find(knight(m, n)) is None) == impossible


def test_generalised_petersen_graphs() -> None:
    # Alspach, J. Combin. Theory B 34 (1983) 293-312: none for k = 2 and (n - 1) / 2 when
    # n = 5 mod 6 (the same graph up to names), all others with k < n / 2.
    for n in range(5, 20):
        for k in range(1, (n + 1) // 2):
            impossible = n % 6 == 5 and k in (2, (n - 1) // 2)
            assert (find(petersen(n, k)) is None) == impossible


def test_grids() -> None:
    # Itai, Papadimitriou, Szwarcfiter, SIAM J. Comput. 11 (1982) 676-686: a cycle exactly when
    # both sides are at least two and the number of cells is even.
    for m in range(2, 8):
        for n in range(m, 9):
            grid = nx.convert_node_labels_to_integers(nx.grid_2d_graph(m, n))
            assert (find(build(m * n, grid.edges())) is None) == (m * n % 2 == 1)


LARGE = {
    "path of squares": lambda: build_path_question(squares(500)),
    "cycle of squares": lambda: build_cycle_question(squares(500)),
    "knight 24 by 24": lambda: knight(24, 24),
    "knight 3 by 150": lambda: knight(3, 150),
    "hops of four or seven": lambda: build_path_question(as_graph(hops(800, 4, 7))),
    "closed hops of four or seven": lambda: hops(800, 4, 7),
    "4-regular": lambda: build(900, nx.random_regular_graph(4, 900, seed=4).edges()),
    "prism": lambda: petersen(450, 1),
    "generalised Petersen 450, 2": lambda: petersen(450, 2),
}


def hops(n: int, *lengths: int) -> Question:
    return build(n, ((i, i + k) for i in range(n) for k in lengths if i + k < n))


@pytest.mark.parametrize("name", LARGE)
def test_large_sparse_graphs(name: str) -> None:
    question = LARGE[name]()
    cycle = find(question)
    assert cycle is not None
    assert is_hamiltonian(question, cycle)


@settings(max_examples=30)
@given(st.integers(20, 80), st.integers(0, 10_000))
def test_a_hidden_cycle_with_required_edges(n: int, seed: int) -> None:
    # A cycle, chords, and every third edge of the cycle required.
    dice = random.Random(seed)
    hidden = dice.sample(range(n), n)
    steps = [edge_between(hidden[i - 1], hidden[i]) for i in range(n)]
    chords = {edge_between(*dice.sample(range(n), 2)) for _ in range(n // 2)}
    edges = tuple(sorted({*steps, *chords}))
    question = Question(n=n, edges=edges, required=frozenset(steps[::3]))
    cycle = find(question)
    assert cycle is not None
    assert is_hamiltonian(question, cycle)


def test_the_same_question_gives_the_same_cycle() -> None:
    for question in (knight(8, 8), petersen(30, 3), build_path_question(squares(60))):
        first = find(question)
        again = Question(question.n, question.edges, question.required, question.apex)
        assert find(again) == first
        assert find_witness(again, budget=Budget.of(1e6)) == first


def test_the_cycle_begins_at_0_with_the_smaller_neighbour() -> None:
    cycle = find(petersen(8, 1))
    assert cycle is not None
    assert cycle[0] == 0
    assert cycle[1] < cycle[-1]


def test_a_spent_budget_gives_up() -> None:
    assert find_witness(knight(4, 8), budget=Budget.of(0)) is None


def test_small_and_absent_questions() -> None:
    assert find(Question(n=0, edges=())) is None
    assert find(Question(n=2, edges=((0, 1),))) is None
    triangle = ((0, 1), (0, 2), (1, 2))
    assert find(Question(n=3, edges=triangle)) == (0, 1, 2)
    assert find(Question(n=3, edges=triangle, absent=True)) is None


def test_the_path_on_one_vertex() -> None:
    question = build_path_question(Graph((7,), ()))
    cycle = find(question)
    assert cycle is not None
    assert write_witness(question, cycle) == Witness((0,))


def test_a_wrong_cycle_is_not_written() -> None:
    square = build(4, [(0, 1), (1, 2), (2, 3), (0, 3)])
    assert is_cycle(square, (0, 1, 2, 3))
    for wrong in ((0, 2, 1, 3), (0, 1, 2), (0, 1, 2, 2), ()):
        assert not is_cycle(square, wrong)
        with pytest.raises(ValueError, match="no Hamiltonian cycle"):
            write_witness(square, wrong)
    diagonal = Question(
        n=4, edges=tuple(sorted({*square.edges, (0, 2)})), required=frozenset({(0, 2)})
    )
    assert not is_cycle(diagonal, (0, 1, 2, 3))
