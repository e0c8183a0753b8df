"""Whatever the checker accepts is true by exhaustion.

Three sources of evidence: what the finders find, the same with a part corrupted, and
evidence drawn at random (drawn.py). Each property also counts, over all its examples,
how much was accepted and refused: a property that accepts nothing shows nothing.
"""

from __future__ import annotations

import math
from collections import Counter
from itertools import pairwise
from typing import Any

from hypothesis import assume, given, settings
from hypothesis import strategies as st

from certify.checker.cases import check_cases
from certify.checker.counting import check_counting
from certify.checker.obstruction import check_obstruction
from certify.checker.sweep import check_sweep
from certify.checker.witness import check_witness
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.cases import find_cases
from certify.search.counting import find_counting
from certify.search.obstruction import find_obstruction
from certify.search.sweep import sweep_along
from tests.brute import hamiltonian_cycles, has_cycle
from tests.checker.drawn import (
    countings,
    obstructions,
    ordered,
    questions,
    symmetric_questions,
    trees,
)
from tests.checker.questions import PETERSEN as PETERSEN_EDGES
from tests.checker.questions import Check, cycle_question, holds, knight, path_question
from tests.corrupt import corrupt_json

AMPLE = Budget(math.inf)
CHECKS: dict[str, Check] = {
    "obstruction": check_obstruction,
    "counting": check_counting,
    "cases": check_cases,
    "sweep": check_sweep,
}


def exists(question: Question) -> bool:
    """Return whether the object asked for exists, by exhaustion."""
    return question.is_one_vertex_path or has_cycle(question)


def judge(kind: str, question: Question, body: Any) -> bool:
    """Check evidence that there is nothing; say whether it is accepted, which must be true."""
    accepted = holds(CHECKS[kind], question, body)
    if accepted:
        assert not exists(question), (kind, body)
    return accepted


