"""Cuts and parity sets that a fractional solution violates.

Input everywhere: the vertices 0..n-1, the edges, and x, a value in [0, 1] for
each edge, with x summing to 2 at each vertex up to rounding. Floating point is
harmless here: a set that is found needlessly is still a true fact.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import igraph

from certify.graph.graph import Edge

TOLERANCE = 1e-6
_VIOLATION = 1e-4
_ENOUGH = 60

Sides = list[list[int]]


class _Groups:
    """Disjoint groups of vertices that can be joined, as a forest of parents."""

    def __init__(self, n: int) -> None:
        self.parent = list(range(n))

    def find(self, v: int) -> int:
        parent = self.parent
        while parent[v] != v:
            parent[v] = parent[parent[v]]
            v = parent[v]
        return v

    def join(self, u: int, v: int) -> bool:
        u, v = self.find(u), self.find(v)
        self.parent[max(u, v)] = min(u, v)
        return u != v

    def members(self) -> dict[int, list[int]]:
        """Return the groups by their least vertex, in order."""
        groups: dict[int, list[int]] = {}
        for v in range(len(self.parent)):
            groups.setdefault(self.find(v), []).append(v)
        return groups


def find_cuts(n: int, edges: Sequence[Edge], x: Sequence[float]) -> Sides:
    """Find sets S with less than 2 leaving: the violated cuts.

    First the components of the edges with x > 0. If there is one only, the
    groups that arise when edges are contracted in the order of decreasing x. If none
    of these is violated, the cuts of a Gomory-Hu tree (J. SIAM 9 (1961)
    551-570) of the graph in which edges with x = 1 are contracted: a least cut
    below 2 survives that (Padberg and Rinaldi, Math. Programming 47 (1990)
    19-36), and is one of the tree's cuts. So an empty list says that there is
    none.
    Cost: O(m log n), and n maximum flows where the tree is needed.
    """
    support = [(x[e], u, v) for e, (u, v) in enumerate(edges) if x[e] > TOLERANCE]
    groups = _Groups(n)
    for _, u, v in support:
        groups.join(u, v)
    parts = list(groups.members().values())
    if len(parts) > 1:
        return parts if len(parts) > 2 else parts[:1]
    return _cuts_by_contraction(n, support) or _cuts_by_tree(n, support)


def _cuts_by_contraction(n: int, support: list[tuple[float, int, int]]) -> Sides:
    near: list[dict[int, float]] = [{} for _ in range(n)]
    leaving = [0.0] * n
    for value, u, v in support:
        near[u][v] = near[v][u] = value
        leaving[u] += value
        leaving[v] += value
    groups = _Groups(n)
    members = [[v] for v in range(n)]
    found: Sides = []
    for _, a, b in sorted(support, key=lambda item: (-item[0], item[1], item[2])):
        u, v = groups.find(a), groups.find(b)
        if u == v:
            continue
        groups.join(u, v)
        kept, gone = min(u, v), max(u, v)
        leaving[kept] += leaving[gone] - 2 * near[kept].pop(gone)
        del near[gone][kept]
        for w, value in near[gone].items():
            del near[w][gone]
            near[kept][w] = near[w][kept] = near[kept].get(w, 0.0) + value
        members[kept] += members[gone]
        if len(members[kept]) >= n - 1:
            break
        if leaving[kept] < 2 - _VIOLATION:
            found.append(list(members[kept]))
    return found[:_ENOUGH]


def _cuts_by_tree(n: int, support: list[tuple[float, int, int]]) -> Sides:
    groups = _Groups(n)
    for value, u, v in support:
        if value > 1 - TOLERANCE:
            groups.join(u, v)
    parts = groups.members()
    number = {root: i for i, root in enumerate(parts)}
    if len(parts) < 4:
        return []
    capacity: dict[Edge, float] = {}
    for value, a, b in support:
        u, v = number[groups.find(a)], number[groups.find(b)]
        if u != v:
            capacity[min(u, v), max(u, v)] = capacity.get((min(u, v), max(u, v)), 0.0) + value
    bodies = list(parts.values())
    return [
        [v for part in side for v in bodies[part]]
        for _, side in _tree_cuts(len(bodies), capacity, 2 - _VIOLATION)
    ][:_ENOUGH]


def _tree_cuts(
    n: int, capacity: dict[Edge, float], below: float
) -> Iterator[tuple[float, list[int]]]:
    """Yield the cuts of a Gomory-Hu tree that are below a value: (value, one side)."""
    graph = igraph.Graph(n, list(capacity))
    tree = graph.gomory_hu_tree(capacity=list(capacity.values()))
    near: list[list[tuple[int, float]]] = [[] for _ in range(n)]
    for (u, v), flow in zip(tree.get_edgelist(), tree.es["flow"], strict=True):
        near[u].append((v, flow))
        near[v].append((u, flow))
    parent = [-1] * n
    order = [0]
    flow_up = [0.0] * n
    for v in order:
        for w, flow in near[v]:
            if w != parent[v]:
                parent[w] = v
                flow_up[w] = flow
                order.append(w)
    below_v: list[list[int]] = [[v] for v in range(n)]
    for v in reversed(order[1:]):
        if flow_up[v] < below:
            yield flow_up[v], sorted(below_v[v])
        below_v[parent[v]] += below_v[v]


def find_parities(
    n: int, edges: Sequence[Edge], x: Sequence[float]
) -> list[tuple[list[int], list[int]]]:
    """Find sets S with odd sets F of leaving edges (numbers) whose parity fact is violated.

    For fixed S the best F takes every leaving edge with x > 1/2, and one edge
    more or less where that is an even number. First S runs through the components of
    the fractional edges; if none is violated, through the cuts of a Gomory-Hu
    tree with capacities min(x, 1 - x), in which a violated one is found if there is
    one (Letchford, Reinelt and Theis, "A faster exact separation algorithm for
    blossom inequalities", IPCO 2004, LNCS 3064, 196-205).
    Returns pairs (S, F); an empty list says that there is none.
    Cost: O(m), and n maximum flows where the tree is needed.
    """
    fractional = [e for e, value in enumerate(x) if TOLERANCE < value < 1 - TOLERANCE]
    groups = _Groups(n)
    for e in fractional:
        groups.join(*edges[e])
    parts = [part for part in groups.members().values() if len(part) > 2]
    at: list[list[int]] = [[] for _ in range(n)]
    for e, (u, v) in enumerate(edges):
        at[u].append(e)
        at[v].append(e)
    found = _violated(parts, edges, x, at)
    if found:
        return found
    for part in parts:
        place = {v: i for i, v in enumerate(part)}
        capacity = {
            (place[u], place[v]): min(x[e], 1 - x[e])
            for e in fractional
            for u, v in [edges[e]]
            if u in place
        }
        cuts = _tree_cuts(len(part), capacity, 1 - _VIOLATION)
        sides = [[part[i] for i in side] for _, side in cuts]
        found += _violated(sides, edges, x, at)
    return found[:_ENOUGH]


def _violated(
    sides: Sides, edges: Sequence[Edge], x: Sequence[float], at: list[list[int]]
) -> list[tuple[list[int], list[int]]]:
    found = []
    for side in sides:
        members = set(side)
        leaving = [
            e for v in side for e in at[v] if (edges[e][0] in members) != (edges[e][1] in members)
        ]
        if not leaving:
            continue
        odd = {e for e in leaving if x[e] > 0.5}
        loss = sum(min(x[e], 1 - x[e]) for e in leaving)
        if len(odd) % 2 == 0:
            swing = min(leaving, key=lambda e: (abs(2 * x[e] - 1), e))
            odd ^= {swing}
            loss += abs(2 * x[swing] - 1)
        if loss < 1 - _VIOLATION:
            found.append((side, sorted(odd)))
    return found
