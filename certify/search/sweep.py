"""Finding a sweep: advance all states together, vertex by vertex.

What a state is, and what a step does to it, is defined in FORMAT.md, section 6;
that after the last step no state is left proves that there is no Hamiltonian
cycle. The method is the frontier method of counting and optimising over
subgraphs (Sekine, Imai and Tani, ISAAC 1995, LNCS 1004, 224-233; Kloczkowski and
Jernigan, J. Chem. Phys. 109 (1998) 5134-5146, for Hamiltonian paths on lattices).

Words: the *frontier* is written as a sorted tuple of vertices. A *layer* holds
all states after a step. Its states are the columns of a matrix with one row for
each frontier vertex, so that one numpy operation treats one vertex in all
states. A vertex with two chosen edges has the value n there (the format's -1:
matrices hold unsigned integers), which this module calls *full*.

Nothing is pruned: the numbers of states and the digest are those of the format.
A closed cycle is taken for the answer only if no required edge joins two
vertices that are not swept yet, as such an edge is not on it.
"""

from __future__ import annotations

import hashlib
from collections.abc import Sequence, Set
from dataclasses import dataclass
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from certify.evidence.sweep import Sweep
from certify.graph.graph import edge_between
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.orders import estimate_states, find_order, measure_degeneracy

Values = NDArray[np.unsignedinteger]
Indices = NDArray[np.intp]
Flags = NDArray[np.bool_]

WIDEST_CORE = 30
"""A graph with a part of all degrees above this has too many states along every order."""
MOST_EXPECTED = 1 << 34
"""Orders with a larger estimate are not tried. It is an upper bound; the numbers of states
that were measured (knight boards, snarks, random cubic graphs) are 2 to 50 times smaller."""
BLOCK = 1 << 14
"""How many states are treated at a time where that helps to stay in the processor's cache."""
KEY_LIMIT = 1 << 62
"""Keys of states stay below this; frontiers of more than 18 vertices take several keys."""


def find_sweep(
    question: Question, *, budget: Budget, memory: int = 1 << 30
) -> Sweep | tuple[int, ...] | None:
    """Find a sweep along which no state survives, or a Hamiltonian cycle on the way.

    memory: how many bytes the states, and what is kept to trace a cycle back, may take.
    Returns the sweep when there is no Hamiltonian cycle through the required
    edges; such a cycle, as the order of its vertices, when there is one; None when
    the expected number of states, the memory or the budget forbids the sweep, and
    for the questions that have no sweep (absent, or below three vertices).
    Cost: for each state and each way to go on from it about 0.2 microseconds.
    """
    near = question.neighbours
    if question.absent or question.n < 3 or measure_degeneracy(near) > WIDEST_CORE:
        return None
    order = find_order(question)
    if estimate_states(near, order) > MOST_EXPECTED:
        return None
    return sweep_along(question, order, budget=budget, memory=memory)


def sweep_along(
    question: Question, order: Sequence[int], *, budget: Budget, memory: int = 1 << 30
) -> Sweep | tuple[int, ...] | None:
    """Sweep along a given order; arguments, results and cost as for `find_sweep`.

    question: not absent, at least three vertices. order: a permutation of them.
    """
    layer = _Layer((), np.zeros((0, 1), dtype=np.min_scalar_type(question.n)))
    digest = hashlib.sha256()
    writer = _Writer(question.n)
    states: list[int] = []
    history: list[_Ways] = []
    kept = 0
    swept: set[int] = set()
    for v in order:
        step = _Step(question, swept, layer.frontier, v)
        spread = step.spread(layer)
        end = step.find_completion(spread)
        if end is not None:
            return _trace(question.n, [*history, end])
        advanced = step.advance(spread, budget=budget, memory=memory - kept)
        if advanced is None:
            return None
        layer, ways = advanced
        history.append(ways)
        kept += ways.parents.nbytes + ways.chosen.nbytes
        swept.add(v)
        states.append(layer.size)
        writer.write(layer, digest)
    return Sweep(tuple(order), tuple(states), digest.hexdigest())


@dataclass(frozen=True)
class _Layer:
    """All states after a step.

    values: one row for each vertex of the frontier, one column for each state,
    the columns in the order in which the format writes the states.
    """

    frontier: tuple[int, ...]
    values: Values

    @property
    def size(self) -> int:
        """Return the number of states."""
        return int(self.values.shape[1])


@dataclass(frozen=True)
class _Spread:
    """The states before a step, with rows for the frontier after it.

    at_vertex: the values of the step's vertex. values: the values of the
    frontier after the step, its new vertices having themselves as values.
    """

    at_vertex: Values
    values: Values


@dataclass(frozen=True)
class _Ways:
    """One way to each state after a step over a vertex.

    parents: a state before the step, by its column. chosen: the position in
    `choices` of what was chosen from there.
    """

    vertex: int
    choices: tuple[tuple[int, ...], ...]
    parents: NDArray[np.uint32]
    chosen: NDArray[np.uint32]


