"""Where to branch: the branch whose cases are settled soonest, by looking ahead.

A *branch* splits a state into cases: an edge is used or removed, or a vertex
uses one of its few pairs of edges. *Looking ahead* makes every case of every
branch, with its forced moves, and asks which are closed at once (leaves.py).
The rest is estimated from the number of edges still open, as if every so many
of them doubled the tree; the branch with the least estimate wins.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from certify.evidence.cases import OnEdge, OnVertex
from certify.search.forced import State
from certify.search.leaves import Assumptions, Judge

Closed = tuple[Assumptions, ...]
"""The cases closed before that hang off the way to a state, oldest first."""

_MOST_PAIRS = 4
"""At a vertex with more pairs than this, branches are on edges."""
_MOST_EDGES = 256
"""How many edges of a state are looked at."""
_MOST_CLOSED = 200
"""How many of the last closed cases are compared with a state."""
_MOST_KNOWN = 20_000
"""How many states' candidates are remembered."""
_PLAIN, _ARGUED = 1.0, 1.25
"""What a closed case counts: by forced moves or symmetry; by an argument, which reads longer."""


@dataclass(frozen=True, slots=True)
class Case:
    """One case of a branch: the edges it uses and removes, by number."""

    used: tuple[int, ...]
    removed: tuple[int, ...]

    def extend(self, assumptions: Assumptions) -> Assumptions:
        """Return the assumptions of this case of a state with the given assumptions."""
        used, removed = assumptions
        for edge in self.used:
            used |= 1 << edge
        for edge in self.removed:
            removed |= 1 << edge
        return used, removed


@dataclass(frozen=True, slots=True)
class Branch:
    """A branch: its node in the tree, and its cases in the order of FORMAT.md."""

    node: OnEdge | OnVertex
    cases: tuple[Case, ...]


@dataclass(frozen=True, slots=True)
class Settings:
    """How to look ahead.

    halving: so many open edges fewer halve the estimate of a case.
    levels: how many branches deep to look; 1 or more.
    breadth: how many branches of a state are followed deeper.
    """

    halving: float
    levels: int = 1
    breadth: int = 8


@dataclass(frozen=True, slots=True)
class Candidate:
    """A branch with the estimate of its size; `is_settled`: every case is closed."""

    branch: Branch
    estimate: float
    is_settled: bool


