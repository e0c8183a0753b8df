"""Answers by exhaustion, and random small graphs: the yardstick of the property tests.

Nothing here is shared with the search or the checker.
"""

from __future__ import annotations

from collections.abc import Iterator

from hypothesis import strategies as st

from certify.graph.graph import Edge
from certify.graph.question import Question


def hamiltonian_cycles(question: Question) -> Iterator[tuple[int, ...]]:
    """Yield every Hamiltonian cycle through the required edges, once, from vertex 0."""
    n = question.n
    if n < 3 or question.absent:
        return
    near = question.neighbours

    def extend(path: list[int], seen: set[int]) -> Iterator[tuple[int, ...]]:
        if len(path) == n:
            if path[0] in near[path[-1]] and path[1] < path[-1]:
                yield tuple(path)
            return
        for v in near[path[-1]]:
            if v not in seen:
                yield from extend([*path, v], seen | {v})

    for cycle in extend([0], {0}):
        if question.required <= cycle_edges(cycle):
            yield cycle


def cycle_edges(cycle: tuple[int, ...]) -> frozenset[Edge]:
    """Return the edges of a closed walk."""
    pairs = zip(cycle, (*cycle[1:], cycle[0]), strict=True)
    return frozenset((min(pair), max(pair)) for pair in pairs)


def has_cycle(question: Question) -> bool:
    """Return whether the question's answer is yes, by exhaustion."""
    return next(hamiltonian_cycles(question), None) is not None


@st.composite
def questions(draw: st.DrawFn, *, least: int = 3, most: int = 8) -> Question:
    """Draw a small question: random graph, sometimes with required edges."""
    n = draw(st.integers(least, most))
    pairs = [(u, v) for u in range(n) for v in range(u + 1, n)]
    chosen = draw(st.lists(st.booleans(), min_size=len(pairs), max_size=len(pairs)))
    edges = tuple(pair for pair, kept in zip(pairs, chosen, strict=True) if kept)
    required = draw(st.frozensets(st.sampled_from(edges), max_size=2)) if edges else frozenset()
    return Question(n=n, edges=edges, required=required)
