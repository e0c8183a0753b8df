"""One residue class of an endless claim: the graphs of n(0), n(1), ... and their sweeps.

The sets T(i) of FORMAT.md, section 8.2, are kept in the vertex numbers of the graph
of n(0), the *base*. To get T(i + 1), the names are changed to those of the graph of
n(1), where p layers more are left to sweep, and after these layers back again. Both
changes keep the order of the numbers, so a frontier stays sorted.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from certify.errors import CertifyError
from certify.graph.graph import Edge, Label
from certify.graph.strip import Strip
from certify.search.budget import Budget
from certify.search.states import Keys, Layer, Masks, Step, Ways, group_equal

MOST_STATES = 2_000_000
"""How many states there may be after a step, and in all T(i) together."""


@dataclass(frozen=True)
class Allowance:
    """How much time and how many bytes may be spent."""

    budget: Budget
    memory: int = 1 << 30


class Frame:
    """The graph for one n, with the order in which it is swept.

    order: by layers, the apex last. label(v): what is kept of a vertex when the strip
    gets longer; None is the apex.
    """

    def __init__(self, strip: Strip, n: int) -> None:
        self.strip = strip
        self.n = n
        self.graph = strip.graph(n)
        self.question = strip.question(n, self.graph)
        self.layers = strip.layers(n)
        order = strip.order(self.graph)
        self.order = order if self.question.apex is None else [*order, self.question.apex]
        self.number: dict[Label | None, int] = dict(
            zip(self.graph.labels, range(self.graph.n), strict=True)
        )
        if self.question.apex is not None:
            self.number[None] = self.question.apex

    def label(self, v: int) -> Label | None:
        """Return the label of a vertex, None for the apex."""
        return None if v == self.question.apex else self.graph.labels[v]

    def layer(self, v: int) -> int:
        """Return the layer of a vertex; the apex comes after the last one."""
        label = self.label(v)
        return self.layers if label is None else self.strip.layer(label)

    def move(self, v: int, layers: int) -> Label | None:
        """Return the label of a vertex moved along the strip; the apex stays."""
        label = self.label(v)
        return None if label is None else self.strip.moved(label, layers)

    def steps(self, first: int, last: int) -> list[Step]:
        """Return the steps over the layers first, ..., last - 1."""
        swept = {v for v in self.order if self.layer(v) < first}
        frontier: tuple[int, ...] = tuple(
            sorted({u for v in swept for u in self.question.neighbours[v]} - swept)
        )
        steps: list[Step] = []
        for v in self.order:
            if first <= self.layer(v) < last:
                step = Step(self.question, swept, frontier, v)
                steps.append(step)
                frontier = step.after
                swept.add(v)
        return steps

    def empty(self) -> Layer:
        """Return the one state before the first step."""
        kind = np.min_scalar_type(self.question.n + self.graph.n)
        return Layer((), np.zeros((0, 1), dtype=kind))


class Strand:
    """The sweep of one residue class.

    base, longer: the graphs of n(0) and n(1). cut: how many layers of the base are
    swept at T(0); 3Z are left.
    """

    def __init__(self, strip: Strip, n: int, allowance: Allowance) -> None:
        self.strip = strip
        self.allowance = allowance
        self.base = Frame(strip, n)
        self.longer = Frame(strip, n + strip.modulus)
        self.cut = self.base.layers - 3 * strip.zone
        self.piece = self.longer.steps(self.cut, self.cut + strip.modulus)
        self.finish = self.base.steps(self.cut, self.base.layers + 1)
        self._there = self._renaming(self.base, self.longer, self.finish[0].before, back=False)
        self._back = self._renaming(self.longer, self.base, self.piece[-1].after, back=True)
        if {self._there[v] for v in self.finish[0].before} != set(self.piece[0].before):
            raise CertifyError(f"{strip.claim.where}: the pieces of the strip do not fit")

    def _renaming(
        self, source: Frame, target: Frame, frontier: Iterable[int], *, back: bool
    ) -> dict[int, int]:
        """Return the numbers of frontier vertices in the other graph.

        There: the next layers keep their place, the last ones move on. Back: all move.
        """
        size = self.strip.modulus
        names: dict[int, int] = {}
        for v in frontier:
            moves = back or source.layer(v) >= source.layers - self.strip.zone
            names[v] = target.number[source.move(v, (-size if back else size) * moves)]
        return names

    def rename(self, layer: Layer, *, back: bool) -> Layer:
        """Return a set T(i) in the numbers of the longer graph, or back in those of the base."""
        names = self._back if back else self._there
        source, target = (self.longer, self.base) if back else (self.base, self.longer)
        table = np.zeros(source.question.n + 1, dtype=layer.values.dtype)
        for v, name in names.items():
            table[v] = name
        table[source.question.n] = target.question.n
        return Layer(tuple(names[v] for v in layer.frontier), table[layer.values])

    def start(self) -> Layer | None:
        """Return T(0); None when a limit is reached."""
        layer = self.base.empty()
        layer = Layer((), layer.values.astype(np.min_scalar_type(self.longer.question.n)))
        found = run(self.base.steps(0, self.cut), layer, self.allowance)
        return None if found is None else self.sort(found)

    def advance(self, layer: Layer) -> Layer | None:
        """Return T(i + 1) for T(i); None when a limit is reached."""
        found = run(self.piece, self.rename(layer, back=False), self.allowance)
        return None if found is None else self.sort(self.rename(found, back=True))

    def advance_marked(self, layer: Layer, marks: Masks) -> tuple[Layer, Masks] | None:
        """Return what p layers make of some states, with the marks of their parents."""
        found = run_marked(self.piece, self.rename(layer, back=False), marks, self.allowance)
        if found is None:
            return None
        after = self.rename(found.layer, back=True)
        order, _ = group_equal(self.keys(after))
        return Layer(after.frontier, after.values[:, order]), found.marks[:, order]

    def complete(self, layer: Layer, marks: Masks) -> Masks | None:
        """Return the marks of all states of T(i) that can be completed, in one column."""
        found = run_marked(self.finish, layer, marks, self.allowance)
        return None if found is None else found.completed

    def keys(self, layer: Layer) -> np.typing.NDArray[np.int64]:
        """Return the keys of states in the base: equal for equal states only."""
        keys = Keys(layer.frontier, self.base.question.n)
        words = np.empty((len(keys.digits), layer.size), dtype=np.int64)
        keys.write(layer.values, words)
        return words

    def sort(self, layer: Layer) -> Layer:
        """Return the states in the order of their keys."""
        order, _ = group_equal(self.keys(layer))
        return Layer(layer.frontier, layer.values[:, order])


@dataclass(frozen=True)
class Marked:
    """States with their marks after some steps, and the marks of those that were completed."""

    layer: Layer
    marks: Masks
    completed: Masks


def run(steps: Sequence[Step], layer: Layer, allowance: Allowance) -> Layer | None:
    """Return the states after some steps; None when a limit is reached."""
    for step in steps:
        spread = step.spread(layer)
        advanced = step.advance(spread, budget=allowance.budget, memory=allowance.memory)
        if advanced is None or advanced[0].size > MOST_STATES:
            return None
        layer = advanced[0]
    return layer


def run_marked(
    steps: Sequence[Step], layer: Layer, marks: Masks, allowance: Allowance
) -> Marked | None:
    """Return the states after some steps with their marks; None when a limit is reached."""
    completed = np.zeros((marks.shape[0], 1), dtype=np.uint64)
    for step in steps:
        spread = step.spread(layer)
        for _, complete in step.completions(spread):
            if complete.any():
                ended = np.bitwise_or.reduce(marks[:, complete], axis=1)
                completed[:, 0] |= ended
        advanced = step.advance_marked(
            spread, marks, budget=allowance.budget, memory=allowance.memory
        )
        if advanced is None or advanced[0].size > MOST_STATES:
            return None
        layer, marks = advanced
    return Marked(layer, marks, completed)


@dataclass(frozen=True)
class Traced:
    """A way through some steps, step by step, with the states at their end.

    ended: the way that completes the cycle, which ended the run; otherwise None.
    """

    layer: Layer
    history: tuple[Ways, ...]
    ended: bool


def run_traced(steps: Sequence[Step], layer: Layer, allowance: Allowance) -> Traced | None:
    """Return the states after some steps and how they came about, up to a completed cycle."""
    history: list[Ways] = []
    kept = 0
    for step in steps:
        spread = step.spread(layer)
        end = step.find_completion(spread)
        if end is not None:
            return Traced(layer, (*history, end), ended=True)
        advanced = step.advance(spread, budget=allowance.budget, memory=allowance.memory - kept)
        if advanced is None:
            return None
        layer, ways = advanced
        history.append(ways)
        kept += ways.parents.nbytes + ways.chosen.nbytes
    return Traced(layer, tuple(history), ended=False)


def named_edges(
    frame: Frame, edges: Iterable[Edge], layers: int, far: int
) -> Iterable[tuple[Label | None, Label | None]]:
    """Yield edges (swept end first) by labels, moved along the strip.

    layers: how far the ends move; far: how far an end in the last Z layers moves
    whose edge comes from one of the first Z.
    """
    zone = frame.strip.zone
    for u, v in edges:
        last = frame.layers - zone <= frame.layer(v) < frame.layers and frame.layer(u) < zone
        yield frame.move(u, layers), frame.move(v, far if last else layers)
