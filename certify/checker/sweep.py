"""Kind `sweep`: along an order of the vertices no state survives.

The invariant: let H be a Hamiltonian cycle through the required edges. After
each step, the edges of H with a swept end form pieces, which are paths whose
inner vertices include all swept ones (each swept vertex has its two edges). The
state writes down, for every frontier vertex, whether it is untouched, inside a
piece, or the end of a piece, and of which. The choice that H makes at the next
vertex is among the choices tried, and it closes no cycle before the last one.
So the state of H is among the states after every step; when there is none, there
is no H. A choice that completes a Hamiltonian cycle is a reason to reject.
"""

from __future__ import annotations

import hashlib
from itertools import combinations
from typing import Any

from .graphs import Question, edge, need_question_of_cycle
from .strict import Rejected, need_integer, need_keys, need_list, need_permutation

INNER = -1
MOST_STATES = 20_000_000

State = tuple[int, ...]


def check_sweep(question: Question, body: dict[str, Any]) -> None:
    """Accept an order for which the sweep, done again here, ends without a state."""
    need_question_of_cycle(question)
    need_keys(body, {"order", "states", "digest"}, "sweep")
    order = need_permutation(body["order"], question.n, "order")
    told = [need_integer(item, "states", 0) for item in need_list(body["states"], "states")]
    if len(told) != question.n:
        raise Rejected(f"states has {len(told)} numbers and not {question.n}")
    digest = hashlib.sha256()
    states: set[State] = {()}
    frontier: list[int] = []
    unswept = set(range(question.n))
    for step, v in enumerate(order):
        unswept.discard(v)
        states, frontier = _advance(question, states, frontier, v, unswept)
        if len(states) != told[step]:
            raise Rejected(f"step {step + 1} has {len(states)} states and not {told[step]}")
        texts = sorted([",".join(map(str, state)) for state in states])
        digest.update((";".join(texts) + "\n").encode())
    if states:
        raise Rejected("states are left after the last step")
    if digest.hexdigest() != body["digest"]:
        raise Rejected("the digest is another one")


def _advance(
    question: Question, states: set[State], frontier: list[int], v: int, unswept: set[int]
) -> tuple[set[State], list[int]]:
    """Return the states and the frontier after v was swept."""
    ahead = sorted(question.near[v] & unswept)
    required = {u for u in ahead if edge(u, v) in question.required}
    after = sorted((set(frontier) | set(ahead)) - {v})
    before = sorted({*frontier, *after, v})
    old_place = {u: i for i, u in enumerate(frontier)}
    reached: set[State] = set()
    for state in states:
        value = {u: state[old_place[u]] if u in old_place else u for u in before}
        open_ahead = [u for u in ahead if value[u] != INNER]
        missing = 0 if value[v] == INNER else 2 if value[v] == v else 1
        for choice in combinations(open_ahead, missing):
            if not required.issubset(choice):
                continue
            joined = _join(value, v, choice)
            if joined is not None:
                reached.add(tuple([joined[u] for u in after]))
            elif all(value.get(u, u) == INNER or u in choice for u in unswept):
                # Every vertex has two edges and the one piece is closed.
                raise Rejected("the sweep finds a Hamiltonian cycle")
    if len(reached) > MOST_STATES:
        raise Rejected(f"more than {MOST_STATES} states")
    return reached, after


def _join(value: dict[int, int], v: int, choice: tuple[int, ...]) -> dict[int, int] | None:
    """Return the values after v is joined to the chosen vertices; None if a cycle closes."""
    joined = dict(value)
    for u in choice:
        end_v, end_u = joined[v], joined[u]
        if end_v == u:
            return None
        # The pieces (or single vertices) that end in v and in u become one.
        joined[v] = joined[u] = INNER
        joined[end_v], joined[end_u] = end_u, end_v
    return joined
