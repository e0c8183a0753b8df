"""What the kernel's program accepts is true by exhaustion, and is what the checker accepts."""

from __future__ import annotations

import random
from collections import Counter
from itertools import combinations
from typing import Any

from hypothesis import assume, given, settings
from hypothesis import strategies as st

from certify.graph.graph import Edge, Graph
from certify.graph.question import Question, build_cycle_question, build_path_question
from certify.report.kernel.ask import Kernel
from certify.search.sweep import sweep_along
from tests.brute import has_cycle
from tests.checker.drawn import countings, obstructions, questions, symmetric_questions, trees
from tests.checker.questions import holds
from tests.checker.test_truth import AMPLE, CHECKS, exists, real_evidence
from tests.corrupt import corrupt_json
from tests.kernel.asking import refutes

MANY = settings(max_examples=300)


def sweep(order: list[int]) -> dict[str, Any]:
    """Return a sweep; its numbers are not for the kernel, which computes them."""
    return {"order": order, "states": [], "digest": ""}


def test_sweeps_of_all_small_graphs(kernel: Kernel) -> None:
    """Every labelled graph on up to 5 vertices."""
    seen: Counter[bool] = Counter()
    chance = random.Random(5)
    for n in (3, 4, 5):
        pairs = list(combinations(range(n), 2))
        for chosen in range(1 << len(pairs)):
            edges = tuple(e for i, e in enumerate(pairs) if chosen >> i & 1)
            question = build_cycle_question(Graph(tuple(range(n)), edges))
            order = chance.sample(range(n), n)
            accepted = refutes(kernel, question, "sweep", sweep(order))
            assert accepted != has_cycle(question), (edges, order)
            seen[accepted] += 1
    # Labelled graphs with a Hamiltonian cycle on 3, 4, 5 vertices: 1 + 10 + 218 (OEIS A326208,
    # its number from memory; the values are those that brute force gives).
    assert seen[False] == 229


def draw_question(chance: random.Random) -> Question:
    """Draw a question of any sort about a random graph on 3 to 8 vertices."""
    n = chance.randint(3, 8)
    density = chance.choice([0.3, 0.5, 0.6, 0.7, 0.9])
    edges = tuple(e for e in combinations(range(n), 2) if chance.random() < density)
    required = chance.sample(edges, min(len(edges), chance.choice([0, 0, 1, 2])))
    graph = Graph(tuple(range(n)), edges)
    if chance.random() < 0.7:
        return build_cycle_question(graph, required=required)
    return build_path_question(graph, required=required)


def test_sweeps_of_thousands_of_random_graphs(kernel: Kernel) -> None:
    seen: Counter[bool] = Counter()
    chance = random.Random(2026)
    for _ in range(4000):
        question = draw_question(chance)
        order = chance.sample(range(question.n), question.n)
        accepted = refutes(kernel, question, "sweep", sweep(order))
        assert accepted != has_cycle(question), (question, order)
        seen[accepted] += 1
    assert min(seen.values()) >= 1000, seen


def draw_weights(chance: random.Random, question: Question) -> dict[str, Any]:
    """Draw weights, cuts and parities, with more of what holds than chance would give."""
    kept: set[int] = set()
    for v in chance.sample(range(question.n), question.n):
        kept |= {v} - {w for u in kept for w in question.neighbours[u]}
    weights = [1 if v in kept else -1 for v in range(question.n)]
    if chance.random() < 0.3:
        weights = [chance.choice([-2, -1, 0, 1, 2]) for _ in range(question.n)]
    cuts, parities = [], []
    for _ in range(chance.choice([0, 0, 1, 2])):
        members = sorted(chance.sample(range(question.n), chance.randint(1, question.n - 1)))
        leaving = [e for e in question.edges if (e[0] in members) != (e[1] in members)]
        if leaving and chance.random() < 0.5:
            flipped = sorted(chance.sample(leaving, min(len(leaving), chance.choice([1, 1, 2, 3]))))
            parities.append([members, [list(e) for e in flipped], chance.randint(1, 2)])
        else:
            cuts.append([members, chance.randint(1, 2)])
    vertex = [[v, y] for v, y in enumerate(weights) if y]
    return {"vertex": vertex, "cut": cuts, "parity": parities}


