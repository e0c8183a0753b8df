"""Questions for the tests of the checker, and what they do to evidence.

The checker has a `Question` of its own; the finders have another one. Here is the
way from one to the other, and small graphs about which the truth is published.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import Any

import pytest

from certify.checker.graphs import Question as CheckerQuestion
from certify.checker.strict import Rejected
from certify.graph.graph import Edge, Graph
from certify.graph.question import Ends, Question, build_cycle_question, build_path_question

Check = Callable[[CheckerQuestion, dict[str, Any]], None]


def twin(question: Question) -> CheckerQuestion:
    """Return the checker's form of a question."""
    return CheckerQuestion(
        question.n,
        set(question.edges),
        set(question.required),
        question.apex is not None,
        question.absent,
    )


def holds(check: Check, question: Question, body: Any) -> bool:
    """Return whether evidence is accepted; anything but Rejected is a failure of the test."""
    try:
        check(twin(question), body)
    except Rejected:
        return False
    return True


def rejects(check: Check, question: Question, body: Any, reason: str) -> None:
    """Assert that evidence is rejected, and for this reason."""
    with pytest.raises(Rejected, match=reason):
        check(twin(question), body)


def graph_of(edges: Iterable[Edge]) -> Graph:
    pairs = sorted({(min(e), max(e)) for e in edges})
    n = 1 + max((v for e in pairs for v in e), default=-1)
    return Graph(tuple(range(n)), tuple(pairs))


def cycle_question(edges: Iterable[Edge], required: Iterable[Edge] = ()) -> Question:
    wanted = [(min(e), max(e)) for e in required]
    return build_cycle_question(graph_of(edges), required=wanted)


def path_question(edges: Iterable[Edge], *ends: int) -> Question:
    return build_path_question(graph_of(edges), ends=Ends(ends))


def complete(n: int) -> list[Edge]:
    return [(u, v) for v in range(n) for u in range(v)]


def ring(*vertices: int) -> list[Edge]:
    return list(zip(vertices, (*vertices[1:], vertices[0]), strict=True))


def generalised_petersen(n: int, k: int) -> list[Edge]:
    """The rim 0..n-1, spokes to n..2n-1, and there steps of k.

    For k = 2 Hamiltonian unless n = 5 (mod 6): Robertson's thesis (1969); Alspach,
    J. Combin. Theory B 34 (1983) 293-312.
    """
    inner = [(n + i, n + (i + k) % n) for i in range(n)]
    return ring(*range(n)) + inner + [(i, n + i) for i in range(n)]


PETERSEN = generalised_petersen(5, 2)

CLAW = [(0, 1), (0, 2), (0, 3)]

HERSCHEL = [
    (0, 1), (0, 3), (0, 4), (1, 2), (1, 5), (1, 6), (2, 3), (2, 7), (3, 8), (3, 9), (4, 5), (4, 9),
    (5, 10), (6, 7), (6, 10), (7, 8), (8, 10), (9, 10),
]  # fmt: skip
"""Herschel's graph: bipartite with sides of 5 and 6, so without a Hamiltonian cycle; the
smallest such polyhedron (Barnette and Jucovic, J. Combin. Theory 9 (1970) 54-59)."""


def knight(rows: int, columns: int) -> list[Edge]:
    """The knight's graph. No closed tour for 3 x 4 and 4 x n: Schwenk, Math. Mag. 64 (1991) 325."""
    cells = {(x, y): x * columns + y for x in range(rows) for y in range(columns)}
    return [
        (cells[x, y], cells[x + dx, y + dy])
        for x, y in cells
        for dx, dy in ((1, 2), (2, 1), (2, -1), (1, -2))
        if (x + dx, y + dy) in cells
    ]
