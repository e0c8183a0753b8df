"""Facts, their clauses and proofs: what is accepted is true, and every H satisfies the facts."""

from __future__ import annotations

import math
import re
from collections import Counter
from itertools import combinations
from typing import Any

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from pysat.solvers import Solver

from certify.checker.clauses import check_clauses, check_formula
from certify.checker.strict import Rejected
from certify.evidence.clauses import Clauses
from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.clauses import find_clauses
from certify.search.encoding import (
    CutFact,
    DegreeFact,
    Fact,
    MirrorFact,
    RequiredFact,
    sort_facts,
    write_cnf,
)
from tests.brute import cycle_edges, hamiltonian_cycles, has_cycle
from tests.checker.drawn import automorphisms, join, ordered, questions, symmetric_questions
from tests.checker.questions import PETERSEN, complete, cycle_question, ring, twin
from tests.corrupt import corrupt_bytes

AMPLE = Budget(math.inf)
FILES = ("cnf", "lrat", "drat")


def body_of(found: Clauses) -> dict[str, Any]:
    return {**found.body(), **{form: f"clauses/only.{form}.gz" for form in FILES}}


def judge(question: Question, body: Any, files: dict[str, bytes]) -> bool:
    """Check clauses; say whether they are accepted, which must be true."""
    try:
        check_clauses(twin(question), body, files["cnf"], files["lrat"], files["drat"])
    except Rejected:
        return False
    assert not has_cycle(question)
    return True


def find(question: Question, mirrors: list[tuple[int, ...]]) -> Clauses | None:
    if question.n < 3 or question.absent:
        return None
    found = find_clauses(question, budget=AMPLE, mirrors=mirrors)
    return found if isinstance(found, Clauses) else None


def test_found_clauses_are_accepted_and_their_corrupted_twins_rejected_or_true() -> None:
    seen: Counter[str] = Counter()
    some = st.one_of(questions(least=3, most=8), symmetric_questions())

    @settings(max_examples=120)
    @given(some, st.data())
    def run(question: Question, data: st.DataObject) -> None:
        group = automorphisms(question)
        mirrors = data.draw(st.lists(st.sampled_from(group), max_size=3, unique=True))
        found = find(question, mirrors)
        if found is None:
            return
        files = {form: getattr(found, form) for form in FILES}
        assert judge(question, body_of(found), files)
        seen["found"] += 1
        seen["mirror"] += b"mirror" in found.cnf
        for _ in range(5):
            form = data.draw(st.sampled_from(FILES))
            damaged = files | {form: data.draw(corrupt_bytes(files[form]))}
            seen[str(damaged == files or judge(question, body_of(found), damaged))] += 1
        body = body_of(found)
        count = data.draw(st.sampled_from(["clauses", "steps"]))
        body[count] += data.draw(st.sampled_from([-1, 1]))
        assert not judge(question, body, files)
        u, v = data.draw(st.sampled_from(list(combinations(range(question.n), 2))))
        edges = tuple(sorted(question.edge_set ^ {(u, v)}))
        other = Question(question.n, edges, question.required & set(edges), question.apex)
        judge(other, body_of(found), files)

    run()
    assert seen["found"] >= 30, seen
    assert seen["False"] >= 100, seen


def facts_of(
    question: Question, cuts: list[list[int]], mirrors: list[tuple[int, tuple[int, ...]]]
) -> list[Fact]:
    facts: list[Fact] = []
    facts += [DegreeFact(v) for v in range(question.n) if len(question.neighbours[v]) > 1]
    facts += [RequiredFact(e) for e in sorted(question.required)]
    facts += [CutFact(tuple(cut)) for cut in cuts]
    facts += [MirrorFact(length, image) for length, image in mirrors]
    return sort_facts(facts)


def least_of_orbit(question: Question, cycle: frozenset[Edge], group: list[tuple[int, ...]]) -> Any:
    """Return the lexicographically least image of a cycle, as edge vectors in sorted order."""
    images = [frozenset(ordered(p[u], p[v]) for u, v in cycle) for p in group]
    return min(images, key=lambda image: [e in image for e in question.edges])


def generated(mirrors: list[tuple[int, ...]], n: int) -> list[tuple[int, ...]]:
    """Return the group that permutations generate."""
    group = {tuple(range(n))}
    waiting = list(group)
    while waiting:
        p = waiting.pop()
        for q in mirrors:
            image = tuple(q[v] for v in p)
            if image not in group:
                group.add(image)
                waiting.append(image)
    return sorted(group)


