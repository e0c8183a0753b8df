"""The texts of `render_reason`: word for word, and on random questions."""

from __future__ import annotations

import gzip
import json
import re
from itertools import pairwise
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.checker import check_line
from certify.errors import ContradictionError
from certify.evidence.base import count_integers
from certify.graph.graph import Graph
from certify.graph.question import Ends, Question, build_cycle_question, build_path_question
from certify.report.explain import render_reason
from certify.report.words import Words
from tests.report import examples, texts

record = examples.record

SQUARES_15 = (8, 1, 15, 10, 6, 3, 13, 12, 4, 5, 11, 14, 2, 7, 9)
WITNESS = {"order": [v - 1 for v in SQUARES_15]}
ENDS = {"form": "crowded", "vertex": 18, "neighbours": [15, 16, 17]}
CENTRE = {"form": "separator", "set": [5, 6, 9, 10, 16]}
COUNTING_CYCLE = {
    "vertex": [[1, -1], [7, 1], [8, 1]],
    "cut": [[[0, 1, 6, 7, 8, 9], 1]],
    "parity": [],
}
COUNTING_PATH = {
    "vertex": [[1, 1], [6, -1], [8, 1], [10, 1], [13, -1], [17, 1], [21, 1], [22, -1]],
    "cut": [],
    "parity": [],
}
PETERSEN = {
    "nodes": [["vertex", 0], ["vertex", 1], ["forced"], ["forced"], ["like", 1, 0]],
    "symmetries": [[0, 1, 2, 7, 5, 4, 6, 3, 9, 8, 10]],
}
SWEEP = {
    "order": [8, 1, 3, 6, 2, 5, 7, 0, 9, 4],
    "states": [3, 4, 4, 4, 4, 4, 1, 0, 0, 0],
    "digest": "caac072afe99ffe85d75694698eff1b810286123c0c17521f400f46e7764754d",
}
SQUARES = b"""structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "square(a + b)"
[instances]
n = "2..24"
"""
KNIGHTS = b"""structure = "hamiltonian-%s"
[graph]
vertices = { x = "1..m", y = "1..n" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
[instances]
m = "3..4"
n = "3..4"
"""


def test_witness() -> None:
    graph = examples.squares(15)
    line = record(graph, {"n": 15}, "witness", WITNESS, "exists")
    assert all(a + b in (4, 9, 16, 25) for a, b in pairwise(SQUARES_15))
    assert render_reason(graph, build_path_question(graph), line) == texts.WITNESS


def test_three_ends() -> None:
    graph = examples.squares(18)
    line = record(graph, {"n": 18}, "obstruction", ENDS)
    assert render_reason(graph, build_path_question(graph), line) == texts.ENDS


def test_separator_of_the_four_by_four_board() -> None:
    graph = examples.knights(4, 4)
    line = record(graph, {"m": 4, "n": 4}, "obstruction", CENTRE)
    assert render_reason(graph, build_path_question(graph), line) == texts.SEPARATOR


def test_colour_classes_of_the_herschel_graph() -> None:
    # The Herschel graph is bipartite with classes of 5 and 6 (Coxeter, Regular Polytopes, section
    # 1.1; from memory).
    graph = examples.herschel()
    line = record(graph, {}, "obstruction", {"form": "independent", "set": [0, 2, 5, 6, 8, 9]})
    assert render_reason(graph, build_cycle_question(graph), line) == texts.COLOURS


def test_counting_on_a_cycle() -> None:
    graph = examples.knights(3, 4)
    line = record(graph, {"m": 3, "n": 4}, "counting", COUNTING_CYCLE)
    assert render_reason(graph, build_cycle_question(graph), line) == texts.COUNTING_CYCLE


def test_counting_on_a_path() -> None:
    graph = examples.squares(22)
    line = record(graph, {"n": 22}, "counting", COUNTING_PATH)
    assert render_reason(graph, build_path_question(graph), line) == texts.COUNTING_PATH


def test_weights_on_a_separator_are_told_by_their_classical_name() -> None:
    graph = examples.squares(20)
    body = {"vertex": [[4, -1], [6, -1], [17, 1], [20, -1]], "parity": []}
    body["cut"] = [[[1, 10, 13], 1], [[8, 15, 19], 1]]
    text = render_reason(
        graph, build_path_question(graph), record(graph, {"n": 20}, "counting", body)
    )
    assert "Remove the two vertices 5 and 7. Four pieces are left" in text
    assert "weight" not in text


def test_cases() -> None:
    # A Hamiltonian path between neighbours would close to a cycle; the Petersen graph has none.
    graph = examples.petersen()
    question = build_path_question(graph, ends=Ends((0, 1)))
    line = record(graph, {}, "cases", PETERSEN)
    assert render_reason(graph, question, line) == texts.CASES


