"""An instance of the benchmark: a named question with what is known about it."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

from benchmark.outcome import Answer
from certify.graph.graph import Edge, Graph, edge_between
from certify.graph.question import Question, build_cycle_question

CORE = "issue-core"
HARD = "hard"


@dataclass(frozen=True)
class Planted:
    """A generated question and the vertices that are the reason for its answer.

    reason: the separator, the larger class, or the block behind the cut, sorted.
    """

    question: Question
    reason: tuple[int, ...]


@dataclass(frozen=True)
class Instance:
    """One row of the benchmark.

    answer: what is known, None if nothing is; source: where it is known from.
    planted: for generated instances, the question together with its reason.
    tags: CORE for quick runs, HARD for what defeats some method.
    """

    name: str
    family: str
    build: Callable[[], Question]
    answer: Answer | None
    source: str
    tags: frozenset[str] = frozenset()
    planted: Callable[[], Planted] | None = None


def build_question(n: int, edges: Iterable[Edge]) -> Question:
    """Build the cycle question of a graph on 0..n-1; edges in any order and direction."""
    distinct = sorted({edge_between(u, v) for u, v in edges})
    return build_cycle_question(Graph(labels=tuple(range(n)), edges=tuple(distinct)))
