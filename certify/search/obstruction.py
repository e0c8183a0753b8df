"""Finding a direct obstruction: a few vertices that no Hamiltonian cycle can pass.

The forms are those of FORMAT.md, section 6, in its order. Of all obstructions
found, the one that reads shortest is returned; of equally short ones the first
by form, then lexicographically. Leaves, crowded vertices, rings, and separators
of at most one vertex are found exactly; so are pairs in nets that are not too
large, and independent sets with fewer neighbours than members. The rest is
searched for within bounds.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence

from certify.evidence.obstruction import Obstruction
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.deficient import find_deficient
from certify.search.net import build_net, count_pieces
from certify.search.separators import find_separator


def find_obstruction(question: Question, *, budget: Budget) -> Obstruction | None:
    """Find the shortest direct obstruction that the search meets.

    The answer depends on the question alone as long as the budget lasts: then
    the work is counted in steps, bounded by the constants of the modules used.
    None says that none was found, never that a cycle exists.
    Cost: O(n + m) for the first forms, n times that for pairs.
    """
    if question.is_one_vertex_path:
        return None
    if question.absent:
        return Obstruction("absent")
    if question.n < 3:
        return Obstruction("small")
    found = _find_at_sight(question)
    if found is not None and found.length < 2:
        return found
    net = build_net(question)
    most = question.n if found is None else found.length - 1
    separator = find_separator(net, most=most, budget=budget)
    if separator is not None:
        found = Obstruction("separator", {"set": separator})
    if question.required and (found is None or found.length > 1) and not budget.spent:
        independent = _find_independent(question, (found.length if found else question.n) - 1)
        if independent is not None:
            found = Obstruction("independent", {"set": independent})
    return found


def _find_at_sight(question: Question) -> Obstruction | None:
    """Find the shortest of the obstructions that a walk or two through the graph show."""
    pieces, more = count_pieces(build_net(question), ())
    if pieces > 1:
        return Obstruction("separator", {"set": ()})
    for v, near in enumerate(question.neighbours):
        if len(near) < 2:
            return Obstruction("leaf", {"vertex": v})
    for v in range(question.n):
        if more[v] > 0:
            return Obstruction("separator", {"set": (v,)})
    forced = _forced_neighbours(question)
    ring: tuple[int, ...] | None
    if max(map(len, forced)) > 2:
        ring = _find_triangle(forced) if question.n > 3 else None
        if ring is None:
            v = next(v for v, at_v in enumerate(forced) if len(at_v) > 2)
            return Obstruction("crowded", {"vertex": v, "neighbours": tuple(forced[v][:3])})
    else:
        ring = min(_rings(forced), key=lambda ring: (len(ring), ring), default=None)
    return None if ring is None else Obstruction("ring", {"vertices": ring})


def _forced_neighbours(question: Question) -> list[list[int]]:
    """Return for each vertex its neighbours along forced edges, sorted.

    An edge is forced when it is required or an end of it has two edges only.
    """
    near = question.neighbours
    forced = [set(at_v) if len(at_v) == 2 else set[int]() for at_v in near]
    for u, at_u in enumerate(near):
        if len(at_u) == 2:
            for v in at_u:
                forced[v].add(u)
    for u, v in question.required:
        forced[u].add(v)
        forced[v].add(u)
    return [sorted(at_v) for at_v in forced]


def _find_triangle(forced: Sequence[Sequence[int]]) -> tuple[int, ...] | None:
    """Find the first three vertices that forced edges join to each other."""
    for u, at_u in enumerate(forced):
        for v in at_u:
            if v > u:
                for w in at_u:
                    if w > v and w in forced[v]:
                        return u, v, w
    return None


def _rings(forced: Sequence[Sequence[int]]) -> Iterator[tuple[int, ...]]:
    """Yield the closed cycles of forced edges that miss a vertex, at most two edges a vertex.

    Each starts with its first vertex and the smaller of that one's neighbours.
    """
    seen = [len(at_v) < 2 for at_v in forced]
    for start, at_start in enumerate(forced):
        if seen[start]:
            continue
        ring = [start]
        here = at_start[0]
        while here != start and len(forced[here]) == 2:
            before = ring[-1]
            ring.append(here)
            seen[here] = True
            first, second = forced[here]
            here = second if first == before else first
        if here == start and len(ring) < len(forced):
            yield tuple(ring)


def _find_independent(question: Question, most: int) -> tuple[int, ...] | None:
    """Find an independent set that is too large, of at most `most` vertices.

    2 size + r > n, with r the required edges without an end in the set, says that
    the weights 2 - (required edges at v) of its vertices sum up to more than
    n - (required edges). Without required edges the set has over n / 2 vertices
    and the rest of the graph is a shorter separator; so there is none to look for.
    None says that none was found.
    """
    weight = [2] * question.n
    for u, v in question.required:
        weight[u] -= 1
        weight[v] -= 1
    bound = question.n - len(question.required)
    order = sorted(range(question.n), key=lambda v: (-weight[v], len(question.neighbours[v]), v))
    best: tuple[int, ...] | None = None
    for seed in ((), *find_deficient(build_net(question))):
        seeded = set(seed)
        chosen = _pick_independent(question, [*(v for v in order if v in seeded), *order])
        total = sum(weight[v] for v in chosen if weight[v] > 0)
        # Heavy vertices come first, so the light ones are spared.
        kept = []
        so_far = 0
        for v in sorted(chosen, key=lambda v: (-weight[v], v)):
            if so_far <= bound and weight[v] > 0:
                so_far += weight[v]
                kept.append(v)
        if total > bound and len(kept) <= most:
            best = tuple(sorted(kept))
            most = len(kept) - 1
    return best


def _pick_independent(question: Question, order: Iterable[int]) -> list[int]:
    """Pick vertices in this order, each unless it is picked already or joined to a picked one."""
    barred = bytearray(question.n)
    picked = []
    for v in order:
        if not barred[v]:
            picked.append(v)
            barred[v] = 1
            for w in question.neighbours[v]:
                barred[w] = 1
    return picked
