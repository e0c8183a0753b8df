"""Witnesses, obstructions, counting by hand: what is accepted, and twins rejected by reason."""

from __future__ import annotations

import copy
from typing import Any

import pytest

from certify.checker.counting import check_counting
from certify.checker.obstruction import check_obstruction
from certify.checker.witness import check_witness
from certify.graph.graph import Graph
from certify.graph.question import (
    Ends,
    Question,
    build_cycle_question,
    build_path_question,
)
from tests.brute import has_cycle
from tests.checker.questions import (
    CLAW,
    HERSCHEL,
    complete,
    cycle_question,
    graph_of,
    path_question,
    rejects,
    ring,
    twin,
)

SQUARE = cycle_question(ring(0, 1, 2, 3))
ONE = Graph((1,), ())
EMPTY = Graph((), ())


# witness


def order(*vertices: int) -> dict[str, Any]:
    return {"order": list(vertices)}


def test_witnesses_are_accepted() -> None:
    check_witness(twin(SQUARE), order(2, 3, 0, 1))
    check_witness(twin(path_question(ring(0, 1, 2)[:2])), order(0, 1, 2))
    check_witness(twin(path_question(complete(4), 2)), order(2, 0, 1, 3))
    check_witness(twin(path_question(complete(4), 2)), order(0, 1, 3, 2))
    check_witness(twin(path_question(complete(4), 2, 1)), order(1, 0, 3, 2))
    check_witness(twin(build_path_question(ONE)), order(0))
    check_witness(twin(build_path_question(ONE, ends=Ends((0, 0)))), order(0))
    check_witness(twin(cycle_question(complete(4), [(0, 2)])), order(0, 2, 1, 3))


@pytest.mark.parametrize(
    ("question", "body", "reason"),
    [
        (SQUARE, order(0, 1, 2), "has 3 vertices and not 4"),
        (SQUARE, order(0, 1, 2, 3, 3), "twice"),
        (SQUARE, order(0, 1, 2, 4), "not in the graph"),
        (SQUARE, order(0, 1, 2, -1), "not in the graph"),
        (SQUARE, order(0, 2, 1, 3), "not joined"),
        (SQUARE, {"order": [0, True, 2, 3]}, "not an integer"),
        (SQUARE, {"order": [0, 1.0, 2, 3]}, "not an integer"),
        (SQUARE, {"order": "0123"}, "not a list"),
        (SQUARE, {"order": [0, 1, 2, 3], "x": 0}, "unknown keys"),
        (SQUARE, {}, "missing"),
        (cycle_question(ring(0, 1, 2, 3)[:3]), order(0, 1, 2, 3), "not joined"),
        (cycle_question([(0, 1)]), order(0, 1), "three vertices"),
        (cycle_question(complete(4), [(0, 2)]), order(0, 1, 2, 3), r"\(0, 2\) is not used"),
        (path_question(complete(4), 2), order(0, 1, 2, 3), r"\(2, 4\) is not used"),
        (path_question(complete(4), 2, 1), order(1, 0, 2, 3), "not joined"),
        (path_question(complete(4), 2, 2), order(2, 0, 1, 3), "not joined"),
        (path_question(complete(4)), order(0, 1, 2, 3, 4), "not in the graph"),
        (build_cycle_question(EMPTY), order(), "no vertex is"),
        (build_path_question(EMPTY), order(), "no vertex is"),
        (build_cycle_question(ONE), order(0), "three vertices"),
        (build_path_question(ONE, ends=Ends((), True)), order(0), "not there"),
        (build_cycle_question(SQUARE_GRAPH := graph_of(complete(4)), absent=True),
         order(0, 1, 2, 3), "not there"),
        (build_cycle_question(SQUARE_GRAPH, forbidden=[(0, 1)]), order(0, 1, 2, 3), "not joined"),
    ],
)  # fmt: skip
def test_other_witnesses_are_rejected(question: Question, body: Any, reason: str) -> None:
    rejects(check_witness, question, body, reason)


