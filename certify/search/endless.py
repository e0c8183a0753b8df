"""Settling an endless claim: sweep the strip until the sets of states repeat.

FORMAT.md, section 8.2, says what the sets T(i) are and why their repetition settles
every n; the transfer of a whole set of states from one piece to the next is the
transfer matrix method in its Boolean form (Klarner and Pollack, Discrete
Mathematics 32 (1980) 45-52, for domino tilings of strips; Kloczkowski and Jernigan,
J. Chem. Phys. 109 (1998) 5134-5146, for Hamiltonian paths). Nothing is pruned, as
the sizes of the sets are part of the evidence.

The finish is made once for all i: the states of all T(i) are swept together, each
with the *marks* of the i whose set it belongs to, one bit each.
"""

from __future__ import annotations

import hashlib

import numpy as np

from certify.evidence.base import Evidence
from certify.evidence.endless import Endless, ResidueClass
from certify.graph.strip import Strip
from certify.search.budget import Budget
from certify.search.ladder import KINDS, Limits, settle
from certify.search.recipes import WORD, Settled, find_recipes, has_mark
from certify.search.states import Layer, Masks, group_equal
from certify.search.strand import MOST_STATES, Allowance, Strand

SMALL_KINDS = frozenset(KINDS) - {"clauses"}
SMALL_SHARE = 0.25
"""Which share of what is left of the budget one small n may take."""
RECIPE_SHARE = 0.5
MOST_SETS = 10_000
"""How many sets of states are looked at for a repetition."""
MOST_BITS = 1 << 31
"""How large the number of sets times the number of different states in them may be."""


def find_endless(strip: Strip, limits: Limits) -> Endless | None:
    """Settle the question for every n >= low.

    Returns None when the budget or the memory ends the sweep or the search for a
    small n, never because of an answer.
    Cost: about 0.2 microseconds for each state and way to go on, for p layers and
    each of the preperiod + period sets, and once more for the last 3Z layers.
    """
    budget = Budget.of(limits.seconds)
    allowance = Allowance(budget, limits.memory)
    settled: list[Settled] = []
    for place in range(strip.modulus):
        found = sweep_class(strip, strip.first + place, allowance)
        if found is None:
            return None
        settled.append(found)
    small: list[Evidence] = []
    for n in range(strip.low, strip.first):
        question = strip.question(n, strip.graph(n))
        seconds = budget.left * SMALL_SHARE
        evidence = settle(question, Limits(seconds, limits.memory, SMALL_KINDS, limits.shortest))
        if evidence is None:
            return None
        small.append(evidence)
    recipes = find_recipes(settled, budget=budget.share(RECIPE_SHARE), memory=limits.memory)
    return Endless(
        first=strip.first,
        modulus=strip.modulus,
        zone=strip.zone,
        small=tuple(small),
        classes=tuple(part.result for part in settled),
        recipes=recipes,
    )


def sweep_class(strip: Strip, n: int, allowance: Allowance) -> Settled | None:
    """Sweep the graphs of n(0) = n, n(1), ... until the sets of states repeat.

    None when a limit is reached.
    """
    strand = Strand(strip, n, allowance)
    seen: dict[bytes, int] = {}
    sizes: list[int] = []
    union, marks = None, np.zeros((0, 0), dtype=np.uint64)
    layer = strand.start()
    while layer is not None and len(sizes) < MOST_SETS:
        digest = hashlib.sha256(np.ascontiguousarray(layer.values).tobytes()).digest()
        if digest in seen and sizes[seen[digest]] == layer.size:
            break
        seen[digest] = len(sizes)
        union, marks = _unite(strand, union, marks, layer, len(sizes))
        sizes.append(layer.size)
        if union.size > min(MOST_STATES, MOST_BITS // len(sizes)):
            return None
        if union.values.nbytes + marks.nbytes > allowance.memory // 4:
            return None
        layer = strand.advance(layer)
    if layer is None or union is None or len(sizes) == MOST_SETS:
        return None
    completed = strand.complete(union, marks)
    if completed is None:
        return None
    preperiod = seen[digest]
    answers = tuple(has_mark(completed[:, 0], i) for i in range(len(sizes)))
    result = ResidueClass(tuple(sizes), preperiod, len(sizes) - preperiod, answers)
    return Settled(strand, result, union, marks)


def _unite(
    strand: Strand, union: Layer | None, marks: Masks, layer: Layer, i: int
) -> tuple[Layer, Masks]:
    """Add T(i) to the states with marks."""
    words = i // WORD + 1
    fresh = np.zeros((words, layer.size), dtype=np.uint64)
    fresh[i // WORD] = np.uint64(1 << i % WORD)
    if union is None:
        return layer, fresh
    old = np.zeros((words, union.size), dtype=np.uint64)
    old[: marks.shape[0]] = marks
    both = Layer(union.frontier, np.concatenate([union.values, layer.values], axis=1))
    order, starts = group_equal(strand.keys(both))
    if not len(starts):
        return both, old
    all_marks = np.concatenate([old, fresh], axis=1)[:, order]
    merged = np.bitwise_or.reduceat(all_marks, starts, axis=1)
    return Layer(both.frontier, both.values[:, order[starts]]), merged