def test_sweep() -> None:
    graph = examples.knights(3, 3)
    line = record(graph, {"m": 3, "n": 3}, "sweep", SWEEP)
    assert render_reason(graph, build_path_question(graph), line) == texts.SWEEP


def test_clauses() -> None:
    graph = examples.squares(31)
    files = {kind: f"clauses/17.{kind}.gz" for kind in ("cnf", "lrat", "drat")}
    line = record(graph, 17, "clauses", {"clauses": 40, "steps": 12, **files})
    cnf = gzip.compress(b"c fact degree 0\nc fact degree 1\nc fact cut 0 3\np cnf 2 1\n1 0\n")
    question = build_cycle_question(graph)
    assert render_reason(graph, question, line, {files["cnf"]: cnf}.__getitem__) == texts.CLAUSES
    assert "about degrees" not in render_reason(graph, question, line)


def test_open() -> None:
    graph = examples.squares(40)
    line = record(graph, {"n": 40}, "none", {}, "open")
    question = build_path_question(graph, ends=Ends((0,)))
    assert render_reason(graph, question, line) == texts.OPEN


@pytest.mark.parametrize(
    ("claim", "key", "size", "kind", "body"),
    [
        (SQUARES, {"n": 18}, (18, 18), "obstruction", ENDS),
        (SQUARES, {"n": 22}, (22, 26), "counting", COUNTING_PATH),
        (KNIGHTS % b"path", {"m": 4, "n": 4}, (16, 24), "obstruction", CENTRE),
        (KNIGHTS % b"cycle", {"m": 3, "n": 4}, (12, 14), "counting", COUNTING_CYCLE),
        (KNIGHTS % b"path", {"m": 3, "n": 3}, (9, 8), "sweep", SWEEP),
    ],
)
def test_the_examples_are_accepted_by_the_checker(
    claim: bytes, key: dict[str, int], size: tuple[int, int], kind: str, body: dict[str, Any]
) -> None:
    length = sum(SWEEP["states"]) if kind == "sweep" else count_integers(body)
    line = {
        **{"instance": key, "vertices": size[0], "edges": size[1], "answer": "impossible"},
        **{"kind": kind, "evidence": body, "length": length},
    }
    data = json.dumps(line, sort_keys=True, separators=(",", ":")).encode() + b"\n"
    verdict = check_line(claim, key, data, {})
    assert verdict.holds, verdict.reason


@pytest.mark.parametrize(
    ("kind", "body"),
    [
        ("obstruction", {"form": "leaf", "vertex": 0}),
        ("obstruction", {"form": "crowded", "vertex": 0, "neighbours": [1, 4, 5]}),
        ("obstruction", {"form": "separator", "set": [0, 1, 2]}),
        ("obstruction", {"form": "independent", "set": [0, 2, 8, 9]}),
        ("obstruction", {"form": "ring", "vertices": [0, 1, 2, 3, 4]}),
        ("counting", {"vertex": [[0, 1]], "cut": [], "parity": []}),
        ("cases", {"nodes": [["forced"]], "symmetries": []}),
        ("cases", {"nodes": [["edge", 0, 1], ["forced"], ["forced"]], "symmetries": []}),
    ],
)
def test_what_shows_nothing_is_not_explained(kind: str, body: dict[str, Any]) -> None:
    graph = examples.petersen()
    line = record(graph, {}, kind, body)
    with pytest.raises(ContradictionError):
        render_reason(graph, build_cycle_question(graph), line)


@pytest.mark.parametrize(
    ("question", "body", "expected"),
    [
        (Question(2, ((0, 1),)), {"form": "small"}, "The graph has two vertices; a cycle has"),
        (Question(3, (), absent=True), {"form": "absent"}, "names a required edge that this"),
        (
            Question(4, ((0, 1), (0, 2), (0, 3), (1, 2), (2, 3)), frozenset({(0, 2)})),
            {"form": "crowded", "vertex": 0, "neighbours": [1, 2, 3]},
            "uses the three edges a-b, a-c and a-d at vertex a: a-b, because b has only the "
            "neighbours a and c; a-c is required; a-d, because d has",
        ),
        (
            Question(5, ((0, 1), (0, 2), (1, 2), (2, 3), (2, 4), (3, 4))),
            {"form": "ring", "vertices": [0, 1, 2]},
            "close the cycle a, b, c, a, and miss the other two vertices",
        ),
        (
            Question(5, ((0, 1), (0, 2), (1, 2), (2, 3), (2, 4), (3, 4))),
            {"form": "separator", "set": [2]},
            "Vertex c is a cut vertex: without it two pieces are left, {a, b} and {d, e}. A cycle",
        ),
        (
            Question(4, ((0, 1), (0, 2), (1, 2), (2, 3)), frozenset({(0, 1), (0, 2), (1, 2)})),
            {"form": "separator", "set": [0, 1, 2]},
            "That is three edges between the three vertices a, b and c, but a cycle that visits "
            "other vertices too uses at most two between them.",
        ),
    ],
)
def test_forms(question: Question, body: dict[str, Any], expected: str) -> None:
    graph = Graph(tuple("abcde"[: question.n]), question.edges)
    text = render_reason(graph, question, record(graph, {}, "obstruction", body))
    assert expected in " ".join(text.split())


