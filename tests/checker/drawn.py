"""Questions and evidence drawn at random, with more of what holds than chance would give."""

from __future__ import annotations

from itertools import combinations
from typing import Any

from hypothesis import strategies as st

from certify.checker.forced import State
from certify.graph.graph import Edge, Graph
from certify.graph.question import Ends, Question, build_cycle_question, build_path_question
from tests.checker.questions import complete, cycle_question, generalised_petersen, twin

Assumed = set[tuple[bool, Edge]]
"""The edges that are used (True) or removed (False) on the way to a node."""


def ordered(u: int, v: int) -> Edge:
    return min(u, v), max(u, v)


@st.composite
def graphs(draw: st.DrawFn, *, least: int = 0, most: int = 7) -> Graph:
    """Draw a graph; half of them bipartite, and many of these with unequal sides."""
    n = draw(st.integers(least, most))
    density = draw(st.sampled_from([2, 3, 4, 5, 6, 8, 9, 10]))
    pairs = list(combinations(range(n), 2))
    if draw(st.booleans()):
        side = max(0, (n - 1) // 2 - draw(st.sampled_from([0, 0, 1])))
        pairs = [(u, v) for u, v in pairs if u < side <= v]
    kept = draw(st.lists(st.integers(0, 9), min_size=len(pairs), max_size=len(pairs)))
    edges = tuple(e for e, roll in zip(pairs, kept, strict=True) if roll < density)
    return Graph(tuple(range(n)), edges)


@st.composite
def questions(draw: st.DrawFn, *, least: int = 0, most: int = 7) -> Question:
    """Draw a question of any sort: cycle or path, ends, required, forbidden, absent."""
    graph = draw(graphs(least=least, most=most))
    required: list[Edge] = []
    forbidden: list[Edge] = []
    named: list[int] = []
    if graph.edges:
        some = st.lists(st.sampled_from(graph.edges), max_size=draw(st.integers(0, 2)))
        required, forbidden = draw(some), draw(some) if draw(st.booleans()) else []
    if draw(st.booleans()):
        return build_cycle_question(graph, required=required, forbidden=forbidden)
    if graph.n:
        named = draw(st.lists(st.integers(0, graph.n - 1), max_size=2))
    ends = Ends(tuple(named))
    return build_path_question(graph, ends=ends, required=required, forbidden=forbidden)


@st.composite
def symmetric_questions(draw: st.DrawFn) -> Question:
    """Draw a question about a graph with symmetries; at most one edge is required."""
    edges = draw(
        st.sampled_from(
            [
                join(3, 4), join(3, 4), join(2, 4), join(3, 3), complete(5),
                [*join(3, 4), (0, 1)], [*join(2, 4), (0, 1)],
                [*complete(5), *[(u + 4 if u else 0, v + 4) for u, v in complete(4)]],
                [*complete(4), *[(u + 3 if u else 0, v + 3) for u, v in complete(4)]],
                generalised_petersen(3, 1), generalised_petersen(4, 1),
            ]
        )
    )  # fmt: skip
    required = draw(st.lists(st.sampled_from(sorted(edges)), max_size=draw(st.integers(0, 1))))
    return cycle_question(edges, required)


def join(small: int, large: int) -> list[Edge]:
    """Return the complete bipartite graph."""
    return [(u, small + v) for u in range(small) for v in range(large)]


@st.composite
def obstructions(draw: st.DrawFn, question: Question) -> dict[str, Any]:
    """Draw an obstruction whose vertices are in the graph."""
    n, near = question.n, question.neighbours
    forms = ["absent", "small", "leaf", "crowded", "crowded", "ring", "separator", "independent"]
    form = draw(st.sampled_from(forms))
    if form in ("absent", "small") or n == 0:
        return {"form": form}
    vertex = draw(st.integers(0, n - 1))
    subset = draw(st.sets(st.integers(0, n - 1), max_size=n))
    if form == "leaf":
        return {"form": form, "vertex": vertex}
    if form == "crowded":
        few = {v for v in range(n) if len(near[v]) == 2}
        if draw(st.booleans()):
            vertex = max(range(n), key=lambda v: len(few & {*near[v]}))
        three = sorted(near[vertex], key=lambda v: v not in few)[:3]
        return {"form": form, "vertex": vertex, "neighbours": sorted(three)}
    if form == "ring":
        return {"form": form, "vertices": draw(st.permutations(sorted(subset)))}
    if form == "independent" or draw(st.booleans()):
        kept: set[int] = set()
        for v in draw(st.permutations(range(n))):
            kept |= {v} - {w for u in kept for w in near[u]}
        subset = kept if form == "independent" else {*range(n)} - kept
    return {"form": form, "set": sorted(subset)}


@st.composite
def countings(draw: st.DrawFn, question: Question) -> dict[str, Any]:
    """Draw weights: those of two sides, or of anything, with cuts and parities."""
    n = question.n
    inside = draw(st.sets(st.integers(0, n - 1)))
    weights = [-1 if v in inside else 1 for v in range(n)]
    match draw(st.sampled_from(["sides", "any", "none"])):
        case "sides":
            kept: set[int] = set()
            for v in draw(st.permutations(range(n))):
                kept |= {v} - {w for u in kept for w in question.neighbours[u]}
            weights = [1 if v in kept else -1 for v in range(n)]
        case "any":
            weights = draw(st.lists(st.integers(-2, 2), min_size=n, max_size=n))
        case "none":
            weights = [0] * n
    cuts, parities = [], []
    for _ in range(draw(st.integers(0, 2))):
        chosen = draw(st.sets(st.integers(0, n - 1), min_size=1, max_size=n - 1))
        z = draw(st.integers(1, 3))
        leaving = [e for e in question.edges if (e[0] in chosen) != (e[1] in chosen)]
        if leaving and draw(st.booleans()):
            wanted = [e for e in leaving if e in question.required] or leaving
            flipped = draw(st.sets(st.sampled_from(wanted), min_size=1, max_size=3))
            parities.append([sorted(chosen), [list(e) for e in sorted(flipped)], z])
        else:
            cuts.append([sorted(chosen), z])
    vertex = [[v, y] for v, y in enumerate(weights) if y]
    return {"vertex": vertex, "cut": cuts, "parity": parities}


@st.composite
def trees(draw: st.DrawFn, question: Question) -> dict[str, Any]:
    """Draw a tree of forced leaves, closed by symmetry where that may be, or just said to be."""
    nodes: list[Any] = []
    found = draw(st.permutations(automorphisms(question)))
    symmetries = [list(p) for p in found[: draw(st.sampled_from([20, 1, 4]))]]
    if draw(st.integers(0, 9)) == 7:
        symmetries.append(draw(st.permutations(range(question.n))))
    closed: dict[int, Assumed] = {}
    branches: list[tuple[int, Assumed, int]] = []  # number, assumptions, children to come
    nothing: Assumed = set()
    waiting = [(State(twin(question)), nothing)]

    def close(number: int, assumed: Assumed) -> None:
        closed[number] = assumed
        while branches:
            number, assumed, left = branches.pop()
            if left > 1:
                branches.append((number, assumed, left - 1))
                return
            closed[number] = assumed

    while waiting and len(nodes) < 150:
        state, assumed = waiting.pop()
        edges = [e for e in sorted(state.edges) if state.is_open(*e)]
        leaf = ["forced"] if state.contradiction or not edges else None
        if leaf is None and symmetries and closed:
            leaf = draw(likes(state, closed, symmetries))
        nodes.append(leaf)
        if leaf is not None:
            close(len(nodes) - 1, assumed)
            continue
        u, v = draw(st.sampled_from(edges))
        nodes[-1] = ["edge", u, v]
        cases: list[Assumed] = [{(True, (u, v))}, {(False, (u, v))}]
        if draw(st.booleans()) and len(state.used[u]) < 2:
            pairs = combinations(sorted(state.left[u]), 2)
            fitting = [pair for pair in pairs if state.used[u] <= set(pair)]
            cases = [{(True, ordered(u, w)) for w in pair} for pair in fitting]
            nodes[-1] = ["vertex", u]
        branches.append((len(nodes) - 1, assumed, len(cases)))
        for case in reversed(cases):
            used = [e for is_used, e in case if is_used]
            removed = [e for is_used, e in case if not is_used]
            waiting.append((state.assume(used, removed), assumed | case))
    return {"nodes": nodes, "symmetries": symmetries}


@st.composite
def likes(
    draw: st.DrawFn, state: State, closed: dict[int, Assumed], symmetries: list[list[int]]
) -> list[Any] | None:
    """Draw a node `like` whose demands are met, or once in a while any; None if there is none."""
    if draw(st.integers(0, 60)) == 41:
        return ["like", draw(st.sampled_from([*closed])), draw(st.integers(0, len(symmetries) - 1))]
    here = {(True, e) for e in state.used_edges()} | {(False, e) for e in state.removed_edges()}
    fitting = []
    for k, p in enumerate(symmetries):
        image = {(is_used, ordered(p[u], p[v])) for is_used, (u, v) in here}
        fitting += [["like", j, k] for j, assumed in closed.items() if assumed <= image]
    return draw(st.sampled_from(fitting)) if fitting and draw(st.integers(0, 3)) != 3 else None


def automorphisms(question: Question, most: int = 60) -> list[tuple[int, ...]]:
    """Return automorphisms that keep the required edges, by exhaustion; at most so many."""
    found: list[tuple[int, ...]] = []
    kept = (question.edge_set, question.required)

    def extend(image: list[int]) -> None:
        v = len(image)
        if v == question.n:
            found.append(tuple(image))
            return
        for w in set(range(question.n)) - set(image):
            pairs = [((u, v), ordered(x, w)) for u, x in enumerate(image)]
            alike = all((e in edges) == (f in edges) for e, f in pairs for edges in kept)
            if alike and len(found) < most:
                extend([*image, w])

    extend([])
    return found
