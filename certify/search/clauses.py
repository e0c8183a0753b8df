"""Clauses that contradict each other, found by adding cuts when they are missed.

Variables are the edges. At first the solver (CaDiCaL) knows that two edges are
used at each vertex and that required edges are used. Its answer is a set of
closed cycles that pass every vertex once. One cycle is a Hamiltonian cycle; of
several, each says which cut fact was missed (Dantzig, Fulkerson and Johnson,
Oper. Res. 2 (1954) 393-410, did this by hand with linear programs). When the
facts contradict each other, a last run on a fresh solver writes the proof.

Nothing here looks at the clock but to give up, so the same question gives the same bytes.
"""

from __future__ import annotations

import tempfile
import threading
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from os import SEEK_END
from types import TracebackType
from typing import BinaryIO

import pysolvers

from certify.evidence.clauses import Clauses
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.encoding import (
    Clause,
    ClauseBuilder,
    DegreeFact,
    Fact,
    MirrorFact,
    RequiredFact,
    build_cut,
    sort_facts,
    write_cnf,
)
from certify.search.lrat import Proof, join_steps, trim_proof, write_drat, write_lrat

_MIRROR_PLACES = 10
_MOST_MIRRORS = 30
"""How many mirrors are used, and how many places each compares. More of either excludes
more cycles, but on snarks and generalised Petersen graphs the clauses grow faster than
the proof shrinks."""

_MOST_CHARACTERS = 2**28
"""How long each text of the evidence may be; the solver's proof may be twice as long."""

_CONFLICTS_A_CHUNK = 1000
_JOINED_STEPS = 3000
_POLISHED_STEPS = 500
_POLISHED_FACTS = 200
_POLISHED_CONFLICTS = 10_000

_SEARCHING = {"inprocessing": 0, "elim": 0, "probe": 0, "lucky": 0, "walk": 0, "stabilizeonly": 1}
"""Options of the solver. Without simplification in between, rounds are fast and proofs short."""

_VARIANTS = (
    _SEARCHING,
    {**_SEARCHING, "phase": 0},
    {**_SEARCHING, "chrono": 0},
    {**_SEARCHING, "bumpreason": 0},
)
"""The runs that polish: other choices of the solver, of which the shortest proof is kept."""


def find_clauses(
    question: Question, *, budget: Budget, mirrors: Sequence[tuple[int, ...]] = ()
) -> Clauses | tuple[int, ...] | None:
    """Find clauses that contradict each other, or a Hamiltonian cycle on the way.

    A refutation holds because every fact is true of every Hamiltonian cycle
    through the required edges (a mirror fact of the first one among its images),
    so facts that contradict each other leave none.
    mirrors: symmetries of the question, by which only the first of several images
    has to be excluded; the identity is passed over, and so are those beyond `_MOST_MIRRORS`.
    Returns the evidence, or a Hamiltonian cycle as an order of the vertices.
    None: the budget is spent, or a text is too long; or there is nothing to say in clauses,
    since the question is absent, has under three vertices or a vertex with one edge or none.
    Errors: ValueError when a mirror is no symmetry of the question.
    Cost: exponential at worst. Trimming takes about as long as the solver took for
    its proof, polishing a short proof a second; both may overrun the budget.
    """
    facts = opening_facts(question, mirrors)
    if facts is None:
        return None
    found = _find_contradiction(question, facts, budget)
    if not isinstance(found, list):
        return found
    refutation = _refute(question, found, _SEARCHING, budget)
    if refutation is None:
        return None
    evidence = _polish(question, refutation).write(question)
    too_long = max(len(evidence.cnf), len(evidence.lrat)) > _MOST_CHARACTERS
    return None if too_long else evidence


def opening_facts(question: Question, mirrors: Sequence[tuple[int, ...]]) -> list[Fact] | None:
    """Return the facts that the search begins with; the cuts are found later.

    None: there is nothing to say in clauses (see `find_clauses`).
    """
    if question.absent or question.n < 3 or min(map(len, question.neighbours)) < 2:
        return None
    identity = tuple(range(question.n))
    images = [p for p in dict.fromkeys(map(tuple, mirrors)) if p != identity]
    facts: list[Fact] = [DegreeFact(v) for v in range(question.n)]
    facts.extend(RequiredFact(edge) for edge in sorted(question.required))
    facts.extend(MirrorFact(_MIRROR_PLACES, p) for p in images[:_MOST_MIRRORS])
    return facts


