"""Making a recipe longer: the object for n + q, n + 2q, ... from a witness for n."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from certify.errors import CertifyError
from certify.evidence.endless import Recipe
from certify.graph.graph import Graph, Label
from certify.graph.strip import Strip


def lengthen(strip: Strip, recipe: Recipe, graph: Graph, times: int) -> list[Label]:
    """Return the object for n + times * step: the labels of its vertices in order.

    graph: the graph for the recipe's n. Repeats the stretch of the recipe as section
    8.3 of FORMAT.md says.
    Errors: CertifyError when the result is no path or cycle.
    Cost: linear in the number of vertices.
    """
    closed = strip.question(recipe.n, graph).apex is None
    order = [graph.labels[v] for v in recipe.order]
    total = times * recipe.step
    near: dict[Label, list[Label]] = {}
    for u, v in [*pairwise(order), *([(order[-1], order[0])] if closed else [])]:
        for one, other in _repeated(strip, recipe, u, v, times, total):
            near.setdefault(one, []).append(other)
            near.setdefault(other, []).append(one)
    ends = [label for label, at in near.items() if len(at) == 1]
    start = min(near, key=str) if closed else min(ends, key=strip.layer, default=order[0])
    path, last = [start], None
    while len(path) < len(near):
        onward = [label for label in near[path[-1]] if label != last]
        if not onward:
            raise CertifyError(f"{strip.claim.where}: a recipe for {recipe.n} breaks off")
        last = path[-1]
        path.append(onward[0])
    return path


def _repeated(
    strip: Strip, recipe: Recipe, u: Label, v: Label, times: int, total: int
) -> Iterator[tuple[Label, Label]]:
    """Yield what becomes of an edge of the recipe's witness."""
    if strip.layer(u) > strip.layer(v):
        u, v = v, u
    layer = strip.layer(u)
    if layer <= recipe.cut:
        far = strip.layer(v) - layer > strip.zone
        yield u, strip.moved(v, total) if far else v
    elif layer <= recipe.cut + recipe.step:
        for k in range(times + 1):
            yield strip.moved(u, k * recipe.step), strip.moved(v, k * recipe.step)
    else:
        yield strip.moved(u, total), strip.moved(v, total)
