"""The proof checker: what it must accept, and what every proof checker must refuse."""

from __future__ import annotations

from itertools import product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from certify.checker.lrat import check_proof
from certify.checker.strict import Rejected
from certify.report.referee import check_dimacs

ALL_SIGNS = [(1, 2), (-1, 2), (1, -2), (-1, -2)]
GOOD = ["5 2 0 1 2 0", "6 0 5 3 4 0"]


def test_a_proof_is_accepted() -> None:
    check_proof(ALL_SIGNS, GOOD)


@pytest.mark.parametrize(
    "lines",
    [
        [],
        GOOD[:1],
        GOOD[1:],
        ["5 0 0", GOOD[1]],
        ["5 2 0 1 0", GOOD[1]],
        ["5 2 0 2 1 2 0", GOOD[1]],
        ["5 2 0 1 2 0 ", GOOD[1]],
        ["5  2 0 1 2 0", GOOD[1]],
        ["+5 2 0 1 2 0", GOOD[1]],
        ["5 2 0 -1 2 0", GOOD[1]],
        ["5 2 0 1 9 0", GOOD[1]],
        ["5 2 0 1 5 0", GOOD[1]],
        ["7 2 0 1 2 0", GOOD[1]],
        ["5 2 -2 0 1 2 0", GOOD[1]],
        ["5 d 1 0", *GOOD],
        [*GOOD, "7 0 6 0"],
        [*GOOD, "7 1 0 6 0"],
        ["5 2 0 1 2 0", "6 0 5 3 4"],
        ["5 2 0 1 2", GOOD[1]],
        ["x", *GOOD],
        ["", *GOOD],
    ],
)
def test_a_corrupted_proof_is_rejected(lines: list[str]) -> None:
    with pytest.raises(Rejected):
        check_proof(ALL_SIGNS, lines)


def test_an_empty_clause_without_hints_proves_nothing() -> None:
    """The formula is satisfiable; known checkers have said VERIFIED here (issue trackers)."""
    with pytest.raises(Rejected):
        check_proof([(1, 2)], ["2 0 0"])


def test_a_header_that_promises_missing_clauses_is_not_given_to_a_referee() -> None:
    check_dimacs("p cnf 2 1\n1 2 0\n")
    for text in ("p cnf 2 5\n1 2 0\n", "p cnf 2 0\n1 2 0\n", "p cnf 1 1\n1 2 0\n", "1 2 0\n", ""):
        with pytest.raises(ValueError, match=r"formula|header|variable"):
            check_dimacs(text)


literals = st.integers(1, 3).flatmap(lambda v: st.sampled_from([v, -v]))
clauses = st.lists(st.lists(literals, max_size=3).map(tuple), min_size=1, max_size=6)
steps = st.lists(
    st.tuples(st.lists(literals, max_size=2), st.lists(st.integers(1, 9), max_size=4)), max_size=4
)


@given(clauses, steps)
def test_nothing_is_proved_of_a_satisfiable_formula(
    formula: list[tuple[int, ...]], proof: list[tuple[list[int], list[int]]]
) -> None:
    lines = []
    for place, (clause, hints) in enumerate([*proof, ([], [1, 2, 3])], len(formula) + 1):
        lines.append(" ".join(map(str, [place, *clause, 0, *hints, 0])))
    try:
        check_proof(formula, lines)
    except Rejected:
        return
    for signs in product([False, True], repeat=3):
        assert not all(any(signs[abs(x) - 1] == (x > 0) for x in clause) for clause in formula)