def refute_part(
    question: Question, facts: Sequence[Fact], units: Clause, budget: Budget
) -> Refutation | tuple[int, ...] | None:
    """Refute the facts together with some literals, or find a Hamiltonian cycle.

    In the refutation the literals are unit clauses that follow the clauses of the facts.
    None: the budget is spent, or a text is too long. Cost: as `find_clauses`.
    """
    found = _find_contradiction(question, facts, budget, units)
    return _refute(question, found, _SEARCHING, budget, units) if isinstance(found, list) else found


@dataclass(frozen=True)
class Refutation:
    """Facts in the order of the file, and a proof from all their clauses.

    clauses: those of the facts; of a part of a question also its unit clauses, at the end.
    """

    facts: list[Fact]
    clauses: list[Clause]
    proof: Proof

    @property
    def length(self) -> int:
        return len(self.clauses) + len(self.proof.steps)

    def write(self, question: Question) -> Clauses:
        """Write the three texts."""
        return Clauses(
            clauses=len(self.clauses),
            steps=len(self.proof.steps),
            cnf=write_cnf(question, self.facts),
            lrat=write_lrat(self.proof),
            drat=write_drat(self.proof),
        )


class _Solver:
    """One CaDiCaL; closes it at the end of a `with` block.

    log: a file for the proof, complete after the block.
    """

    def __init__(self, options: dict[str, int], log: BinaryIO | None = None) -> None:
        self._log = log
        self._solver = pysolvers.cadical195_new()
        for name, value in options.items():
            pysolvers.cadical195_set(self._solver, name, value)
        if log is not None:
            pysolvers.cadical195_set(self._solver, "lrat", 1)
            pysolvers.cadical195_set(self._solver, "binary", 0)
            pysolvers.cadical195_tracepr(self._solver, log)

    def __enter__(self) -> _Solver:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        pysolvers.cadical195_del(self._solver, self._log)

    def add(self, clauses: Iterable[Clause]) -> None:
        for clause in clauses:
            pysolvers.cadical195_add_cl(self._solver, list(clause))

    def solve(self, effort: Budget | int) -> bool | None:
        """Return whether the clauses can all be true.

        effort: a budget, or a number of conflicts. None: it is spent.
        """
        if isinstance(effort, int):
            return self._solve_a_chunk(effort)
        while not effort.spent:
            answer = self._solve_a_chunk(_CONFLICTS_A_CHUNK)
            if answer is not None:
                return answer
        return None

    def _solve_a_chunk(self, conflicts: int) -> bool | None:
        pysolvers.cadical195_cbudget(self._solver, conflicts)
        in_main = threading.current_thread() is threading.main_thread()
        answer = int(pysolvers.cadical195_solve_lim(self._solver, [], int(in_main)))
        return answer > 0 if answer else None

    def model(self) -> Sequence[int]:
        """Return the literals that the last solution makes true, by variable."""
        literals: Sequence[int] = pysolvers.cadical195_model(self._solver)
        return literals


def _find_contradiction(
    question: Question, facts: Sequence[Fact], budget: Budget, units: Clause = ()
) -> list[Fact] | tuple[int, ...] | None:
    """Add the cuts that solutions miss until there is no solution, or one cycle only.

    units: literals that hold besides. Returns the facts that contradict each other (a
    list), or the Hamiltonian cycle (a tuple). None: the budget is spent.
    """
    builder = ClauseBuilder(question)
    known: list[Fact] = []
    missed = facts
    with _Solver(_SEARCHING) as solver:
        solver.add((unit,) for unit in units)
        while True:
            for fact in missed:
                clauses = builder.build(fact)
                if () in clauses:
                    return [fact]
                solver.add(clauses)
                if budget.spent:
                    return None
            known.extend(missed)
            solved = solver.solve(budget)
            if not solved:
                return None if solved is None else known
            cycles = _walk_cycles(question, solver.model())
            if len(cycles) == 1:
                return cycles[0]
            missed = list(dict.fromkeys(build_cut(question, cycle) for cycle in cycles))