def is_satisfied(
    clauses: list[tuple[int, ...]], question: Question, cycle: frozenset[Edge]
) -> bool:
    """Return whether the clauses hold when exactly the edges of the cycle are true."""
    with Solver(name="cadical153", bootstrap_with=[list(c) for c in clauses]) as solver:
        units = [i if e in cycle else -i for i, e in enumerate(question.edges, 1)]
        return bool(solver.solve(assumptions=units))


def test_the_first_cycle_of_each_orbit_satisfies_all_facts_together() -> None:
    """So no set of true facts, with any mirrors at once, refutes a question with a cycle."""
    seen: Counter[str] = Counter()

    @settings(max_examples=150)
    @given(st.one_of(questions(least=3, most=7), symmetric_questions()), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        assume(not question.absent)
        cycles = list(hamiltonian_cycles(question))
        assume(cycles)
        group = automorphisms(question, 200)
        mirrors = data.draw(st.lists(st.sampled_from(group), max_size=4))
        lengths = [data.draw(st.integers(1, question.m)) for _ in mirrors]
        vertices = st.sets(st.integers(0, question.n - 1), min_size=1, max_size=question.n - 1)
        cuts = [sorted(cut) for cut in data.draw(st.lists(vertices, max_size=4))]
        facts = facts_of(question, cuts, list(zip(lengths, mirrors, strict=True)))
        clauses = check_formula(twin(question), write_cnf(question, facts))
        spanned = generated(mirrors, question.n)
        for cycle in cycles[:4]:
            first = least_of_orbit(question, cycle_edges(cycle), spanned)
            assert is_satisfied(clauses, question, first)
        plain = check_formula(twin(question), write_cnf(question, facts_of(question, cuts, [])))
        assert all(is_satisfied(plain, question, cycle_edges(cycle)) for cycle in cycles[:4])
        excluded = any(not is_satisfied(clauses, question, cycle_edges(c)) for c in cycles)
        seen["pruning"] += excluded
        seen["several mirrors"] += len({*mirrors} - {tuple(range(question.n))}) > 1

    run()
    assert min(seen["pruning"], seen["several mirrors"]) >= 10, seen


@pytest.mark.parametrize("n", [5, 7, 8, 9])
def test_a_degree_fact_says_exactly_two(n: int) -> None:
    """Both encodings, direct and by counters (7 and more edges at a vertex), on a star."""
    question = cycle_question(complete(n))
    cnf = write_cnf(question, [DegreeFact(0)])
    clauses = check_formula(twin(question), cnf)
    assert (b"p cnf %d " % question.m in cnf) == (n <= 7)
    star = [(0, v) for v in range(1, n)]
    for size in range(len(star) + 1):
        for chosen in combinations(star, size):
            assert is_satisfied(clauses, question, frozenset(chosen)) == (size == 2)


PETERSEN_QUESTION = cycle_question(PETERSEN)
K34 = cycle_question(join(3, 4), [(0, 3)])


def formula(question: Question, head: str) -> bytes:
    """Return the CNF file for facts given as text; clauses by the search's encoder."""
    facts: list[Fact] = []
    for line in head.splitlines():
        name, *rest = line.split()
        numbers = tuple(map(int, rest))
        match name:
            case "degree":
                facts.append(DegreeFact(numbers[0]))
            case "cut":
                facts.append(CutFact(numbers))
            case "required":
                facts.append(RequiredFact((numbers[0], numbers[1])))
            case "mirror":
                facts.append(MirrorFact(numbers[0], numbers[1:]))
    return write_cnf(question, facts)


GOOD_FACTS = "degree 0\ndegree 3\ncut 0 3\ncut 1\nrequired 0 3\nmirror 3 0 2 1 3 4 5 6\n"
GOOD_CNF = formula(K34, GOOD_FACTS)


def test_a_formula_is_accepted() -> None:
    clauses = check_formula(twin(K34), GOOD_CNF)
    assert b" %d\n" % len(clauses) in GOOD_CNF
    assert len(clauses) == len(GOOD_CNF.splitlines()) - len(GOOD_FACTS.splitlines()) - 1


@pytest.mark.parametrize(
    ("old", "new", "reason"),
    [
        ("c fact degree 0\n", "", "other ones"),
        ("c fact degree 0\n", "c fact degree 0\nc fact degree 0\n", "doubled"),
        ("degree 0", "degree 3", "doubled|other ones"),
        ("degree 0", "degree 4", "not in their order|other ones"),
        ("degree 0", "degree 7", "not in the graph"),
        ("degree 0", "degree -1", "not in the graph"),
        ("degree 0", "degree 00", "plain form"),
        ("degree 0", "degree +0", "plain form"),
        ("degree 0", "degree 0 1", "not a fact"),
        ("degree 0", "degree", "not a fact"),
        ("degree 0", "degree  0", "plain form"),
        ("degree 0", "degree x", "plain form"),
        ("degree 0", "clique 0", "not a fact"),
        ("c fact degree 0", "c Fact degree 0", "not a fact"),
        ("cut 0 3", "cut 3 0", "not sorted"),
        ("cut 0 3", "cut 0 0", "not sorted"),
        ("cut 0 3", "cut 0 1 2 3 4 5 6", "is everything"),
        ("cut 0 3", "cut 0 4", "other ones"),
        ("required 0 3", "required 0 4", "not a required edge"),
        ("required 0 3", "required 3 0", "not a required edge"),
        ("required 0 3", "required 0", "not a fact"),
        ("mirror 3", "mirror 0", "not a fact"),
        ("mirror 3", "mirror -3", "not a fact"),
        ("mirror 3", "mirror 2", "other ones|other variables"),
        ("0 2 1 3 4 5 6", "0 2 2 3 4 5 6", "onto itself"),
        ("0 2 1 3 4 5 6", "0 2 1 3 4 5", "not a fact"),
        ("0 2 1 3 4 5 6", "1 0 2 3 4 5 6", "onto itself"),
        ("0 2 1 3 4 5 6", "3 2 1 0 4 5 6", "onto itself"),
        ("p cnf", "p  cnf", "other variables"),
        ("p cnf", "p dnf", "other variables"),
        ("p cnf", "c cnf", "other variables"),
        ("p cnf 1", "p cnf 2", "other variables"),
        ("\n1 2 3 0\n", "\n1 2 3 0\n1 2 3 0\n", "other ones|other variables"),
        ("\n", "\r\n", "plain form|other"),
        ("c fact cut 0 3\nc fact cut 1\nc fact required 0 3\n",
         "c fact required 0 3\nc fact cut 0 3\nc fact cut 1\n", "not in their order|other ones"),
    ],
)  # fmt: skip
def test_other_formulas_are_rejected(old: str, new: str, reason: str) -> None:
    text = GOOD_CNF.decode()
    assert old in text or old == "\n1 2 3 0\n"
    if old == "\n1 2 3 0\n":
        old = re.search(r"\n[-0-9 ]+ 0\n", text)[0]  # type: ignore[index]
        new = old + old[1:]
    with pytest.raises(Rejected, match=reason):
        check_formula(twin(K34), text.replace(old, new).encode())


def test_short_files_are_rejected() -> None:
    longer = (GOOD_CNF + b"\n", GOOD_CNF + b"1 0\n")
    for cnf in (b"", b"p cnf 12 1\n", GOOD_CNF[:-1], b"\xff", *longer):
        with pytest.raises(Rejected):
            check_formula(twin(K34), cnf)


def test_a_proof_that_starts_from_an_empty_clause() -> None:
    """A cut that no edge leaves is the empty clause: one step says so."""
    question = cycle_question(ring(0, 1, 2) + ring(3, 4, 5))
    cnf = formula(question, "cut 0 1 2\n")
    assert cnf.endswith(b"p cnf 6 1\n0\n")
    body = {"clauses": 1, "steps": 1, "cnf": "", "lrat": "", "drat": ""}
    assert judge(question, body, {"cnf": cnf, "lrat": b"2 0 1 0\n", "drat": b"0\n"})
    assert not judge(question, body, {"cnf": cnf, "lrat": b"2 0 1 0\n", "drat": b"0\n0\n"})
    assert not judge(question, body, {"cnf": cnf, "lrat": b"2 0 1 0\n", "drat": b""})
    assert not judge(question, body, {"cnf": cnf, "lrat": b"", "drat": b""})
    joined = cycle_question([*ring(0, 1, 2), *ring(3, 4, 5), (0, 3), (1, 4)])
    assert not judge(joined, body, {"cnf": cnf, "lrat": b"2 0 1 0\n", "drat": b"0\n"})


def test_a_mirror_for_a_graph_without_that_symmetry_is_rejected() -> None:
    found = find(PETERSEN_QUESTION, automorphisms(PETERSEN_QUESTION)[1:4])
    assert found is not None
    files = {form: getattr(found, form) for form in FILES}
    assert judge(PETERSEN_QUESTION, body_of(found), files)
    for e in combinations(range(10), 2):
        if e not in PETERSEN_QUESTION.edge_set:
            more = Question(10, tuple(sorted({*PETERSEN_QUESTION.edges, e})))
            assert not judge(more, body_of(found), files)
