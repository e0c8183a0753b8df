"""Questions split into parts: the parts cover everything, and what is joined is a proof.

Checked against exhaustion, published theorems and the programs that check_evidence asks.
"""

from __future__ import annotations

import pickle

import pytest
from hypothesis import given

from certify.evidence.base import Evidence
from certify.evidence.clauses import Clauses
from certify.evidence.witness import Witness
from certify.graph.question import Question
from certify.search.ladder import Limits
from certify.search.split import Part, join_parts, settle_part, split_question
from tests.brute import cycle_edges, hamiltonian_cycles, has_cycle, questions
from tests.search.known_graphs import IMPOSSIBLE, POSSIBLE, build
from tests.search.test_clauses import CALM, check_evidence


def settle_apart(question: Question, parts: tuple[Part, ...]) -> Evidence | None:
    """Settle the parts as other processes would: from bytes, last part first."""
    proofs = []
    for part in reversed(parts):
        sent = pickle.loads(pickle.dumps((question, part)))
        proof = settle_part(*sent, Limits(300))
        assert proof is not None
        proofs.append(pickle.loads(pickle.dumps(proof)))
    return join_parts(question, parts, proofs[::-1])


@CALM
@given(questions(most=7))
def test_every_cycle_is_in_exactly_one_part(question: Question) -> None:
    parts = split_question(question, 6)
    number = {edge: i for i, edge in enumerate(question.edges, 1)}
    for cycle in hamiltonian_cycles(question):
        used = {number[edge] for edge in cycle_edges(cycle)}
        fitting = [p for p in parts if all((abs(d) in used) == (d > 0) for d in p)]
        assert len(fitting) == 1 or not parts


@CALM
@given(questions(most=7))
def test_answers_are_those_of_exhaustion(question: Question) -> None:
    parts = split_question(question, 5)
    if not parts or min(map(len, question.neighbours)) < 2:
        return
    found = settle_apart(question, parts)
    assert isinstance(found, Witness if has_cycle(question) else Clauses)
    if isinstance(found, Clauses):
        check_evidence(found)


@pytest.mark.parametrize("name", sorted(IMPOSSIBLE))
def test_joined_proofs_of_published_theorems(name: str) -> None:
    question = IMPOSSIBLE[name]
    if question.m > 120:
        pytest.skip("large: the others show the same")
    parts = split_question(question, 8)
    found = settle_apart(question, parts) if parts else None
    if found is not None:
        assert isinstance(found, Clauses)
        check_evidence(found)
        assert found == settle_apart(question, parts)


@pytest.mark.parametrize("name", sorted(POSSIBLE)[:6])
def test_a_cycle_in_one_part_is_the_answer(name: str) -> None:
    question = POSSIBLE[name]
    parts = split_question(question, 4)
    if parts:
        assert isinstance(settle_apart(question, parts), Witness)


def test_what_forced_moves_settle_is_not_split() -> None:
    path = build(4, [(0, 1), (1, 2), (2, 3)])
    assert split_question(path, 8) == ()
    ring = build(4, [(0, 1), (1, 2), (2, 3), (3, 0)])
    assert split_question(ring, 8) == ()


def test_a_missing_part_leaves_no_proof() -> None:
    question = build(5, [(u, v) for u in (0, 1) for v in (2, 3, 4)])
    wheel = build(10, [*((i, (i + 1) % 5) for i in range(5)), *((i, i + 5) for i in range(5)),
                       *((5 + i, 5 + (i + 2) % 5) for i in range(5))])  # fmt: skip
    assert split_question(question, 4) == ()
    parts = split_question(wheel, 4)
    proofs = [settle_part(wheel, part, Limits(300)) for part in parts]
    assert all(proofs)
    with pytest.raises(ValueError, match="zip"):
        join_parts(wheel, parts, [proof for proof in proofs if proof][1:])