def test_witnesses_are_accepted_exactly_when_they_are_true() -> None:
    seen: Counter[bool] = Counter()

    @settings(max_examples=200)
    @given(questions(most=6), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        apex = question.apex
        count = question.n - (apex is not None)
        order = data.draw(st.permutations(range(count)))
        cycles = list(hamiltonian_cycles(question))
        if cycles:
            cycle = data.draw(st.sampled_from(cycles))
            start = cycle.index(question.n - 1) if apex is not None else 0
            order = [*cycle[start:], *cycle[:start]][question.n - count :]
        steps = list(pairwise(order))
        if apex is None:
            steps += [(order[-1], order[0])] if order else []
        else:
            steps += [(apex, v) for v in order[:1] + order[-1:]]
        used = {ordered(u, v) for u, v in steps}
        true = count >= (3 if apex is None else 1) and not question.absent
        true = true and question.required <= used <= question.edge_set
        assert holds(check_witness, question, {"order": list(order)}) == true
        assert not true or exists(question)
        seen[true] += 1

    run()
    assert min(seen[True], seen[False]) >= 20, seen


def test_accepted_obstructions_are_true() -> None:
    seen: Counter[str] = Counter()

    @settings(max_examples=600)
    @given(questions(most=6), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        for _ in range(3):
            body = data.draw(obstructions(question))
            seen[body["form"] if judge("obstruction", question, body) else "none"] += 1

    run()
    for form in ("leaf", "separator", "independent", "small", "absent", "crowded"):
        assert seen[form] >= 3, seen
    assert seen["none"] >= 100, seen


def test_accepted_counting_is_true() -> None:
    seen: Counter[str] = Counter()

    @settings(max_examples=500)
    @given(questions(least=3, most=7), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        for _ in range(2):
            body = data.draw(countings(question))
            accepted = judge("counting", question, body)
            for part in [key for key in ("cut", "parity") if body[key]] or ["vertex"]:
                seen[f"{part} {accepted}"] += 1
            seen[f"required {accepted and bool(question.required)}"] += 1

    run()
    for part in ("vertex", "cut", "parity", "required"):
        assert seen[f"{part} True"] >= 10, seen


def test_accepted_trees_are_true() -> None:
    seen: Counter[str] = Counter()

    @settings(max_examples=200)
    @given(st.one_of(questions(least=5, most=7), *[symmetric_questions()] * 4), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        assume(not question.absent)
        body = data.draw(trees(question))
        accepted = judge("cases", question, body)
        like = any(node[0] == "like" for node in body["nodes"])
        seen[f"{'like' if like else 'plain'} {accepted}"] += 1
        seen[f"branched {accepted and len(body['nodes']) > 1}"] += 1

    run()
    assert seen["like True"] >= 10, seen
    assert seen["like False"] >= 5, seen
    assert seen["branched True"] >= 20, seen


def test_sweeps_are_accepted_exactly_when_there_is_no_cycle() -> None:
    seen: Counter[bool] = Counter()

    @settings(max_examples=250)
    @given(questions(least=3, most=8), st.randoms(use_true_random=False))
    def run(question: Question, random: Any) -> None:
        assume(not question.absent)
        order = list(range(question.n))
        random.shuffle(order)
        found = sweep_along(question, order, budget=AMPLE)
        if isinstance(found, tuple):
            # No numbers make a sweep over a Hamiltonian cycle an accepted one.
            assert exists(question)
            body: Any = {"order": order, "states": [10**6] * question.n, "digest": ""}
            assert not judge("sweep", question, body)
        else:
            assert found is not None
            assert judge("sweep", question, found.body())
        seen[isinstance(found, tuple)] += 1

    run()
    assert min(seen.values()) >= 40, seen


def real_evidence(question: Question) -> list[tuple[str, dict[str, Any]]]:
    """Return what the finders say; all of them are deterministic."""
    found: list[tuple[str, Any]] = [("obstruction", find_obstruction(question, budget=AMPLE))]
    if question.n >= 3 and not question.absent:
        found += [
            ("counting", find_counting(question, budget=AMPLE)),
            ("cases", find_cases(question, budget=AMPLE, most_leaves=50)),
            ("sweep", sweep_along(question, range(question.n), budget=AMPLE)),
        ]
    return [(kind, item.body()) for kind, item in found if hasattr(item, "body")]


def test_found_evidence_is_accepted_and_its_corrupted_twins_are_rejected_or_true() -> None:
    seen: Counter[str] = Counter()

    @settings(max_examples=120)
    @given(questions(least=1, most=7), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        for kind, body in real_evidence(question):
            assert judge(kind, question, body), (kind, body)
            seen[kind] += 1
            for _ in range(4):
                other = data.draw(corrupt_json(body))
                seen[f"{kind} twin {other == body or judge(kind, question, other)}"] += 1

    run()
    for kind in CHECKS:
        assert seen[kind] >= 15, seen
        assert seen[f"{kind} twin False"] >= 30, seen


def test_evidence_for_one_question_is_rejected_or_true_for_another() -> None:
    """The same evidence after the graph has changed by an edge, or what is required has."""
    seen: Counter[str] = Counter()

    @settings(max_examples=150)
    @given(questions(least=3, most=7), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        u, v = sorted(data.draw(st.sets(st.integers(0, question.n - 1), min_size=2, max_size=2)))
        edges = question.edge_set ^ {(u, v)}
        required = question.required & edges if data.draw(st.booleans()) else frozenset()
        other = Question(question.n, tuple(sorted(edges)), required, question.apex, question.absent)
        for kind, body in real_evidence(question):
            seen[f"{kind} {judge(kind, other, body)}"] += 1

    run()
    for kind in CHECKS:
        assert seen[f"{kind} False"] >= 5, seen
        assert seen[f"{kind} True"] >= 3, seen


PETERSEN = cycle_question(PETERSEN_EDGES)


def test_trees_with_symmetry_and_their_corrupted_twins() -> None:
    """Petersen's graph has no Hamiltonian cycle, yet without any vertex or edge it may have."""
    found = find_cases(PETERSEN, budget=AMPLE, most_leaves=50)
    assert found is not None
    assert any(node[0] == "like" for node in found.body()["nodes"])  # type: ignore[index, union-attr]
    one_more = Question(10, tuple(sorted({*PETERSEN.edges, (0, 2)})))
    assert exists(one_more)
    assert not judge("cases", one_more, found.body())
    seen: Counter[bool] = Counter()

    @given(st.data())
    def run(data: st.DataObject) -> None:
        body = data.draw(corrupt_json(found.body()))
        seen[judge("cases", PETERSEN, body)] += 1
        assert not judge("cases", one_more, body)

    run()
    assert seen[False] >= 50, seen


def test_published_examples() -> None:
    """Petersen (1898); Schwenk, Math. Mag. 64 (1991) 325-332, for boards."""
    assert not exists(PETERSEN)
    assert not exists(cycle_question(knight(3, 4)))
    assert exists(path_question(knight(3, 4)))
    for question in (PETERSEN, cycle_question(knight(3, 4)), cycle_question(knight(4, 4))):
        kinds = {kind for kind, body in real_evidence(question) if judge(kind, question, body)}
        assert {"cases", "sweep"} <= kinds
