"""Finding a sweep: an order of the vertices along which no state survives.

What a state is, and what a step does to it, is defined in FORMAT.md, section 6,
and done in `states`; that after the last step no state is left proves that there
is no Hamiltonian cycle. Nothing is pruned: the numbers of states and the digest
are those of the format.
"""

from __future__ import annotations

import hashlib
from collections.abc import Sequence

import numpy as np

from certify.evidence.sweep import Sweep
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.orders import estimate_states, find_order, measure_degeneracy
from certify.search.states import BLOCK, Layer, Step, Values, Ways, follow, join_edges

WIDEST_CORE = 30
"""A graph with a part of all degrees above this has too many states along every order."""
MOST_EXPECTED = 1 << 34
"""Orders with a larger estimate are not tried. It is an upper bound; the numbers of states
that were measured (knight boards, snarks, random cubic graphs) are 2 to 50 times smaller."""


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
    layer = Layer((), np.zeros((0, 1), dtype=np.min_scalar_type(question.n)))
    digest = hashlib.sha256()
    writer = _Writer(question.n)
    states: list[int] = []
    history: list[Ways] = []
    kept = 0
    swept: set[int] = set()
    for v in order:
        step = Step(question, swept, layer.frontier, v)
        spread = step.spread(layer)
        end = step.find_completion(spread)
        if end is not None:
            return join_edges(question.n, follow([*history, end], 0))
        advanced = step.advance(spread, budget=budget, memory=memory - kept)
        if advanced is None:
            return None
        layer, ways = advanced
        history.append(ways)
        kept += ways.parents.nbytes + ways.chosen.nbytes
        swept.add(v)
        states.append(layer.size)
        writer.write(layer, digest)
        if layer.size == 0:
            # Nothing comes of no state: the lines of the remaining steps are empty.
            remaining = len(order) - len(states)
            states += [0] * remaining
            digest.update(b"\n" * remaining)
            break
    return Sweep(tuple(order), tuple(states), digest.hexdigest())


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

    def write(self, layer: Layer, digest: hashlib._Hash) -> None:
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
