"""When a state of a tree of cases is closed, and by what.

A state (forced.py) is *closed* when it is plain that it has no Hamiltonian
cycle: the forced moves end in a contradiction; or a symmetry maps it into a
case that was closed before; or a counting argument refutes it, which covers
every direct obstruction that counts (separators, independent sets).

*Assumptions* of a case are the edges that the branches on the way to it used
and removed, without forced moves, as two masks (forced.Frame).
"""

from __future__ import annotations

import functools
import math
import operator
from collections.abc import Sequence

from certify.evidence.counting import Counting
from certify.graph.graph import edge_between
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.counting import CountingProgram
from certify.search.forced import Frame, State
from certify.search.symmetry import (
    MOST_ELEMENTS,
    Permutation,
    Symmetries,
    find_mapping,
    find_symmetries,
    inverse,
)

Assumptions = tuple[int, int]
"""The masks of the used and of the removed edges."""

_MOST_BITS = 100_000_000
"""How large the table of symmetries on pairs of edges may be, in bits."""
_MOST_CASES = 20_000
"""How many closed cases are kept as lists of edges."""
_MOST_POINTS = 400
"""How many fractional solutions are remembered."""
_MOST_JUDGED = 50_000
"""How many states are remembered as open or closed."""
_MOST_MAPPINGS = 16
"""How many closed cases are compared by canonical form where the group is too large to list."""
_WHOLE = 1e-7
"""How close to 0 or 1 a fraction counts as whole."""


class Mirrors:
    """The symmetries of a question, and which states they map into closed cases."""

    def __init__(self, frame: Frame) -> None:
        self._frame = frame
        m = max(1, len(frame.edges))
        most = max(1, min(MOST_ELEMENTS, _MOST_BITS // (m * m)))
        self._group: Symmetries = find_symmetries(frame.question, most=most)
        self._parts: dict[Assumptions, tuple[tuple[int, bool], ...]] = {}
        # For edges e, f the elements that map e to f: bit i for element number i.
        self._from: list[dict[int, int]] = [{} for _ in frame.edges]
        for i, p in enumerate(self._group.elements):
            for e, (u, v) in enumerate(frame.edges):
                f = frame.index[edge_between(p[u], p[v])]
                self._from[e][f] = self._from[e].get(f, 0) | 1 << i

    @property
    def is_trivial(self) -> bool:
        """Return whether the identity is the only symmetry."""
        return self._group.order == 1

    def find(
        self, state: State, closed: Sequence[Assumptions]
    ) -> tuple[Assumptions, Permutation] | None:
        """Find a closed case and a symmetry that maps the state into it.

        That is: p maps used edges of the state onto all that the case assumes
        used, and removed edges onto all that it assumes removed. A Hamiltonian
        cycle in the state would be mapped to one in the closed case.
        Cost: one step on a set of elements for each assumed edge of a closed
        case and each edge that it can be mapped to.
        """
        everyone = (1 << len(self._group.elements)) - 1
        into: dict[tuple[int, bool], int] = {}
        for case in closed:
            fitting = everyone
            for edge, is_used in self._assumed(case):
                if (edge, is_used) not in into:
                    target = state.used_mask if is_used else state.removed_mask
                    into[edge, is_used] = functools.reduce(
                        operator.or_,
                        (who for f, who in self._from[edge].items() if target >> f & 1),
                        0,
                    )
                fitting &= into[edge, is_used]
                if not fitting:
                    break
            else:
                first = (fitting & -fitting).bit_length() - 1
                # It maps the case into the state: its inverse maps the state.
                return case, inverse(self._group.elements[first])
        return None

    def find_by_form(
        self, assumptions: Assumptions, closed: Sequence[Assumptions]
    ) -> tuple[Assumptions, Permutation] | None:
        """Find a closed case with the same assumptions up to symmetry.

        For groups too large to list; compares canonical forms. Cost: two of
        them for each of the last few closed cases.
        """
        if self._group.is_complete:
            return None
        source = tuple(frozenset(self._frame.edges_of(mask)) for mask in assumptions)
        for case in closed[-_MOST_MAPPINGS:]:
            target = tuple(frozenset(self._frame.edges_of(mask)) for mask in case)
            p = find_mapping(self._frame.question, (source[0], source[1]), (target[0], target[1]))
            if p is not None:
                return case, p
        return None

    def _assumed(self, case: Assumptions) -> tuple[tuple[int, bool], ...]:
        """Return the edge numbers of the assumptions, each with whether it is used."""
        known = self._parts.get(case)
        if known is None:
            if len(self._parts) >= _MOST_CASES:
                self._parts.clear()
            index = self._frame.index
            known = self._parts[case] = tuple(
                (index[edge], is_used)
                for mask, is_used in zip(case, (True, False), strict=True)
                for edge in self._frame.edges_of(mask)
            )
        return known


class CycleFoundError(Exception):
    """A Hamiltonian cycle turned up: the search for a tree of cases is pointless."""


class EffortSpentError(Exception):
    """The effort allowed is spent; unlike the budget it does not depend on the clock."""


class Judge:
    """Says whether states of one question are closed; keeps what it learns.

    A fractional solution of the counting program keeps every state open whose
    used edges have the value 1 in it and whose removed edges have 0; the last
    solutions are remembered as pairs of masks, which saves most linear programs.
    """

    def __init__(
        self, question: Question, *, budget: Budget, most_effort: float = math.inf
    ) -> None:
        self.frame = Frame(question)
        self.mirrors = Mirrors(self.frame)
        self.most_effort = most_effort
        """The sum over all linear programs of their number of edges, squared, may be no more."""
        self._effort = 0
        self._budget = budget
        self._program = CountingProgram(question)
        self._points: list[Assumptions] = []
        self._judged: dict[Assumptions, bool] = {}

    def is_refuted(self, state: State) -> bool:
        """Return whether a counting argument closes the state (free of contradiction).

        Errors: CycleFoundError, EffortSpentError.
        Cost: at most one run of the counting program.
        """
        if state.complete:
            raise CycleFoundError
        key = (state.used_mask, state.removed_mask)
        known = self._judged.get(key)
        if known is not None:
            return known
        for ones, zeros in reversed(self._points):
            if not (key[0] & ~ones or key[1] & ~zeros):
                return False
        return self.find_counting(state) is not None

    def find_counting(self, state: State, *, shortest: bool = False) -> Counting | None:
        """Find a counting argument for the state, and remember whether there is one.

        Errors: CycleFoundError, EffortSpentError.
        """
        self._effort += len(self.frame.edges) ** 2
        if self._effort > self.most_effort:
            raise EffortSpentError
        found = self._program.refute(
            state.used_edges(), state.removed_edges(), budget=self._budget, shortest=shortest
        )
        if found is None and not self._budget.spent:
            self._remember_point()
        if len(self._judged) >= _MOST_JUDGED:
            self._judged.clear()
        self._judged[(state.used_mask, state.removed_mask)] = found is not None
        return found

    def _remember_point(self) -> None:
        """Keep the fractional solution of the last run, as masks of its ones and zeros."""
        point = self._program.fractional()
        if point is None:
            return
        ones = zeros = 0
        for i, edge in enumerate(self.frame.edges):
            if point[edge] >= 1 - _WHOLE:
                ones |= 1 << i
            elif point[edge] <= _WHOLE:
                zeros |= 1 << i
        if ones | zeros == (1 << len(self.frame.edges)) - 1:
            raise CycleFoundError
        self._points.append((ones, zeros))
        del self._points[:-_MOST_POINTS]
