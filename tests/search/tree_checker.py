"""A plain checker of trees of cases, written from FORMAT.md for the tests of the finder.

It shares nothing with the search; leaves by obstruction or counting are checked here too.
"""

from __future__ import annotations

import itertools

from certify.evidence.base import Json
from certify.evidence.cases import Cases
from certify.graph.graph import Edge
from certify.graph.question import Question


class WrongError(Exception):
    """The tree does not show what it should."""


def need(condition: bool, text: str) -> None:
    if not condition:
        raise WrongError(text)


def pair(u: int, v: int) -> Edge:
    return (min(u, v), max(u, v))


class Contradiction(Exception):  # noqa: N818 - not an error: what the moves end in
    pass


def forced_moves(
    question: Question, used: frozenset[Edge], removed: frozenset[Edge]
) -> tuple[frozenset[Edge], frozenset[Edge]]:
    """Make the forced moves by trying every rule everywhere until nothing changes."""
    using, gone = set(used), set(removed)
    if using & gone:
        raise Contradiction
    while True:
        before = len(using) + len(gone)
        for v in range(question.n):
            left = {e for e in question.edges if v in e} - gone
            here = left & using
            if len(left) < 2 or len(here) > 2:
                raise Contradiction
            if len(here) == 2:
                gone |= left - using
            if len(left) == 2:
                using |= left
        for ends, size in pieces(question.n, using):
            if size == question.n:
                continue
            if not ends:
                raise Contradiction
            shortcut = pair(*ends)
            if shortcut in question.edges and shortcut not in using:
                gone.add(shortcut)
        if using & gone:
            raise Contradiction
        if len(using) + len(gone) == before:
            return frozenset(using), frozenset(gone)


def pieces(n: int, using: set[Edge]) -> list[tuple[tuple[int, ...], int]]:
    """Return for each piece of used edges its two ends (() for a cycle) and its size."""
    near: dict[int, set[int]] = {v: set() for v in range(n)}
    for u, v in using:
        near[u].add(v)
        near[v].add(u)
    found, seen = [], set()
    for start in range(n):
        if start in seen or not near[start] or max(map(len, near.values())) > 2:
            continue
        part, waiting = {start}, [start]
        while waiting:
            for w in near[waiting.pop()] - part:
                part.add(w)
                waiting.append(w)
        seen |= part
        ends = tuple(sorted(v for v in part if len(near[v]) == 1))
        found.append((ends, len(part)))
    return found


def check_tree(question: Question, cases: Cases) -> None:
    """Raise WrongError unless the tree is a proof that the question has no Hamiltonian cycle."""
    body = cases.body()
    nodes, symmetries = body["nodes"], body["symmetries"]
    assert isinstance(nodes, list)
    assert isinstance(symmetries, list)
    need(question.n >= 3 and not question.absent, "no trees for such a question")
    edges = set(question.edges)
    for p in symmetries:
        assert isinstance(p, list)
        need(sorted(p) == list(range(question.n)), "not a permutation")  # type: ignore[type-var]
        need({pair(p[u], p[v]) for u, v in edges} == edges, "not an automorphism")
        need(
            {pair(p[u], p[v]) for u, v in question.required} == set(question.required),
            "required edges are moved",
        )
    assumed: dict[int, tuple[frozenset[Edge], frozenset[Edge]]] = {}
    ended: set[int] = set()
    none: frozenset[Edge] = frozenset()
    number = 0
    # What waits: a case with its own assumptions, or the number of a node whose subtree ends here.
    waiting: list[int | tuple[frozenset[Edge], frozenset[Edge]]] = [(none, none)]
    while waiting:
        task = waiting.pop()
        if isinstance(task, int):
            ended.add(task)
            continue
        need(number < len(nodes), "the tree is cut short")
        node = nodes[number]
        assert isinstance(node, list)
        assumed[number] = task
        waiting.append(number)
        number += 1
        try:
            used, removed = forced_moves(question, task[0] | question.required, task[1])
        except Contradiction:
            need(node == ["forced"], "a contradiction that the tree does not say")
            continue
        need(node != ["forced"], "no contradiction")
        match node:
            case ["obstruction", dict(inner)]:
                check_obstruction(question.assume(used, removed), inner)
            case ["counting", dict(inner)]:
                check_counting(question.assume(used, removed), inner)
            case ["like", int(j), int(k)]:
                need(j in ended, "not closed before")
                p = symmetries[k]
                assert isinstance(p, list)
                need(assumed[j][0] <= {pair(p[u], p[v]) for u, v in used}, "used edges")
                need(assumed[j][1] <= {pair(p[u], p[v]) for u, v in removed}, "removed edges")
            case ["edge", int(u), int(v)]:
                e = (u, v)
                need(e in edges and e not in used and e not in removed, "no open edge")
                waiting.append((task[0], task[1] | {e}))
                waiting.append((task[0] | {e}, task[1]))
            case ["vertex", int(v)]:
                here = {e for e in used if v in e}
                need(len(here) < 2, "nothing to choose")
                left = sorted(u for u in range(question.n) if pair(u, v) in edges - removed)
                pairs = [{pair(a, v), pair(b, v)} for a, b in itertools.combinations(left, 2)]
                waiting.extend((task[0] | two, task[1]) for two in reversed(pairs) if here <= two)
            case _:
                raise WrongError(f"unknown node {node}")
    need(number == len(nodes), "more than one tree")


