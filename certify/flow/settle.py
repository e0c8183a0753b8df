"""Instances through the engine: jobs out to workers, outcomes back in order."""

from __future__ import annotations

from collections import deque
from collections.abc import Iterable, Iterator
from functools import partial
from typing import Any

from certify.engine.executors import Workers
from certify.engine.ordered import CAPACITY, Failure, Task, run_in_order
from certify.evidence.record import read_record
from certify.flow.outcome import Origin, Outcome
from certify.flow.split import cut_open
from certify.flow.work import Finding, Job, Refusal, check_record, settle_job

PRELOAD = ("certify.flow.work", "certify.flow.split")
"""What workers need."""


def settle_all(workers: Workers, jobs: Iterable[tuple[Origin, Job]]) -> Iterator[Outcome]:
    """Yield the outcome of every job, in order. What is held does not grow with their number.

    Errors: those of `jobs`, and of instances that have no graph, in their place.
    """
    under_way: deque[Origin] = deque()

    def tasks() -> Iterator[Task]:
        for origin, job in jobs:
            under_way.append(origin)
            # A graph of a list is small work, by the length of its text; that of a rule
            # may be hard, so it goes alone.
            weight = CAPACITY if origin.source is None else len(origin.source)
            yield Task(settle_job, job, weight)

    for result in run_in_order(workers, tasks(), cut=partial(cut_open, workers.jobs)):
        yield _outcome(under_way.popleft(), result, foreign=workers.foreign)


def _outcome(origin: Origin, result: Any, *, foreign: bool) -> Outcome:
    """Make an outcome of what a worker found.

    What comes from a cluster is checked once more, here: neither the network nor
    the other machine is believed. A process that was started on this machine by this
    one runs the same checker from the same files, on the very bytes that it sends through
    a pipe that no other program has; it is believed as much as this process itself.
    """
    if isinstance(result, Refusal):
        raise result.error
    if not isinstance(result, Finding):
        text = result.text if isinstance(result, Failure) else "a worker sent no finding"
        return _left_open(origin, text)
    if not foreign:
        record = read_record(result.line, lambda _: dict(result.files))
        return Outcome(record, result.verdict, origin, result.stored, result.error)
    try:
        # Only files that the record names, which are those that the checker wants: any other
        # would be written under whatever name was sent.
        record = read_record(result.line, lambda names: {n: result.files[n] for n in names})
    except (ValueError, KeyError, TypeError, AttributeError, RecursionError):
        return _left_open(origin, "a worker sent no record")
    verdict = check_record(origin, record)
    if not (verdict.holds or verdict.is_open):
        return _left_open(origin, f"a worker sent what is rejected here: {verdict.reason}")
    return Outcome(record, verdict, origin, result.stored, result.error)


def _left_open(origin: Origin, error: str) -> Outcome:
    record = origin.write_open()
    return Outcome(record, check_record(origin, record), origin, error=error)
