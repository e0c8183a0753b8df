"""Few and small weights for a counting argument.

Among the weights with need - offer >= 1, those that read shortest are sought by
linear programs in the weights: minimise the sum of their absolute values, each
times the number of integers its fact takes. The prices of such a program are an x
again, and facts that x violates may shorten the argument: they are asked for
and added. Then the costs are divided by the size the weight had before, so that
small ones vanish (reweighted l1 minimisation: Candès, Wakin and Boyd, J.
Fourier Anal. Appl. 14 (2008) 877-905). Last, the facts of the best argument are
forbidden in turn, to see whether another one is shorter.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

from certify.search.budget import Budget
from certify.search.exact import OPEN, USED, Tally, drop_redundant, round_weights
from certify.search.facts import Fact
from certify.search.program import INFINITY, Column, LinearProgram

_PRICING_ROUNDS = 4
_REWEIGHTING_ROUNDS = 5
_DAMPING = 0.05
_MOST_TRIALS = 40
_FAVOUR = 0.25


def find_sparse(
    facts: Sequence[Fact],
    status: Sequence[int],
    find_violated: Callable[[list[float]], list[Fact]],
    *,
    budget: Budget,
) -> Tally | None:
    """Find the weights of a short argument.

    facts: such that some weights make an argument. status: OPEN, USED or
    REMOVED for each edge. find_violated: returns facts, not among those used,
    that an x violates; x has a value in [0, 1] for each edge.
    Returns the shortest found until the budget was spent, or None.
    Cost: up to 50 linear programs of one row for each open edge, each from the basis of the last.
    """
    search = _Search(status, budget)
    search.program.add(facts)
    for _ in range(_PRICING_ROUNDS):
        if not search.attempt():
            return search.best
        more = find_violated(search.program.x)
        if not more:
            break
        search.program.add(more)
    for _ in range(_REWEIGHTING_ROUNDS):
        if not search.attempt():
            break
        search.program.damp()
    search.forbid_in_turn()
    return search.best


class _Search:
    """The best argument so far, and the program that looks for better ones."""

    def __init__(self, status: Sequence[int], budget: Budget) -> None:
        self.program = _SparseProgram(status)
        self.best: Tally | None = None
        self._status = status
        self._budget = budget

    def attempt(self) -> bool:
        """Solve, make exact, keep it if it is shorter; return whether there was a solution."""
        if not self.program.solve(budget=self._budget):
            return False
        tally = round_weights(self.program.facts, self._status, self.program.weights)
        if tally is not None:
            drop_redundant(tally)
            if self.best is None or tally.size < self.best.size:
                self.best = tally
        return True

    def forbid_in_turn(self) -> None:
        """Forbid the facts of the best argument, longest first; keep forbidden what helps."""
        tried: set[int] = set()
        for _ in range(_MOST_TRIALS):
            best = self.best
            if best is None:
                return
            left = [i for i, w in enumerate(best.weights) if w and i not in tried]
            if not left:
                return
            i = min(left, key=lambda i: (-best.facts[i].length, abs(best.weights[i]), i))
            tried.add(i)
            self.program.favour(best.weights)
            self.program.forbid(i)
            self.attempt()
            if self.best is best:
                self.program.forbid(i, forbidden=False)


class _SparseProgram:
    """Minimise the cost of weights with need - offer >= 1.

    Rows: for each open edge, what it offers minus its score is not negative;
    last, need - offer >= 1. Columns: what each open edge offers; then each
    fact's weight, in two parts if it may be negative.
    """

    def __init__(self, status: Sequence[int]) -> None:
        self.facts: list[Fact] = []
        self.weights: list[float] = []
        self.x: list[float] = []
        self._status = status
        self._open = [e for e, kind in enumerate(status) if kind == OPEN]
        self._row = {e: r for r, e in enumerate(self._open)}
        self._signs: list[tuple[int, int]] = []
        self._costs = [0.0] * len(self._open)
        self._program = LinearProgram()
        last = len(self._open)
        self._program.add_rows([*[(0.0, INFINITY)] * last, (1.0, INFINITY)])
        self._program.add_columns(
            [(0.0, INFINITY, 0.0, [(r, 1.0), (last, -1.0)]) for r in range(last)]
        )

    def add(self, facts: Sequence[Fact]) -> None:
        """Add facts, at the cost of the integers they take."""
        columns: list[Column] = []
        for i, fact in enumerate(facts, start=len(self.facts)):
            entries = [(self._row[e], -sign) for e, sign in fact.terms if e in self._row]
            entries.append((len(self._open), gain_of(fact, self._status)))
            for way in (1, -1) if fact.equal else (1,):
                column = [(r, float(way * a)) for r, a in entries if a]
                columns.append((0.0, INFINITY, 0.0, column))
                self._signs.append((i, way))
                self._costs.append(float(fact.length))
        self.facts += facts
        self._program.add_columns(columns)

    def solve(self, *, budget: Budget) -> bool:
        """Find the cheapest weights, and the x that goes with them."""
        self._program.set_costs(self._costs)
        optimum = self._program.solve(budget=budget)
        if optimum is None:
            return False
        weights = [0.0] * len(self.facts)
        values = optimum.columns[len(self._open) :]
        for (i, way), value in zip(self._signs, values, strict=True):
            weights[i] += way * value
        largest = max(map(abs, weights))
        price = optimum.prices[-1]
        if largest <= 0 or price <= 0:
            return False
        self.weights = [w / largest for w in weights]
        self.x = [float(kind == USED) for kind in self._status]
        for e, paid in zip(self._open, optimum.prices, strict=False):
            self.x[e] = paid / price
        return True

    def damp(self) -> None:
        """Make facts cheap where the weight is large, and dear where it is small."""
        self._costs[len(self._open) :] = [
            self.facts[i].length / (abs(self.weights[i]) + _DAMPING) for i, _ in self._signs
        ]

    def favour(self, weights: Sequence[int]) -> None:
        """Make facts cheaper that have a weight."""
        self._costs[len(self._open) :] = [
            self.facts[i].length * (_FAVOUR if i < len(weights) and weights[i] else 1.0)
            for i, _ in self._signs
        ]

    def forbid(self, i: int, *, forbidden: bool = True) -> None:
        """Keep the weight of a fact at 0, or let it go again."""
        top = 0.0 if forbidden else INFINITY
        self._program.set_bounds(
            [
                (len(self._open) + j, 0.0, top)
                for j, (fact, _) in enumerate(self._signs)
                if fact == i
            ]
        )


def gain_of(fact: Fact, status: Sequence[int]) -> int:
    """Return what weight 1 adds to need minus the scores of the used edges."""
    return fact.bound - sum(sign for e, sign in fact.terms if status[e] == USED)
