"""One hard question, split into parts that are refuted apart and joined to one proof.

The parts are the leaves of a tree that decides edges, used or removed: every
Hamiltonian cycle is in one of them. Each part is refuted by clauses, with its decisions
as unit clauses beside the facts. From a refutation of a part follows, without
them, the clause that says "not all these decisions": every step of its proof gets the
denied decisions as further literals. Two such clauses that differ in the last
decision give the one without it, and so on up to the empty clause. (Cube and conquer:
Heule, Kullmann, Wieringa and Biere, HVC 2011, 50-65, from memory.)

All of it depends on the question alone, so it does not matter who settles which part, or when.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from certify.evidence.base import Evidence
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.clauses import Refutation, keep_facts, opening_facts, refute_part
from certify.search.encoding import Clause, ClauseBuilder, Fact, MirrorFact, sort_facts
from certify.search.forced import Frame, State
from certify.search.ladder import Limits
from certify.search.lrat import Step, tidy_steps
from certify.search.symmetry import find_symmetries
from certify.search.witness import write_witness

Part = Clause
"""The decisions of a part: the number of an edge, from 1, if it is used; negative if removed."""

_MOST_TRIED = 64
"""How many edges are compared for each decision."""


@dataclass(frozen=True)
class PartProof:
    """What came out for a part: a Hamiltonian cycle of the question, or a refutation.

    cycle: an order of the vertices, or None. facts: in the order of the file.
    steps: from the facts' clauses to the clause that denies the decisions, or to one
    that says more; hints are numbered as in lrat.py.
    """

    cycle: tuple[int, ...] | None
    facts: tuple[Fact, ...] = ()
    steps: tuple[Step, ...] = ()


def split_question(question: Question, count: int) -> tuple[Part, ...]:
    """Split a question into about `count` parts, always the same for the same question.

    The state with most open edges is split next, at the edge whose two sides decide
    most further edges by forced moves. Parts that the forced moves close are among the result.
    Empty: there is nothing to split (absent, under three vertices, or settled by forced moves).
    Cost: 2 * 64 states of O(n + m) for each part.
    """
    if question.absent or question.n < 3:
        return ()
    first = State.first(Frame(question))
    leaves: list[tuple[Part, State]] = [((), first)]
    while len(leaves) < count:
        undecided = [i for i, (_, state) in enumerate(leaves) if not _is_settled(state)]
        if not undecided:
            break
        place = max(undecided, key=lambda i: (leaves[i][1].open_count, -i))
        part, state = leaves[place]
        edge = _choose_edge(state)
        leaves[place : place + 1] = [
            ((*part, edge + 1), state.assume((edge,))),
            ((*part, -edge - 1), state.assume((), (edge,))),
        ]
    return tuple(part for part, _ in leaves) if len(leaves) > 1 else ()


def _is_settled(state: State) -> bool:
    return state.contradiction or state.complete or state.open_count == 0


def _choose_edge(state: State) -> int:
    """Return the open edge whose two sides decide most edges (the product of both numbers)."""

    def decided(child: State) -> int:
        left = 0 if _is_settled(child) else child.open_count
        return state.open_count - left

    edges = state.open_edges()
    ends = state.frame.edges
    edges.sort(key=lambda edge: (sum(map(state.left_count, ends[edge])), edge))
    return max(
        edges[:_MOST_TRIED],
        key=lambda edge: (
            decided(state.assume((edge,))) * decided(state.assume((), (edge,))),
            -edge,
        ),
    )


def settle_part(question: Question, part: Part, limits: Limits) -> PartProof | None:
    """Refute one part by clauses, or find a Hamiltonian cycle on the way.

    None: the limits leave it open. Cost: as `find_clauses`.
    """
    facts = opening_facts(question, find_symmetries(question).elements[1:])
    if facts is None:
        return None
    found = refute_part(question, facts, part, Budget.of(limits.seconds))
    if found is None or isinstance(found, tuple):
        return None if found is None else PartProof(found)
    steps = _deny(found, part)
    return None if steps is None else PartProof(None, tuple(found.facts), steps)


def _deny(refutation: Refutation, part: Part) -> tuple[Step, ...] | None:
    """Return the steps with the denied decisions as further literals, without the unit clauses."""
    units = len(refutation.clauses) - len(part)
    denied = tuple(-decision for decision in part)
    decided = frozenset(part)

    def moved(literals: Clause) -> Clause:
        return tuple(dict.fromkeys((*literals, *denied)))

    steps: list[tuple[int, Step]] = []
    for number, (literals, hints) in enumerate(refutation.proof.steps, len(refutation.clauses)):
        if not decided.intersection(literals):  # else it is true here and says nothing
            kept = tuple(hint for hint in hints if not units <= hint < len(refutation.clauses))
            steps.append((number, (moved(literals), kept)))
    numbers = {number for number, _ in steps} | set(range(units))
    fitting = [
        (number, (literals, tuple(hint for hint in hints if hint in numbers)))
        for number, (literals, hints) in steps
    ]
    proof = tidy_steps(fitting, refutation.clauses[:units], goal=denied)
    return None if proof is None else proof.steps


def join_parts(
    question: Question, parts: Sequence[Part], proofs: Sequence[PartProof]
) -> Evidence | None:
    """Join what came out for all parts, in their order, to evidence for the question.

    A cycle of one part answers the question. None: the proofs do not fit together.
    Cost: linear in the proofs.
    """
    for proof in proofs:
        if proof.cycle is not None:
            return write_witness(question, proof.cycle)
    facts = _merge_facts(proofs)
    placed = {_name(fact): (fact, first, shift) for fact, first, shift in _place(question, facts)}
    builder = ClauseBuilder(question)
    clauses = [clause for fact in facts for clause in builder.build(fact)]
    steps: list[tuple[int, Step]] = []
    number = len(clauses)
    denied: dict[Part, int] = {}
    for part, proof in zip(parts, proofs, strict=True):
        places, variables = _translate(question, proof, placed)
        count = sum(1 for _ in _clauses_of(question, proof.facts))
        for i, (literals, hints) in enumerate(proof.steps):
            places[count + i] = number
            steps.append(
                (number, (_rename(literals, variables), tuple(places[hint] for hint in hints)))
            )
            number += 1
        denied[part] = number - 1
    while () not in denied:
        longest = max(map(len, denied))
        used = next(part for part in denied if len(part) == longest)
        parent, last = used[:-1], used[-1]
        hints = (denied.pop((*parent, last)), denied.pop((*parent, -last)))
        steps.append((number, (tuple(-decision for decision in parent), hints)))
        denied[parent] = number
        number += 1
    joined = tidy_steps(steps, clauses, goal=())
    if joined is None:
        return None
    return keep_facts(question, facts, joined).write(question)


def _merge_facts(proofs: Sequence[PartProof]) -> list[Fact]:
    """Return the facts of all parts, each once; of a mirror the longest."""
    merged: dict[object, Fact] = {}
    for proof in proofs:
        for fact in proof.facts:
            known = merged.get(_name(fact))
            if isinstance(fact, MirrorFact) and isinstance(known, MirrorFact):
                fact = max(fact, known, key=lambda mirror: mirror.length)
            merged[_name(fact)] = fact
    return sort_facts(merged.values())


def _name(fact: Fact) -> object:
    """Return what tells a fact from others, whatever the length of a mirror."""
    return ("mirror", fact.images) if isinstance(fact, MirrorFact) else fact


def _clauses_of(question: Question, facts: Sequence[Fact]) -> Iterator[Clause]:
    builder = ClauseBuilder(question)
    for fact in facts:
        yield from builder.build(fact)


def _place(question: Question, facts: Sequence[Fact]) -> Iterator[tuple[Fact, int, int]]:
    """Yield each fact with the number of its first clause and of the variables before it."""
    builder = ClauseBuilder(question)
    first = 0
    for fact in facts:
        before = builder.variables
        size = len(builder.build(fact))
        yield fact, first, before
        first += size


def _translate(
    question: Question, proof: PartProof, placed: dict[object, tuple[Fact, int, int]]
) -> tuple[dict[int, int], dict[int, int]]:
    """Return where the clauses and the further variables of a part are among all facts'.

    The clauses of a shorter mirror are the first ones of a longer, its variables too.
    """
    places: dict[int, int] = {}
    variables: dict[int, int] = {}
    builder = ClauseBuilder(question)
    own = 0
    for fact in proof.facts:
        before = builder.variables
        size = len(builder.build(fact))
        _, first, shift = placed[_name(fact)]
        places.update((own + i, first + i) for i in range(size))
        variables.update((v, v - before + shift) for v in range(before + 1, builder.variables + 1))
        own += size
    return places, variables


def _rename(literals: Clause, variables: dict[int, int]) -> Clause:
    return tuple(variables.get(abs(old), abs(old)) * (1 if old > 0 else -1) for old in literals)
