"""Trees and sweeps by hand: what is accepted, and twins rejected for a stated reason."""

from __future__ import annotations

from hashlib import sha256
from typing import Any

import pytest

from certify.checker.cases import check_cases
from certify.checker.sweep import check_sweep
from certify.graph.question import (
    build_path_question,
)
from tests.brute import has_cycle
from tests.checker.questions import (
    complete,
    cycle_question,
    holds,
    rejects,
    ring,
    twin,
)
from tests.checker.test_short import ABSENT, K23, ONE, SQUARE, counting, obstruction

# cases

FORCED = ["forced"]


def cases(*nodes: Any, symmetries: Any = ()) -> dict[str, Any]:
    return {"nodes": list(nodes), "symmetries": [list(p) for p in symmetries]}


def test_trees_are_accepted() -> None:
    assert not has_cycle(cycle_question(K23))
    check_cases(twin(cycle_question(K23)), cases(FORCED))
    leaf = ["obstruction", obstruction("separator", set=[0])]
    check_cases(twin(cycle_question(complete_bowtie())), cases(leaf))


def complete_bowtie() -> list[tuple[int, int]]:
    """Two complete graphs on 5 vertices that share the vertex 0."""
    return [*complete(5), *[(u + 4 if u else 0, v + 4) for u, v in complete(5)]]


BOW = cycle_question(complete_bowtie())
BOW_LEAF = ["obstruction", obstruction("separator", set=[0])]
# Exchanges the two parts, and turns one of them.
SWAP = [0, 5, 6, 7, 8, 1, 2, 3, 4]
TURN = [0, 2, 3, 4, 1, 5, 6, 7, 8]
BACK = [0, 4, 1, 2, 3, 5, 6, 7, 8]
PAIRS_AT_1 = 6


def test_branches_are_accepted_in_their_order() -> None:
    check_cases(twin(BOW), cases(["edge", 0, 1], BOW_LEAF, BOW_LEAF))
    check_cases(twin(BOW), cases(["vertex", 1], *[BOW_LEAF] * PAIRS_AT_1))
    # 0-1 used; then its image 0-2 used; then both removed.
    tree = cases(
        ["edge", 0, 1], BOW_LEAF, ["edge", 0, 2], ["like", 1, 0], BOW_LEAF,
        symmetries=[BACK],
    )  # fmt: skip
    check_cases(twin(BOW), tree)


@pytest.mark.parametrize(
    ("nodes", "symmetries", "reason"),
    [
        ([], [], "cut short"),
        ([FORCED], [], "without a contradiction"),
        ([["edge", 0, 1], BOW_LEAF], [], "cut short"),
        ([BOW_LEAF, BOW_LEAF], [], "after the end"),
        ([["edge", 0, 1], BOW_LEAF, BOW_LEAF, BOW_LEAF], [], "after the end"),
        ([["edge", 1, 0], BOW_LEAF, BOW_LEAF], [], "neither used nor removed"),
        ([["edge", 1, 5], BOW_LEAF, BOW_LEAF], [], "neither used nor removed"),
        ([["edge", 0, 0], BOW_LEAF, BOW_LEAF], [], "neither used nor removed"),
        ([["edge", 0, 9], BOW_LEAF, BOW_LEAF], [], "not in the graph"),
        ([["edge", 0, True], BOW_LEAF, BOW_LEAF], [], "not an integer"),
        ([["edge", 0], BOW_LEAF, BOW_LEAF], [], "not a node"),
        ([["edge", 0, 1], ["edge", 0, 1], BOW_LEAF, BOW_LEAF, BOW_LEAF], [], "neither used"),
        ([["vertex", 1], BOW_LEAF, BOW_LEAF], [], "cut short"),
        ([["vertex", 9], BOW_LEAF], [], "not in the graph"),
        ([["vertex"], BOW_LEAF], [], "not a node"),
        ([[]], [], "not a node"),
        ([["guess"]], [], "not a node"),
        ([[["forced"]]], [], "not a node"),
        (["forced"], [], "not a list"),
        ([["forced", 1]], [], "not a node"),
        ([["obstruction", obstruction("separator", set=[1])]], [], "pieces are left"),
        ([["obstruction", obstruction("small")]], [], "not too small"),
        ([["obstruction", obstruction("absent")]], [], "is in the graph"),
        ([["obstruction", [1]]], [], "not an object"),
        ([["counting", counting()]], [], "no contradiction"),
        ([["like", 0, 0]], [SWAP], "node 0 is not closed"),
        ([["edge", 0, 1], ["like", 0, 0], BOW_LEAF], [SWAP], "node 0 is not closed"),
        ([["edge", 0, 1], BOW_LEAF, ["like", 2, 0]], [SWAP], "node 2 is not closed"),
        ([["edge", 0, 1], BOW_LEAF, ["like", 1, 1]], [SWAP], "there is no symmetry 1"),
        ([["edge", 0, 1], BOW_LEAF, ["like", -1, 0]], [SWAP], "less than 0"),
        ([["edge", 0, 1], BOW_LEAF, ["like", 1, 0]], [SWAP], "does not map this node"),
        ([["edge", 0, 1], BOW_LEAF, ["edge", 0, 2], ["like", 1, 0], BOW_LEAF],
         [TURN], "does not map this node"),
        ([BOW_LEAF], [[0, 1, 2, 3, 4, 5]], "6 vertices and not 9"),
        ([BOW_LEAF], [[0, 1, 2, 3, 4, 5, 6, 7, 7]], "twice"),
        ([BOW_LEAF], [[1, 0, 2, 3, 4, 5, 6, 7, 8]], "does not map the question"),
        ([BOW_LEAF], [0], "not a list"),
    ],
)  # fmt: skip
def test_other_trees_are_rejected(nodes: list[Any], symmetries: list[Any], reason: str) -> None:
    rejects(check_cases, BOW, {"nodes": nodes, "symmetries": symmetries}, reason)