# obstruction


def obstruction(form: str, **details: Any) -> dict[str, Any]:
    return {"form": form, **details}


TWO_TRIANGLES = ring(0, 1, 2) + ring(3, 4, 5)
BOWTIE = ring(0, 1, 2) + ring(0, 3, 4)
K23 = [(0, 2), (0, 3), (0, 4), (1, 2), (1, 3), (1, 4)]
PENDANT_RING = [*ring(0, 1, 2), (2, 3), (3, 4), (4, 5), (5, 3)]
ABSENT = build_cycle_question(graph_of(complete(4)), required=[(0, 1)], forbidden=[(0, 1)])

OBSTRUCTIONS: list[tuple[Question, dict[str, Any]]] = [
    (ABSENT, obstruction("absent")),
    (build_path_question(ONE, ends=Ends((), True)), obstruction("absent")),
    (build_path_question(ONE, required=[(0, 0)]), obstruction("absent")),
    (build_cycle_question(EMPTY), obstruction("small")),
    (build_path_question(EMPTY), obstruction("small")),
    (cycle_question([(0, 1)]), obstruction("small")),
    (cycle_question([*ring(0, 1, 2), (2, 3)]), obstruction("leaf", vertex=3)),
    (path_question(CLAW, 1, 1), obstruction("leaf", vertex=4)),
    (path_question([(0, 1), (1, 2)], 1), obstruction("crowded", vertex=1, neighbours=[0, 2, 3])),
    (cycle_question(K23), obstruction("crowded", vertex=0, neighbours=[2, 3, 4])),
    (cycle_question(complete(5), [(0, 1), (0, 2), (0, 3)]),
     obstruction("crowded", vertex=0, neighbours=[1, 2, 3])),
    (cycle_question(complete(5), ring(0, 3, 1)), obstruction("ring", vertices=[1, 0, 3])),
    (cycle_question(TWO_TRIANGLES), obstruction("ring", vertices=[0, 1, 2])),
    (cycle_question(TWO_TRIANGLES), obstruction("separator", set=[])),
    (cycle_question(BOWTIE), obstruction("separator", set=[0])),
    (cycle_question(K23), obstruction("separator", set=[0, 1])),
    (path_question(CLAW), obstruction("separator", set=[0, 4])),
    # With an edge inside the set required, two parts are one too many.
    (cycle_question([*ring(0, 1, 2), *ring(0, 1, 3)], [(0, 1)]),
     obstruction("separator", set=[0, 1])),
    (cycle_question(HERSCHEL), obstruction("independent", set=[0, 2, 5, 6, 8, 9])),
    (cycle_question(K23), obstruction("independent", set=[2, 3, 4])),
    (cycle_question([*ring(0, 2, 1, 3), (0, 1)], [(0, 1)]), obstruction("independent", set=[2, 3])),
]  # fmt: skip


def test_obstructions_are_accepted_and_true() -> None:
    for question, body in OBSTRUCTIONS:
        assert not has_cycle(question)
        check_obstruction(twin(question), body)


PATH_ONE = build_path_question(ONE)


