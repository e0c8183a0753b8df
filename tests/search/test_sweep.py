"""The sweep against exhaustion, against the definition read literally, and published facts."""

from __future__ import annotations

import hashlib
from itertools import combinations
from random import Random

import networkx as nx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence.sweep import Sweep
from certify.graph.graph import Edge, Graph, edge_between
from certify.graph.question import Ends, Question, build_path_question
from certify.search.budget import Budget
from certify.search.sweep import find_sweep, sweep_along
from tests.brute import cycle_edges, has_cycle, questions
from tests.search.known_graphs import build, famous, flower, knight, petersen

AMPLE = 600.0
"""Seconds; no test comes near it."""

State = dict[int, int]


def sweep_plainly(question: Question, order: tuple[int, ...]) -> tuple[list[int], str] | None:
    """Sweep as FORMAT.md reads, one state at a time; None says that a cycle is completed."""
    ahead_of_all = set(order)
    frontier: set[int] = set()
    states: list[State] = [{}]
    counts: list[int] = []
    text = ""
    for v in order:
        ahead_of_all.remove(v)
        ahead = [u for u in question.neighbours[v] if u in ahead_of_all]
        needed = {u for u in ahead if edge_between(u, v) in question.required}
        frontier = (frontier | set(ahead)) - {v}
        after: dict[tuple[int, ...], State] = {}
        for state in states:
            value = {u: state.get(u, u) for u in (v, *frontier)}
            free = 2 if value[v] == v else 0 if value[v] == -1 else 1
            for chosen in combinations(ahead, free):
                if not needed <= set(chosen) or any(value[u] == -1 for u in chosen):
                    continue
                joined = _join(value, v, chosen)
                if joined is not None:
                    after[tuple(joined[u] for u in sorted(frontier))] = {
                        u: joined[u] for u in frontier
                    }
                elif all(value.get(u, u) == -1 for u in ahead_of_all - set(chosen)):
                    pairs = combinations(sorted(ahead_of_all), 2)
                    if question.required.isdisjoint(pairs):
                        return None
        states = list(after.values())
        counts.append(len(after))
        text += ";".join(sorted(",".join(map(str, values)) for values in after)) + "\n"
    return counts, hashlib.sha256(text.encode("ascii")).hexdigest()


def _join(value: State, v: int, chosen: tuple[int, ...]) -> State | None:
    """Add the edges from v one after the other; None when one closes a cycle."""
    joined = dict(value)
    for u in chosen:
        if joined[v] == u:
            return None
        a, b = joined[v], joined[u]
        for end in (v, u):
            if joined[end] != end:
                joined[end] = -1
        joined[a], joined[b] = b, a
    return joined


def check_cycle(question: Question, cycle: tuple[int, ...]) -> None:
    assert sorted(cycle) == list(range(question.n))
    assert cycle_edges(cycle) <= question.edge_set
    assert question.required <= cycle_edges(cycle)


def answer(question: Question) -> bool:
    """Return what the finder says; it has to say something."""
    found = find_sweep(question, budget=Budget.of(AMPLE))
    assert found is not None
    if isinstance(found, Sweep):
        assert sorted(found.order) == list(range(question.n))
        assert len(found.states) == question.n
        assert found.states[-1] == 0
        return False
    check_cycle(question, found)
    return True


def path_question(question: Question) -> Question:
    """Ask for a path in the graph of a cycle question."""
    return build_path_question(Graph(tuple(range(question.n)), question.edges))


@settings(deadline=None, max_examples=300)
@given(questions(most=9))
def test_answer_equals_exhaustion(question: Question) -> None:
    assert answer(question) == has_cycle(question)


@settings(deadline=None, max_examples=100)
@given(questions(most=7), st.integers(0, 2), st.randoms(use_true_random=False))
def test_paths_with_ends_equal_exhaustion(inner: Question, ends: int, random: Random) -> None:
    graph = Graph(tuple(range(inner.n)), inner.edges)
    chosen = tuple(random.sample(range(inner.n), ends))
    question = build_path_question(graph, ends=Ends(chosen), required=inner.required)
    assert answer(question) == has_cycle(question)


@settings(deadline=None, max_examples=300)
@given(questions(most=8), st.randoms(use_true_random=False))
def test_any_order_gives_the_counts_and_digest_of_the_definition(
    question: Question, random: Random
) -> None:
    order = tuple(random.sample(range(question.n), question.n))
    compare_with_definition(question, order)


def compare_with_definition(question: Question, order: tuple[int, ...]) -> None:
    found = sweep_along(question, order, budget=Budget.of(AMPLE))
    plain = sweep_plainly(question, order)
    if isinstance(found, Sweep):
        assert found.order == order
        assert (list(found.states), found.digest) == plain
    else:
        assert found is not None
        assert plain is None
        check_cycle(question, found)


@settings(deadline=None, max_examples=40)
@given(st.integers(5, 8), st.integers(0, 10**6), st.integers(0, 3))
def test_numbers_of_two_digits_are_sorted_as_texts(half: int, seed: int, needed: int) -> None:
    random = Random(seed)
    graph = build(2 * half, nx.random_regular_graph(3, 2 * half, seed=seed).edges)
    removed = random.sample(graph.edges, 2)
    used = set(random.sample(graph.edges, needed)) - set(removed)
    question = graph.assume(used, removed)
    compare_with_definition(question, tuple(random.sample(range(2 * half), 2 * half)))


@pytest.mark.parametrize("n", [131, 503])
def test_numbers_of_three_and_four_digits(n: int) -> None:
    # 262 and 1006 vertices: past one byte a value, and past four bytes a text.
    question = petersen(n, 2)
    found = find_sweep(question, budget=Budget.of(AMPLE))
    assert isinstance(found, Sweep)
    compare_with_definition(question, found.order)


