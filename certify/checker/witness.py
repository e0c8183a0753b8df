"""Kind `witness`: the object itself."""

from __future__ import annotations

from itertools import pairwise
from typing import Any

from .graphs import Question, edge
from .strict import Rejected, need_keys, need_permutation


def check_witness(question: Question, body: dict[str, Any]) -> None:
    """Accept an order of the graph's vertices that is the path or cycle asked for.

    Sound because every demand of the definition is looked at: each vertex once,
    each step an edge (of those not forbidden), the cycle closed and on at least
    three vertices, the required edges used, the ends where they must be.
    """
    count = question.order_length
    order = need_permutation(need_keys(body, {"order"}, "witness")["order"], count, "order")
    if question.absent or count == 0:
        raise Rejected("the claim asks for an end or an edge that is not there, or no vertex is")
    steps = list(pairwise(order))
    if question.path:
        apex = question.n - 1
        # The ends: the steps from the apex to the first and from the last vertex. With
        # one vertex there is one such step; the normal form has no cycle then.
        steps += [(apex, order[0]), (order[-1], apex)]
    else:
        if count < 3:
            raise Rejected("a cycle has at least three vertices")
        steps.append((order[-1], order[0]))
    used = {edge(u, v) for u, v in steps}
    for u, v in steps:
        if edge(u, v) not in question.edges:
            raise Rejected(f"vertices {u} and {v} follow each other and are not joined")
    unused = sorted(question.required - used)
    if unused:
        raise Rejected(f"the required edge {unused[0]} is not used")
