"""Kind `cases`: a tree of cases, every leaf of which is closed.

Sound by induction from the leaves up: for any Hamiltonian cycle H that fits a
state, forced moves keep it fitting (forced.py); at an edge H uses the edge or
not, at a vertex H uses exactly one pair of the edges left, which contains the
used ones; so H fits one of the children. At a leaf no H fits: because the
forced moves contradict, because of an obstruction or counting argument for the
question of that state, or by symmetry (see `_check_like`).
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations
from math import comb
from typing import Any

from .counting import check_counting
from .forced import State, question_of
from .graphs import Edge, Question, edge, is_automorphism, need_question_of_cycle
from .obstruction import check_obstruction
from .strict import (
    Rejected,
    need_integer,
    need_keys,
    need_list,
    need_object,
    need_permutation,
    need_vertex,
)

Assumptions = tuple[frozenset[Edge], frozenset[Edge]]
NONE: Assumptions = (frozenset(), frozenset())


@dataclass
class _Branch:
    """A branching node whose children are being read; the last of `children` comes next."""

    number: int
    state: State
    children: list[Assumptions]
    assumed: Assumptions


def check_cases(question: Question, body: dict[str, Any]) -> None:
    """Accept a tree, given in preorder, in which every leaf is closed."""
    need_question_of_cycle(question)
    need_keys(body, {"nodes", "symmetries"}, "cases")
    symmetries = []
    for item in need_list(body["symmetries"], "symmetries"):
        image = need_permutation(item, question.n, "symmetry")
        if not is_automorphism(question, image):
            raise Rejected("a symmetry does not map the question onto itself")
        symmetries.append(image)
    nodes = need_list(body["nodes"], "nodes")
    closed: dict[int, Assumptions] = {}
    path: list[_Branch] = []
    state, assumed = State(question), NONE
    for number, node in enumerate(nodes):
        if number > 0:
            if not path:
                raise Rejected(f"node {number} comes after the end of the tree")
            branch = path[-1]
            used, removed = branch.children.pop()
            state = branch.state.assume(sorted(used), sorted(removed))
            assumed = (branch.assumed[0] | used, branch.assumed[1] | removed)
        try:
            most = len(nodes) - number - 1
            children = _check_node(question, state, node, closed, symmetries, most)
        except Rejected as error:
            raise Rejected(f"node {number}: {error}") from None
        if children:
            path.append(_Branch(number, state, children[::-1], assumed))
            continue
        closed[number] = assumed
        while path and not path[-1].children:
            done = path.pop()
            closed[done.number] = done.assumed
    if path or not nodes:
        raise Rejected("the tree is cut short")


def _check_node(
    question: Question,
    state: State,
    node: object,
    closed: dict[int, Assumptions],
    symmetries: list[list[int]],
    most: int,
) -> list[Assumptions]:
    """Return the assumptions of a node's children; none, when the node is a closed leaf.

    most: how many nodes follow, and so how many children there may be.
    """
    name, *parts = need_list(node, "node") or [None]
    if name == "forced" and not parts:
        if not state.contradiction:
            raise Rejected("the forced moves end without a contradiction")
        return []
    if state.contradiction:
        raise Rejected("the forced moves close this node already")
    if name in ("obstruction", "counting") and len(parts) == 1:
        check = check_obstruction if name == "obstruction" else check_counting
        check(question_of(state, question), need_object(parts[0], name))
        return []
    if name == "like" and len(parts) == 2:
        _check_like(state, parts, closed, symmetries)
        return []
    if name == "edge" and len(parts) == 2:
        u, v = (need_vertex(part, state.n, "edge") for part in parts)
        if u >= v or not state.is_open(u, v):
            raise Rejected(f"{[u, v]} is not an edge that is neither used nor removed")
        one = frozenset([(u, v)])
        return [(one, frozenset()), (frozenset(), one)]
    if name == "vertex" and len(parts) == 1:
        v = need_vertex(parts[0], state.n, "vertex")
        return _pairs_at(state, v, most)
    raise Rejected("not a node")


def _pairs_at(state: State, v: int, most: int) -> list[Assumptions]:
    """Return one child for each pair of edges that a Hamiltonian cycle may use at v.

    The state is free of contradiction, so two edges or more are left at v, and there
    is a child.
    """
    left, used = state.left[v], state.used[v]
    if len(used) >= 2:
        raise Rejected(f"vertex {v} has its two edges already")
    if (len(left) - 1 if used else comb(len(left), 2)) > most:
        raise Rejected("the tree is cut short")
    first = used or left
    return [
        (frozenset([edge(v, a), edge(v, b)]), frozenset())
        for a, b in combinations(sorted(left), 2)
        if a in first or b in first
    ]


def _check_like(
    state: State,
    parts: list[Any],
    closed: dict[int, Assumptions],
    symmetries: list[list[int]],
) -> None:
    """Accept a leaf that a symmetry maps into a node closed before.

    If H fitted this state, its image would be a Hamiltonian cycle of the same
    question that uses and avoids all that the other node assumes; but that node
    was shown to have none.
    """
    j, k = (need_integer(part, "like", 0) for part in parts)
    if j not in closed or k >= len(symmetries):
        raise Rejected(f"node {j} is not closed yet, or there is no symmetry {k}")
    image = symmetries[k]
    used = {edge(image[u], image[v]) for u, v in state.used_edges()}
    removed = {edge(image[u], image[v]) for u, v in state.removed_edges()}
    if not (closed[j][0] <= used and closed[j][1] <= removed):
        raise Rejected(f"symmetry {k} does not map this node into node {j}")
