"""The language of paths says the same as the normal form; trees and weights are told."""

from __future__ import annotations

import json
import re
from itertools import pairwise
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence.base import Body
from certify.graph.graph import Graph, edge_between
from certify.graph.question import Ends, Question, build_cycle_question, build_path_question
from certify.report.balance import weigh
from certify.report.explain import render_reason
from certify.report.structure import measure_independent, separate
from certify.report.symmetry import tell_symmetry
from certify.report.words import Words
from certify.search.budget import Budget
from certify.search.cases import find_cases
from certify.search.counting import find_counting
from tests.brute import hamiltonian_cycles, has_cycle
from tests.report.examples import record


@st.composite
def asked(draw: st.DrawFn, *, most: int = 7) -> tuple[Graph, Question]:
    """Draw a graph, and a question about a path or a cycle in it."""
    n = draw(st.integers(3, most))
    pairs = [(u, v) for u in range(n) for v in range(u + 1, n)]
    edges = tuple(sorted(draw(st.sets(st.sampled_from(pairs), max_size=2 * n))))
    graph = Graph(tuple(f"v{v}" for v in range(n)), edges)
    required = draw(st.sets(st.sampled_from(edges), max_size=2)) if edges else ()
    if draw(st.booleans()):
        return graph, build_cycle_question(graph, required=required)
    ends = Ends(tuple(range(draw(st.integers(0, 2)))))
    return graph, build_path_question(graph, ends=ends, required=required)


@st.composite
def weights(draw: st.DrawFn, question: Question) -> dict[str, Any]:
    """Draw true facts with weights: a counting body that need not show anything."""
    n = question.n
    vertex = [[v, y] for v in range(n) if (y := draw(st.integers(-2, 2)))]
    sides = st.sets(st.integers(0, n - 1), min_size=1, max_size=n - 1)
    cuts = [[sorted(draw(sides)), draw(st.integers(1, 2))] for _ in range(draw(st.integers(0, 2)))]
    parity = []
    for _ in range(draw(st.integers(0, 2))):
        side = draw(sides)
        leaving = [e for e in question.edges if (e[0] in side) != (e[1] in side)]
        if leaving:
            marked = draw(st.sets(st.sampled_from(leaving), min_size=1))
            if len(marked) % 2 == 0:
                marked.pop()
            parity.append([sorted(side), sorted(map(list, marked)), draw(st.integers(1, 2))])
    return {"vertex": vertex, "cut": cuts, "parity": parity}


@settings(max_examples=200, deadline=None)
@given(asked(), st.data())
def test_every_path_and_cycle_keeps_the_balance(
    drawn: tuple[Graph, Question], data: st.DataObject
) -> None:
    """What the text says of any Hamiltonian path or cycle is true of all of them."""
    _, question = drawn
    body = data.draw(weights(question))
    for cycle in hamiltonian_cycles(question):
        balance = weigh(question, body)
        edges = [edge_between(u, v) for u, v in pairwise([*cycle, cycle[0]])]
        total = sum(balance.score[e] for e in edges if e[1] != question.apex)
        ends = sum(balance.end_value[u] for u, v in edges if v == question.apex)
        assert total + ends >= balance.need
        assert total <= balance.offer
        assert ends <= balance.end_offer


@settings(max_examples=200, deadline=None)
@given(asked(), st.data())
def test_weights_that_refute_still_refute_in_the_language_of_paths(
    drawn: tuple[Graph, Question], data: st.DataObject
) -> None:
    """Whenever need > offer as FORMAT.md counts them, the text's numbers collide too."""
    _, question = drawn
    body = data.draw(weights(question))
    if question.apex is not None and len(question.neighbours[question.apex]) < 2:
        return
    score = dict.fromkeys(question.edges, 0)
    need = 0
    for v, y in body["vertex"]:
        need += 2 * y
        for w in question.neighbours[v]:
            score[edge_between(v, w)] += y
    for side, odd, z in [*((s, [], z) for s, z in body["cut"]), *body["parity"]]:
        need += z * (1 - len(odd)) if odd else 2 * z
        for u, v in question.edges:
            if (u in side) != (v in side):
                score[u, v] += -z if [u, v] in odd else z
    offer = sum(s if e in question.required else max(0, s) for e, s in score.items())
    balance = weigh(question, body)
    assert balance.need - balance.offer - balance.end_offer >= need - offer


@settings(max_examples=300, deadline=None)
@given(asked(), st.data())
def test_separators_and_independent_sets_hold_as_in_the_format(
    drawn: tuple[Graph, Question], data: st.DataObject
) -> None:
    """`holds` is the condition of FORMAT.md, section 6, counted here on the normal form."""
    _, question = drawn
    chosen = data.draw(st.sets(st.integers(0, question.n - 1), max_size=question.n - 1))
    seen, pieces = set(chosen), 0
    for start in range(question.n):
        if start not in seen:
            pieces += 1
            stack = [start]
            while stack:
                v = stack.pop()
                if v not in seen:
                    seen.add(v)
                    stack.extend(question.neighbours[v])
    inside = sum(chosen.issuperset(e) for e in question.required)
    accepted = pieces > len(chosen) - inside and (bool(chosen) or pieces > 1)
    assert separate(question, chosen).holds == accepted
    joined = any(chosen.issuperset(e) for e in question.edges)
    outside = sum(chosen.isdisjoint(e) for e in question.required)
    found = measure_independent(question, chosen)
    assert (found is None) == joined
    assert found is None or found.holds == (2 * len(chosen) + outside > question.n)
    if accepted or (found is not None and found.holds):
        assert not has_cycle(question)


@settings(max_examples=80, deadline=None)
@given(asked())
def test_found_trees_and_weights_are_told(drawn: tuple[Graph, Question]) -> None:
    graph, question = drawn
    if has_cycle(question):
        return
    found = [
        find_cases(question, budget=Budget.of(10), most_leaves=30),
        find_counting(question, budget=Budget.of(10)),
    ]
    for evidence in found:
        if evidence is None:
            continue
        line = record(graph, {"n": 1}, evidence.kind, read_back(evidence.body()))
        text = render_reason(graph, question, line)
        assert "apex" not in text
        assert set(re.findall(r"v\d+", text)) <= set(graph.labels)
        assert max(map(len, text.splitlines())) <= 88


def read_back(body: Body) -> dict[str, Any]:
    """Return a body as it comes out of a file: lists, no tuples."""
    found: dict[str, Any] = json.loads(json.dumps(body))
    return found


def test_a_symmetry_that_moves_the_ends_is_told_on_paths() -> None:
    # Vertex c is joined to all others, so it can change places with the ends of the path.
    graph = Graph(tuple("abc"), ((0, 2), (1, 2)))
    words = Words(graph, build_path_question(graph))
    text = re.sub("[\ue000\ue001]", "", tell_symmetry(words, [0, 1, 3, 2]))
    assert "makes the neighbours of c on the path (their images) the new ends" in text
    assert tell_symmetry(words, [1, 0, 2, 3]).count("of the graph") == 1
