"""Independent sets with fewer neighbours than members, or as many and more besides.

The neighbours of such a set are a separator: each member is a piece, and what is
neither a member nor a neighbour makes at least one piece more. Both sorts are
found exactly, by giving each vertex a neighbour of its own.

- Where that is impossible, some set X has fewer neighbours than members (Hall,
  J. London Math. Soc. 10 (1935) 26-30).
- Where it is possible, walk from a vertex to the vertices that were given its
  neighbours. The sets X with as many neighbours as members are those that no walk
  leaves (Dulmage, Mendelsohn, Canad. J. Math. 10 (1958) 517-534).

In X leave out the members that are neighbours of members. The rest is
independent, and its neighbours are those of X without the ones left out, at most:
so it has fewer neighbours, or as many, as X has.
"""

from __future__ import annotations

from collections.abc import Iterator

import igraph

from certify.search.net import Net

MOST_SETS = 8
"""How many sets with fewer neighbours are given at most."""


def find_deficient(net: Net) -> Iterator[tuple[int, ...]]:
    """Yield independent sets of the net whose neighbours are a separator, sorted.

    net: connected. Sets with fewer neighbours than members: at most `MOST_SETS`,
    each for a vertex that a largest matching leaves out, and the least one with
    this vertex. If there are none, all least sets with as many neighbours as
    members that leave something over. None are yielded exactly when neither sort
    exists.
    Cost: O(n m) at worst; mostly O(n + m), and a walk for each vertex that a
    greedy matching leaves out.
    """
    degrees = {len(at_v) for at_v in net.near}
    if len(degrees) == 1:
        # d edges at each member lead to neighbours with d edges: these are no fewer,
        # and if as many they have no other edge, so nothing is left over.
        return
    matching = _Matching(net)
    for root in matching.left_out[:MOST_SETS]:
        came_from, _ = matching.reach(root)
        reached = {root, *(matching.owner[w] for w in came_from)}
        yield tuple(sorted(reached - came_from.keys()))
    if not matching.left_out:
        yield from _find_tight(net, matching)


def _find_tight(net: Net, matching: _Matching) -> Iterator[tuple[int, ...]]:
    """Yield the least independent sets with as many neighbours, where something is left over.

    matching: gives a neighbour to each vertex. The least sets that no walk
    leaves are the strong components without a way out.
    """
    ways = [(v, matching.owner[w]) for v, at_v in enumerate(net.near) for w in at_v]
    walks = igraph.Graph(n=len(net.near), edges=ways, directed=True)
    strong = walks.connected_components(mode="strong")
    name = strong.membership
    has_way_out = {name[v] for v, w in ways if name[v] != name[w]}
    for i, members in enumerate(strong):
        around = {matching.given[v] for v in members}
        inner = [v for v in members if v not in around]
        if i not in has_way_out and inner:
            neighbours = {w for v in inner for w in net.near[v]}
            if len(inner) + len(neighbours) < len(net.near):
                yield tuple(sorted(inner))


class _Matching:
    """A largest matching of vertices with neighbours of theirs.

    owner[w]: the vertex to which w is given, -1 for none; given[v]: the neighbour
    given to v, -1 for none; left_out: the vertices to which none is given.
    """

    def __init__(self, net: Net) -> None:
        self._near = near = net.near
        self.owner = [-1] * len(near)
        self.given = [-1] * len(near)
        by_degree = sorted(range(len(near)), key=lambda v: len(near[v]))
        for v in by_degree:
            free = [w for w in near[v] if self.owner[w] < 0]
            if free:
                self._give(min(free, key=lambda w: len(near[w])), v)
        self.left_out = [v for v in by_degree if self.given[v] < 0 and not self._improve(v)]

    def _give(self, w: int, v: int) -> None:
        self.owner[w] = v
        self.given[v] = w

    def reach(self, root: int) -> tuple[dict[int, int], int]:
        """Find what the root can reach: a neighbour, its owner, a neighbour of that, ...

        Returns for each neighbour reached the vertex it was reached from, and a
        neighbour without owner, with which the search ends; -1 if none is reached.
        """
        came_from: dict[int, int] = {}
        queue = [root]
        for v in queue:
            for w in self._near[v]:
                if w not in came_from:
                    came_from[w] = v
                    if self.owner[w] < 0:
                        return came_from, w
                    queue.append(self.owner[w])
        return came_from, -1

    def _improve(self, root: int) -> bool:
        """Give the root a neighbour, passing others on along a way; say whether it works."""
        came_from, w = self.reach(root)
        if w < 0:
            return False
        while w >= 0:
            v = came_from[w]
            passed_on = self.given[v]
            self._give(w, v)
            w = passed_on
        return True
