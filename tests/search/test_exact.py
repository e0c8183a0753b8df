"""Exact margins: what holds, what does not, and how weights are rounded."""

from __future__ import annotations

import pytest

from certify.evidence.counting import Counting
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.counting import find_counting
from certify.search.exact import OPEN, Tally, drop_redundant, holds, round_weights
from certify.search.facts import FactMaker

SUBDIVIDED_PRISM = [
    *[(0, 1), (0, 2), (1, 2), (3, 4), (3, 5), (4, 5)],
    *[(0, 6), (3, 6), (1, 7), (4, 7), (2, 8), (5, 8)],
]
PRISM_PROOF = Counting(
    vertex=((6, 1), (7, 1), (8, 1)), parity=(((0, 1, 2), ((0, 6), (1, 7), (2, 8)), 1),)
)


@pytest.mark.parametrize(
    "twin",
    [
        Counting(),
        Counting(vertex=PRISM_PROOF.vertex[:2], parity=PRISM_PROOF.parity),
        Counting(vertex=((7, 1), (6, 1), (8, 1)), parity=PRISM_PROOF.parity),
        Counting(vertex=((6, 1), (7, 1), (8, 1), (9, 1)), parity=PRISM_PROOF.parity),
        Counting(vertex=PRISM_PROOF.vertex, cut=(((0, 1, 2), 1),)),
        Counting(vertex=PRISM_PROOF.vertex, cut=(((), 5),)),
        Counting(vertex=PRISM_PROOF.vertex, cut=((tuple(range(9)), 5),)),
        Counting(vertex=PRISM_PROOF.vertex, cut=(((9,), 5),)),
        Counting(vertex=PRISM_PROOF.vertex, parity=(((0, 1, 2), ((0, 6), (1, 7)), 5),)),
        Counting(vertex=PRISM_PROOF.vertex, parity=(((0, 1, 2), ((0, 1), (0, 6), (1, 7)), 1),)),
        Counting(vertex=PRISM_PROOF.vertex, parity=(((0, 1, 2), ((0, 6), (2, 8), (1, 7)), 1),)),
        Counting(vertex=PRISM_PROOF.vertex, parity=(((0, 1, 2), ((0, 6), (1, 7), (2, 8)), -1),)),
    ],
)
def test_a_corrupted_argument_does_not_hold(twin: Counting) -> None:
    question = Question(9, tuple(sorted(SUBDIVIDED_PRISM)))
    assert holds(question, PRISM_PROOF)
    assert not holds(question, twin)


def test_absent_and_small_questions_have_no_counting_argument() -> None:
    for question in (
        Question(2, ((0, 1),)),
        Question(0, ()),
        Question(4, ((0, 1),), absent=True),
    ):
        assert find_counting(question, budget=Budget.of(60)) is None
        assert not holds(question, Counting(vertex=((0, 1),)))


def test_rounding_finds_the_scale_that_is_needed() -> None:
    # A path on three vertices with an end of degree 1: weight 1/3 already proves it.
    facts = FactMaker(Question(3, ((0, 1), (1, 2)))).degrees()
    status = [OPEN, OPEN]
    assert round_weights(facts, status, [0.0, 0.0, 0.0]) is None
    tally = round_weights(facts, status, [1 / 3, 1e-12, -1e-12])
    assert tally is not None
    assert tally.weights == [1, 0, 0]
    tally = Tally(facts, status)
    for i, w in enumerate([6, -2, 6]):
        tally.change(i, w)
    drop_redundant(tally)
    assert sorted(map(abs, tally.weights)) == [0, 0, 1]
    assert tally.margin > 0
