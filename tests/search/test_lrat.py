"""Trimming, joining and writing proofs."""

from __future__ import annotations

import pytest

from certify.search.lrat import Proof, join_steps, trim_proof, write_drat, write_lrat
from tests.search.lrat_checker import check_lrat

FOUR = [(1, 2), (-1, 2), (1, -2), (-1, -2)]


def test_trimming_drops_what_plays_no_part() -> None:
    text = b"5 2 0 1 2 0\n5 d 1 0\n6 1 2 0 1 0\n7 1 0 1 3 4 0\n8 0 5 7 4 0\n9 0 8 0\n"
    proof = trim_proof(text, FOUR)
    assert proof == Proof(4, (((2,), (0, 1)), ((1,), (0, 2)), ((), (4, 5, 3))))
    assert write_lrat(proof) == b"5 2 0 1 2 0\n6 1 0 1 3 0\n7 0 5 6 4 0\n"
    assert write_drat(proof) == b"2 0\n1 0\n0\n"


def test_trimming_drops_idle_hints_and_idle_literals() -> None:
    # Clause 5 says 3 and has no part in anything; nor has literal 4 of the first step.
    text = b"6 4 2 0 5 1 2 0\n7 0 5 6 3 4 0\n"
    proof = trim_proof(text, [*FOUR, (3,)])
    assert proof == Proof(5, (((2,), (0, 1)), ((), (5, 2, 3))))


def test_the_solver_may_number_its_own_steps_between_the_clauses() -> None:
    # Clauses 1, 2, 4: the solver shortened the second by the first at once.
    proof = trim_proof(b"3 2 0 1 2 0\n5 0 3 1 4 0\n", [(1,), (-1, 2), (-2, -1)])
    assert proof == Proof(3, (((2,), (0, 1)), ((), (3, 0, 2))))


@pytest.mark.parametrize(
    "text",
    [
        b"",
        b"5 2 0 1 2 0\n",
        b"5 2 0 1 2 0\n6 0 5 4 0\n",
        b"5 2 0 -1 3 0\n6 0 5 3 4 0\n",
        b"5 2 0 1 9 0\n6 0 5 3 4 0\n",
        b"5 0 6 0\n6 2 0 1 2 0\n",
    ],
    ids=["nothing", "cut short", "no contradiction", "RAT", "unknown hint", "later hint"],
)
def test_what_is_no_proof_is_refused(text: bytes) -> None:
    assert trim_proof(b"5 2 0 1 2 0\n6 0 5 3 4 0\n", FOUR) is not None
    assert trim_proof(text, FOUR) is None


def test_joining_leaves_one_step_where_one_is_enough() -> None:
    clauses = [(1,), (-1, 2), (-2, 3), (-3,)]
    proof = Proof(4, (((2,), (0, 1)), ((3,), (4, 2)), ((), (5, 3))))
    joined = join_steps(proof, clauses)
    assert joined == Proof(4, (((), (0, 1, 2, 3)),))


def test_joining_keeps_a_step_that_is_needed() -> None:
    proof = trim_proof(b"5 2 0 1 2 0\n6 0 5 3 4 0\n", FOUR)
    assert proof is not None
    assert join_steps(proof, FOUR) == proof


def test_the_plain_checker_refuses_corrupted_proofs() -> None:
    clauses = [list(clause) for clause in FOUR]
    assert check_lrat(clauses, b"5 2 0 1 2 0\n6 0 5 3 4 0\n") == ""
    for text in (b"5 2 0 1 2 0\n", b"5 2 0 1 3 0\n6 0 5 3 4 0\n", b"6 2 0 1 2 0\n7 0 6 3 4 0\n"):
        assert check_lrat(clauses, text) != ""
