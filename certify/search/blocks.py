"""Blocks behind small edge cuts.

When two or three edges separate a block from the rest, a Hamiltonian cycle crosses
exactly two of them and passes the block in one go. So a Hamiltonian cycle of the
graph becomes one of the *contraction*, the block with all the rest drawn together
into one vertex; if that has none, the graph has none. The contraction is small, and
a sweep along an order that begins with the block dies at its end, however wide
the rest of the graph is.

A block may also have a passage, but always through one certain edge, as the fragment of
Tutte (J. London Math. Soc. 21 (1946) 98-101). Three blocks whose certain edges
meet in one vertex leave no cycle, as in his graph; then the sweep begins with the three.
"""

from __future__ import annotations

import random
from collections.abc import Iterator
from dataclasses import dataclass

import igraph

from certify.evidence.sweep import Sweep
from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.sweep import find_sweep, sweep_along

_SEED = 20
_MOST_EDGES = 2_000
"""Triples of edges are looked up pair by pair; graphs with more are left to others."""
_MOST_BLOCKS = 40
_TOO_MANY = 3
"""A cycle has two edges at a vertex."""


def find_block(question: Question, *, budget: Budget, memory: int = 1 << 26) -> Sweep | None:
    """Find a block behind two or three edges that no Hamiltonian cycle passes.

    Or three blocks that every one leaves towards the same vertex.

    Returns a sweep of the whole question whose order begins with the block. None:
    there is no such block among the smallest `_MOST_BLOCKS`, or a limit was reached.
    Cost: O(m^2) for the cuts, then a sweep of each block.
    """
    if question.n < 3 or question.absent or question.m > _MOST_EDGES:
        return None
    certain: dict[int, list[tuple[int, ...]]] = {}
    for block in _find_small_sides(question):
        if budget.spent:
            return None
        order, forced = _pass_through(question, block, budget, memory)
        if order is None:
            continue
        begins = [order] if not forced else []
        for u, v in forced:
            outer = v if u in order else u
            certain.setdefault(outer, []).append(order)
            if len(certain[outer]) == _TOO_MANY:
                begins.append((*(w for part in certain[outer] for w in part), outer))
        for begin in begins:
            distinct = tuple(dict.fromkeys(begin))
            rest = sorted(set(range(question.n)) - set(distinct))
            whole = sweep_along(question, (*distinct, *rest), budget=budget, memory=memory)
            if isinstance(whole, Sweep):
                return whole
    return None


def _pass_through(
    question: Question, block: tuple[int, ...], budget: Budget, memory: int
) -> tuple[tuple[int, ...] | None, tuple[Edge, ...]]:
    """Return an order of the block, and the edges of its cut that every passage uses.

    No edges: there is no passage at all. No order: nothing is known that helps.
    """
    contraction = _contract(question, block)
    found = find_sweep(contraction.question, budget=budget, memory=memory)
    outside = contraction.question.n - 1
    if isinstance(found, Sweep):
        return tuple(contraction.vertices[v] for v in found.order if v != outside), ()
    inside = set(block)
    for u, v in question.edges:
        if (u in inside) == (v in inside):
            continue
        end = block.index(u if u in inside else v)
        without = contraction.question.assume((), [(end, outside)])
        if min(map(len, without.neighbours)) < 2:
            continue  # of two edges both are used, as the forced moves know
        closed = find_sweep(without, budget=budget, memory=memory)
        if isinstance(closed, Sweep):
            order = tuple(contraction.vertices[w] for w in closed.order if w != outside)
            return order, ((u, v),)
    return None, ()


@dataclass(frozen=True)
class _Contraction:
    """The block, its vertices numbered from 0, and the rest as the last vertex.

    vertices: the block's vertices in the question, by their new numbers.
    """

    question: Question
    vertices: tuple[int, ...]


def _contract(question: Question, block: tuple[int, ...]) -> _Contraction:
    number = {v: i for i, v in enumerate(block)}
    rest = len(block)

    def image(edges: Iterator[Edge]) -> set[Edge]:
        pairs = ((number.get(u, rest), number.get(v, rest)) for u, v in edges)
        return {edge_between(u, v) for u, v in pairs if u != v}

    return _Contraction(
        Question(
            n=rest + 1,
            edges=tuple(sorted(image(iter(question.edges)))),
            required=frozenset(image(iter(question.required))),
        ),
        block,
    )


def _find_small_sides(question: Question) -> list[tuple[int, ...]]:
    """Return sides of cuts of two or three edges, sorted, the smallest first.

    Every edge gets a random number, such that the numbers of a set of edges cancel
    (in exclusive or) when the set is a cut: edges off a spanning tree freely, those of
    the tree the sum of the ones that cross them (Pritchard and Thurimella, ACM
    Transactions on Algorithms 7 (2011) article 46). What cancels by accident is no cut,
    and is thrown out.
    """
    labels = _label_edges(question)
    graph = igraph.Graph(n=question.n, edges=question.edges)
    by_label: dict[int, list[int]] = {}
    for e, label in enumerate(labels):
        by_label.setdefault(label, []).append(e)
    cuts: set[tuple[int, ...]] = set()
    for e, one in enumerate(labels):
        cuts.update((e, f) for f in by_label[one] if f > e)
        for f in range(e + 1, question.m):
            cuts.update((e, f, g) for g in by_label.get(one ^ labels[f], ()) if g > f)
    sides: set[tuple[int, ...]] = set()
    for cut in sorted(cuts):
        if not _is_star(question, cut):
            sides.update(_sides_of(graph, cut))
    return sorted(sides, key=lambda side: (len(side), side))[:_MOST_BLOCKS]


def _is_star(question: Question, cut: tuple[int, ...]) -> bool:
    """Return whether the edges meet in a vertex that has no others."""
    common = set.intersection(*(set(question.edges[e]) for e in cut))
    return any(len(question.neighbours[v]) == len(cut) for v in common)


def _sides_of(graph: igraph.Graph, cut: tuple[int, ...]) -> Iterator[tuple[int, ...]]:
    without = graph.copy()
    without.delete_edges(list(cut))
    parts = without.connected_components()
    if len(parts) != 2:
        return
    member = parts.membership
    if any(member[graph.es[e].source] == member[graph.es[e].target] for e in cut):
        return
    for part in parts:
        # Edges that meet inside the block would become one edge of the contraction.
        inner = {v for e in cut for v in graph.es[e].tuple if member[v] == member[part[0]]}
        if len(inner) == len(cut) and 3 <= len(part) <= graph.vcount() // 2:
            yield tuple(sorted(part))


def _label_edges(question: Question) -> list[int]:
    rng = random.Random(_SEED)
    number = {edge: e for e, edge in enumerate(question.edges)}
    labels = [0] * question.m
    parent = [-1] * question.n
    order: list[int] = []
    for root in range(question.n):
        if parent[root] >= 0:
            continue
        parent[root] = root
        stack = [root]
        while stack:
            v = stack.pop()
            order.append(v)
            for w in question.neighbours[v]:
                if parent[w] < 0:
                    parent[w] = v
                    stack.append(w)
    sums = [0] * question.n
    for e, (u, v) in enumerate(question.edges):
        if parent[u] != v and parent[v] != u:
            labels[e] = rng.getrandbits(64)
            sums[u] ^= labels[e]
            sums[v] ^= labels[e]
    for v in reversed(order):
        if parent[v] != v:
            labels[number[edge_between(v, parent[v])]] = sums[v]
            sums[parent[v]] ^= sums[v]
    return labels