def test_path_forms() -> None:
    graph = Graph(tuple("abcd"), ((0, 1), (1, 2), (1, 3), (2, 3)))
    both = build_path_question(graph, ends=Ends((1, 3)))
    leaf = record(graph, {}, "obstruction", {"form": "leaf", "vertex": 0})
    cut = record(graph, {}, "obstruction", {"form": "separator", "set": [1]})
    same = build_path_question(graph, ends=Ends((2, 2)))
    twice = record(graph, {}, "obstruction", {"form": "leaf", "vertex": 4})
    said = [
        " ".join(render_reason(graph, question, line).split())
        for question, line in ((both, leaf), (both, cut), (same, twice))
    ]
    assert "Vertex a cannot be an end of the path, so the path needs two edges" in said[0]
    assert "Of these, the single vertex a contains no possible end of the path." in said[1]
    assert "by visiting vertex b twice" in said[1]
    assert "begins and ends at c" in said[2]


def test_long_trees_are_outlined() -> None:
    graph = examples.petersen()
    nodes = [["edge", 0, 1]] * 100 + [["forced"]] * 101
    text = render_reason(
        graph,
        build_cycle_question(graph),
        record(graph, {}, "cases", {"nodes": nodes, "symmetries": []}),
    )
    assert "distinguishes 101 cases, which are closed 101 by forced edges" in text
    assert "too long to be read" in text


@pytest.mark.parametrize(
    ("labels", "expected"),
    [
        ((3, 6), "3-6"),
        ((-1, 2), "{-1, 2}"),
        (((1, 2), (3, 3)), "(1,2)-(3,3)"),
        (("left", "right"), "left-right"),
        (("a-b", "c"), '{"a-b", c}'),
        (("(0, 1)", "(1, 0)"), "(0,1)-(1,0)"),
        (("a b", "x\n"), '{"a b", "x\\n"}'),
    ],
)
def test_names_of_edges(labels: tuple[Any, Any], expected: str) -> None:
    graph = Graph(labels, ((0, 1),))
    words = Words(graph, build_cycle_question(graph))
    assert words.edge((0, 1)).strip("\ue000\ue001") == expected


@st.composite
def graphs(draw: st.DrawFn) -> Graph:
    """Draw a sparse graph whose labels cannot be taken for anything else."""
    n = draw(st.integers(3, 8))
    pairs = [(u, v) for u in range(n) for v in range(u + 1, n)]
    edges = draw(st.sets(st.sampled_from(pairs), max_size=n + 3))
    return Graph(tuple(f"v{v}" for v in range(n)), tuple(sorted(edges)))


@settings(max_examples=150, deadline=None)
@given(graphs(), st.integers(0, 2), st.booleans(), st.data())
def test_obstructions_of_random_questions(
    graph: Graph, ends: int, is_path: bool, data: st.DataObject
) -> None:
    required = data.draw(st.sets(st.sampled_from(graph.edges), max_size=2)) if graph.edges else ()
    where = Ends(tuple(range(ends)))
    if is_path:
        question = build_path_question(graph, ends=where, required=required)
    else:
        question = build_cycle_question(graph, required=required)
    bodies: list[dict[str, Any]] = [
        {"form": "leaf", "vertex": v} for v in range(question.n) if len(question.neighbours[v]) < 2
    ]
    chosen = sorted(data.draw(st.sets(st.integers(0, question.n - 1), max_size=4)))
    bodies += [{"form": form, "set": chosen} for form in ("separator", "independent")]
    bodies += [
        {"form": "crowded", "vertex": v, "neighbours": list(near[:3])}
        for v, near in enumerate(question.neighbours)
        if len(near) > 2
    ]
    for body in bodies:
        try:
            text = render_reason(graph, question, record(graph, {"n": 1}, "obstruction", body))
        except ContradictionError:
            continue
        assert "apex" not in text
        assert set(re.findall(r"v\d+", text)) <= set(graph.labels)
        assert "\ue000" not in text
        assert "\xa0" not in text
        assert max(map(len, text.splitlines())) <= 88
        assert " ".join(text.split()).endswith("says nothing about other instances.")