def check_counting(question: Question, body: dict[str, Json]) -> None:
    """Add up the scores of FORMAT.md."""
    cuts: list[tuple[set[int], set[Edge], int]] = []
    weight: dict[int, int] = {}
    rows = {key: body[key] for key in ("vertex", "cut", "parity")}
    need(len(body) == 3, "keys")
    for v, y in rows["vertex"]:  # type: ignore[misc, union-attr]
        need(y != 0 and v not in weight, "vertex weight")
        weight[v] = y
    for s, z in rows["cut"]:  # type: ignore[misc, union-attr]
        cuts.append((set(s), set(), z))
    for s, f, z in rows["parity"]:  # type: ignore[misc, union-attr]
        odd = {(u, v) for u, v in f}
        need(len(odd) % 2 == 1 and odd <= set(question.edges), "odd set")
        need(all((u in s) != (v in s) for u, v in odd), "leaves")
        cuts.append((set(s), odd, z))
    needed = 2 * sum(weight.values())
    for inside, odd, z in cuts:
        need(z > 0 and 0 < len(inside) < question.n, "set")
        needed += z * (1 - len(odd) if odd else 2)
    offer = 0
    for u, v in question.edges:
        score = weight.get(u, 0) + weight.get(v, 0)
        for inside, odd, z in cuts:
            if (u in inside) != (v in inside):
                score += -z if (u, v) in odd else z
        offer += score if (u, v) in question.required else max(0, score)
    need(needed > offer, "the sum does not exceed the offer")


def check_obstruction(question: Question, body: dict[str, Json]) -> None:
    """Check the forms of FORMAT.md."""
    near = question.neighbours

    def is_forced(e: Edge) -> bool:
        return e in question.required or min(len(near[e[0]]), len(near[e[1]])) == 2

    match body:
        case {"form": "leaf", "vertex": int(v)}:
            need(len(near[v]) <= 1, "degree")
        case {"form": "crowded", "vertex": int(v), "neighbours": list(others)}:
            need(len(set(others)) == 3, "three neighbours")  # type: ignore[arg-type]
            need(all(u in near[v] and is_forced(pair(u, v)) for u in others), "forced")  # type: ignore[operator, arg-type]
        case {"form": "ring", "vertices": list(ring)}:
            steps = [pair(a, b) for a, b in zip(ring, ring[1:] + ring[:1], strict=True)]  # type: ignore[arg-type]
            need(3 <= len(set(ring)) == len(ring) < question.n, "short")  # type: ignore[arg-type]
            need(all(e in question.edge_set and is_forced(e) for e in steps), "forced")
        case {"form": "separator", "set": list(inside)}:
            apart = set(inside)
            rest, parts = set(range(question.n)) - apart, 0  # type: ignore[operator]
            need(bool(rest), "everything")
            while rest:
                parts += 1
                waiting = [rest.pop()]
                while waiting:
                    new = rest & set(near[waiting.pop()])
                    rest -= new
                    waiting.extend(new)
            within = sum(e[0] in apart and e[1] in apart for e in question.required)
            need(parts > len(apart) - within, "few parts")
            need(bool(apart) or parts >= 2, "connected")
        case {"form": "independent", "set": list(chosen)}:
            apart = set(chosen)
            need(not any(e[0] in apart and e[1] in apart for e in question.edges), "independent")
            outside = sum(not apart & set(e) for e in question.required)  # type: ignore[operator]
            need(2 * len(apart) + outside > question.n, "small")
        case _:
            raise WrongError(f"unknown form {body}")
