"""Trees of cases: sound by a plain checker and exhaustion, small on published graphs."""

from __future__ import annotations

import dataclasses
import itertools

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence.cases import Cases, Forced, Like, OnEdge, OnVertex
from certify.graph.question import Question, build_path_question
from certify.search.budget import Budget
from certify.search.cases import find_cases
from certify.search.forced import Frame, State
from certify.search.leaves import Mirrors
from certify.search.symmetry import find_symmetries, image_of, is_symmetry
from tests.brute import has_cycle, questions
from tests.search.known_graphs import build, famous, flower, knight, petersen, squares
from tests.search.tree_checker import WrongError, check_tree

MINUTE = 60.0


def find(question: Question, *, most: int = 200, shortest: bool = False) -> Cases | None:
    return find_cases(question, budget=Budget.of(MINUTE), most_leaves=most, shortest=shortest)


def count_leaves(cases: Cases) -> int:
    return sum(not isinstance(node, OnEdge | OnVertex) for node in cases.nodes)


@given(questions(least=3, most=8))
@settings(deadline=None)
def test_a_tree_exactly_where_no_cycle_exists(question: Question) -> None:
    cases = find(question)
    assert (cases is not None) == (not has_cycle(question))
    if cases is not None:
        check_tree(question, cases)


@given(questions(least=3, most=7))
@settings(deadline=None, max_examples=40)
def test_the_shortest_is_sound_and_not_longer(question: Question) -> None:
    short, quick = find(question, shortest=True), find(question)
    assert (short is not None) == (quick is not None) == (not has_cycle(question))
    if short is not None and quick is not None:
        check_tree(question, short)
        assert short.length <= quick.length


# None of these has a Hamiltonian cycle: Petersen, Tutte and Coxeter graphs: Holton and Sheehan,
# The Petersen Graph (1993); Tutte 1946 and 1960. Thomassen's hypotraceable graph: Thomassen,
# Discrete Math. 9 (1974). Flower snarks: Isaacs 1975. GP(11, 2): Alspach, JCTB 34 (1983).
# Herschel: bipartite with parts of 5 and 6. The bounds are the project's own aims.
SMALL_TREES = {
    "Petersen": (famous("Petersen"), 6),
    "Herschel": (famous("Herschel"), 1),
    "Tutte": (famous("Tutte"), 6),
    "Thomassen": (famous("Thomassen"), 6),
    "Coxeter": (famous("Coxeter"), 12),
    "flower 5": (flower(5), 12),
    "flower 7": (flower(7), 20),
    "GP(11, 2)": (petersen(11, 2), 12),
    # Knight boards: Schwenk, Math. Mag. 64 (1991).
    "knight 3x4": (knight(3, 4), 3),
    "knight 3x8": (knight(3, 8), 3),
    # Neighbours that sum to squares, in a ring: none for n <= 31 (OEIS A071984).
    "squares 31": (Question(31, squares(31).edges), 3),
    # The same in a row: none for 18..22 (OEIS A090461).
    "squares row 22": (build_path_question(squares(22)), 3),
}


@pytest.mark.parametrize("name", SMALL_TREES)
def test_small_trees_of_published_graphs(name: str) -> None:
    question, most = SMALL_TREES[name]
    cases = find(question, most=most)
    assert cases is not None
    check_tree(question, cases)
    assert count_leaves(cases) <= most


@pytest.mark.parametrize("name", ["Heawood", "Dodecahedral", "Franklin"])
def test_no_tree_where_a_cycle_exists(name: str) -> None:
    # These have Hamiltonian cycles: from memory (MathWorld, under their names).
    assert find(famous(name), most=500) is None


def test_questions_without_trees() -> None:
    assert find(Question(2, ((0, 1),))) is None
    assert find(Question(3, ((0, 1), (0, 2), (1, 2)), absent=True)) is None


def test_limit_on_leaves() -> None:
    assert find(famous("Petersen"), most=1) is None
    assert find(famous("Petersen"), most=0) is None


def test_spent_budget_gives_nothing() -> None:
    assert find_cases(famous("Coxeter"), budget=Budget.of(0.0), most_leaves=100) is None


