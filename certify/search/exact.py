"""From floating-point weights to integers that prove something.

Weights w for facts give every edge a *score*, the sum of w times its
coefficient. Along a Hamiltonian cycle the scores add up to at least
*need* = sum of w times bound; the edges *offer* at most the scores of the
required edges plus the positive scores of the others. The argument holds when
the *margin* need - offer is positive. The margin is a concave, piecewise linear
function of w with slopes that are small integers, so rounding the scaled
weights of a linear program keeps it positive once the scale is large enough; all that
is decided here is decided in integers.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from certify.evidence.counting import Counting
from certify.graph.question import Question
from certify.search.facts import Fact

OPEN, USED, REMOVED = 0, 1, 2
"""What an edge may be: free to be used or not, used for certain, not there."""

_SCALES = (*range(1, 13), 14, 15, 16, 18, 20, 24, 30, 36, 48, 60, 84, 120)
_LARGEST_SCALE = 2**40


def holds(question: Question, counting: Counting) -> bool:
    """Return whether a counting argument refutes a question, in exact integers.

    Need and offer as defined in the module's docstring and in FORMAT.md,
    section 6; malformed weights, sets and edges give False.
    Cost: O(m) for each cut or parity set.
    """
    n = question.n
    vertices = [v for v, _ in counting.vertex]
    if n < 3 or question.absent or vertices != sorted(set(vertices)):
        return False
    if any(not 0 <= v < n or y == 0 for v, y in counting.vertex):
        return False
    weight = dict(counting.vertex)
    score = {(u, v): weight.get(u, 0) + weight.get(v, 0) for u, v in question.edges}
    need = 2 * sum(weight.values())
    sides = [(side, (), z) for side, z in counting.cut]
    for side, odd, z in [*sides, *counting.parity]:
        members = set(side)
        if z <= 0 or list(side) != sorted(members) or not 0 < len(side) < n:
            return False
        if not members <= set(range(n)):
            return False
        flipped = set(odd)
        leaving = {e for e in question.edges if (e[0] in members) != (e[1] in members)}
        if list(odd) != sorted(flipped) or not flipped <= leaving:
            return False
        for e in leaving:
            score[e] += -z if e in flipped else z
        need += z * (1 - len(odd)) if odd else 2 * z
    if any(len(odd) % 2 == 0 for _, odd, _ in counting.parity):
        return False
    required = question.required
    offer = sum(s if e in required else max(0, s) for e, s in score.items())
    return need > offer


class Tally:
    """Integer weights with their scores and margin, kept up to date under changes.

    facts, weights: as many of the one as of the other. status: OPEN, USED or REMOVED for each edge.
    Invariant: `margin` is need - offer of `weights`, and `_score[e]` the score of e.
    """

    def __init__(self, facts: Sequence[Fact], status: Sequence[int]) -> None:
        self.facts = tuple(facts)
        self.weights = [0] * len(facts)
        self.margin = 0
        self._status = status
        self._score = [0] * len(status)

    @property
    def size(self) -> tuple[int, int]:
        """Return how many integers the weighted facts take, and the sum of absolute weights."""
        pairs = list(zip(self.facts, self.weights, strict=True))
        return sum(fact.length for fact, w in pairs if w), sum(abs(w) for _, w in pairs)

    def margin_after(self, i: int, step: int) -> int:
        """Return the margin if weight i grew by `step`. Cost: the terms of fact i."""
        fact = self.facts[i]
        margin = self.margin + step * fact.bound
        for e, sign in fact.terms:
            kind = self._status[e]
            if kind == USED:
                margin -= step * sign
            elif kind == OPEN:
                old = self._score[e]
                margin -= max(0, old + step * sign) - max(0, old)
        return margin

    def change(self, i: int, step: int) -> None:
        """Add `step` to weight i. Cost: the terms of fact i."""
        self.margin = self.margin_after(i, step)
        self.weights[i] += step
        for e, sign in self.facts[i].terms:
            self._score[e] += step * sign


def round_weights(
    facts: Sequence[Fact], status: Sequence[int], weights: Sequence[float]
) -> Tally | None:
    """Return the weights times the smallest scale that keeps the margin positive, rounded.

    Scales are 1..12, then some with many divisors, then powers of two; weights
    are at most 1 in absolute value, so scales are bounds for the integers.
    None says that no scale tried is enough.
    """
    for scale in _scales():
        tally = Tally(facts, status)
        for i, w in enumerate(weights):
            step = round(w * scale)
            if step > 0 or (step < 0 and facts[i].equal):
                tally.change(i, step)
        if tally.margin > 0:
            return tally
    return None


def _scales() -> Iterator[int]:
    yield from _SCALES
    scale = 256
    while scale <= _LARGEST_SCALE:
        yield scale
        scale *= 4


def drop_redundant(tally: Tally) -> None:
    """Take weights out, or nearer to 0, as long as the margin stays positive.

    Long facts first, then small weights; repeated until nothing changes. The
    result is divided by the common divisor.
    """
    facts, weights = tally.facts, tally.weights
    changed = True
    while changed:
        changed = False
        order = sorted(
            (i for i, w in enumerate(weights) if w),
            key=lambda i: (facts[i].equal, -facts[i].length, abs(weights[i]), i),
        )
        for i in order:
            step = -1 if weights[i] > 0 else 1
            if tally.margin_after(i, -weights[i]) > 0:
                tally.change(i, -weights[i])
                changed = True
            elif abs(weights[i]) > 1 and tally.margin_after(i, step) >= tally.margin:
                tally.change(i, step)
                changed = True
    divisor = math.gcd(*weights)
    if divisor > 1:
        for i, w in enumerate(weights):
            if w:
                tally.change(i, w // divisor - w)
