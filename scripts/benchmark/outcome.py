"""What a method says about one instance, and the check of a cycle it names."""

from __future__ import annotations

import resource
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from certify.graph.graph import edge_between
from certify.graph.question import Question

Answer = Literal["exists", "impossible", "open"]


def processor_seconds() -> float:
    """Return the processor time used so far by this process and by its ended children.

    All methods are timed with this clock: unlike the clock on the wall it does not
    run faster when the machine is busy with something else, so ratios hold on a
    shared machine, and a method that works in several processes pays for them all.
    """
    # Not time.process_time(): while the limit's timer runs (see `child`), Linux moves
    # that clock in steps of 4 ms, longer than many runs take.
    own = resource.getrusage(resource.RUSAGE_SELF)
    ended = resource.getrusage(resource.RUSAGE_CHILDREN)
    return own.ru_utime + own.ru_stime + ended.ru_utime + ended.ru_stime


class WrongCycleError(Exception):
    """A method named a cycle that is none."""


@dataclass(frozen=True)
class Outcome:
    """The answer of one method to one question.

    answer: `open` when the limit was reached or the method ended without one.
    search_seconds: building the model and solving it (for this tool: the search).
    check_seconds: checking the evidence; 0 where a method offers none. Both are
    seconds of `processor_seconds`.
    kind: the kind of evidence, or how an open run ended.
    proof_steps: lines of the proof the method wrote, 0 if it writes none.
    """

    answer: Answer
    search_seconds: float
    check_seconds: float = 0.0
    kind: str = ""
    proof_steps: int = 0

    @property
    def seconds(self) -> float:
        """Return search and check together."""
        return self.search_seconds + self.check_seconds

    @property
    def is_decided(self) -> bool:
        """Return whether the method answered."""
        return self.answer != "open"


def check_cycle(question: Question, order: Sequence[int]) -> None:
    """Check that `order` is a Hamiltonian cycle that uses every required edge.

    Raises WrongCycleError otherwise: a method that is fast and wrong must not
    get into the table. Cost: O(n).
    """
    if len(order) < 3 or sorted(order) != list(range(question.n)):
        raise WrongCycleError(f"not an order of the {question.n} vertices: {list(order)}")
    closed = [*order, order[0]]
    used = {edge_between(u, v) for u, v in zip(order, closed[1:], strict=True)}
    if not used <= question.edge_set:
        raise WrongCycleError(f"not edges: {sorted(used - question.edge_set)}")
    if not question.required <= used:
        raise WrongCycleError(f"required edges unused: {sorted(question.required - used)}")
