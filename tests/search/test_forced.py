"""Forced moves: they keep every Hamiltonian cycle, and they are those of FORMAT.md."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.search.forced import Frame, Move, Reason, State
from tests.brute import cycle_edges, hamiltonian_cycles, questions
from tests.search.tree_checker import Contradiction, forced_moves


def start(question: Question, *, record: bool = False) -> State:
    return State.first(Frame(question), record=record)


@st.composite
def assumptions(draw: st.DrawFn) -> tuple[Question, frozenset[Edge], frozenset[Edge]]:
    """Draw a question and disjoint sets of assumed edges, none of them decided at first."""
    question = draw(questions(least=3, most=7))
    state = start(question)
    if state.contradiction or not state.open_count:
        return question, frozenset(), frozenset()
    edges = [question.edges[i] for i in state.open_edges()]
    used = draw(st.frozensets(st.sampled_from(edges), max_size=2))
    removed = draw(st.frozensets(st.sampled_from(edges), max_size=2)) - used
    return question, used, removed


def reach(question: Question, used: frozenset[Edge], removed: frozenset[Edge]) -> State:
    state = start(question)
    index = state.frame.index
    return state.assume([index[e] for e in sorted(used)], [index[e] for e in sorted(removed)])


@given(assumptions())
def test_every_cycle_is_kept(case: tuple[Question, frozenset[Edge], frozenset[Edge]]) -> None:
    question, used, removed = case
    state = reach(question, used, removed)
    cycles = [
        edges
        for edges in map(cycle_edges, hamiltonian_cycles(question))
        if used <= edges and not removed & edges
    ]
    if state.contradiction:
        assert cycles == []
        return
    for edges in cycles:
        assert set(state.used_edges()) <= edges
        assert not set(state.removed_edges()) & edges
    if state.complete:
        assert len(cycles) == 1


@given(assumptions())
def test_agrees_with_the_plain_rules(
    case: tuple[Question, frozenset[Edge], frozenset[Edge]],
) -> None:
    question, used, removed = case
    state = reach(question, used, removed)
    try:
        plain = forced_moves(question, used | question.required, removed)
    except Contradiction:
        assert state.contradiction
        return
    assert not state.contradiction
    assert plain == (frozenset(state.used_edges()), frozenset(state.removed_edges()))
    assert state.open_count == len(state.open_edges())
    assert state.open_count == question.m - len(plain[0]) - len(plain[1])


@given(questions(least=3, most=7))
def test_moves_tell_what_happened(question: Question) -> None:
    """Replaying the recorded moves: each is justified by what came before, and none is missing."""
    state = start(question, record=True)
    assert state.moves is not None
    used, removed = set(question.required), set[Edge]()
    for move in state.moves:
        check_move(question, move, used, removed)
        if move.edge is not None:
            (used if move.reason is Reason.LAST_TWO else removed).add(move.edge)
    if not state.contradiction:
        assert used == set(state.used_edges())
        assert removed == set(state.removed_edges())
    else:
        assert state.moves[-1].edge is None


def check_move(question: Question, move: Move, used: set[Edge], removed: set[Edge]) -> None:
    v = move.vertices[0]
    left = {e for e in question.edges if v in e} - removed
    steps = [(min(e), max(e)) for e in zip(move.vertices, move.vertices[1:], strict=False)]
    match move.reason:
        case Reason.TOO_FEW:
            assert len(left) < 2
        case Reason.TOO_MANY:
            assert len(left & used) > 2
        case Reason.FULL:
            assert len(left & used) >= 2
            assert move.edge in left - used
        case Reason.LAST_TWO:
            assert len(left) == 2
            assert move.edge in left
        case Reason.SHORTCUT:
            assert move.edge == tuple(sorted((v, move.vertices[-1])))
            assert len(move.vertices) < question.n
            assert used.issuperset(steps)
        case Reason.SHORT_CYCLE:
            last = (min(v, move.vertices[-1]), max(v, move.vertices[-1]))
            assert len(move.vertices) < question.n
            assert used.issuperset([*steps, last])


def test_a_state_is_not_changed_by_its_cases() -> None:
    square = Question(4, ((0, 1), (0, 2), (0, 3), (1, 2), (1, 3), (2, 3)))
    state = start(square)
    before = (state.used_mask, state.removed_mask, state.open_edges())
    child = state.assume([0, 1])
    assert child.used_edges() == ((0, 1), (0, 2), (1, 3), (2, 3))
    assert child.complete
    assert before == (state.used_mask, state.removed_mask, state.open_edges())


def test_moves_in_words_of_an_example() -> None:
    # A triangle 0 1 2 and a path 2 3 4 to a dead end.
    state = start(Question(5, ((0, 1), (0, 2), (1, 2), (2, 3), (3, 4))), record=True)
    assert state.moves == [Move(Reason.TOO_FEW, None, (4,))]
    # Without the dead end: the triangle's corner 0 and vertex 1 have two edges each.
    state = start(Question(4, ((0, 1), (0, 2), (1, 2), (1, 3), (2, 3))), record=True)
    assert state.moves is not None
    assert state.moves[:2] == [
        Move(Reason.LAST_TWO, (0, 1), (0,)),
        Move(Reason.LAST_TWO, (0, 2), (0,)),
    ]
    assert state.complete
    assert state.removed_edges() == ((1, 2),)


@pytest.mark.parametrize("size", [6, 7])
def test_short_cycles_are_refused(size: int) -> None:
    # Two triangles side by side, joined by a path of edges: each is a short cycle once used.
    ring = [(0, 1), (0, 2), (1, 2), (3, 4), (3, 5), (4, 5), (2, 3)]
    extra = [(5, 6), (0, 6)] if size == 7 else [(0, 5)]
    question = Question(size, tuple(sorted(ring + extra)), frozenset({(0, 1), (0, 2), (1, 2)}))
    assert start(question).contradiction
