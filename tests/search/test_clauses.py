"""Refutations by clauses: right answers, and proofs that others accept.

Checked against exhaustion (brute.py), other solvers and proof checkers, a plain
LRAT checker written from FORMAT.md, and published theorems.
"""

from __future__ import annotations

import math
import shutil
import subprocess
from collections.abc import Iterable
from pathlib import Path

import dratify
import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st
from pysat.solvers import Solver

import certify.search.clauses as finder
from certify.evidence.clauses import Clauses
from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.clauses import find_clauses
from certify.search.symmetry import find_symmetries
from tests.brute import cycle_edges, has_cycle, questions
from tests.search.known_graphs import IMPOSSIBLE, POSSIBLE, build
from tests.search.lrat_checker import check_lrat, read_cnf

CALM = settings(suppress_health_check=[HealthCheck.too_slow, HealthCheck.filter_too_much])


def check_evidence(evidence: Clauses) -> None:
    """Check all that the three texts promise, with programs that are not ours where possible."""
    _, variables, clauses = read_cnf(evidence.cnf)
    assert len(clauses) == evidence.clauses
    assert max((abs(x) for clause in clauses for x in clause), default=0) <= variables
    assert check_lrat(clauses, evidence.lrat) == ""
    lines = evidence.lrat.decode().splitlines()
    assert len(lines) == evidence.steps
    words = [line.split(" ")[1:] for line in lines]
    drat = [" ".join(line[: line.index("0") + 1]) for line in words]
    assert drat == evidence.drat.decode().splitlines()
    with Solver(name="minisat22", bootstrap_with=clauses) as solver:
        assert not solver.solve()
    formula = dratify.parse_dimacs(evidence.cnf.decode())
    assert dratify.check_proof(formula, evidence.drat.decode(), engine="python").ok


def refute(question: Question, mirrors: Iterable[tuple[int, ...]] = ()) -> Clauses:
    found = find_clauses(question, budget=Budget.of(300), mirrors=tuple(mirrors))
    assert isinstance(found, Clauses)
    return found


@CALM
@given(questions(most=7))
def test_answers_are_those_of_exhaustion(question: Question) -> None:
    found = find_clauses(question, budget=Budget.of(60))
    if min(map(len, question.neighbours)) < 2:
        assert found is None
    elif isinstance(found, Clauses):
        assert not has_cycle(question)
        check_evidence(found)
    else:
        assert found is not None
        assert sorted(found) == list(range(question.n))
        assert question.required <= cycle_edges(found) <= question.edge_set


@CALM
@given(questions(least=5, most=7), st.integers(0, 2**32))
def test_answers_with_mirrors_are_those_of_exhaustion(question: Question, seed: int) -> None:
    assume(min(map(len, question.neighbours)) >= 2)
    elements = find_symmetries(question).elements
    mirrors = tuple(elements[(seed >> 4 * i) % len(elements)] for i in range(4))
    found = find_clauses(question, budget=Budget.of(60), mirrors=mirrors)
    assert isinstance(found, Clauses) != has_cycle(question)
    if isinstance(found, Clauses):
        check_evidence(found)


@pytest.mark.parametrize("name", IMPOSSIBLE)
def test_published_graphs_without_a_cycle_are_refuted(name: str) -> None:
    check_evidence(refute(IMPOSSIBLE[name]))


@pytest.mark.parametrize("name", POSSIBLE)
def test_published_graphs_with_a_cycle_give_one(name: str) -> None:
    question = POSSIBLE[name]
    found = find_clauses(question, budget=Budget.of(300))
    assert isinstance(found, tuple)
    assert sorted(found) == list(range(question.n))
    assert cycle_edges(found) <= question.edge_set


