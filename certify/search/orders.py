"""Orders of the vertices along which few states are expected.

The *prefix* of an order after i steps is the set of its first i vertices; the
*frontier* of a prefix is the set of the other vertices that are joined to it.
A sweep (FORMAT.md, section 6) keeps one value for each frontier vertex, so an
order is good when its frontiers are small. The least possible largest frontier
is the pathwidth (Kinnersley, Inform. Process. Lett. 42 (1992) 345-350), which
is hard to find: here several quick orders are made, the best few are improved
by moving single vertices, and the best is kept. No randomness, no floating
point: the same question gives the same order on every machine.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import cache

from certify.graph.question import Question

Neighbours = Sequence[Sequence[int]]

STARTS = 6
"""How many vertices, evenly spaced by number, the searches start from."""
IMPROVED = 3
"""How many of the quick orders are improved."""
ROUNDS = 4
"""How often every vertex may be moved."""
REACH = 60
"""How many places a vertex may move in one round, to either side."""
MOVES = 60_000
"""How many places all vertices together may be moved over, for each order."""
WIDEST = 60
"""Frontiers beyond this size are hopeless: their states are not counted exactly (each
further place counts eightfold), and orders that have them are not improved."""


def find_order(question: Question) -> tuple[int, ...]:
    """Find an order of the vertices with a small expected number of states.

    An apex that is joined to many vertices is put last at first: it then costs
    one place in every frontier, but put first it would make all its neighbours
    frontier. The improvement may move it.
    Cost: O(n + m) for each of about 50 quick orders, and MOVES moves, each of
    the cost of a vertex's degree, for each of IMPROVED orders.
    """
    near = question.neighbours
    hub = question.apex
    if hub is None or len(near[hub]) <= 2:
        orders = _list_orders(near)
    else:
        inner = [tuple(u for u in at_v if u != hub) for at_v in near[:hub]]
        orders = [(*order, hub) for order in _list_orders(inner)]
    ranked = sorted(dict.fromkeys(orders), key=lambda order: estimate_states(near, order))
    if measure_width(near, ranked[0]) > WIDEST:
        return ranked[0]
    improved = [_improve(near, order) for order in ranked[:IMPROVED]]
    return min(improved, key=lambda order: estimate_states(near, order))


def estimate_states(near: Neighbours, order: Sequence[int]) -> int:
    """Return an upper bound for the number of states along an order, all steps together.

    A state pairs up some frontier vertices, the ends of pieces; each of the
    others has no chosen edge or, if at least two edges lead to it from the
    prefix, possibly two. With a frontier beyond WIDEST it is a rough measure only.
    Cost: O(n + m).
    """
    prefix = _Prefix(near)
    total = 0
    for v in order:
        prefix.add(v)
        total += prefix.bound
    return total


def measure_width(near: Neighbours, order: Sequence[int]) -> int:
    """Return the size of the largest frontier along an order. Cost: O(n + m)."""
    prefix = _Prefix(near)
    widest = 0
    for v in order:
        prefix.add(v)
        widest = max(widest, prefix.once + prefix.more)
    return widest


def measure_degeneracy(near: Neighbours) -> int:
    """Return the largest k such that some part of the graph has all degrees at least k.

    This is the degeneracy. Every order has a frontier of at least this size,
    because treewidth lies between degeneracy and pathwidth. Vertices of least
    degree are taken away one by one (Matula and Beck, J. ACM 30 (1983) 417-427).
    Cost: O(n + m).
    """
    degree = [len(at_v) for at_v in near]
    buckets: list[list[int]] = [[] for _ in range(len(near) + 1)]
    for v, d in enumerate(degree):
        buckets[d].append(v)
    gone = [False] * len(near)
    largest = least = 0
    for _ in near:
        v = -1
        while v < 0:
            while not buckets[least]:
                least += 1
            top = buckets[least].pop()
            v = top if not gone[top] and degree[top] == least else -1
        gone[v] = True
        largest = max(largest, least)
        for u in near[v]:
            if not gone[u]:
                degree[u] -= 1
                buckets[degree[u]].append(u)
        least = max(least - 1, 0)
    return largest


@cache
def _count_states(once: int, more: int) -> int:
    """Return how many states a frontier may have.

    once, more: how many frontier vertices are joined to the prefix by one edge,
    and by more. Each is paired with another one or single; a single one of the
    second sort has two possible values, one of the first sort only one.
    """
    if once + more > WIDEST:
        fewer = WIDEST - min(more, WIDEST)
        extra = once + more - WIDEST
        return _count_states(fewer, min(more, WIDEST)) << 3 * extra
    if once:
        paired = (once - 1) * _count_states(once - 2, more) if once > 1 else 0
        mixed = more * _count_states(once - 1, more - 1) if more else 0
        return _count_states(once - 1, more) + paired + mixed
    if more:
        paired = (more - 1) * _count_states(0, more - 2) if more > 1 else 0
        return 2 * _count_states(0, more - 1) + paired
    return 1


class _Prefix:
    """A prefix that grows and shrinks, with the size of its frontier.

    inside[v]: whether v is in the prefix. back[v]: how many neighbours of v are.
    once, more: how many frontier vertices have one neighbour in it, and more.
    """

    def __init__(self, near: Neighbours) -> None:
        self.near = near
        self.inside = [False] * len(near)
        self.back = [0] * len(near)
        self.once = 0
        self.more = 0

    @property
    def bound(self) -> int:
        """Return how many states the frontier may have."""
        return _count_states(self.once, self.more)

    def add(self, v: int) -> None:
        """Put v into the prefix."""
        inside, back = self.inside, self.back
        inside[v] = True
        if back[v] == 1:
            self.once -= 1
        elif back[v]:
            self.more -= 1
        for u in self.near[v]:
            back[u] += 1
            if not inside[u]:
                if back[u] == 1:
                    self.once += 1
                elif back[u] == 2:
                    self.once -= 1
                    self.more += 1

    def remove(self, v: int) -> None:
        """Take v out of the prefix."""
        inside, back = self.inside, self.back
        for u in self.near[v]:
            if not inside[u]:
                if back[u] == 1:
                    self.once -= 1
                elif back[u] == 2:
                    self.once += 1
                    self.more -= 1
            back[u] -= 1
        inside[v] = False
        if back[v] == 1:
            self.once += 1
        elif back[v]:
            self.more += 1

    def bound_with(self, v: int) -> int:
        """Return how many states the frontier may have once v is in the prefix too."""
        inside, back = self.inside, self.back
        once, more = self.once, self.more
        if back[v] == 1:
            once -= 1
        elif back[v]:
            more -= 1
        for u in self.near[v]:
            if not inside[u]:
                if back[u] == 0:
                    once += 1
                elif back[u] == 1:
                    once -= 1
                    more += 1
        return _count_states(once, more)


def _improve(near: Neighbours, order: Sequence[int]) -> tuple[int, ...]:
    """Return the order after moving single vertices to better places.

    Each vertex in turn is taken out and put where the bound on the number of
    states is least, within REACH places; as with the variables of decision
    diagrams (Rudell, ICCAD 1993, 42-47). Ends when a round changes nothing, or
    after ROUNDS rounds or MOVES moves.
    """
    best = list(order)
    moves = 0
    for _ in range(ROUNDS):
        changed = False
        prefix = _Prefix(near)
        moved: set[int] = set()
        place = 0
        while place < len(best):
            v = best[place]
            if v not in moved and moves < MOVES:
                moved.add(v)
                target, tried = _find_place(prefix, best, place)
                moves += tried
                if target != place:
                    changed = True
                    best.insert(target, best.pop(place))
                    if target > place:
                        continue  # another vertex stands here now
            prefix.add(v)
            place += 1
        if not changed or moves >= MOVES:
            break
    return tuple(best)


def _find_place(prefix: _Prefix, order: list[int], place: int) -> tuple[int, int]:
    """Find the best new place for the vertex at a place, and count the places tried.

    prefix: the vertices before `place`; it is changed and put back. With v taken
    out, let x_i be the bound for the first i of the others and y_i the bound
    for these and v. With v at place i the bounds are x_0..x_i and y_i..., so one
    place further costs x_(i+1) - y_i more.
    """
    v = order[place]
    best, target = 0, place
    change = 0
    after = order[place + 1 : place + 1 + REACH]
    before = order[max(0, place - REACH) : place]
    for i, u in enumerate(after):
        with_v = prefix.bound_with(v)
        prefix.add(u)
        change += prefix.bound - with_v
        if change < best:
            best, target = change, place + 1 + i
    for u in reversed(after):
        prefix.remove(u)
    change = 0
    for i, u in enumerate(reversed(before)):
        without_v = prefix.bound
        prefix.remove(u)
        change += prefix.bound_with(v) - without_v
        if change < best:
            best, target = change, place - 1 - i
    for u in before:
        prefix.add(u)
    return target, len(after) + len(before)


def _list_orders(near: Neighbours) -> list[tuple[int, ...]]:
    """Return the quick orders, some of them possibly equal."""
    n = len(near)
    orders = [
        tuple(range(n)),
        *(_order_by_columns(n, k) for k in range(2, n // 2 + 1) if n % k == 0),
    ]
    starts = dict.fromkeys(n * i // STARTS for i in range(STARTS) if n)
    far = dict.fromkeys(_find_far(near, start) for start in starts)
    for start in dict.fromkeys([*far, *starts]):
        by_breadth = _order_by_breadth(near, start)
        greedy = _order_greedily(near, start)
        orders.append(by_breadth)
        orders.append(by_breadth[::-1])  # reverse Cuthill-McKee
        orders.extend([] if greedy is None else [greedy])
        orders.append(_order_between(near, start, _find_far(near, start)))
    return orders


def _order_by_columns(n: int, columns: int) -> tuple[int, ...]:
    """Return the cells of a board that was numbered row by row, column by column instead."""
    return tuple(v for first in range(columns) for v in range(first, n, columns))


def _order_between(near: Neighbours, start: int, end: int) -> tuple[int, ...]:
    """Return the vertices in order of how much nearer they are to the start than to the end."""
    here, there = _measure_distances(near, start), _measure_distances(near, end)
    return tuple(sorted(range(len(near)), key=lambda v: (here[v] - there[v], here[v], v)))


def _measure_distances(near: Neighbours, start: int) -> list[int]:
    """Return the distances from a vertex; n for vertices that are not reached."""
    distance = [len(near)] * len(near)
    distance[start] = 0
    queue = [start]
    for v in queue:
        for u in near[v]:
            if distance[u] > distance[v] + 1:
                distance[u] = distance[v] + 1
                queue.append(u)
    return distance


def _find_far(near: Neighbours, start: int) -> int:
    """Find a pseudo-peripheral vertex: go to a farthest one as long as the distance grows.

    Among the farthest the one of least degree is taken
    (George and Liu, ACM Trans. Math. Softw. 5 (1979) 284-295).
    """
    n = len(near)
    reach = -1
    while True:
        distance = _measure_distances(near, start)
        farthest = max(d for d in distance if d < n)
        if farthest <= reach:
            return start
        reach = farthest
        start = min(
            (v for v in range(n) if distance[v] == farthest), key=lambda v: (len(near[v]), v)
        )


def _order_by_breadth(near: Neighbours, start: int) -> tuple[int, ...]:
    """Return the vertices in order of distance from a start, component by component.

    Neighbours of a vertex follow by degree, as proposed by Cuthill and McKee
    (Proc. 24th ACM Nat. Conf. (1969) 157-172).
    """
    seen = [False] * len(near)
    order: list[int] = []
    for first in (start, *range(len(near))):
        if seen[first]:
            continue
        seen[first] = True
        order.append(first)
        done = len(order) - 1
        while done < len(order):
            fresh = [u for u in near[order[done]] if not seen[u]]
            for u in sorted(fresh, key=lambda u: (len(near[u]), u)):
                seen[u] = True
                order.append(u)
            done += 1
    return tuple(order)


def _order_greedily(near: Neighbours, start: int) -> tuple[int, ...] | None:
    """Return an order in which each vertex adds as few vertices to the frontier as possible.

    Among these, the one that is longest in the frontier comes first. None: the
    frontier grew beyond WIDEST.
    """
    inside = [False] * len(near)
    order: list[int] = []
    frontier: dict[int, None] = {}
    for first in (start, *range(len(near))):
        if not inside[first]:
            frontier[first] = None
        while frontier:
            v = min(frontier, key=lambda u: _count_fresh(near, inside, frontier, u))
            del frontier[v]
            inside[v] = True
            order.append(v)
            frontier.update(dict.fromkeys(u for u in near[v] if not inside[u]))
            if len(frontier) > WIDEST:
                return None
    return tuple(order)


def _count_fresh(
    near: Neighbours, inside: Sequence[bool], frontier: dict[int, None], v: int
) -> int:
    """Return how many vertices v would add to the frontier."""
    return sum(not inside[u] and u not in frontier for u in near[v])
