"""Kind `counting`: weights whose sum no Hamiltonian cycle can afford.

For every Hamiltonian cycle H through the required edges, with x_e = 1 on its
edges and 0 elsewhere:

    degree   the x_e at a vertex v add up to 2                        weight y
    cut      the x_e leaving S, neither empty nor all, are >= 2       weight z > 0
    parity   H leaves S an even number of times, so not exactly in the odd set
             F of leaving edges: (outside F) - (inside F) >= 1 - |F|  weight z > 0

Their weighted sum says: sum of s_e x_e >= need. But H offers at most s_e on each
required edge and max(0, s_e) on each other one. So need > offer leaves no H.
"""

from __future__ import annotations

from typing import Any

from .graphs import Edge, Question, need_question_of_cycle
from .strict import (
    Rejected,
    need_integer,
    need_keys,
    need_list,
    need_vertex,
    need_vertex_set,
)


def check_counting(question: Question, body: dict[str, Any]) -> None:
    """Accept weights for which more is needed than the edges can offer."""
    need_question_of_cycle(question)
    need_keys(body, {"vertex", "cut", "parity"}, "counting")
    score = dict.fromkeys(question.edges, 0)
    need = 0
    last = -1
    for item in need_list(body["vertex"], "vertex"):
        v, y = _row(item, 2, "a vertex weight")
        v, y = need_vertex(v, question.n, "vertex"), need_integer(y, "weight")
        if v <= last or y == 0:
            raise Rejected("vertex weights are not sorted, or one is 0")
        last = v
        need += 2 * y
        for w in question.near[v]:
            score[(v, w) if v < w else (w, v)] += y
    for item in need_list(body["cut"], "cut"):
        vertices, z = _row(item, 2, "a cut")
        leaving, z = _leaving(question, vertices), need_integer(z, "weight", 1)
        need += 2 * z
        for e in leaving:
            score[e] += z
    for item in need_list(body["parity"], "parity"):
        vertices, chosen, z = _row(item, 3, "a parity")
        leaving, z = _leaving(question, vertices), need_integer(z, "weight", 1)
        flipped = _edge_set(question, chosen)
        if len(flipped) % 2 == 0 or not flipped <= set(leaving):
            raise Rejected(
                "the edges of a parity are not an odd number of those that leave its set"
            )
        need += z * (1 - len(flipped))
        for e in leaving:
            score[e] += -z if e in flipped else z
    offer = sum(s if e in question.required else max(0, s) for e, s in score.items())
    if need <= offer:
        raise Rejected(f"{need} is needed and the edges offer {offer}: no contradiction")


def _row(item: object, width: int, what: str) -> list[Any]:
    row = need_list(item, what)
    if len(row) != width:
        raise Rejected(f"{what} has {len(row)} parts and not {width}")
    return row


def _leaving(question: Question, vertices: object) -> list[Edge]:
    chosen = need_vertex_set(vertices, question.n, "set")
    if not 0 < len(chosen) < question.n:
        raise Rejected("a set is empty or holds every vertex")
    return question.leaving(chosen)


def _edge_set(question: Question, pairs: object) -> set[Edge]:
    found: list[Edge] = []
    for item in need_list(pairs, "edges of a parity"):
        u, v = _row(item, 2, "an edge")
        u, v = need_vertex(u, question.n, "edge"), need_vertex(v, question.n, "edge")
        if (u, v) not in question.edges:
            raise Rejected(f"{[u, v]} is not an edge")
        found.append((u, v))
    if found != sorted(set(found)):
        raise Rejected("the edges of a parity are not sorted")
    return set(found)
