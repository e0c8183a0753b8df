"""Finding the object itself.

A *witness* of a path question is cut out of a Hamiltonian cycle at the apex.
Two methods that miss different graphs take turns, both with a bounded number
of steps: rotations of a path, and merging the cycles of a 2-factor. Neither is
complete: when both fail, nothing follows.
"""

from __future__ import annotations

from collections.abc import Sequence

from certify.evidence.witness import Witness
from certify.graph.graph import edge_between
from certify.graph.question import Question
from certify.search.budget import Budget
from certify.search.forced import Frame, State
from certify.search.merging import find_by_merging
from certify.search.rotation import find_by_rotation

ONE_VERTEX_PATH = (0, 1)
"""What stands for a cycle in the question of the path on one vertex: it, and the apex."""

FIRST_PATHS = range(2)
MORE_PATHS = range(2, 6)
"""The paths begun before and after merging is tried."""


def find_witness(question: Question, *, budget: Budget) -> tuple[int, ...] | None:
    """Find a Hamiltonian cycle of the question that uses every required edge.

    Makes the forced moves first; they change no answer. The same question gives
    the same cycle, whatever the clock says: the budget is used only to give up.
    Returns the vertices in the order of the cycle, from vertex 0, the smaller of
    its neighbours second (vertex and apex, for the path on one vertex).
    None says that no cycle was found, never that there is none.
    Cost: bounded by the constants of `rotation` and `merging`, for n vertices
    O(n) steps of O(n) each and some calls of a solver with a bounded number of
    conflicts.
    """
    return _find(question, budget, first_only=False)


def glance_for_witness(question: Question, *, budget: Budget) -> tuple[int, ...] | None:
    """Find a Hamiltonian cycle as `find_witness` does, but by its first attempt alone.

    What it finds is what `find_witness` finds.
    """
    return _find(question, budget, first_only=True)


def _find(question: Question, budget: Budget, *, first_only: bool) -> tuple[int, ...] | None:
    if question.is_one_vertex_path:
        return ONE_VERTEX_PATH
    if question.absent or question.n < 3 or min(map(len, question.neighbours)) < 2:
        return None
    if question.required or min(map(len, question.neighbours)) == 2:
        state = State.first(Frame(question))
        if state.contradiction:
            return None
        reduced = question.assume(state.used_edges(), state.removed_edges())
    else:
        reduced = question
    cycle = find_by_rotation(reduced, paths=FIRST_PATHS, budget=budget)
    if cycle is None and not first_only:
        cycle = find_by_merging(reduced, budget=budget) or find_by_rotation(
            reduced, paths=MORE_PATHS, budget=budget
        )
    if cycle is None or not is_cycle(question, cycle):
        return None
    return _normal_form(cycle)


def is_cycle(question: Question, cycle: Sequence[int]) -> bool:
    """Return whether these vertices, in order, are a Hamiltonian cycle through R."""
    if len(cycle) < 3 or sorted(cycle) != list(range(question.n)):
        return False
    steps = {edge_between(u, v) for u, v in zip(cycle, (*cycle[1:], cycle[0]), strict=True)}
    return question.required <= steps <= question.edge_set


def write_witness(question: Question, cycle: Sequence[int]) -> Witness:
    """Write a cycle of the question as the order of the graph's vertices.

    cycle: as `find_witness` gives it. For a path question it is cut at the apex,
    the smaller end first; for a cycle question it is kept.
    Errors: ValueError when it is not a Hamiltonian cycle through R.
    """
    if question.is_one_vertex_path and tuple(cycle) == ONE_VERTEX_PATH:
        return Witness((0,))
    if question.absent or not is_cycle(question, cycle):
        raise ValueError("these vertices are no Hamiltonian cycle of the question")
    if question.apex is None:
        return Witness(tuple(cycle))
    at = cycle.index(question.apex)
    path = (*cycle[at + 1 :], *cycle[:at])
    return Witness(min(path, path[::-1]))


def _normal_form(cycle: Sequence[int]) -> tuple[int, ...]:
    at = cycle.index(0)
    first, *rest = (*cycle[at:], *cycle[:at])
    return (first, *min(rest, rest[::-1]))
