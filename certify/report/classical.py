"""Weights that say what the literature says without weights.

Many counting arguments are a classical obstruction in disguise: weight -1 on a
separator, weight 1 on an independent set. A reader is better served by the classical name.
What is named here is checked on the question itself, so it is true whatever the
weights were.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from certify.graph.question import Question
from certify.report.structure import (
    certain_ends,
    is_end,
    is_forced,
    measure_independent,
    separate,
)


def name_classical(question: Question, body: dict[str, Any]) -> dict[str, Any] | None:
    """Return the body of a direct obstruction that the weights amount to.

    question: on at least 3 vertices, not absent. body: of kind `counting`.
    None when no such obstruction is seen; the weights then speak for themselves.
    Cost: O(n + m).
    """
    for v in range(question.n):
        if len(question.neighbours[v]) <= 1:
            return {"form": "leaf", "vertex": v}
    if question.apex is not None:
        ends = [v for v in range(question.apex) if is_certain_end(question, v)]
        if len(ends) > 2:
            return {"form": "crowded", "vertex": question.apex, "neighbours": ends[:3]}
    for chosen in _supports(question, body, negative=True):
        if separate(question, chosen).holds:
            return {"form": "separator", "set": chosen}
    for chosen in _supports(question, body, negative=False):
        found = measure_independent(question, chosen)
        if found is not None and found.holds:
            return {"form": "independent", "set": chosen}
    return None


def is_certain_end(question: Question, v: int) -> bool:
    """Return whether every Hamiltonian path ends at v, by requirement or for want of edges."""
    if question.apex is None or not is_end(question, v):
        return False
    return v in certain_ends(question) or is_forced(question, v, question.apex)


def _supports(question: Question, body: dict[str, Any], *, negative: bool) -> Iterator[list[int]]:
    """Yield the vertices with weights of one sign, as they are, then with and without the apex."""
    support = {v for v, y in body["vertex"] if (y < 0) == negative}
    seen: list[set[int]] = []
    for chosen in (support, support | {question.apex}, support - {question.apex}):
        fitting = {v for v in chosen if v is not None}
        if (fitting or negative) and fitting not in seen:
            seen.append(fitting)
            yield sorted(fitting)
