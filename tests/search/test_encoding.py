"""Facts hold for every Hamiltonian cycle, and their clauses say what they should."""

from __future__ import annotations

import itertools
from collections.abc import Iterable

import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st
from pysat.solvers import Solver

from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question
from certify.search.encoding import (
    ClauseBuilder,
    DegreeFact,
    Fact,
    MirrorFact,
    RequiredFact,
    build_cut,
    sort_facts,
    write_cnf,
)
from certify.search.symmetry import find_symmetries
from tests.brute import cycle_edges, hamiltonian_cycles, questions
from tests.search.known_graphs import build, famous, petersen

CALM = settings(suppress_health_check=[HealthCheck.too_slow, HealthCheck.filter_too_much])


def extends(question: Question, facts: Iterable[Fact], used: Iterable[Edge]) -> bool:
    """Return whether the clauses can hold when exactly these edges are used."""
    builder = ClauseBuilder(question)
    clauses = [list(clause) for fact in facts for clause in builder.build(fact)]
    chosen = set(used)
    assumed = [i if e in chosen else -i for i, e in enumerate(question.edges, start=1)]
    with Solver(name="minisat22", bootstrap_with=clauses) as solver:
        return bool(solver.solve(assumptions=assumed))


@CALM
@given(questions(least=4, most=7))
def test_every_cycle_satisfies_every_fact(question: Question) -> None:
    cycles = list(itertools.islice(hamiltonian_cycles(question), 20))
    assume(cycles)
    sizes = range(1, question.n)
    sets = itertools.chain.from_iterable(
        itertools.combinations(range(question.n), k) for k in sizes
    )
    facts: list[Fact] = [DegreeFact(v) for v in range(question.n)]
    facts.extend(build_cut(question, side) for side in sets)
    facts.extend(RequiredFact(edge) for edge in question.required)
    assert all(extends(question, facts, cycle_edges(cycle)) for cycle in cycles)


def vector(question: Question, used: frozenset[Edge]) -> tuple[bool, ...]:
    return tuple(edge in used for edge in question.edges)


def moved(p: tuple[int, ...], used: frozenset[Edge]) -> frozenset[Edge]:
    return frozenset(edge_between(p[u], p[v]) for u, v in used)


@CALM
@given(questions(least=4, most=6), st.integers(1, 20))
def test_the_first_of_all_images_satisfies_every_mirror(question: Question, length: int) -> None:
    first = next(hamiltonian_cycles(question), None)
    assume(first is not None)
    assert first is not None
    group = find_symmetries(question)
    assert group.is_complete
    images = [moved(p, cycle_edges(first)) for p in group.elements]
    least = min(images, key=lambda used: vector(question, used))
    facts = [MirrorFact(length, p) for p in group.elements]
    assert extends(question, facts, least)


@CALM
@given(questions(least=4, most=6), st.integers(1, 8), st.data())
def test_a_mirror_says_what_it_should(question: Question, length: int, data: st.DataObject) -> None:
    """Exactly: x is no larger than its image, compared at the first places that p moves."""
    assume(question.m >= 1)
    p = data.draw(st.sampled_from(find_symmetries(question).elements))
    used = data.draw(st.frozensets(st.sampled_from(question.edges)))
    at = [i for i, (u, v) in enumerate(question.edges) if edge_between(p[u], p[v]) != (u, v)]
    ours, image = vector(question, used), vector(question, moved(p, used))
    holds = [ours[i] for i in at[:length]] <= [image[i] for i in at[:length]]
    assert extends(question, [MirrorFact(length, p)], used) == holds


@pytest.mark.parametrize("degree", range(2, 10))
def test_a_degree_says_exactly_two(degree: int) -> None:
    star = build(degree + 1, [(0, v) for v in range(1, degree + 1)])
    for k in range(degree + 1):
        for used in itertools.combinations(star.edges, k):
            assert extends(star, [DegreeFact(0)], used) == (k == 2)


def test_the_text_is_the_one_of_the_format() -> None:
    # Written by hand from FORMAT.md, section 6: edges 1 = 01, 2 = 02, 3 = 03, 4 = 12, 5 = 23; the
    # mirror swaps 1 and 3, so edges 1 and 3, and 4 and 5.
    question = Question(4, ((0, 1), (0, 2), (0, 3), (1, 2), (2, 3)), frozenset({(0, 2)}))
    facts = sort_facts(
        [
            MirrorFact(2, (0, 3, 2, 1)),
            RequiredFact((0, 2)),
            build_cut(question, (1, 2, 3)),
            build_cut(question, (2, 3)),
            DegreeFact(1),
            DegreeFact(0),
        ]
    )
    assert write_cnf(question, facts).decode() == (
        "c fact degree 0\nc fact degree 1\nc fact cut 0\nc fact cut 0 1\nc fact required 0 2\n"
        "c fact mirror 2 0 3 2 1\np cnf 6 13\n"
        "2 3 0\n1 3 0\n1 2 0\n-1 -2 -3 0\n4 0\n1 0\n1 2 3 0\n2 3 4 0\n2 0\n"
        "-1 3 0\n-1 6 0\n3 6 0\n-6 -3 1 0\n"
    )


def test_the_text_of_a_large_degree_is_the_one_of_the_format() -> None:
    # By hand from FORMAT.md: s_2 = 8, t_2 = 9, s_3 = 10, ..., s_6 = 16, t_6 = 17, t_7 = 18.
    star = build(8, [(0, v) for v in range(1, 8)])
    clauses = ClauseBuilder(star).build(DegreeFact(0))
    second = [(-1, 8), (-2, 8), (-8, 1, 2), (-9, 1), (-9, 2), (-1, -2, 9)]
    third = [(-8, 10), (-3, 10), (-10, 8, 3), (-11, 9, 8), (-11, 9, 3), (-9, 11), (-9, -3)]
    last = [(-18, 17, 16), (-18, 17, 7), (-17, 18), (-17, -7), (-16, -7, 18), (18,)]
    assert clauses[:13] == [*second, *third]
    assert clauses[13] == (-8, -3, 11)
    assert clauses[-6:] == last
    assert len(clauses) == 6 + 4 * 8 + 5 + 1


def test_a_shorter_mirror_has_the_first_clauses_and_no_more_than_are_in_use() -> None:
    question = famous("Petersen")
    p = find_symmetries(question).generators[0]

    def clauses(mirror: MirrorFact) -> list[tuple[int, ...]]:
        return ClauseBuilder(question).build(mirror)

    long = clauses(MirrorFact(6, p))
    assert len(long) == 16
    for i in range(16):
        short = MirrorFact(6, p).shorten([0, i])
        assert clauses(short) == long[: len(clauses(short))]
        assert len(clauses(short)) > i >= len(clauses(MirrorFact(short.length - 1, p)))


def test_one_cut_has_one_name() -> None:
    question = petersen(5, 2)
    assert build_cut(question, (3, 1)) == build_cut(question, set(range(10)) - {1, 3})
    assert build_cut(question, range(5, 10)).vertices == (0, 1, 2, 3, 4)


def test_a_leaf_has_no_degree_fact() -> None:
    with pytest.raises(ValueError, match="fewer than two"):
        ClauseBuilder(build(2, [(0, 1)])).build(DegreeFact(0))
