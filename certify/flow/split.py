"""Hard instances in parts: what the ladder leaves open is split, and workers take the parts.

An instance is asked in parts once, and only where there are several workers. The parts
together have the budget of the instance once more, on every worker; their
proofs are joined by one more task, whose record is checked like any other. If a part stays
open, so does the instance.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import partial
from typing import Any

from certify.engine.ordered import Parts, Task
from certify.evidence.record import write_record
from certify.flow.work import Finding, Job, Refusal, judge
from certify.graph.build import build_question
from certify.search.split import Part, PartProof, join_parts, settle_part

PARTS = 16
"""Fixed, so that the evidence does not depend on how many workers there are."""


@dataclass(frozen=True)
class PartJob:
    """One part of an instance for a worker. seconds: the budget of the part."""

    job: Job
    part: Part
    seconds: float


@dataclass(frozen=True)
class JoinJob:
    """An instance whose parts are to be joined. proofs: None for a part left open."""

    job: Job
    first: Finding
    parts: tuple[Part, ...]
    proofs: tuple[PartProof | None, ...]


def cut_open(jobs: int, task: Task, found: Any) -> Parts | None:
    """Return the parts of an instance that the search left open; None if there are none.

    jobs: how many parts run at a time.
    """
    if not isinstance(found, Finding) or not found.parts:
        return None
    seconds = task.item.limits.seconds * jobs / len(found.parts)
    tasks = [Task(settle_one, PartJob(task.item, part, seconds)) for part in found.parts]
    return Parts(tasks, partial(_join, task.item, replace(found, parts=()), found.parts))


def _join(job: Job, first: Finding, parts: tuple[Part, ...], found: list[Any]) -> Task:
    proofs = tuple(proof if isinstance(proof, PartProof) else None for proof in found)
    return Task(join, JoinJob(job, first, parts, proofs))


def settle_one(item: PartJob) -> PartProof | None:
    """Settle one part, in a worker."""
    origin = item.job.origin
    question = build_question(origin.claim, item.job.key, origin.build_graph())
    return settle_part(question, item.part, replace(item.job.limits, seconds=item.seconds))


def join(item: JoinJob) -> Finding | Refusal:
    """Join the parts to a record and have it checked, in a worker; open if a part is.

    A cycle of one part settles the instance, whatever became of the others.
    """
    origin = item.job.origin
    graph = origin.build_graph()
    question = build_question(origin.claim, item.job.key, graph)
    cycles = [proof for proof in item.proofs if proof is not None and proof.cycle is not None]
    proofs = [proof for proof in item.proofs if proof is not None]
    if not cycles and len(proofs) < len(item.parts):
        return item.first
    evidence = join_parts(question, item.parts, cycles[:1] or proofs)
    return (
        item.first
        if evidence is None
        else judge(origin, write_record(item.job.key, graph, evidence))
    )
