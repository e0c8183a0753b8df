"""Sets whose removal leaves more pieces than a Hamiltonian cycle can join.

A Hamiltonian cycle minus k >= 1 vertices falls into at most k parts, so a graph
with a Hamiltonian cycle falls into at most k pieces (Chvatal, Discrete
Mathematics 5 (1973) 215-228). A *separator* of a net (see `net`) is a set of
vertices of the question whose removal leaves more pieces than that. A vertex
that touches at most two of the pieces can be put back, and the rest still is
a separator, unless nothing is left; so middles are never needed.
"""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from itertools import combinations
from math import comb

from certify.search.budget import Budget
from certify.search.deficient import find_deficient
from certify.search.net import Net, count_pieces

PAIR_WORK = 300_000
"""Pairs are tried where vertices times the work of a walk is no more than this."""
ALL_SETS = 150
"""Up to so many sets are tried one by one."""
GROWTH_WORK = 20_000
"""Sets are grown where the work of a walk is no more than this."""
MANY_STARTS_WORK = 2_000
MANY_STARTS = 4
"""Where a walk is cheaper than the first number, sets are grown from several vertices."""
GROWTH_PER_WALK = 20
"""A set is looked at anew after growing by one in so many of its vertices."""


def is_separator(net: Net, chosen: Collection[int]) -> bool:
    """Return whether these vertices of the question leave more pieces than their number."""
    return 0 < len(chosen) < net.n and count_pieces(net, chosen)[0] > len(chosen)


