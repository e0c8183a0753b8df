"""Trees of cases, found by looking ahead.

Branch and bound in the manner of Little, Murty, Sweeney and Karel (Operations
Research 11 (1963) 972-989) with the choice of branches by looking ahead
(branching.py) and leaves closed by forced moves, symmetry or counting
(leaves.py). A tree proves that there is no Hamiltonian cycle because in every
branch one of its cases holds for it, the forced moves keep it, and no leaf
has one. Several trees are tried, each with other settings, and a small one is
kept, its leaves written as shortly as possible.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from certify.evidence.cases import Cases, Forced, Like, Node
from certify.evidence.counting import Counting
from certify.evidence.obstruction import Obstruction
from certify.graph.question import Question
from certify.search.branching import Closed, Lookahead, Settings
from certify.search.budget import Budget
from certify.search.forced import State
from certify.search.leaves import Assumptions, CycleFoundError, EffortSpentError, Judge
from certify.search.obstruction import find_obstruction
from certify.search.symmetry import Permutation

_QUICK = (Settings(8.0), Settings(4.0))
_THOROUGH = (
    *_QUICK,
    Settings(12.0, levels=2),
    Settings(18.0, levels=2),
    Settings(4.0, levels=2, breadth=20),
)
_FEW_LEAVES = 3
"""A tree with so few leaves is not improved upon."""
_SLACK = 2
"""How many leaves more a tree may have to be compared by its reading length."""
_READ_LEAVES = 60
"""In a tree with more leaves nobody reads them all: no time is spent on making it shorter."""


def find_cases(
    question: Question,
    *,
    budget: Budget,
    most_leaves: int,
    most_effort: float = math.inf,
    shortest: bool = False,
) -> Cases | None:
    """Find a tree of cases that shows there is no Hamiltonian cycle.

    question: in normal form; fewer than 3 vertices, or absent, has no tree.
    most_leaves: larger trees are not looked for. most_effort: the search is given up
    when the squares of the numbers of edges, added over its linear programs, are more
    (a million takes one to two seconds); the same on every machine. shortest: look
    further ahead and try more trees; of those with few leaves the one with the least reading
    length is returned (the least of those tried, not of all there are).
    None says that no tree was found within the limits, never that a cycle exists.
    The budget makes the search give up and has no other influence.
    Cost: see `Lookahead.choose`, for each branch of the tree; memory is bounded
    by the tables of leaves.py and branching.py and by the tree.
    """
    if question.n < 3 or question.absent:
        return None
    judge = Judge(question, budget=budget, most_effort=most_effort)
    try:
        trees = _grow_trees(judge, budget, most_leaves=most_leaves, shortest=shortest)
        judge.most_effort = math.inf
        found = [_write(tree, judge, budget, shortest=shortest) for tree in trees]
    except CycleFoundError:
        return None
    if budget.spent or not found:
        return None
    return min(found, key=lambda cases: cases.length) if shortest else found[0]


@dataclass(frozen=True, slots=True)
class _Likeness:
    """A leaf that is like the closed case number `number`, under a symmetry."""

    number: int
    symmetry: Permutation


@dataclass(frozen=True)
class _Tree:
    """A finished tree in preorder; for leaves closed by counting also their states."""

    nodes: list[Node | _Likeness]
    states: dict[int, State]
    leaves: int

    @property
    def size(self) -> tuple[int, int]:
        """Return what is to be small: leaves, then nodes."""
        return self.leaves, len(self.nodes)


@dataclass(frozen=True, slots=True)
class _Task:
    """A case that waits to be settled."""

    state: State
    assumptions: Assumptions
    closed: Closed


def _grow_trees(judge: Judge, budget: Budget, *, most_leaves: int, shortest: bool) -> list[_Tree]:
    """Grow trees with one setting after another; the smallest by leaves, then nodes, comes first.

    With `shortest` other trees follow that have hardly more leaves: they may read shorter.
    Errors: CycleFoundError.
    """
    trees: list[_Tree] = []
    slack = _SLACK if shortest else 0
    for settings in _THOROUGH if shortest else _QUICK:
        if settings.levels > 1 and not trees and most_leaves > _READ_LEAVES:
            break
        least = min((tree.leaves for tree in trees), default=most_leaves)
        try:
            tree = _grow(judge, settings, min(most_leaves, least + slack), budget)
        except EffortSpentError:
            break
        if tree is not None:
            trees.append(tree)
            if not _FEW_LEAVES < tree.leaves <= _READ_LEAVES:
                break
    trees.sort(key=lambda tree: tree.size)
    return [tree for tree in trees if tree.leaves <= trees[0].leaves + slack]


def _grow(judge: Judge, settings: Settings, most_leaves: int, budget: Budget) -> _Tree | None:
    """Grow a tree depth first, in preorder; None if it has too many leaves or the budget ends.

    Errors: CycleFoundError.
    """
    lookahead = Lookahead(judge, settings)
    nodes: list[Node | _Likeness] = []
    states: dict[int, State] = {}
    numbers: dict[Assumptions, int] = {}
    leaves = 0
    waiting = [_Task(State.first(judge.frame), (0, 0), ())]
    while waiting:
        if budget.spent or leaves + len(waiting) > most_leaves:
            return None
        task = waiting.pop()
        number = numbers[task.assumptions] = len(nodes)
        leaf = _close(judge, task, numbers)
        if leaf is not None:
            if isinstance(leaf, Counting):
                states[number] = task.state
            nodes.append(leaf)
            leaves += 1
            continue
        branch = lookahead.choose(task.state, task.assumptions, task.closed)
        nodes.append(branch.node)
        closed, children = task.closed, []
        for case in branch.cases:
            child = task.state.assume(case.used, case.removed)
            own = case.extend(task.assumptions)
            children.append(_Task(child, own, closed))
            closed = lookahead.after(own, closed)
        waiting.extend(reversed(children))
    return _Tree(nodes, states, leaves)


def _close(
    judge: Judge, task: _Task, numbers: dict[Assumptions, int]
) -> Forced | Counting | _Likeness | None:
    """Return what closes the case, None if nothing does."""
    state = task.state
    if state.contradiction:
        return Forced()
    if task.closed:
        found = judge.mirrors.find(state, task.closed) or judge.mirrors.find_by_form(
            task.assumptions, task.closed
        )
        if found is not None:
            case, symmetry = found
            return _Likeness(numbers[case], symmetry)
    return judge.find_counting(state) if judge.is_refuted(state) else None


def _write(tree: _Tree, judge: Judge, budget: Budget, *, shortest: bool) -> Cases:
    """Write a tree as evidence: leaves as short as possible, symmetries numbered."""
    symmetries: dict[Permutation, int] = {}
    nodes: list[Node] = []
    for number, node in enumerate(tree.nodes):
        if isinstance(node, _Likeness):
            k = symmetries.setdefault(node.symmetry, len(symmetries))
            nodes.append(Like(node.number, k))
        elif isinstance(node, Counting) and tree.leaves <= _READ_LEAVES:
            nodes.append(_shorten(node, tree.states[number], judge, budget, shortest=shortest))
        else:
            nodes.append(node)
    return Cases(tuple(nodes), tuple(symmetries))


def _shorten(
    found: Counting, state: State, judge: Judge, budget: Budget, *, shortest: bool
) -> Counting | Obstruction:
    """Return the shortest of the argument found, a sparser one, and an obstruction."""
    leaf: Counting | Obstruction = found
    question = judge.frame.question.assume(state.used_edges(), state.removed_edges())
    for other in (
        find_obstruction(question, budget=budget),
        judge.find_counting(state, shortest=True) if shortest else None,
    ):
        if other is not None and other.length < leaf.length:
            leaf = other
    return leaf