def _walk_cycles(question: Question, model: Sequence[int]) -> list[tuple[int, ...]]:
    """Return the closed cycles of a solution, each as an order of its vertices."""
    near: list[list[int]] = [[] for _ in range(question.n)]
    for (u, v), literal in zip(question.edges, model, strict=False):
        if literal > 0:
            near[u].append(v)
            near[v].append(u)
    seen = [False] * question.n
    cycles = []
    for start in range(question.n):
        cycle = []
        v = start
        while not seen[v]:
            seen[v] = True
            cycle.append(v)
            v = next((u for u in near[v] if not seen[u]), v)
        if cycle:
            cycles.append(tuple(cycle))
    return cycles


def _refute(
    question: Question,
    facts: Iterable[Fact],
    options: dict[str, int],
    effort: Budget | int,
    units: Clause = (),
) -> Refutation | None:
    """Refute facts that contradict each other, and keep those that the proof uses.

    units: literals that hold besides. None: the effort is spent, or the solver's proof is
    not of the wanted form.
    """
    in_order = sort_facts(facts)
    builder = ClauseBuilder(question)
    clauses = [clause for fact in in_order for clause in builder.build(fact)]
    clauses.extend((unit,) for unit in units)
    if () in clauses:
        at_once = Proof(len(clauses), (((), (clauses.index(()),)),))
        return keep_facts(question, in_order, at_once, units)
    with tempfile.TemporaryFile() as log:
        with _Solver(options, log) as solver:
            solver.add(clauses)
            solved = solver.solve(effort)
        if solved is not False:
            return None
        log.seek(0, SEEK_END)
        if log.tell() > 2 * _MOST_CHARACTERS:
            return None
        log.seek(0)
        proof = trim_proof(log.read(), clauses)
    if proof is None:
        return None
    if len(proof.steps) <= _JOINED_STEPS:
        proof = join_steps(proof, clauses)
    return keep_facts(question, in_order, proof, units)


def keep_facts(
    question: Question, facts: Sequence[Fact], proof: Proof, units: Clause = ()
) -> Refutation:
    """Keep the facts of which the proof uses a clause, with all their clauses.

    facts: in the order of the file. units: literals whose clauses come after those of the facts.
    """
    used = proof.used_clauses
    old, new = ClauseBuilder(question), ClauseBuilder(question)
    kept: list[Fact] = []
    clauses: list[Clause] = []
    places: dict[int, int] = {}
    variables: dict[int, int] = {}
    first = 0
    for fact in facts:
        variable = old.variables
        size = len(old.build(fact))
        in_use = [i for i in range(size) if first + i in used]
        if in_use:
            if isinstance(fact, MirrorFact):
                fact = fact.shorten(in_use)
            kept.append(fact)
            shift = new.variables - variable
            variables.update((v, v + shift) for v in range(variable + 1, old.variables + 1))
            places.update((first + i, len(clauses) + i) for i in in_use)
            clauses.extend(new.build(fact))
        first += size
    places.update((first + i, len(clauses) + i) for i in range(len(units)))
    clauses.extend((unit,) for unit in units)
    return Refutation(kept, clauses, proof.renumber(len(clauses), places, variables))


def _polish(question: Question, best: Refutation) -> Refutation:
    """Make a small refutation shorter: leave out facts, then choose among several proofs.

    Large ones are returned as they are. Bounded by conflicts, not by the clock,
    so that the budget does not change the bytes.
    """
    if len(best.facts) > _POLISHED_FACTS or len(best.proof.steps) > _POLISHED_STEPS:
        return best
    for facts in (best.facts, _leave_out_facts(question, best.facts)):
        for options in _VARIANTS:
            again = _refute(question, facts, options, _POLISHED_CONFLICTS)
            if again is not None and again.length < best.length:
                best = again
    return best


def _leave_out_facts(question: Question, facts: Sequence[Fact]) -> list[Fact]:
    """Leave out one fact after the other, those with most clauses first, if the rest is enough."""
    left = list(facts)
    for fact in sorted(facts, key=lambda fact: -len(ClauseBuilder(question).build(fact))):
        without = [other for other in left if other != fact]
        builder = ClauseBuilder(question)
        with _Solver(_SEARCHING) as solver:
            for other in without:
                solver.add(builder.build(other))
            if solver.solve(_CONFLICTS_A_CHUNK) is False:
                left = without
    return left