def test_same_question_same_tree() -> None:
    question = flower(5)
    assert find(question) == find(question)


def test_trees_without_symmetry() -> None:
    # Two more vertices hung on the Petersen graph spoil its symmetry.
    pairs = [*famous("Petersen").edges, (0, 10), (1, 10), (2, 11), (10, 11)]
    question = build(12, pairs)
    cases = find(question)
    assert (cases is None) == has_cycle(question)
    if cases is not None:
        check_tree(question, cases)


def test_a_group_too_large_to_list() -> None:
    # No Hamiltonian cycle: Meredith, JCTB 14 (1973) 55-60. Each of ten parts can be permuted alone.
    question = famous("Meredith")
    cases = find(question)
    assert cases is not None
    check_tree(question, cases)
    assert any(isinstance(node, Like) for node in cases.nodes)


def test_likeness_by_canonical_form() -> None:
    complete = Question(9, tuple(itertools.combinations(range(9), 2)))
    frame = Frame(complete)
    mirrors = Mirrors(frame)
    case, other = (frame.mask([(0, 1)]), 0), (0, frame.mask([(0, 1)]))
    found = mirrors.find_by_form((frame.mask([(7, 8)]), 0), (other, case))
    assert found is not None
    assert found[0] == case
    assert {found[1][7], found[1][8]} == {0, 1}
    assert mirrors.find_by_form((frame.mask([(7, 8)]), 0), (other,)) is None


@given(questions(least=4, most=6), st.data())
def test_likeness_agrees_with_exhaustion(question: Question, data: st.DataObject) -> None:
    frame = Frame(question)
    state = State.first(frame)
    if state.contradiction or not state.open_count:
        return
    edges = st.sampled_from([question.edges[i] for i in state.open_edges()])
    used = data.draw(st.frozensets(edges, max_size=2))
    removed = data.draw(st.frozensets(edges, max_size=2)) - used
    state = state.assume([frame.index[e] for e in used], [frame.index[e] for e in removed])
    case_used = data.draw(st.frozensets(edges, max_size=2))
    case_removed = data.draw(st.frozensets(edges, max_size=2)) - case_used
    if state.contradiction:
        return
    found = Mirrors(frame).find(state, ((frame.mask(case_used), frame.mask(case_removed)),))

    def maps(p: tuple[int, ...]) -> bool:
        images = image_of(p, state.used_edges()), image_of(p, state.removed_edges())
        return case_used <= images[0] and case_removed <= images[1]

    assert (found is not None) == any(map(maps, find_symmetries(question).elements))
    if found is not None:
        assert is_symmetry(question, found[1])
        assert maps(found[1])


def corrupted(cases: Cases) -> list[Cases]:
    """Return twins of a tree that prove nothing."""
    nodes = cases.nodes
    twins = [
        dataclasses.replace(cases, nodes=nodes[:-1]),
        dataclasses.replace(cases, nodes=(*nodes, Forced())),
        dataclasses.replace(cases, nodes=(Forced(),)),
    ]
    for number, node in enumerate(nodes):
        if isinstance(node, Like):
            itself = Like(number, node.symmetry)
            twins.append(
                dataclasses.replace(cases, nodes=(*nodes[:number], itself, *nodes[number + 1 :]))
            )
            identity = tuple(range(len(cases.symmetries[0])))
            twins.append(dataclasses.replace(cases, symmetries=(identity,) * len(cases.symmetries)))
        elif not isinstance(node, Forced):
            closed = (*nodes[:number], Forced(), *nodes[number + 1 :])
            twins.append(dataclasses.replace(cases, nodes=closed))
    return twins


@pytest.mark.parametrize("name", ["Petersen", "Coxeter", "Tutte"])
def test_corrupted_twins_are_rejected(name: str) -> None:
    question = famous(name)
    cases = find(question)
    assert cases is not None
    twins = corrupted(cases)
    assert len(twins) > 4
    for twin in twins:
        with pytest.raises(WrongError):
            check_tree(question, twin)
