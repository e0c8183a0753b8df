"""Recipes: witnesses of a strip that can be made longer (FORMAT.md, 8.3).

They are examples for readers. That the object exists for all n that are told does not rest
on them; but what a record says has to be true, so they are checked too.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Callable
from itertools import pairwise

from .graphs import Edge, Graph, Question, edge
from .strict import Rejected, need_integer, need_keys, need_permutation
from .strip import Strip
from .witness import check_witness

Ask = Callable[[int], tuple[Graph, Question]]


def check_recipe(strip: Strip, told: object, ask: Ask, what: str) -> None:
    """Accept a recipe whose witnesses for n, n + q and n + 2q are witnesses.

    ask: gives the graph and the question for an n.
    """
    entry = need_keys(told, {"cut", "n", "order", "step"}, what)
    n = need_integer(entry["n"], f"{what}: n", strip.first)
    step = need_integer(entry["step"], f"{what}: step", 1)
    cut = need_integer(entry["cut"], f"{what}: cut", 0)
    if step % strip.modulus or cut + step >= strip.count_layers(n):
        raise Rejected(f"{what}: the layers after {cut} cannot be repeated with the step {step}")
    graph, question = ask(n)
    check_witness(question, {"order": entry["order"]})
    order = need_permutation(entry["order"], len(graph.names), what)
    edges = _edges_of(order, path=question.path)
    for times in (1, 2):
        longer, asked = ask(n + times * step)
        moved = _lengthen(strip, (n, graph, edges), (cut, step, times), longer)
        order = _walk(moved, path=asked.path)
        if _edges_of(order, path=asked.path) != moved:
            raise Rejected(f"{what}: with the layers {times} times more it is no path or cycle")
        check_witness(asked, {"order": order})


def _edges_of(order: list[int], *, path: bool) -> set[Edge]:
    """Return the edges of a path, or of a cycle, that visits the vertices in this order."""
    steps = list(pairwise(order)) if path else list(pairwise([*order, order[0]]))
    return {edge(u, v) for u, v in steps}


def _lengthen(
    strip: Strip,
    witness: tuple[int, Graph, set[Edge]],
    repeat: tuple[int, int, int],
    longer: Graph,
) -> set[Edge]:
    """Return the edges of the witness after the layers are repeated, in the longer graph."""
    (n, graph, edges), (cut, step, times) = witness, repeat
    cells, layers = strip.cells(graph), strip.layers(graph)
    number = {cell: v for v, cell in enumerate(strip.cells(longer))}
    last = strip.count_layers(n) - strip.zone

    def move(v: int, by: int) -> int:
        cell = list(cells[v])
        cell[strip.long] += by
        if tuple(cell) not in number:
            raise Rejected(f"the longer graph has no vertex {cell}")
        return number[tuple(cell)]

    moved = []
    for u, v in edges:
        lower, upper = (u, v) if layers[u] <= layers[v] else (v, u)
        if layers[lower] < strip.zone and layers[upper] >= last:
            moved.append((move(lower, 0), move(upper, times * step)))
        elif layers[lower] <= cut:
            moved.append((move(lower, 0), move(upper, 0)))
        elif layers[lower] <= cut + step:
            moved += [(move(lower, k * step), move(upper, k * step)) for k in range(times + 1)]
        else:
            moved.append((move(lower, times * step), move(upper, times * step)))
    return {edge(u, v) for u, v in moved}


def _walk(edges: set[Edge], *, path: bool) -> list[int]:
    """Return the vertices in the order in which a path or cycle of these edges visits them.

    What is no path or cycle gives an order with other edges.
    """
    near: dict[int, list[int]] = defaultdict(list)
    for u, v in sorted(edges):
        near[u].append(v)
        near[v].append(u)
    ends = sorted(v for v, around in near.items() if len(around) == 1)
    order: list[int] = []
    seen: set[int] = set()
    here = ends[:1] if path else sorted(near)[:1]
    while here:
        order.append(here[0])
        seen.add(here[0])
        here = [v for v in near[here[0]] if v not in seen]
    return order
