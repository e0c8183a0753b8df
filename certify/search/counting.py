"""Counting arguments, found by linear programming.

A *counting argument* is a set of weighted facts (facts.py) whose scores no
Hamiltonian cycle can afford (exact.py). By linear programming duality one
exists for a set of facts exactly when no x in [0, 1]^E with x = 1 on the
required edges satisfies them all; with the cuts this is the relaxation of
Dantzig, Fulkerson and Johnson (Operations Research 2 (1954) 393-410).

The program has two *shortfall* columns for each degree and one for each other
fact, each of cost 1, so it always has an optimum. The least total shortfall is
positive exactly when an argument exists, and then the prices of the rows are
its weights, between -1 and 1. Facts other than degrees are added when the
solution at hand violates them (cuts.py).
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from certify.evidence.counting import Counting
from certify.graph.graph import Edge
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.cuts import find_cuts, find_parities
from certify.search.exact import (
    OPEN,
    REMOVED,
    USED,
    drop_redundant,
    holds,
    round_weights,
)
from certify.search.facts import Fact, FactMaker, write_counting
from certify.search.program import INFINITY, LinearProgram, Optimum
from certify.search.sparse import find_sparse

_POSITIVE = 1e-6
_NEGLIGIBLE = 1e-9
_PARITY_EDGES = 200
"""Looking for parities takes seconds in larger graphs, where they have never decided anything."""
_POOL_SIZE = 200
_POOL_PER_VERTEX = 4
_BOUNDS = {OPEN: (0.0, 1.0), USED: (1.0, 1.0), REMOVED: (0.0, 0.0)}


def find_counting(question: Question, *, budget: Budget, shortest: bool = False) -> Counting | None:
    """Find weights that no Hamiltonian cycle can afford.

    Why it proves anything: see the modules' docstrings; the result has passed
    `holds`, in exact integers.

    question: in normal form; with fewer than 3 vertices, or absent, it has no
    counting argument. shortest: spend more on few and small weights.
    None says that the facts tried can be satisfied fractionally, or that the
    budget was spent; never that a cycle exists.
    Cost: a linear program of m columns for each round of cuts.
    """
    return CountingProgram(question).refute(budget=budget, shortest=shortest)


class CountingProgram:
    """The linear program of one question, kept warm between related calls.

    Each call may assume that edges are used or removed; facts found by earlier
    calls stay, since they hold for every Hamiltonian cycle of the question.
    The answer to a call may therefore depend on the calls before it, always in
    the same way.
    """

    def __init__(self, question: Question) -> None:
        self._question = question
        self._maker = FactMaker(question)
        self._number = {e: i for i, e in enumerate(question.edges)}
        self._degrees = self._maker.degrees()
        self._pool: list[Fact] = []
        self._known: set[tuple[tuple[int, ...], tuple[Edge, ...]]] = set()
        self._last_priced: list[int] = []
        self._round = 0
        self._status = [OPEN] * question.m
        self._removed: frozenset[Edge] = frozenset()
        self._x: list[float] | None = None
        self._build()

    def refute(
        self,
        used: Iterable[Edge] = (),
        removed: Iterable[Edge] = (),
        *,
        budget: Budget,
        shortest: bool = False,
    ) -> Counting | None:
        """Find a counting argument for the question with `used` required and `removed` gone.

        used, removed: edges of the question, none of them in both.
        None as for `find_counting`. The result holds for `question.assume(used, removed)`.
        """
        self._x = None
        question = self._question
        if question.n < 3 or question.absent:
            return None
        used, removed = tuple(used), frozenset(removed)
        self._assume({*used, *question.required} - removed, removed)
        optimum = self._separate(budget)
        if optimum is None:
            return None
        facts, prices = self._weigh(optimum, everything=False)
        found = round_weights(facts, self._status, prices)
        if found is not None:
            drop_redundant(found)
        if shortest:
            facts, _ = self._weigh(optimum, everything=True)
            sparse = find_sparse(facts, self._status, self._find_new, budget=budget)
            if sparse is not None and (found is None or sparse.size < found.size):
                found = sparse
        if found is None:
            return None
        counting = write_counting(found.facts, found.weights)
        return counting if holds(question.assume(used, removed), counting) else None

    def fractional(self) -> dict[Edge, float] | None:
        """Return the x that kept the last call of `refute` from finding an argument.

        It violates no degree, cut or parity fact, up to rounding; in particular it
        is a Hamiltonian cycle if all its values are 0 or 1. None if the last call found an
        argument, or was ended by its budget.
        """
        if self._x is None:
            return None
        return dict(zip(self._question.edges, self._x, strict=True))

    @property
    def pool(self) -> tuple[Fact, ...]:
        """Return the cuts and parities known so far."""
        return tuple(self._pool)

    def _build(self) -> None:
        """Set up the program of the degrees and the pool."""
        n, m = self._question.n, self._question.m
        self._program = LinearProgram()
        self._program.add_rows([(2.0, 2.0)] * n)
        self._program.add_columns(
            [
                (*_BOUNDS[self._status[e]], 0.0, [(u, 1.0), (v, 1.0)])
                for e, (u, v) in enumerate(self._question.edges)
            ]
        )
        self._program.add_columns(
            [(0.0, INFINITY, 1.0, [(v, sign)]) for v in range(n) for sign in (1.0, -1.0)]
        )
        self._columns = m + 2 * n
        pool, self._pool, self._known, self._last_priced = self._pool, [], set(), []
        self._add(pool)

    def _assume(self, used: set[Edge], removed: frozenset[Edge]) -> None:
        """Move the bounds of the edges to what is assumed about them."""
        full = _POOL_SIZE + _POOL_PER_VERTEX * self._question.n
        if len(self._pool) > full:
            # The facts whose last price is the oldest go.
            order = sorted(range(len(self._pool)), key=lambda i: (-self._last_priced[i], i))
            self._pool = [self._pool[i] for i in sorted(order[: full // 2])]
            self._build()
        status = [OPEN] * self._question.m
        for e in used:
            status[self._number[e]] = USED
        for e in removed:
            status[self._number[e]] = REMOVED
        self._removed = removed
        changes = [
            (e, *_BOUNDS[new])
            for e, (old, new) in enumerate(zip(self._status, status, strict=True))
            if old != new
        ]
        self._program.set_bounds(changes)
        self._status = status

    def _add(self, facts: list[Fact]) -> bool:
        """Add rows for facts not known yet; return whether there were any."""
        new = []
        for fact in facts:
            key = (fact.vertices, fact.odd)
            if key not in self._known:
                self._known.add(key)
                new.append(fact)
        if not new:
            return False
        shortfall = self._columns
        self._columns += len(new)
        self._program.add_columns([(0.0, INFINITY, 1.0, ())] * len(new))
        self._program.add_full_rows(
            [
                (float(fact.bound), INFINITY, [*fact.terms, (shortfall + i, 1.0)])
                for i, fact in enumerate(new)
            ]
        )
        self._pool += new
        self._last_priced += [self._round] * len(new)
        return True

    def _separate(self, budget: Budget) -> Optimum | None:
        """Solve and add violated facts until a shortfall remains or nothing is violated."""
        n = self._question.n
        while not budget.spent:
            optimum = self._program.solve(budget=budget)
            if optimum is None:
                return None
            self._round += 1
            for i, price in enumerate(optimum.prices[n:]):
                if price > _NEGLIGIBLE:
                    self._last_priced[i] = self._round
            if optimum.value > _POSITIVE:
                return optimum
            x = optimum.columns[: self._question.m]
            if not self._add(self._violated(x)):
                self._x = x
                return None
        return None

    def _violated(self, x: Sequence[float]) -> list[Fact]:
        """Return facts that x violates: cuts; in small graphs parities if there are none."""
        n, edges, maker = self._question.n, self._question.edges, self._maker
        sides = find_cuts(n, edges, x)
        if sides or len(edges) > _PARITY_EDGES:
            return [maker.cut(maker.smaller_side(side)) for side in sides]
        return [
            maker.parity(maker.smaller_side(side), odd) for side, odd in find_parities(n, edges, x)
        ]

    def _find_new(self, x: Sequence[float]) -> list[Fact]:
        """Add facts that x violates to the pool; return them without the removed edges."""
        before = len(self._pool)
        self._add(self._violated(x))
        derived = (self._maker.without(fact, self._removed) for fact in self._pool[before:])
        return [fact for fact in derived if fact is not None]

    def _weigh(self, optimum: Optimum, *, everything: bool) -> tuple[list[Fact], list[float]]:
        """Return the facts with their prices, those with price 0 only if `everything`."""
        pairs = [
            (self._maker.without(fact, self._removed), price)
            for fact, price in zip([*self._degrees, *self._pool], optimum.prices, strict=True)
            if everything or abs(price) > _NEGLIGIBLE
        ]
        kept = [(fact, price) for fact, price in pairs if fact is not None]
        return [fact for fact, _ in kept], [price for _, price in kept]
