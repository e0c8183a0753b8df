"""The ladder: which finder runs when, and with which share of the budget.

The rungs are tried from the top, and the first that settles the question ends the
search: those further up give shorter reasons, or cost less when they fail. (A tree of
cases reads better than a sweep, but in a graph too large to draw it is seldom found, and
the attempt is dear: there it comes later.) Each share is of what is left of the budget.

    rung          kinds it gives       share   because
    glance        witness               10 %   of most small graphs a cycle is found at once
    obstruction   obstruction           10 %   a look at the graph
    witness       witness               10 %   a bounded number of steps
    counting      counting              20 %   one linear program
    few cases     cases                 20 %   trees a reader can follow, of graphs one can draw
    block         sweep                 20 %   a part behind three edges
    thin sweep    sweep, witness        20 %   long thin graphs, at once
    few cases     cases                 20 %   the same in larger graphs, where it seldom succeeds
    clauses       clauses, witness      60 %   the strongest on small dense graphs
    wide sweep    sweep, witness        60 %   what needs memory
    many cases    cases                100 %   the last resort
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from certify.evidence.base import Evidence
from certify.evidence.witness import Witness
from certify.graph.question import Question
from certify.search.blocks import find_block
from certify.search.budget import Budget
from certify.search.cases import find_cases
from certify.search.clauses import find_clauses
from certify.search.counting import find_counting
from certify.search.obstruction import find_obstruction
from certify.search.sweep import find_sweep
from certify.search.symmetry import find_symmetries
from certify.search.witness import find_witness, glance_for_witness, write_witness

KINDS = ("witness", "obstruction", "counting", "cases", "sweep", "clauses")

SMALL_VERTICES = 64
READABLE_LEAVES = 12
READABLE_VERTICES = 48
READABLE_EFFORT = 500_000
MOST_LEAVES = 5_000
THIN_MEMORY = 1 << 26

Found = Evidence | tuple[int, ...] | None


@dataclass(frozen=True)
class Search:
    """What a rung is given beside the question: limits, and how much effort is wanted.

    memory: bytes a sweep may take. shortest: spend time on a shorter reason.
    """

    budget: Budget
    memory: int = 1 << 30
    shortest: bool = False


def _obstruction(question: Question, search: Search) -> Found:
    return find_obstruction(question, budget=search.budget)


def _glance(question: Question, search: Search) -> Found:
    if question.n > SMALL_VERTICES:
        return None
    return glance_for_witness(question, budget=search.budget)


def _witness(question: Question, search: Search) -> Found:
    return find_witness(question, budget=search.budget)


def _counting(question: Question, search: Search) -> Found:
    return find_counting(question, budget=search.budget, shortest=search.shortest)


def _few_cases_small(question: Question, search: Search) -> Found:
    return _few_cases(question, search) if question.n <= READABLE_VERTICES else None


def _few_cases_large(question: Question, search: Search) -> Found:
    return _few_cases(question, search) if question.n > READABLE_VERTICES else None


def _few_cases(question: Question, search: Search) -> Found:
    return find_cases(
        question,
        budget=search.budget,
        most_leaves=READABLE_LEAVES,
        most_effort=math.inf if search.shortest else READABLE_EFFORT,
        shortest=search.shortest,
    )


def _many_cases(question: Question, search: Search) -> Found:
    return find_cases(question, budget=search.budget, most_leaves=MOST_LEAVES)


def _block(question: Question, search: Search) -> Found:
    return find_block(question, budget=search.budget, memory=min(search.memory, THIN_MEMORY))


def _thin_sweep(question: Question, search: Search) -> Found:
    memory = min(search.memory, THIN_MEMORY)
    return find_sweep(question, budget=search.budget, memory=memory)


def _wide_sweep(question: Question, search: Search) -> Found:
    return find_sweep(question, budget=search.budget, memory=search.memory)


def _clauses(question: Question, search: Search) -> Found:
    mirrors = find_symmetries(question).elements[1:]
    return find_clauses(question, budget=search.budget, mirrors=mirrors)


@dataclass(frozen=True)
class Rung:
    """A finder, the kinds it can give, and its share of what is left of the budget."""

    kinds: frozenset[str]
    find: Callable[[Question, Search], Found]
    share: float


LADDER = (
    Rung(frozenset({"witness"}), _glance, 0.1),
    Rung(frozenset({"obstruction"}), _obstruction, 0.1),
    Rung(frozenset({"witness"}), _witness, 0.1),
    Rung(frozenset({"counting"}), _counting, 0.2),
    Rung(frozenset({"cases"}), _few_cases_small, 0.2),
    Rung(frozenset({"sweep"}), _block, 0.2),
    Rung(frozenset({"sweep", "witness"}), _thin_sweep, 0.2),
    Rung(frozenset({"cases"}), _few_cases_large, 0.2),
    Rung(frozenset({"clauses", "witness"}), _clauses, 0.6),
    Rung(frozenset({"sweep", "witness"}), _wide_sweep, 0.6),
    Rung(frozenset({"cases"}), _many_cases, 1.0),
)


@dataclass(frozen=True)
class Limits:
    """What the search for one instance may cost, and what it is to look for.

    seconds: the budget. memory: bytes that a sweep may take. kinds: no other
    evidence is looked for. shortest: spend the budget on a shorter reason.
    """

    seconds: float = 60.0
    memory: int = 1 << 30
    kinds: frozenset[str] = frozenset(KINDS)
    shortest: bool = False


DEFAULTS = Limits()


def settle(question: Question, limits: Limits) -> Evidence | None:
    """Return evidence that answers the question; None when the limits leave it open.

    With `shortest` the readable rungs are gone through to the end after a refutation
    is found, and the one with the least reading length is kept.
    """
    budget = Budget.of(limits.seconds)
    best: Evidence | None = None
    for rung in LADDER:
        if not rung.kinds & limits.kinds or budget.spent:
            continue
        if best is not None and rung.kinds & {"sweep", "clauses"}:
            continue
        search = Search(budget.share(rung.share), limits.memory, limits.shortest)
        found = rung.find(question, search)
        evidence = write_witness(question, found) if isinstance(found, tuple) else found
        if evidence is None or evidence.kind not in limits.kinds:
            continue
        if isinstance(evidence, Witness) or not limits.shortest:
            return evidence
        if best is None or evidence.length < best.length:
            best = evidence
    return best