def test_countings_of_thousands_of_random_graphs(kernel: Kernel) -> None:
    seen: Counter[str] = Counter()
    chance = random.Random(1859)
    for _ in range(4000):
        question = draw_question(chance)
        body = draw_weights(chance, question)
        accepted = refutes(kernel, question, "counting", body)
        assert accepted == holds(CHECKS["counting"], question, body), (question, body)
        assert not (accepted and has_cycle(question)), (question, body)
        seen[f"{accepted}"] += 1
        seen[f"cut {accepted and bool(body['cut'])}"] += 1
        seen[f"parity {accepted and bool(body['parity'])}"] += 1
    assert min(seen["True"], seen["False"]) >= 500, seen
    assert min(seen["cut True"], seen["parity True"]) >= 50, seen


def agree(kernel: Kernel, question: Question, kind: str, body: Any) -> bool:
    """Assert that kernel and checker say the same of evidence; return what they say."""
    accepted = refutes(kernel, question, kind, body)
    if accepted and kind == "sweep":
        # The checker compares the numbers too; the kernel knows only the order.
        found = sweep_along(question, body["order"], budget=AMPLE)
        body = found.body()  # type: ignore[union-attr]
    assert accepted == holds(CHECKS[kind], question, body), (kind, body)
    assert not (accepted and exists(question))
    return accepted


def test_drawn_evidence_is_judged_alike(kernel: Kernel) -> None:
    seen: Counter[str] = Counter()

    @MANY
    @given(questions(most=7), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        body = data.draw(obstructions(question))
        seen[f"{body['form']} {agree(kernel, question, 'obstruction', body)}"] += 1
        if question.n >= 3 and not question.absent:
            weights = data.draw(countings(question))
            seen[f"counting {agree(kernel, question, 'counting', weights)}"] += 1

    @MANY
    @given(st.one_of(questions(least=5, most=7), *[symmetric_questions()] * 4), st.data())
    def run_trees(question: Question, data: st.DataObject) -> None:
        assume(not question.absent)
        body = data.draw(trees(question))
        like = any(node[0] == "like" for node in body["nodes"])
        seen[f"{'like' if like else 'plain'} {agree(kernel, question, 'cases', body)}"] += 1

    run()
    run_trees()
    for form in ("absent", "small", "leaf", "ring", "separator", "independent"):
        assert seen[f"{form} True"] >= 1, seen
        assert seen[f"{form} False"] >= 5, seen
    for kind in ("counting", "plain", "like"):
        assert min(seen[f"{kind} True"], seen[f"{kind} False"]) >= 5, seen


def test_corrupted_twins_are_judged_alike(kernel: Kernel) -> None:
    seen: Counter[str] = Counter()

    @settings(max_examples=150)
    @given(questions(least=1, most=7), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        for kind, body in real_evidence(question):
            assert agree(kernel, question, kind, body)
            for _ in range(4):
                other = data.draw(corrupt_json(body))
                seen[f"{kind} {agree(kernel, question, kind, other)}"] += 1

    run()
    for kind in CHECKS:
        assert seen[f"{kind} False"] >= 30, seen


def test_evidence_for_another_question_is_judged_alike(kernel: Kernel) -> None:
    """Missing edges, and edges too many: the same evidence after the graph has changed."""
    seen: Counter[str] = Counter()

    @settings(max_examples=150)
    @given(questions(least=3, most=7), st.data())
    def run(question: Question, data: st.DataObject) -> None:
        if question.apex is not None:
            pairs = combinations(range(question.n - 1), 2)
        else:
            pairs = combinations(range(question.n), 2)
        changed: Edge = data.draw(st.sampled_from(list(pairs)))
        edges = question.edge_set ^ {changed}
        kept = question.required & edges
        other = Question(question.n, tuple(sorted(edges)), kept, question.apex, question.absent)
        for kind, body in real_evidence(question):
            seen[f"{kind} {agree(kernel, other, kind, body)}"] += 1

    run()
    for kind in CHECKS:
        assert min(seen[f"{kind} True"], seen[f"{kind} False"]) >= 3, seen