class Lookahead:
    """Chooses branches for the states of one question."""

    def __init__(self, judge: Judge, settings: Settings) -> None:
        self._judge = judge
        self._settings = settings
        self._follow_closed = not judge.mirrors.is_trivial
        # Counting programs grow with the edges; fewer branches are tried then.
        self._most_tried = max(8, min(64, 20_000 // max(1, len(judge.frame.edges))))
        self._known: dict[tuple[Assumptions, Closed], list[Candidate]] = {}

    def choose(self, state: State, assumptions: Assumptions, closed: Closed) -> Branch:
        """Choose the branch of an open state.

        Errors: CycleFoundError. Cost: (branches tried) * (cases) counting programs on the
        first level, times 2 * breadth for each level more.
        """
        return self._look(state, assumptions, closed, self._settings.levels).branch

    def after(self, case: Assumptions, closed: Closed) -> Closed:
        """Return the closed cases when one more is closed; empty if nothing is symmetric."""
        return (*closed, case)[-_MOST_CLOSED:] if self._follow_closed else ()

    def _look(
        self, state: State, assumptions: Assumptions, closed: Closed, levels: int
    ) -> Candidate:
        candidates = self._candidates(state, assumptions, closed)
        settled = [candidate for candidate in candidates if candidate.is_settled]
        if settled:
            return settled[0]
        if levels <= 1:
            return candidates[0]
        best: Candidate | None = None
        for candidate in candidates:
            estimate = 0.0
            for case, child, so_far in self._open_cases(
                state, candidate.branch, assumptions, closed
            ):
                if child is None:
                    estimate += _PLAIN
                else:
                    estimate += self._look(child, case, so_far, levels - 1).estimate
                if best is not None and estimate >= best.estimate:
                    break
            else:
                best = Candidate(candidate.branch, estimate, False)
        return best if best is not None else candidates[0]

    def _candidates(
        self, state: State, assumptions: Assumptions, closed: Closed
    ) -> list[Candidate]:
        """Return the best branches of the state: those that are settled first, then by estimate."""
        key = ((state.used_mask, state.removed_mask), closed)
        known = self._known.get(key)
        if known is not None:
            return known
        rough = []
        for place, branch in enumerate(build_branches(state)):
            children = [state.assume(case.used, case.removed) for case in branch.cases]
            estimate = sum(self._guess(child) for child in children)
            rough.append((estimate, place, branch, children))
        rough.sort(key=lambda entry: entry[:2])
        tried = [
            self._try(branch, children, assumptions, closed)
            for _, _, branch, children in rough[: self._most_tried]
        ]
        tried.sort(key=lambda candidate: (not candidate.is_settled, candidate.estimate))
        if len(self._known) >= _MOST_KNOWN:
            self._known.clear()
        self._known[key] = tried = tried[: self._settings.breadth]
        return tried

    def _try(
        self, branch: Branch, children: list[State], assumptions: Assumptions, closed: Closed
    ) -> Candidate:
        estimate, is_settled = 0.0, True
        for case, child in zip(branch.cases, children, strict=True):
            if child.contradiction or self._judge.mirrors.find(child, closed):
                estimate += _PLAIN
            elif self._judge.is_refuted(child):
                estimate += _ARGUED
            else:
                estimate += self._guess(child)
                is_settled = False
            if self._follow_closed:
                closed = self.after(case.extend(assumptions), closed)
        return Candidate(branch, estimate, is_settled)

    def _open_cases(
        self, state: State, branch: Branch, assumptions: Assumptions, closed: Closed
    ) -> Iterator[tuple[Assumptions, State | None, Closed]]:
        """Yield each case's assumptions, its state (None if closed), and the cases before it."""
        for case in branch.cases:
            child = state.assume(case.used, case.removed)
            own = case.extend(assumptions)
            is_closed = (
                child.contradiction
                or self._judge.mirrors.find(child, closed) is not None
                or self._judge.is_refuted(child)
            )
            yield own, None if is_closed else child, closed
            closed = self.after(own, closed)

    def _guess(self, child: State) -> float:
        """Estimate the leaves below a state from its open edges."""
        if child.contradiction:
            return _PLAIN
        return float(2.0 ** min(900.0, child.open_count / self._settings.halving))


def build_branches(state: State) -> list[Branch]:
    """List the branches of a state that are worth a look: vertices first, then edges.

    An edge is left out where a vertex says the same: one of its ends has one
    used edge and two others. Of very many edges those between vertices with few are
    taken. Cost: O(n + m log m).
    """
    frame = state.frame
    branches = []
    for v in range(frame.n):
        used, left = state.used_count(v), state.left_count(v)
        pairs = left - 1 if used == 1 else left * (left - 1) // 2
        if used < 2 and pairs <= _MOST_PAIRS:
            cases = tuple(Case(pair, ()) for pair in state.pairs_at(v))
            branches.append(Branch(OnVertex(v), cases))
    ends_of = frame.edges
    edges = [
        edge
        for edge in state.open_edges()
        if all(state.used_count(w) == 0 or state.left_count(w) > 3 for w in ends_of[edge])
    ]
    if len(edges) > _MOST_EDGES:
        edges.sort(key=lambda edge: sum(map(state.left_count, ends_of[edge])))
    for edge in edges[:_MOST_EDGES]:
        branches.append(Branch(OnEdge(ends_of[edge]), (Case((edge,), ()), Case((), (edge,)))))
    return branches