@pytest.mark.parametrize(
    ("question", "body", "reason"),
    [
        (SQUARE, obstruction("absent"), "is in the graph"),
        (SQUARE, obstruction("small"), "not too small"),
        (PATH_ONE, obstruction("small"), "not too small"),
        (PATH_ONE, obstruction("absent"), "is in the graph"),
        (PATH_ONE, obstruction("leaf", vertex=0), "fewer than three"),
        (ABSENT, obstruction("small"), "not too small"),
        (ABSENT, obstruction("leaf", vertex=0), "absent"),
        (ABSENT, obstruction("separator", set=[]), "absent"),
        (cycle_question([(0, 1)]), obstruction("leaf", vertex=0), "fewer than three"),
        (SQUARE, obstruction("leaf", vertex=0), "has 2 neighbours"),
        (SQUARE, obstruction("leaf", vertex=4), "not in the graph"),
        (SQUARE, obstruction("leaf", vertex=False), "not an integer"),
        (SQUARE, obstruction("leaf"), "missing"),
        (SQUARE, obstruction("leaf", vertex=0, set=[]), "unknown"),
        (SQUARE, obstruction("bridge", vertex=0), "unknown form 'bridge'"),
        (SQUARE, {"form": ["leaf"], "vertex": 0}, "not a string"),
        (SQUARE, {"vertex": 0}, "not a string"),
        (SQUARE, obstruction("crowded", vertex=0, neighbours=[1, 3]), "2 neighbours"),
        (SQUARE, obstruction("crowded", vertex=0, neighbours=[1, 2, 3]), "forced"),
        (SQUARE, obstruction("crowded", vertex=0, neighbours=[1, 1, 3]), "twice"),
        (SQUARE, obstruction("crowded", vertex=0, neighbours=[3, 2, 1]), "not sorted"),
        (SQUARE, obstruction("crowded", vertex=0, neighbours=[0, 1, 3]), "forced"),
        (cycle_question(complete(5), [(0, 1), (0, 2)]),
         obstruction("crowded", vertex=0, neighbours=[1, 2, 3]), "0 and 3 .* forced"),
        (SQUARE, obstruction("ring", vertices=[0, 1, 2, 3]), "a ring of 4 vertices on 4"),
        (SQUARE, obstruction("ring", vertices=[0, 1]), "a ring of 2"),
        (SQUARE, obstruction("ring", vertices=[0, 1, 2]), "2 and 0 .* forced"),
        (cycle_question(PENDANT_RING), obstruction("ring", vertices=[2, 3, 4]), "forced"),
        (cycle_question(TWO_TRIANGLES), obstruction("ring", vertices=[0, 1, 1]), "twice"),
        (cycle_question(complete(4), ring(0, 1, 2)[:2]), obstruction("ring", vertices=[0, 1, 2]),
         "2 and 0"),
        (SQUARE, obstruction("separator", set=[]), "1 pieces are left"),
        (SQUARE, obstruction("separator", set=[0, 2]), "2 pieces are left, more than 2"),
        (SQUARE, obstruction("separator", set=[0, 1, 2, 3]), "0 pieces"),
        (SQUARE, obstruction("separator", set=[2, 0]), "not sorted"),
        (cycle_question([*ring(0, 1, 2), *ring(0, 1, 3)]), obstruction("separator", set=[0, 1]),
         "2 pieces are left, more than 2"),
        (cycle_question(complete(3), complete(3)), obstruction("separator", set=[0, 1, 2]),
         "0 pieces"),
        (SQUARE, obstruction("independent", set=[0, 2]), "fit into 4"),
        (SQUARE, obstruction("independent", set=[0, 1]), "joined to another"),
        (SQUARE, obstruction("independent", set=[]), "fit into 4"),
        (cycle_question(ring(0, 1, 2, 3), [(0, 1)]), obstruction("independent", set=[0, 2]),
         "fit into 4"),
    ],
)  # fmt: skip
def test_other_obstructions_are_rejected(question: Question, body: Any, reason: str) -> None:
    rejects(check_obstruction, question, body, reason)


# counting


def counting(vertex: Any = (), cut: Any = (), parity: Any = ()) -> dict[str, Any]:
    return {"vertex": list(vertex), "cut": list(cut), "parity": list(parity)}


def test_counting_is_accepted() -> None:
    sides = counting([[v, 1 if v in (0, 2, 5, 6, 8, 9) else -1] for v in range(11)])
    check_counting(twin(cycle_question(HERSCHEL)), sides)
    assert not has_cycle(cycle_question(HERSCHEL))
    check_counting(twin(cycle_question(TWO_TRIANGLES)), counting(cut=[[[0, 1, 2], 1]]))
    # A bridge is crossed an even number of times: not once.
    bridge = cycle_question([*TWO_TRIANGLES, (2, 3)])
    check_counting(twin(bridge), counting(cut=[[[0, 1, 2], 1]]))
    required = cycle_question([*TWO_TRIANGLES, (2, 3)], [(2, 3)])
    parity = counting(parity=[[[0, 1, 2], [[2, 3]], 5]])
    check_counting(twin(required), parity)
    rejects(check_counting, bridge, parity, "0 is needed and the edges offer 0")


