"""Kind `obstruction`: a few vertices that no Hamiltonian cycle can pass.

H is any Hamiltonian cycle of the question that uses all required edges. A
forced edge is required or has an end with two edges only, so H uses it.
"""

from __future__ import annotations

from typing import Any

from .graphs import Question, count_components, need_question_of_cycle
from .strict import (
    Rejected,
    need_keys,
    need_object,
    need_text,
    need_vertex,
    need_vertex_set,
    need_vertices,
)


def check_obstruction(question: Question, body: dict[str, Any]) -> None:
    """Accept an obstruction of one of the seven forms."""
    form = need_text(need_object(body, "obstruction").get("form"), "form")
    if form not in _FORMS:
        raise Rejected(f"unknown form {form!r}")
    keys, check = _FORMS[form]
    need_keys(body, {"form", *keys}, f"obstruction {form}")
    if form not in ("absent", "small"):
        need_question_of_cycle(question)
    check(question, body)


def _check_absent(question: Question, body: dict[str, Any]) -> None:
    # The object would have to use an end or an edge that the graph has not.
    if not question.absent:
        raise Rejected("every end and required edge is in the graph")


def _check_small(question: Question, body: dict[str, Any]) -> None:
    # A cycle has three vertices; so the normal form of a path needs two, and the
    # path on one vertex, which exists, is the one exception.
    if question.absent or question.n >= 3 or question.is_one_vertex_path:
        raise Rejected("the graph is not too small")


def _check_leaf(question: Question, body: dict[str, Any]) -> None:
    # H has two edges at every vertex.
    v = need_vertex(body["vertex"], question.n, "vertex")
    if len(question.near[v]) > 1:
        raise Rejected(f"vertex {v} has {len(question.near[v])} neighbours")


def _check_crowded(question: Question, body: dict[str, Any]) -> None:
    # H has only two edges at a vertex, and these three are all forced.
    v = need_vertex(body["vertex"], question.n, "vertex")
    three = need_vertex_set(body["neighbours"], question.n, "neighbours")
    if len(three) != 3:
        raise Rejected(f"{len(three)} neighbours are named and not 3")
    _need_forced(question, [(v, w) for w in three])


def _check_ring(question: Question, body: dict[str, Any]) -> None:
    # Forced edges that close a cycle before all vertices are on it: H would be
    # that cycle and miss the others.
    ring = need_vertices(body["vertices"], question.n, "vertices")
    if not 3 <= len(ring) < question.n:
        raise Rejected(f"a ring of {len(ring)} vertices on {question.n} is no contradiction")
    _need_forced(question, list(zip(ring, ring[1:] + ring[:1], strict=True)))


def _check_separator(question: Question, body: dict[str, Any]) -> None:
    # Each of the c components is left by H at least twice, as it is not the whole
    # graph, and only towards the set: 2c edges. The set's vertices have
    # 2(size) edge ends on H, of which the r required edges inside take 2r.
    separator = set(need_vertex_set(body["set"], question.n, "set"))
    inside = sum(u in separator and v in separator for u, v in question.required)
    pieces = count_components(question, separator)
    whole = not separator and pieces < 2
    if whole or len(separator) == question.n or pieces <= len(separator) - inside:
        raise Rejected(
            f"without {sorted(separator)} {pieces} pieces are left, "
            f"more than {len(separator) - inside} are needed"
        )


def _check_independent(question: Question, body: dict[str, Any]) -> None:
    # No edge joins two vertices of the set, so H has 2(size) different edges at
    # it; the r required edges without an end in it come on top; H has n edges.
    chosen = set(need_vertex_set(body["set"], question.n, "set"))
    for v in sorted(chosen):
        if question.near[v] & chosen:
            raise Rejected(f"vertex {v} is joined to another vertex of the set")
    elsewhere = sum(u not in chosen and v not in chosen for u, v in question.required)
    if 2 * len(chosen) + elsewhere <= question.n:
        raise Rejected(
            f"{len(chosen)} independent vertices and {elsewhere} required edges elsewhere "
            f"fit into {question.n} vertices"
        )


def _need_forced(question: Question, pairs: list[tuple[int, int]]) -> None:
    for u, v in pairs:
        if not question.is_forced(u, v):
            raise Rejected(f"vertices {u} and {v} are not joined by a forced edge")


_FORMS = {
    "absent": (set[str](), _check_absent),
    "small": (set[str](), _check_small),
    "leaf": ({"vertex"}, _check_leaf),
    "crowded": ({"vertex", "neighbours"}, _check_crowded),
    "ring": ({"vertices"}, _check_ring),
    "separator": ({"set"}, _check_separator),
    "independent": ({"set"}, _check_independent),
}