def find_separator(net: Net, *, most: int, budget: Budget) -> tuple[int, ...] | None:
    """Find a short separator of at most `most` vertices.

    net: connected, and without cut vertices. Pairs first, then all sets where
    these are few, otherwise neighbours of independent sets (exact for these) and
    sets grown from several vertices.
    Returns the first of the shortest ones found, sorted. None says that none was
    found, never that there is none.
    Cost: bounded by the constants of this module; nothing more is begun when the
    budget is spent.
    """
    pair = find_pair(net) if most >= 2 else None
    if pair is not None or most < 3 or budget.spent:
        return pair
    most = min(most, (len(net.near) - 1) // 2, net.n - 1)
    always, others = _candidates(net)
    sizes = range(max(3, len(always)), most + 1)
    if sum(comb(len(others), size - len(always)) for size in sizes) <= ALL_SETS:
        sets = (
            (*always, *chosen)
            for size in sizes
            for chosen in combinations(others, size - len(always))
        )
        return next((tuple(sorted(s)) for s in sets if is_separator(net, s)), None)
    return _find_longer(net, most, budget)


def find_pair(net: Net) -> tuple[int, int] | None:
    """Find the first pair of vertices that leaves three pieces.

    net: connected, without cut vertices; so each vertex of the pair touches every
    piece and has three neighbours.
    None says that there is no such pair, or that the net is too large.
    Cost: O(n (n + m)).
    """
    if len(net.near) * net.work > PAIR_WORK:
        return None
    always, others = _candidates(net)
    if len(always) > 2:
        return None
    pairs = (
        (min(u, v), max(u, v))
        for u in always[:1] or others
        for v, more in enumerate(count_pieces(net, [u])[1][: net.n])
        if more >= 2 and v != u
    )
    # Without `always` the pairs come in order: (u, v) is met at its smaller vertex.
    return min(pairs, default=None) if always else next(pairs, None)


def _candidates(net: Net) -> tuple[list[int], list[int]]:
    """Return the vertices that are in every separator, and those that may be in one.

    The first are joined to all others; a vertex with two neighbours can be spared.
    """
    full = len(net.near) - 1
    always = [v for v in range(net.n) if len(net.near[v]) == full]
    others = [v for v in range(net.n) if 2 < len(net.near[v]) < full]
    return always, others


def _find_longer(net: Net, most: int, budget: Budget) -> tuple[int, ...] | None:
    best: tuple[int, ...] | None = None
    for independent in find_deficient(net):
        around = {w for v in independent for w in net.near[v]}
        found = shrink(net, around)
        if len(found) <= most and (best is None or (len(found), found) < (len(best), best)):
            best = found
    if net.work > GROWTH_WORK:
        return best
    for start in _starts(net):
        if budget.spent:
            break
        grown = grow(net, start, most=most if best is None else len(best) - 1)
        if grown is not None:
            best = shrink(net, grown)
    return best


def _starts(net: Net) -> list[list[int]]:
    """Return the sets to grow: the empty one, then single vertices by their promise."""
    if net.work > MANY_STARTS_WORK:
        return [[]]
    promise = _Promise(net)
    ranked = sorted(_candidates(net)[1], key=lambda v: -promise.score(v, 0))
    return [[], *([v] for v in ranked[1:MANY_STARTS])]


class _Promise:
    """What the removal of a vertex promises.

    value[v] is 2 to the power of minus the neighbours that v has left: the chance
    of v to become a piece by itself when its neighbours are removed at random.
    around[v] is the value of the neighbours of v that are left, which doubles
    when v is removed.
    """

    def __init__(self, net: Net) -> None:
        self._near = net.near
        self._gone = bytearray(len(net.near))
        self._value = [2.0 ** -len(at_v) for at_v in net.near]
        self._around = [sum([self._value[w] for w in at_v]) for at_v in net.near]

    def remove(self, v: int) -> None:
        """Take note that v is removed. Cost: O(d^2), d the largest degree."""
        value, around = self._value, self._around
        self._gone[v] = 1
        for w in self._near[v]:
            around[w] -= value[v]
            if not self._gone[w]:
                for x in self._near[w]:
                    around[x] += value[w]
                value[w] *= 2

    def score(self, v: int, more: int) -> float:
        """Return the gain in pieces, promised and actual, when v is removed."""
        return more + self._around[v] - self._value[v]


def grow(net: Net, start: Sequence[int], *, most: int) -> list[int] | None:
    """Grow a set, always by the most promising vertex, until it is a separator.

    most: the set stays within this number of vertices. Of equal promises the
    first vertex is taken.
    Returns the set in the order it grew, or None.
    Cost: O(n + m) a step, and a walk through the net for most steps of a small
    set, for one in `GROWTH_PER_WALK` of a large one.
    """
    promise = _Promise(net)
    always, others = _candidates(net)
    chosen: list[int] = []
    waiting = [*always, *start]
    left = dict.fromkeys(others)
    next_walk = 0
    more: list[int] = []
    while True:
        if len(chosen) >= next_walk and len(chosen) >= len(always) + len(start):
            next_walk = len(chosen) + 1 + len(chosen) // GROWTH_PER_WALK
            pieces, more = count_pieces(net, chosen)
            if chosen and pieces > len(chosen):
                return chosen
        if len(chosen) >= most:
            return None
        if len(chosen) < len(waiting):
            v = waiting[len(chosen)]
        elif left:
            v = max(left, key=lambda u: promise.score(u, more[u]))
        else:
            return None
        left.pop(v, None)
        chosen.append(v)
        promise.remove(v)


def shrink(net: Net, separator: Iterable[int]) -> tuple[int, ...]:
    """Return a part of a separator that still is one, no vertex of which can be spared.

    Putting back a vertex that touches k pieces turns these into one: the pieces
    change by 1 - k, and their bound by -1. Vertices that touch fewest go first.
    Cost: O(n + m) a pass; few passes.
    """
    inside = set(separator)
    above = list(range(len(net.near)))

    def find(v: int) -> int:
        while above[v] != v:
            above[v] = above[above[v]]
            v = above[v]
        return v

    def join(v: int) -> None:
        for w in net.near[v]:
            if w not in inside:
                above[find(w)] = find(v)

    for v in range(len(above)):
        if v not in inside:
            join(v)
    surplus = sum(above[v] == v for v in range(len(above)) if v not in inside) - len(inside)
    touches = 2
    while touches < surplus + 2:
        spared = False
        for v in sorted(inside, reverse=True):
            touched = len({find(w) for w in net.near[v] if w not in inside})
            if touched <= touches and touched < surplus + 2 and len(inside) > 1:
                surplus += 2 - touched
                inside.remove(v)
                join(v)
                spared = True
        touches = 2 if spared else touches + 1
    return tuple(sorted(inside))