@pytest.mark.parametrize("seed", range(3))
def test_wide_frontiers_take_several_keys(seed: int) -> None:
    # Each edge of the Petersen graph becomes a path of four edges: 55 vertices.
    edges: list[Edge] = []
    for i, (u, v) in enumerate(petersen(5, 2).edges):
        inner = [10 + 3 * i + j for j in range(3)]
        edges += list(zip([u, *inner], [*inner, v], strict=True))
    question = build(55, edges)
    order = tuple(Random(seed).sample(range(question.n), question.n))
    swept: set[int] = set()
    widths = []
    for v in order:
        swept.add(v)
        widths.append(len({u for w in swept for u in question.neighbours[w]} - swept))
    assert max(widths) > 18
    compare_with_definition(question, order)


def test_blocks_do_not_change_the_result(monkeypatch: pytest.MonkeyPatch) -> None:
    question = famous("Coxeter")
    whole = find_sweep(question, budget=Budget.of(AMPLE))
    monkeypatch.setattr("certify.search.sweep.BLOCK", 7)
    monkeypatch.setattr("certify.search.states.BLOCK", 7)
    assert find_sweep(question, budget=Budget.of(AMPLE)) == whole
    assert isinstance(whole, Sweep)  # Tutte, Canad. Math. Bull. 3 (1960) 1-5
    compare_with_definition(question, whole.order)


def test_a_closed_cycle_without_a_required_edge_is_dropped() -> None:
    # The only Hamiltonian cycle is 0-2-1-3, closed at the second step; it lacks 2-3.
    edges = ((0, 2), (0, 3), (1, 2), (1, 3), (2, 3))
    question = Question(4, edges, required=frozenset({(2, 3)}))
    found = sweep_along(question, (0, 1, 2, 3), budget=Budget.of(AMPLE))
    assert isinstance(found, Sweep)
    assert found.states == (1, 0, 0, 0)
    assert answer(Question(4, edges))


def test_limits_give_none() -> None:
    question = famous("Coxeter")
    order = tuple(range(question.n))
    assert find_sweep(question, budget=Budget.of(0)) is None
    assert sweep_along(question, order, budget=Budget.of(AMPLE), memory=20_000) is None
    dense = Question(n=40, edges=tuple(combinations(range(40), 2)))
    assert find_sweep(dense, budget=Budget.of(AMPLE)) is None


def test_no_sweep_for_absent_or_small_questions() -> None:
    triangle = ((0, 1), (0, 2), (1, 2))
    assert find_sweep(Question(3, triangle, absent=True), budget=Budget.of(AMPLE)) is None
    for n in range(3):
        small = Question(n, tuple(combinations(range(n), 2)))
        assert find_sweep(small, budget=Budget.of(AMPLE)) is None
    assert answer(Question(3, triangle))


def test_petersen_graph_is_maximal() -> None:
    # No Hamiltonian cycle, but one as soon as any edge is added
    # (Clark and Entringer, Period. Math. Hungar. 14 (1983) 57-68).
    graph = petersen(5, 2)
    assert not answer(graph)
    assert answer(path_question(graph))
    for pair in set(combinations(range(10), 2)) - set(graph.edges):
        assert answer(build(10, [*graph.edges, pair]))


@pytest.mark.parametrize("petals", range(4, 23))
def test_flower_snarks(petals: int) -> None:
    # Odd: Isaacs, Amer. Math. Monthly 82 (1975) 221-239. Even: common practice, no source.
    assert answer(flower(petals)) == (petals % 2 == 0)


@pytest.mark.parametrize("n", range(5, 36))
def test_generalised_petersen_graphs(n: int) -> None:
    # Alspach, J. Combin. Theory B 34 (1983) 293-312.
    assert answer(petersen(n, 2)) == (n % 6 != 5)


@pytest.mark.parametrize("rows", [3, 4, 5])
@pytest.mark.parametrize("columns", [4, 5, 6, 7, 8, 9, 10, 12])
def test_closed_knight_tours(rows: int, columns: int) -> None:
    # Schwenk, Math. Mag. 64 (1991) 325-332, for rows <= columns.
    short, long = sorted((rows, columns))
    none = (short % 2 and long % 2) or short == 4 or (short == 3 and long in (4, 6, 8))
    assert answer(knight(rows, columns)) == (not none)


@pytest.mark.parametrize(
    ("name", "cycle", "path"),
    [
        ("Coxeter", False, True),  # Tutte, Canad. Math. Bull. 3 (1960) 1-5; path: from memory
        ("Dodecahedral", True, True),  # Hamilton's game of 1857
        ("Herschel", False, True),  # Coxeter, Regular Polytopes (1948), 1.5; path: from memory
        ("Meredith", False, True),  # Meredith, J. Combin. Theory B 14 (1973) 55-60; path: memory
        ("Thomassen", False, False),  # Thomassen, Discrete Math. 9 (1974) 91-96: hypotraceable
        ("Tutte", False, True),  # Tutte, J. London Math. Soc. 21 (1946) 98-101; path: from memory
    ],
)
def test_famous_graphs(name: str, cycle: bool, path: bool) -> None:
    assert answer(famous(name)) == cycle
    assert answer(path_question(famous(name))) == path


def test_thomassen_graph_is_hypotraceable() -> None:
    # Without any one vertex it has a path (Thomassen, Discrete Math. 9 (1974) 91-96).
    graph = famous("Thomassen")
    assert graph.n == 34
    for gone in range(graph.n):
        kept = [v for v in range(graph.n) if v != gone]
        edges = tuple((kept.index(u), kept.index(v)) for u, v in graph.edges if gone not in (u, v))
        assert answer(build_path_question(Graph(tuple(kept), edges)))
