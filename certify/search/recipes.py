"""Recipes: witnesses that can be made longer, for readers of an endless claim.

If a state after some layers comes back, moved by q layers, the choices made in
between can be repeated any number of times. So one witness with such a stretch
gives the object for n, n + q, n + 2q, ... The loops are looked for among states that
can be completed: each of a few hundred of them gets a mark of its own, and the sweep
of p layers is repeated until a state finds its own mark again.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import lcm

import numpy as np
from numpy.typing import NDArray

from certify.errors import CertifyError
from certify.evidence.endless import Recipe, ResidueClass
from certify.graph.graph import Edge, edge_between
from certify.graph.strip import Strip
from certify.search.budget import Budget
from certify.search.lengthen import lengthen
from certify.search.states import Indices, Layer, Masks, follow, group_equal, join_edges
from certify.search.strand import Allowance, Frame, Strand, named_edges, run_traced
from certify.search.witness import is_cycle, write_witness

STARTS = 256
"""How many states are tried as starts of a loop at a time."""
LONGEST_LOOP = 24
"""How many pieces of p layers a stretch has at most."""
MOST_RECIPES = 12
WORD = 64


@dataclass(frozen=True)
class Settled:
    """A residue class that was swept, with what is needed for its recipes.

    states, marks: all states of all T(i), and for each the i whose set has it.
    """

    strand: Strand
    result: ResidueClass
    states: Layer
    marks: Masks

    def has(self, state: int, i: int) -> bool:
        """Return whether a state is in T(i), i >= 0."""
        return has_mark(self.marks[:, state], self._place(i))

    def exists(self, i: int) -> bool:
        """Return the answer for n(i), i >= 0."""
        return self.result.answers[self._place(i)]

    def members(self, i: int) -> Indices:
        """Return the states of T(i), i >= 0."""
        word, bit = divmod(self._place(i), WORD)
        return np.flatnonzero(self.marks[word] >> np.uint64(bit) & np.uint64(1))

    def _place(self, i: int) -> int:
        mu = self.result.preperiod
        return i if i < mu else mu + (i - mu) % self.result.period


def has_mark(words: NDArray[np.uint64], i: int) -> bool:
    """Return whether bit i of a column of marks is set."""
    return bool(int(words[i // WORD]) >> (i % WORD) & 1)


@dataclass(frozen=True)
class _Loop:
    """A state that can be completed and comes back after some pieces."""

    state: int
    pieces: int


def find_recipes(settled: Sequence[Settled], *, budget: Budget, memory: int) -> tuple[Recipe, ...]:
    """Find recipes for as many large n with the object as a few of them reach.

    Returns them in ascending order of n; whether they reach every large n is not
    promised, and nothing depends on it.
    Cost: up to LONGEST_LOOP sweeps of p layers for each loop, and for each recipe one
    sweep that remembers its way.
    """
    recipes: list[Recipe] = []
    for part in settled:
        finder = _Finder(part, Allowance(budget, memory))
        recipes += finder.find(MOST_RECIPES - len(recipes))
    return tuple(sorted(recipes, key=lambda recipe: (recipe.n, recipe.step)))


class _Finder:
    """Finds the recipes of one residue class."""

    def __init__(self, settled: Settled, allowance: Allowance) -> None:
        self.settled = settled
        self.strand = settled.strand
        self.allowance = allowance
        self.recipes: list[Recipe] = []
        self.reached: list[tuple[int, int]] = []

    def find(self, most: int) -> list[Recipe]:
        """Return at most so many recipes."""
        mu, period = self.settled.result.preperiod, self.settled.result.period
        for i in range(mu, mu + period):
            if self.settled.exists(i) and not self._is_reached(i, period):
                loop = self._find_loop(i)
                if loop is None:
                    continue
                self._use(loop, most)
            if len(self.recipes) >= most or self.allowance.budget.spent:
                break
        return self.recipes

    def _is_reached(self, i: int, period: int) -> bool:
        """Return whether all large j = i mod period are reached by recipes."""
        cycle = lcm(period, *(pieces for _, pieces in self.reached))
        return all(
            any((j - start) % pieces == 0 for start, pieces in self.reached)
            for j in range(i, i + cycle, period)
        )

    def _find_loop(self, i: int) -> _Loop | None:
        """Find a short loop from a state of T(i) that can be completed."""
        ours = self.settled.members(i)
        tried = ours[:: max(1, len(ours) // STARTS)][:STARTS]
        completed = self.strand.complete(*self._start(tried))
        if completed is None:
            return None
        good = tried[[has_mark(completed[:, 0], k) for k in range(len(tried))]]
        if not len(good):
            return None
        layer, marks = self._start(good)
        keys = self.strand.keys(layer)
        for pieces in range(1, LONGEST_LOOP + 1):
            advanced = self.strand.advance_marked(layer, marks)
            if advanced is None:
                return None
            layer, marks = advanced
            places = _find_places(keys, self.strand.keys(layer))
            back = [
                int(good[k])
                for k, place in enumerate(places)
                if place >= 0 and has_mark(marks[:, place], k)
            ]
            if back:
                return _Loop(min(back, key=lambda s: self._lateness(s, pieces)), pieces)
        return None

    def _start(self, states: Indices) -> tuple[Layer, Masks]:
        """Return some states, each with a mark of its own."""
        union = self.settled.states
        marks = np.zeros((len(states) // WORD + 1, len(states)), dtype=np.uint64)
        for k in range(len(states)):
            marks[k // WORD, k] = np.uint64(1 << k % WORD)
        return Layer(union.frontier, union.values[:, states]), marks

    def _lateness(self, state: int, pieces: int) -> tuple[int, int]:
        """Return how few residues a loop reaches, and how large n has to be for it."""
        starts = self._starts(state, pieces)
        return -len(starts), sum(starts)

    def _starts(self, state: int, pieces: int) -> list[int]:
        """Return the least i for each residue modulo `pieces` whose T(i) has the state."""
        mu, period = self.settled.result.preperiod, self.settled.result.period
        last = mu + lcm(period, pieces)
        found: dict[int, int] = {}
        for i in range(last):
            if i % pieces not in found and self.settled.has(state, i):
                found[i % pieces] = i
        return sorted(found.values())

    def _use(self, loop: _Loop, most: int) -> None:
        period = self.settled.result.period
        for i in self._starts(loop.state, loop.pieces):
            cycle = lcm(period, loop.pieces)
            if len(self.recipes) >= most or all(
                self._is_reached(j, cycle) for j in range(i, i + cycle, loop.pieces)
            ):
                continue
            recipe = self._write(loop, i)
            if recipe is not None:
                self.recipes.append(recipe)
                self.reached.append((i + loop.pieces, loop.pieces))

    def _write(self, loop: _Loop, i: int) -> Recipe | None:
        """Return the recipe that goes to the state in T(i), round the loop, and on to the end.

        None: a limit was reached.
        """
        strip, base = self.strand.strip, self.strand.base
        step = loop.pieces * strip.modulus
        first = Frame(strip, base.n + i * strip.modulus)
        longer = Frame(strip, base.n + step)
        whole = Frame(strip, first.n + step)
        cut = first.layers - 3 * strip.zone
        here = self.strand.cut
        legs = (
            (first, 0, cut, first.empty(), 0, step),
            (longer, here, here + step, self._place(loop.state, longer, here), cut - here, 0),
            (base, here, base.layers + 1, self._place(loop.state, base, here), whole.n - base.n, 0),
        )
        edges: list[Edge] = []
        for frame, begin, end, start, layers, far in legs:
            traced = run_traced(frame.steps(begin, end), start, self.allowance)
            if traced is None:
                return None
            state = 0
            if not traced.ended:
                goal = self._place(loop.state, frame, end)
                state = int(np.flatnonzero(np.all(traced.layer.values == goal.values, axis=0))[0])
            named = named_edges(frame, follow(traced.history, state), layers, far)
            edges += [edge_between(whole.number[u], whole.number[v]) for u, v in named]
        witness = write_witness(whole.question, join_edges(whole.question.n, edges))
        recipe = Recipe(whole.n, cut - 1, step, witness.order)
        for times in (1, 2):
            check_recipe(strip, recipe, times)
        return recipe

    def _place(self, state: int, frame: Frame, swept: int) -> Layer:
        """Return a state of the base in the numbers of a graph of which `swept` layers are."""
        base, union = self.strand.base, self.settled.states
        table = np.zeros(base.question.n + 1, dtype=np.min_scalar_type(frame.question.n))
        table[base.question.n] = frame.question.n
        for v in union.frontier:
            last = base.layer(v) >= base.layers - self.strand.strip.zone
            layers = frame.layers - base.layers if last else swept - self.strand.cut
            table[v] = frame.number[base.move(v, layers)]
        frontier = tuple(int(table[v]) for v in union.frontier)
        return Layer(frontier, table[union.values[:, [state]]])


def _find_places(keys: NDArray[np.int64], others: NDArray[np.int64]) -> NDArray[np.intp]:
    """Return for each key the place of its equal among the others, which differ; -1 for none."""
    both = np.concatenate([keys, others], axis=1)
    order, starts = group_equal(both)
    group = np.zeros(both.shape[1], dtype=np.intp)
    group[starts[1:]] = 1
    name = np.empty_like(group)
    name[order] = np.cumsum(group)
    place = np.full(len(starts), -1, dtype=np.intp)
    place[name[keys.shape[1] :]] = np.arange(others.shape[1])
    return place[name[: keys.shape[1]]]


def check_recipe(strip: Strip, recipe: Recipe, times: int) -> None:
    """Make a recipe longer and see that the result is the object.

    Errors: CertifyError when it is not, which would be a fault of the program.
    """
    frame = Frame(strip, recipe.n + times * recipe.step)
    labels = lengthen(strip, recipe, strip.graph(recipe.n), times)
    cycle = [frame.number[label] for label in labels]
    if frame.question.apex is not None:
        cycle.append(frame.question.apex)
    if not is_cycle(frame.question, cycle):
        raise CertifyError(f"{strip.claim.where}: a recipe for {recipe.n} does not hold")