class _Step:
    """One step: the sweep passes over one vertex.

    choices: the sets of further edges the vertex may get, by their other ends.
    row[u]: the row of u in the matrices after the step.
    """

    def __init__(
        self, question: Question, swept: Set[int], before: tuple[int, ...], vertex: int
    ) -> None:
        n = question.n
        ahead = [u for u in question.neighbours[vertex] if u not in swept]
        needed = {u for u in ahead if edge_between(u, vertex) in question.required}
        self.vertex = vertex
        self.full = n
        self.before = before
        self.after = tuple(sorted({*before, *ahead} - {vertex}))
        # A vertex that is not reached has no chosen edge; nor is an edge chosen that joins
        # two vertices not swept. With the first, or with the second required, a cycle
        # that is closed now is not the one that is asked for.
        self.may_complete = len(swept) + 1 + len(self.after) == n and not any(
            u in self.after and v in self.after for u, v in question.required
        )
        self.choices = tuple(
            choice for k in range(3) for choice in combinations(ahead, k) if needed <= set(choice)
        )
        self.keys = _Keys(self.after, n)
        self.row = np.zeros(n, dtype=np.intp)
        self.row[list(self.after)] = np.arange(len(self.after))

    def spread(self, layer: _Layer) -> _Spread:
        """Return the states in the shape of the frontier after the step."""
        old = dict(zip(self.before, layer.values, strict=True))
        kind = layer.values.dtype
        at_vertex = old.get(self.vertex, np.full(layer.size, self.vertex, dtype=kind))
        values = np.empty((len(self.after), layer.size), dtype=kind)
        for i, u in enumerate(self.after):
            values[i] = old.get(u, u)
        return _Spread(at_vertex, values)

    def find_completion(self, spread: _Spread) -> _Ways | None:
        """Find a state and a choice that complete the cycle: a single way."""
        if not self.may_complete:
            return None
        for number, choice in enumerate(self.choices):
            closed = self._select(spread, choice, closing=True)
            for u in set(self.after).difference(choice):
                closed = closed & (spread.values[self.row[u]] == self.full)
            if closed.any():
                return self._note(np.flatnonzero(closed)[:1], np.full(1, number))
        return None

    def _note(self, parents: NDArray[np.integer], chosen: NDArray[np.integer]) -> _Ways:
        kind = np.uint32
        return _Ways(self.vertex, self.choices, parents.astype(kind), chosen.astype(kind))

    def advance(
        self, spread: _Spread, *, budget: Budget, memory: int
    ) -> tuple[_Layer, _Ways] | None:
        """Return the layer after the step; None when the budget or the memory forbids it."""
        picks: list[Indices] = []
        for choice in self.choices:
            if budget.spent:
                return None
            picks.append(np.flatnonzero(self._select(spread, choice, closing=False)))
        bounds = np.cumsum([0, *(len(pick) for pick in picks)])
        total = int(bounds[-1])
        values = spread.values
        # The states before, spread out too, and after; for each candidate its key, the key
        # in order, its position in this order, its pick and a copy of that.
        each = 2 * len(values) * values.itemsize + 8 * (4 + len(self.keys.digits))
        if 2 * values.nbytes + total * each > memory:
            return None
        candidates = np.empty((len(values), total), dtype=values.dtype)
        keys = np.empty((len(self.keys.digits), total), dtype=np.int64)
        done = 0
        for choice, pick in zip(self.choices, picks, strict=True):
            for start in range(0, len(pick), BLOCK):
                if budget.spent:
                    return None
                part = pick[start : start + BLOCK]
                block = np.take(values, part, axis=1)
                self._join(block, spread.at_vertex[part], choice)
                candidates[:, done : done + len(part)] = block
                self.keys.write(block, keys[:, done : done + len(part)])
                done += len(part)
        first = _find_different(keys)
        parents = np.concatenate([*picks, np.zeros(0, np.intp)])[first]
        chosen = np.searchsorted(bounds, first, side="right") - 1
        return _Layer(self.after, np.take(candidates, first, axis=1)), self._note(parents, chosen)

    def _select(self, spread: _Spread, choice: tuple[int, ...], *, closing: bool) -> Flags:
        """Return which states allow a choice, among those where it closes a cycle or not."""
        at_vertex, values = spread.at_vertex, spread.values
        chosen = [values[self.row[u]] for u in choice]
        possible: Flags
        closes: Flags
        if len(choice) == 2:
            possible = at_vertex == self.vertex
            closes = chosen[0] == choice[1]
        elif len(choice) == 1:
            possible = (at_vertex != self.full) & (at_vertex != self.vertex)
            closes = at_vertex == choice[0]
        else:
            possible = at_vertex == self.full
            closes = np.zeros_like(possible)
        for at_u in chosen:
            possible = possible & (at_u != self.full)
        possible = possible & (closes == closing)
        return possible

    def _join(self, block: Values, at_vertex: Values, choice: tuple[int, ...]) -> None:
        """Add the chosen edges to the states in a block, one in each column.

        The pieces that the vertex joins have the other ends a and b; a neighbour
        without a chosen edge is the other end of its own.
        """
        if not choice:
            return
        ends = [block[self.row[u]].copy() for u in choice]
        a, b = ends if len(ends) == 2 else (at_vertex, ends[0])
        for u in choice:
            block[self.row[u]] = self.full
        columns = np.arange(block.shape[1])
        block[self.row[a], columns] = b
        block[self.row[b], columns] = a