def test_a_symmetry_must_keep_the_required_edges() -> None:
    question = cycle_question(complete_bowtie(), [(0, 1)])
    rejects(check_cases, question, cases(BOW_LEAF, symmetries=[SWAP]), "does not map the question")
    check_cases(twin(question), cases(BOW_LEAF, symmetries=[[0, 1, 3, 2, 4, 5, 6, 7, 8]]))


def test_a_leaf_must_be_free_of_contradiction_and_a_full_vertex_has_no_branch() -> None:
    rejects(check_cases, cycle_question(K23), cases(BOW_LEAF), "close this node already")
    question = cycle_question([*complete(4), (0, 4), (1, 4)])
    rejects(check_cases, question, cases(["vertex", 4], FORCED), "its two edges already")


def test_a_graph_with_a_cycle_has_no_tree() -> None:
    for leaf in (
        FORCED,
        ["counting", counting()],
        ["obstruction", obstruction("separator", set=[0])],
    ):
        assert not holds(check_cases, SQUARE, cases(leaf))
    rejects(check_cases, build_path_question(ONE), cases(FORCED), "fewer than three")
    rejects(check_cases, ABSENT, cases(FORCED), "absent")


# sweep


def sweep(order: list[int], states: list[int], digest: str = "") -> dict[str, Any]:
    return {"order": order, "states": states, "digest": digest}


def test_the_digest_is_that_of_the_text_in_the_format() -> None:
    # K(2,3), swept from 2: the state "0 and 1 are joined". Then 3 closes a cycle.
    digest = sha256(b"1,0\n\n\n\n\n").hexdigest()
    check_sweep(twin(cycle_question(K23)), sweep([2, 3, 4, 0, 1], [1, 0, 0, 0, 0], digest))
    check_sweep(twin(cycle_question(K23)), sweep(*K23_SWEEP, K23_DIGEST))
    rejects(check_sweep, cycle_question(K23), sweep(*K23_SWEEP, K23_DIGEST.upper()), "digest")


# Swept from 0: two of 2, 3, 4 are the ends of a piece; then one is inside, and the others
# are ends; then 3 and 4 are; then 3 is left with one edge. States in the order of strings.
K23_SWEEP = ([0, 1, 2, 3, 4], [3, 3, 1, 0, 0])
K23_DIGEST = sha256(b"2,4,3;3,2,4;4,3,2\n-1,4,3;3,2,-1;4,-1,2\n4,3\n\n\n").hexdigest()


@pytest.mark.parametrize(
    ("order", "states", "reason"),
    [
        (K23_SWEEP[0], [3, 3, 1, 0, 0], "digest"),
        (K23_SWEEP[0], [3, 4, 1, 0, 0], "step 2 has 3 states and not 4"),
        (K23_SWEEP[0], [2, 3, 1, 0, 0], "more states than 2"),
        (K23_SWEEP[0], [4, 3, 1, 0, 0], "step 1 has 3 states and not 4"),
        (K23_SWEEP[0], [3, 3, 1, 0], "states has 4 numbers"),
        (K23_SWEEP[0], [3, 3, 1, 0, 0, 0], "states has 6 numbers"),
        (K23_SWEEP[0], [3, 3, 1, 0, False], "not an integer"),
        (K23_SWEEP[0], [3, 3, 1, 0, -1], "less than 0"),
        (K23_SWEEP[0], [10**12, 0, 0, 0, 0], "too many states"),
        ([0, 1, 2, 3, 3], [3, 3, 1, 0, 0], "twice"),
        ([0, 1, 2, 3], [3, 3, 1, 0, 0], "4 vertices and not 5"),
        ([1, 0, 2, 3, 5], [3, 3, 1, 0, 0], "not in the graph"),
    ],
)
def test_other_sweeps_are_rejected(order: list[int], states: list[int], reason: str) -> None:
    rejects(check_sweep, cycle_question(K23), sweep(order, states), reason)


def test_a_sweep_over_a_cycle_is_rejected_by_name() -> None:
    rejects(check_sweep, SQUARE, sweep([0, 1, 2, 3], [1, 1, 0, 0]), "finds a Hamiltonian cycle")
    rejects(check_sweep, SQUARE, sweep([0, 1, 2, 3], [1, 1, 1, 1]), "finds a Hamiltonian cycle")
    rejects(check_sweep, build_path_question(ONE), sweep([0, 1], [0, 0]), "fewer than three")


def test_a_closed_cycle_that_leaves_out_a_required_edge_is_none() -> None:
    """Once the checker took the cycle 0 2 1 3 for the answer, though 2-3 is required."""
    question = cycle_question([*ring(0, 2, 1, 3), (2, 3)], [(2, 3)])
    assert not has_cycle(question)
    digest = sha256(b"3,2\n\n\n\n").hexdigest()
    check_sweep(twin(question), sweep([0, 1, 2, 3], [1, 0, 0, 0], digest))
