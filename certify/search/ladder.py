"""The ladder: which finder runs when, and with which share of the budget.

Every finder has one signature: a question and a budget in, evidence or a
Hamiltonian cycle or nothing out. The rungs are tried from the top; the first that
settles the question ends it, as the kinds above read shorter than those below.
"""

from __future__ import annotations

from collections.abc import Callable, Collection
from dataclasses import dataclass

from certify.evidence.base import Evidence
from certify.evidence.witness import Witness
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.clauses import find_clauses
from certify.search.obstruction import find_obstruction
from certify.search.witness import find_witness, write_witness

Finder = Callable[..., Evidence | tuple[int, ...] | None]


@dataclass(frozen=True)
class Rung:
    """A finder, the kinds of evidence it can give, and its share of what is left."""

    kinds: tuple[str, ...]
    find: Finder
    share: float


LADDER = (
    Rung(("obstruction",), find_obstruction, 0.1),
    Rung(("witness",), find_witness, 0.1),
    Rung(("clauses", "witness"), find_clauses, 1.0),
)
KINDS = ("witness", "obstruction", "counting", "cases", "sweep", "clauses")


def settle(
    question: Question, *, budget: Budget, kinds: Collection[str] = KINDS
) -> Evidence | None:
    """Return evidence that answers the question; None when the budget left it open."""
    if question.is_one_vertex_path:
        return Witness((0,))
    for rung in LADDER:
        if not set(rung.kinds) & set(kinds):
            continue
        found = rung.find(question, budget=budget.share(rung.share))
        if isinstance(found, tuple):
            return write_witness(question, found)
        if found is not None:
            return found
    return None
