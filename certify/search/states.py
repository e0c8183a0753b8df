"""All states of a sweep, advanced together, vertex by vertex.

What a state is, and what a step does to it, is defined in FORMAT.md, section 6.
The method is the frontier method of counting and optimising over subgraphs
(Sekine, Imai and Tani, ISAAC 1995, LNCS 1004, 224-233; Kloczkowski and Jernigan,
J. Chem. Phys. 109 (1998) 5134-5146, for Hamiltonian paths on lattices).

Words: the *frontier* is written as a sorted tuple of vertices. A *layer* holds
all states after a step. Its states are the columns of a matrix with one row for
each frontier vertex, so that one numpy operation treats one vertex in all
states. A vertex with two chosen edges has the value n there (the format's -1:
matrices hold unsigned integers), which this module calls *full*.

A closed cycle is taken for the answer only if no required edge joins two
vertices that are not swept yet, as such an edge is not on it.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence, Set
from dataclasses import dataclass
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question
from certify.search.budget import Budget

Values = NDArray[np.unsignedinteger]
Indices = NDArray[np.intp]
Flags = NDArray[np.bool_]
Masks = NDArray[np.uint64]

BLOCK = 1 << 14
"""How many states are treated at a time where that helps to stay in the processor's cache."""
KEY_LIMIT = 1 << 62
"""Keys of states stay below this; frontiers of more than 18 vertices take several keys."""


@dataclass(frozen=True)
class Layer:
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
class Spread:
    """The states before a step, with rows for the frontier after it.

    at_vertex: the values of the step's vertex. values: the values of the
    frontier after the step, its new vertices having themselves as values.
    """

    at_vertex: Values
    values: Values


@dataclass(frozen=True)
class Ways:
    """One way to each state after a step over a vertex.

    parents: a state before the step, by its column. chosen: the position in
    `choices` of what was chosen from there.
    """

    vertex: int
    choices: tuple[tuple[int, ...], ...]
    parents: NDArray[np.uint32]
    chosen: NDArray[np.uint32]


@dataclass(frozen=True)
class _Candidates:
    """What all choices together lead to, before equal states are merged.

    values: one column each. keys: as `Keys` writes them. parents: the state before.
    bounds: where the candidates of each choice begin.
    """

    values: Values
    keys: NDArray[np.int64]
    parents: Indices
    bounds: Indices


class Step:
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
        self.keys = Keys(self.after, n)
        self.row = np.zeros(n, dtype=np.intp)
        self.row[list(self.after)] = np.arange(len(self.after))

    def spread(self, layer: Layer) -> Spread:
        """Return the states in the shape of the frontier after the step."""
        old = dict(zip(self.before, layer.values, strict=True))
        kind = layer.values.dtype
        at_vertex = old.get(self.vertex, np.full(layer.size, self.vertex, dtype=kind))
        values = np.empty((len(self.after), layer.size), dtype=kind)
        for i, u in enumerate(self.after):
            values[i] = old.get(u, u)
        return Spread(at_vertex, values)

    def find_completion(self, spread: Spread) -> Ways | None:
        """Find a state and a choice that complete the cycle: a single way."""
        for number, complete in self.completions(spread):
            if complete.any():
                return self._note(np.flatnonzero(complete)[:1], np.full(1, number))
        return None

    def completions(self, spread: Spread) -> Iterator[tuple[int, Flags]]:
        """Yield for each choice, by its position, in which states it completes the cycle."""
        for number, choice in enumerate(self.choices if self.may_complete else ()):
            closed = self._select(spread, choice, closing=True)
            for u in set(self.after).difference(choice):
                closed = closed & (spread.values[self.row[u]] == self.full)
            yield number, closed

    def _note(self, parents: NDArray[np.integer], chosen: NDArray[np.integer]) -> Ways:
        kind = np.uint32
        return Ways(self.vertex, self.choices, parents.astype(kind), chosen.astype(kind))

    def advance(self, spread: Spread, *, budget: Budget, memory: int) -> tuple[Layer, Ways] | None:
        """Return the layer after the step; None when the budget or the memory forbids it."""
        found = self._candidates(spread, budget=budget, memory=memory)
        if found is None:
            return None
        order, starts = group_equal(found.keys)
        # The least position, as a sort that is not stable leaves equals in any order.
        first = np.minimum.reduceat(order, starts) if len(starts) else order
        parents = found.parents[first]
        chosen = np.searchsorted(found.bounds, first, side="right") - 1
        return Layer(self.after, np.take(found.values, first, axis=1)), self._note(parents, chosen)

    def advance_marked(
        self, spread: Spread, marks: Masks, *, budget: Budget, memory: int
    ) -> tuple[Layer, Masks] | None:
        """Return the layer after the step, each state with the marks of all its parents.

        marks: one column of 64-bit words for each state before the step.
        None: as for `advance`.
        """
        found = self._candidates(
            spread, budget=budget, memory=memory, extra=2 * marks.shape[0] * marks.itemsize
        )
        if found is None:
            return None
        order, starts = group_equal(found.keys)
        if not len(starts):
            return Layer(self.after, found.values), marks[:, :0]
        inherited = np.take(marks, found.parents[order], axis=1)
        merged = np.bitwise_or.reduceat(inherited, starts, axis=1)
        return Layer(self.after, np.take(found.values, order[starts], axis=1)), merged

    def _candidates(
        self, spread: Spread, *, budget: Budget, memory: int, extra: int = 0
    ) -> _Candidates | None:
        """Return what all choices lead to; `extra`: further bytes needed for each of these."""
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
        each = 2 * len(values) * values.itemsize + 8 * (4 + len(self.keys.digits)) + extra
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
        parents = np.concatenate([*picks, np.zeros(0, np.intp)])
        return _Candidates(candidates, keys, parents, bounds)

    def _select(self, spread: Spread, choice: tuple[int, ...], *, closing: bool) -> Flags:
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


class Keys:
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


def group_equal(keys: NDArray[np.int64]) -> tuple[Indices, Indices]:
    """Return the columns in ascending order of the keys, and where each new key begins there."""
    if not keys.size:
        return np.zeros(0, dtype=np.intp), np.zeros(0, dtype=np.intp)
    order = np.argsort(keys[0]) if len(keys) == 1 else np.lexsort(keys[::-1])
    new = np.zeros(len(order), dtype=np.bool_)
    new[0] = True
    for key in keys:
        in_order = key[order]
        new[1:] |= in_order[1:] != in_order[:-1]
    return order, np.flatnonzero(new)


def follow(history: Sequence[Ways], state: int) -> Iterator[Edge]:
    """Yield the edges, swept end first, that were chosen on the way to a state.

    state: a column of the layer after the last step of the history. From the
    last edge to the first.
    """
    for ways in reversed(history):
        for u in ways.choices[ways.chosen[state]]:
            yield ways.vertex, u
        state = int(ways.parents[state])


def join_edges(n: int, edges: Iterable[Edge]) -> tuple[int, ...]:
    """Return the cycle on n vertices that edges make up, its vertices in order.

    Starts at vertex 0 and goes on to the smaller of its neighbours.
    """
    near: list[list[int]] = [[] for _ in range(n)]
    for u, v in edges:
        near[u].append(v)
        near[v].append(u)
    cycle = [0, min(near[0])]
    while len(cycle) < n:
        a, b = near[cycle[-1]]
        cycle.append(b if a == cycle[-2] else a)
    return tuple(cycle)
