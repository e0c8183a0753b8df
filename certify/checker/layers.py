"""The sweep of all graphs of a strip, layer by layer (FORMAT.md, 8.2).

The words and claims 1 and 2 are those of strip.py. Fix a residue modulo p; n(0), n(1), ... are
the n >= FIRST with it. Every graph is swept in the order of its layers, the apex last; T(i) is
the set of states when all but 3Z layers of the graph for n(i) are swept.

In the order of the layers the frontier lies in the next Z layers, in the last Z layers and in the
apex, as an edge spans less than Z layers or joins the first Z to the last Z. Vertices there are
named by the distance of their layer from the next one, or from the end, and by their other
coordinates.

(a) T(i) is the same, by these names, in the graph for every n(j), j >= i, when as many layers are
    swept: the swept layers and the next Z have, counted from the start, the same s, and t >= 2Z
    (so that it counts as Z); so have edges among them the same capped numbers, as n - abs(d) >=
    4Z for them; and so have the edges from the first to the last Z layers, for which n - abs(d)
    is s + t + L - c.
(b) In the graph for n(j), j > i, sweep p more layers from T(i): the result is T(i+1). All that is
    looked at are layers with s >= Z and t >= Z, by residue and difference, and edges that lead
    back to layers with s >= T(0)'s number of layers - Z >= Z. So the step is one function, for
    all i.
(c) Sweep the last 3Z layers from T(i) in the graph for n(i). These layers and what they are
    joined to have s >= Z, and t that do not depend on i: again one function, for all i.
(d) No Hamiltonian cycle is complete before (c): strip.py saw a vertex in the middle Z of the last
    3Z layers, which is not in the frontier of T(i). So there is one for n(i) just when (c)
    completes one.

So it is enough to sweep the graph for n(1) up to T(0), and its next p layers again and again,
until T(mu + lambda) = T(mu); then the states, and the answers by (c), repeat for ever. The last
3Z layers are swept for all i at once: each state carries the set of those i from whose T(i) it
was reached.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from heapq import heapify, heappop, heappush
from itertools import combinations
from operator import itemgetter

from .graphs import Graph, Question
from .strict import Rejected
from .strip import Strip

INNER = 255
MOST_STATES = 2_000_000
COMPLETE = b""

Name = tuple[int, ...]
Slots = dict[Name, int]


@dataclass
class Step:
    """What the sweep over one vertex needs, all of it as slots.

    A state is a row of bytes, one for each slot. A vertex of the frontier has a slot, and its
    byte is the slot at the other end of its piece: its own, if no edge of it is chosen, and
    INNER, if two are. A slot that nobody has holds its own number, so that a new vertex is
    there at once, without an edge.
    """

    slot: int
    ahead: list[int]
    rest: list[int]
    may_complete: bool

    def successors(self, state: bytes) -> list[bytes]:
        """Return the states after each choice; COMPLETE stands for a Hamiltonian cycle.

        Sound for the reason given in sweep.py; there are no required edges here.
        """
        slot = self.slot
        own = state[slot]
        if own == INNER:
            new = bytearray(state)
            new[slot] = slot
            return [bytes(new)]
        found = []
        ahead = [w for w in self.ahead if state[w] != INNER]
        # A vertex with one edge takes one more, which continues its piece.
        pairs = combinations(ahead, 2) if own == slot else [(slot, w) for w in ahead]
        for u, w in pairs:
            end, other = state[u], state[w]
            if end == w:
                if self.may_complete and self._is_all(state, u, w):
                    found.append(COMPLETE)
                continue
            new = bytearray(state)
            # In this order, as an untouched vertex is the end of its own piece.
            new[u] = new[w] = INNER
            new[end], new[other] = other, end
            new[slot] = slot
            found.append(bytes(new))
        return found

    def _is_all(self, state: bytes, u: int, w: int) -> bool:
        """Return whether the cycle closed at u and w leaves out no vertex of the frontier."""
        return all(state[place] == INNER or place in (u, w) for place in self.rest)


class Plan:
    """The steps of a sweep over one graph of a strip, and the slots at chosen moments."""

    def __init__(self, strip: Strip, n: int, graph: Graph, question: Question) -> None:
        self.strip, self.count = strip, strip.count_layers(n)
        self.cells, self.layers = strip.cells(graph), strip.layers(graph)
        order = sorted(range(len(self.cells)), key=lambda v: (self.layers[v], self.cells[v]))
        self.order = [*order, *range(len(order), question.n)]
        self.near = question.near
        self.width = self._widest()
        self.steps: list[Step] = []
        # moments[k]: how many steps are done, and who has which slot, when k layers are swept.
        self.moments: dict[int, tuple[int, Slots]] = {}
        self._assign()

    def _widest(self) -> int:
        unswept, frontier, widest = set(self.order), set[int](), 0
        for v in self.order:
            unswept.discard(v)
            frontier |= (self.near[v] & unswept) | {v}
            widest = max(widest, len(frontier))
            frontier.discard(v)
        if widest >= INNER:
            raise Rejected(f"the frontier has {widest} vertices, and not less than {INNER}")
        return widest

    def _assign(self) -> None:
        """Go through the order, and note each step and moment."""
        free = list(range(self.width))
        heapify(free)
        slots: dict[int, int] = {}
        unswept = set(self.order)
        swept = 0
        for v in self.order:
            while swept < self.count and (v >= len(self.layers) or self.layers[v] >= swept):
                self.moments[swept] = len(self.steps), self._name_slots(slots, swept)
                swept += 1
            unswept.discard(v)
            ahead = sorted(self.near[v] & unswept)
            for u in (v, *ahead):
                if u not in slots:
                    slots[u] = heappop(free)
            own = slots.pop(v)
            may_complete = len(slots) == len(unswept)
            self.steps.append(
                Step(own, [slots[u] for u in ahead], list(slots.values()), may_complete)
            )
            heappush(free, own)

    def _name_slots(self, slots: dict[int, int], swept: int) -> Slots:
        """Return the slots by name: near ones count from the next layer, others from the end."""
        names: Slots = {}
        for v, slot in slots.items():
            if v >= len(self.layers):
                names[()] = slot
                continue
            near = self.layers[v] < swept + self.strip.zone
            at = self.layers[v] - (swept if near else self.count)
            names[
                (at, *self.cells[v][: self.strip.long], *self.cells[v][self.strip.long + 1 :])
            ] = slot
        return names


def sweep_steps(steps: Iterable[Step], states: set[bytes]) -> set[bytes]:
    """Return the states after these steps."""
    for step in steps:
        reached: set[bytes] = set()
        for state in states:
            reached.update(step.successors(state))
            if len(reached) > MOST_STATES:
                raise Rejected(f"a step of the sweep has more than {MOST_STATES} states")
        states = reached
    return states


def sweep_origins(steps: Iterable[Step], states: dict[bytes, int]) -> int:
    """Return the origins, a set of bits, of all cycles that these steps complete."""
    complete = 0
    for step in steps:
        reached: dict[bytes, int] = {}
        for state, origins in states.items():
            for new in step.successors(state):
                reached[new] = reached.get(new, 0) | origins
            if len(reached) > MOST_STATES:
                raise Rejected(f"a step of the sweep has more than {MOST_STATES} states")
        complete |= reached.pop(COMPLETE, 0)
        states = reached
    return complete


class Renaming:
    """Writes states with the slots that their vertices' names have at another moment."""

    def __init__(self, before: Slots, after: Slots, width: int) -> None:
        if before.keys() != after.keys():
            raise Rejected("the frontier is not the same by its names: this is no strip")
        unused = iter(sorted(set(range(width)) - set(before.values())))
        source = {after[name]: slot for name, slot in before.items()}
        source |= {slot: next(unused) for slot in range(width) if slot not in source}
        table = bytearray(range(256))
        for slot, old in source.items():
            table[old] = slot
        self._table = bytes(table)
        # With one more place at the end, the result is a tuple for every width.
        self._pick = itemgetter(*[source[slot] for slot in range(width)], 0)

    def apply(self, state: bytes) -> bytes:
        """Return the state with its new slots."""
        return bytes(self._pick(state.translate(self._table))[:-1])
