"""Kind `sweep`: along an order of the vertices no state survives.

The invariant: let H be a Hamiltonian cycle through the required edges. After
each step, the edges of H with a swept end form pieces, which are paths whose
inner vertices include all swept ones (each swept vertex has its two edges). The
state writes down, for every frontier vertex, whether it is untouched, inside a
piece, or the end of a piece, and of which. The choice that H makes at the next
vertex is among the choices tried, and it closes no cycle before the last one.
So the state of H is among the states after every step; when there is none, there
is no H. A choice that completes H is a reason to reject.
"""

from __future__ import annotations

import hashlib
from collections.abc import Iterable
from itertools import combinations
from typing import Any

from .graphs import Edge, Question, edge, need_question_of_cycle
from .strict import Rejected, need_integer, need_keys, need_list, need_permutation

INNER = -1
MOST_VALUES = 1 << 29

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
    frontier: list[int] = []
    states: set[State] = {()}
    unswept = set(range(question.n))
    for number, v in enumerate(order):
        unswept.discard(v)
        step = _Step(question, frontier, v, unswept, told[number])
        if told[number] * (1 + len(step.frontier)) > MOST_VALUES:
            raise Rejected(f"step {number + 1} has too many states")
        for state in states:
            step.advance(state)
        frontier, states = step.frontier, step.reached
        if len(states) != told[number]:
            raise Rejected(f"step {number + 1} has {len(states)} states and not {told[number]}")
        digest.update(_write(frontier, states).encode())
    if states:
        raise Rejected("states are left after the last step")
    if digest.hexdigest() != body["digest"]:
        raise Rejected("the digest is another one")


class _Step:
    """The sweep over the vertex v.

    A state lists the values of the frontier's vertices, oldest first. While v is
    swept, its list is that of the frontier before, then v if it is not in it, then
    the vertices that are new; `place` says where each one is.
    """

    def __init__(
        self, question: Question, before: list[int], v: int, unswept: set[int], told: int
    ) -> None:
        ahead = sorted(question.near[v] & unswept)
        known = set(before)
        self.fresh = tuple([u for u in (v, *ahead) if u not in known])
        around = [*before, *self.fresh]
        self.v, self.told = v, told
        self.place = {u: place for place, u in enumerate(around)}
        self.at_v = self.place[v]
        self.frontier = [u for u in around if u != v]
        self.reached: set[State] = set()
        # H uses all required edges to vertices ahead, so every choice contains them.
        self.required = {u for u in ahead if edge(u, v) in question.required}
        self.ahead = ahead
        # A cycle closed now leaves out the vertices not reached and the required edges ahead.
        self.may_complete = len(self.frontier) == len(unswept) and not any(
            u in unswept and w in unswept for u, w in question.required
        )

    def advance(self, state: State) -> None:
        """Add the states that the choices at v lead to."""
        values = [*state, *self.fresh]
        own = values[self.at_v]
        if own == INNER:
            if not self.required:
                self._add(values)
            return
        place = self.place
        ahead = [u for u in self.ahead if values[place[u]] != INNER]
        if own == self.v:
            for u, w in self._pairs(ahead):
                self._join(values, values[place[u]], u, w)
        else:
            for u in ahead:
                if self.required <= {u}:
                    self._join(values, own, self.v, u)

    def _pairs(self, ahead: list[int]) -> Iterable[Edge]:
        """Return the pairs of vertices ahead that contain the required ones."""
        if not self.required:
            return combinations(ahead, 2)
        if not self.required.issubset(ahead) or len(self.required) > 2:
            return []
        first = min(self.required)
        return [(first, w) for w in ahead if w != first and self.required <= {first, w}]

    def _add(self, values: list[int]) -> None:
        """Add the state with these values, without that of v, which is swept."""
        del values[self.at_v]
        self.reached.add(tuple(values))
        if len(self.reached) > self.told:
            raise Rejected(f"a step has more states than {self.told}")

    def _join(self, values: list[int], end: int, u: int, w: int) -> None:
        """Add the state after the piece from `end` to u is joined with that of w, through v.

        Neither u nor w is inside a piece. u is v itself if v has one edge.
        """
        place = self.place
        other = values[place[w]]
        if end == w:
            self._refuse_cycle(values, {u, w})
            return
        joined = values.copy()
        # In this order, as an untouched vertex is the end of its own piece.
        joined[place[u]] = joined[place[w]] = INNER
        joined[place[end]], joined[place[other]] = other, end
        self._add(joined)

    def _refuse_cycle(self, values: list[int], closing: set[int]) -> None:
        """Reject if the cycle that is closed now is Hamiltonian; else it is none of H's choices."""
        inner = all(values[self.place[u]] == INNER or u in closing for u in self.frontier)
        if self.may_complete and inner:
            raise Rejected("the sweep finds a Hamiltonian cycle")


def _write(frontier: list[int], states: set[State]) -> str:
    """Return the line of the digest for the states after a step."""
    names = {INNER: str(INNER), **{u: str(u) for u in frontier}}
    ascending = sorted(range(len(frontier)), key=frontier.__getitem__)
    texts = [",".join([names[state[place]] for place in ascending]) for state in states]
    texts.sort()
    return ";".join(texts) + "\n"