K23_PLUS = counting([[0, -1], [1, -1], [2, 1], [3, 1], [4, 1]])


def test_a_required_edge_counts_as_it_is() -> None:
    question = cycle_question([*K23[:4], (0, 1), (1, 4), (0, 4)], [(0, 1)])
    body = counting([[0, -1], [1, -1], [2, 1], [3, 1], [4, 1]])
    check_counting(twin(question), body)
    # Three vertices between 0 and 1, and the edge 01 as well: with or without it, too much.
    check_counting(twin(cycle_question([*K23, (0, 1)])), K23_PLUS)
    # Two vertices between them: only the required edge is too much.
    four = [*ring(0, 2, 1, 3), (0, 1)]
    two = counting([[0, -1], [1, -1], [2, 1], [3, 1]])
    check_counting(twin(cycle_question(four, [(0, 1)])), two)
    rejects(check_counting, cycle_question(four), two, "0 is needed and the edges offer 0")


def change(path: list[Any], value: Any) -> dict[str, Any]:
    """Return a counting argument for K(2,3), with one part changed."""
    vertex = [[v, 5 * y] for v, y in K23_PLUS["vertex"]]
    body = copy.deepcopy(counting(vertex, [[[0], 1]], [[[0, 2], [[0, 3]], 1]]))
    part: Any = body
    for key in path[:-1]:
        part = part[key]
    part[path[-1]] = value
    return body


@pytest.mark.parametrize(
    ("path", "value", "reason"),
    [
        (["vertex", 0], [0, 0], "one is 0"),
        (["vertex", 0], [0, True], "not an integer"),
        (["vertex", 0], [0, 1.0], "not an integer"),
        (["vertex", 1], [0, -1], "not sorted"),
        (["vertex", 4], [5, 1], "not in the graph"),
        (["vertex", 4], [4], "1 parts"),
        (["vertex", 4], 4, "not a list"),
        (["vertex"], {}, "not a list"),
        (["cut", 0, 1], 0, "less than 1"),
        (["cut", 0, 1], -1, "less than 1"),
        (["cut", 0, 0], [], "empty or holds every vertex"),
        (["cut", 0, 0], [0, 1, 2, 3, 4], "empty or holds every vertex"),
        (["cut", 0, 0], [1, 0], "not sorted"),
        (["cut", 0, 0], [0, 0], "twice"),
        (["parity", 0, 1], [], "odd number"),
        (["parity", 0, 1], [[0, 3], [0, 4]], "odd number"),
        (["parity", 0, 1], [[0, 3], [0, 3], [0, 3]], "not sorted"),
        (["parity", 0, 1], [[0, 2]], "leave its set"),
        (["parity", 0, 1], [[3, 0]], "not an edge"),
        (["parity", 0, 1], [[0, 1]], "not an edge"),
        (["parity", 0, 1], [[0, 3, 4]], "3 parts"),
        (["parity", 0, 2], 0, "less than 1"),
        (["parity", 0, 0], [], "empty or holds every vertex"),
        (["other"], [], "unknown keys"),
        (["vertex", 2], [2, -1], "no contradiction"),
        (["vertex", 0], [0, 10**99], "no contradiction"),
    ],
)
def test_other_counting_is_rejected(path: list[Any], value: Any, reason: str) -> None:
    rejects(check_counting, cycle_question(K23), change(path, value), reason)


def test_counting_on_the_unchanged_example_is_accepted() -> None:
    check_counting(twin(cycle_question(K23)), change(["parity", 0, 2], 1))