class _Keys:
    """Numbers for states: equal states have equal keys, and keys are in the format's order.

    The format sorts the texts of the states. They have equally many values, and
    a comma comes before all signs of a value, so this is the order by the texts
    of the first values, then by those of the second, and so on. It is the order
    of numbers with these digits: 0 for -1 and for an end whose piece has its
    other end in an earlier row, which this row then repeats; otherwise the rank
    of the value's text among those that are left. So w values make a number
    below (w + 1)!, cut into several where it is too large for a machine word.

    digits: a list for each word of the key, first word first; in it for each
    row the digits of the values, multiplied by the place they have in the word.
    """

    def __init__(self, frontier: tuple[int, ...], full: int) -> None:
        words: list[list[NDArray[np.int64]]] = [[]]
        place = 1
        for i in range(len(frontier) - 1, -1, -1):
            later = sorted(frontier[i:], key=str)
            base = len(later) + 1
            if place * base > KEY_LIMIT:
                words.append([])
                place = 1
            digits = np.zeros(full + 1, dtype=np.int64)
            digits[later] = np.arange(1, base) * place
            words[-1].append(digits)
            place *= base
        self.digits = [word[::-1] for word in words[::-1]]

    def write(self, values: Values, keys: NDArray[np.int64]) -> None:
        """Write the keys of the states with these values, one row for each word."""
        row = 0
        for word, key in zip(self.digits, keys, strict=True):
            key[:] = 0
            for digits in word:
                key += digits[values[row]]
                row += 1


def _find_different(keys: NDArray[np.int64]) -> Indices:
    """Return the first column of each different key, in ascending order of the keys."""
    if not keys.size:
        return np.zeros(0, dtype=np.intp)
    order = np.argsort(keys[0]) if len(keys) == 1 else np.lexsort(keys[::-1])
    new = np.zeros(len(order), dtype=np.bool_)
    new[0] = True
    for key in keys:
        in_order = key[order]
        new[1:] |= in_order[1:] != in_order[:-1]
    # The least position, as a sort that is not stable leaves equals in any order.
    return np.minimum.reduceat(order, np.flatnonzero(new))


class _Writer:
    """Writes the texts of the digest.

    A cell is the text of a value with a comma or semicolon, filled up with zero
    bytes to the size of a machine word; the zero bytes are taken out at the end.
    """

    def __init__(self, n: int) -> None:
        texts = [str(v).encode() for v in (*range(n), -1)]
        self.size = 4 if max(map(len, texts)) < 4 else 8
        self.inner = self._make_cells(texts, b",")
        self.last = self._make_cells(texts, b";")

    def _make_cells(self, texts: list[bytes], sign: bytes) -> Values:
        cells = b"".join((text + sign).ljust(self.size, b"\0") for text in texts)
        return np.frombuffer(cells, dtype=f"u{self.size}")

    def write(self, layer: _Layer, digest: hashlib._Hash) -> None:
        """Feed the line of a layer to the digest."""
        width = len(layer.frontier)
        for start in range(0, layer.size, BLOCK):
            values = layer.values[:, start : start + BLOCK]
            cells = np.empty((values.shape[1], width), dtype=self.inner.dtype)
            for i, row in enumerate(values):
                cells[:, i] = (self.inner if i < width - 1 else self.last)[row]
            text = cells.tobytes().translate(None, b"\0")
            is_end = start + BLOCK >= layer.size
            digest.update(text.removesuffix(b";") if is_end else text)
        digest.update(b"\n")


def _trace(n: int, history: Sequence[_Ways]) -> tuple[int, ...]:
    """Return the Hamiltonian cycle that the single way of the last step completes.

    Starts at vertex 0 and goes on to the smaller of its neighbours.
    """
    near: list[list[int]] = [[] for _ in range(n)]
    state = 0
    for ways in reversed(history):
        for u in ways.choices[ways.chosen[state]]:
            near[ways.vertex].append(u)
            near[u].append(ways.vertex)
        state = int(ways.parents[state])
    cycle = [0, min(near[0])]
    while len(cycle) < n:
        a, b = near[cycle[-1]]
        cycle.append(b if a == cycle[-2] else a)
    return tuple(cycle)