@pytest.mark.parametrize("name", ["Petersen", "Coxeter", "flower 5", "flower 7"])
def test_mirrors_shorten_what_is_symmetric(name: str) -> None:
    question = IMPOSSIBLE[name]
    with_mirrors = refute(question, find_symmetries(question).elements[:12])
    check_evidence(with_mirrors)
    assert b"c fact mirror " in with_mirrors.cnf
    assert with_mirrors.length < refute(question).length


@pytest.mark.parametrize("name", ["Coxeter", "flower 7", "path of squares to 24", "knight 4 by 6"])
def test_refutations_too_large_to_polish_hold_too(
    name: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(finder, "_JOINED_STEPS", 0)
    monkeypatch.setattr(finder, "_POLISHED_STEPS", 0)
    question = IMPOSSIBLE[name]
    for mirrors in ((), find_symmetries(question).elements[:12]):
        check_evidence(refute(question, mirrors))


@pytest.mark.parametrize("name", IMPOSSIBLE)
def test_drat_trim_accepts(name: str, tmp_path: Path) -> None:
    program = shutil.which("drat-trim")
    if program is None:
        pytest.skip("NOT CHECKED: no program drat-trim on the path")
    evidence = refute(IMPOSSIBLE[name])
    (tmp_path / "facts.cnf").write_bytes(evidence.cnf)
    (tmp_path / "proof.drat").write_bytes(evidence.drat)
    files = [str(tmp_path / "facts.cnf"), str(tmp_path / "proof.drat")]
    said = subprocess.run([program, *files], capture_output=True, text=True, check=False).stdout
    assert "s VERIFIED" in said.replace("\r", "\n").splitlines()
    assert "WARNING" not in said


def test_required_edges_count() -> None:
    # The square with one diagonal: its cycle is the rim, so none uses the diagonal.
    edges: tuple[Edge, ...] = ((0, 1), (0, 2), (0, 3), (1, 2), (2, 3))
    question = Question(4, edges, frozenset({(0, 2)}))
    evidence = refute(question)
    check_evidence(evidence)
    assert b"\nc fact required 0 2\n" in evidence.cnf
    assert isinstance(find_clauses(Question(4, edges), budget=Budget.of(60)), tuple)


def test_a_graph_in_two_pieces_has_a_cut_that_nothing_leaves() -> None:
    question = build(6, [(0, 1), (1, 2), (0, 2), (3, 4), (4, 5), (3, 5)])
    evidence = refute(question)
    check_evidence(evidence)
    assert evidence.cnf == b"c fact cut 0 1 2\np cnf 6 1\n0\n"
    assert evidence.lrat == b"2 0 1 0\n"
    assert evidence.drat == b"0\n"


class Looks(Budget):
    """A budget that is spent after so many looks, whatever the clock says."""

    def __init__(self, looks: int) -> None:
        super().__init__(math.inf)
        object.__setattr__(self, "looks", iter(range(looks)))

    @property
    def spent(self) -> bool:
        return next(self.looks, None) is None  # type: ignore[attr-defined]


def test_the_budget_only_makes_it_give_up() -> None:
    question = IMPOSSIBLE["Petersen"]
    full = refute(question)
    assert refute(question) == full
    found = [find_clauses(question, budget=Looks(looks)) for looks in range(60)]
    given_up = found.index(full)
    assert found == [None] * given_up + [full] * (60 - given_up)
    assert given_up > question.n


def test_what_clauses_cannot_say_is_left_alone() -> None:
    path = build(3, [(0, 1), (1, 2)])
    absent = Question(3, ((0, 1), (0, 2), (1, 2)), absent=True)
    for question in (path, absent, Question(2, ((0, 1),)), Question(0, ())):
        assert find_clauses(question, budget=Budget.of(60)) is None


def test_a_mirror_has_to_be_a_symmetry() -> None:
    question = build(4, [(0, 1), (1, 2), (2, 3), (0, 3), (0, 2)])
    with pytest.raises(ValueError, match="symmetry"):
        find_clauses(question, budget=Budget.of(60), mirrors=[(1, 2, 3, 0)])
