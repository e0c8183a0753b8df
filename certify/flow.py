"""The one flow: claim -> graphs -> search -> evidence -> checker.

Nothing leaves this module as an answer unless the checker, through its front door
and on the very bytes that are to be stored, has said that the evidence holds.
"""

from __future__ import annotations

import json
from collections.abc import Collection, Iterator
from dataclasses import dataclass
from pathlib import Path

from certify.checker import Verdict, check_line
from certify.claim.claim import Claim, count_instances, read_claim
from certify.claim.endless import claimed_set, endless_key, row_of
from certify.claim.instances import Key, name_key
from certify.errors import CertifyError, ContradictionError, InputError
from certify.evidence.carry import carry_over
from certify.evidence.endless import write_endless_record
from certify.evidence.record import Record, read_record, write_record
from certify.evidence.store import Store, claim_name, name_of
from certify.graph.build import Instance, build_graph, build_question, instances
from certify.graph.files import format_of, read_sources
from certify.graph.graph import Graph
from certify.graph.question import BUILDERS, Question
from certify.graph.strip import read_strip
from certify.report.lasting import Lasting, Settled, find_lasting_around
from certify.search.endless import find_endless
from certify.search.ladder import DEFAULTS, Limits, settle


class UnsoundError(CertifyError):
    """The search and the checker disagree: a fault of the program, never an answer."""


@dataclass(frozen=True)
class Outcome:
    """What came out for one instance.

    record: what is stored. verdict: what the checker said of these bytes.
    stored: it was there already and only checked again.
    """

    record: Record
    verdict: Verdict
    graph: Graph
    question: Question
    stored: bool = False

    @property
    def name(self) -> str:
        """Return the instance as messages write it."""
        return name_key(self.record.key)

    @property
    def settled(self) -> Settled:
        """Return what is told of the instance."""
        return Settled(self.record.content, self.graph)

    @property
    def contradicts(self) -> bool:
        """Return whether the evidence shows the opposite of what is claimed."""
        return self.verdict.holds and not self.verdict.accepted


@dataclass(frozen=True)
class Run:
    """A claim that is about to be proved; iterate over `outcomes` to do it."""

    claim: Claim
    folder: Path
    count: int | None
    outcomes: Iterator[Outcome]


def prove(
    claim_path: Path | str,
    *,
    out: Path | str | None = None,
    limits: Limits = DEFAULTS,
    redo: Collection[str] = (),
) -> Run:
    """Find and store evidence for every instance of a claim.

    out: the evidence folder; the claim's own folder if None. limits: for each
    instance. redo: instances to be searched again although evidence is
    stored, by their text (`n=18`, `m=3,n=4`, `17`), or `all`.
    Errors: InputError and below, before anything is written or with it undone.
    """
    path = Path(claim_path)
    claim = read_claim(path)
    _check_rows(claim)
    folder = Path(out) if out is not None else path.parent
    outcomes = _prove(claim, path, folder, limits, set(redo))
    return Run(claim, folder, count_instances(claim), outcomes)


def _check_rows(claim: Claim) -> None:
    """Refuse an endless claim whose rows are not all strips with periodic answers, in time."""
    if claim.growing is not None:
        for row in claim.rows:
            claimed_set(claim, row)
            read_strip(claim, row)


def _prove(
    claim: Claim, path: Path, folder: Path, limits: Limits, redo: set[str]
) -> Iterator[Outcome]:
    with Store(folder, claim, path) as store:
        stored = store.read_stored()
        last: Outcome | None = None
        try:
            unknown = redo - {"all"}
            for instance in instances(claim, path.parent):
                unknown.discard(instance.name)
                again = "all" in redo or instance.name in redo
                line = None if again else stored.get(name_of(instance.key))
                outcome = _take_stored(claim, instance, line, store) if line else None
                if outcome is None:
                    outcome = _find(claim, instance, limits)
                    outcome = _keep_reason(claim.raw, instance, outcome, last) or outcome
                last = outcome
                store.add(outcome.record, stored=outcome.stored)
                yield outcome
            if unknown:
                raise InputError(
                    f"{path}: there is no instance {min(unknown)}; "
                    "--redo takes an instance such as n=18, or all"
                )
        except InputError:
            store.discard()
            raise
        store.finish()


def _take_stored(claim: Claim, instance: Instance, line: bytes, store: Store) -> Outcome | None:
    """Return what is stored for an instance if the checker still says that it holds."""
    try:
        record = read_record(line, store.read_files)
    except (ValueError, KeyError, TypeError):
        return None
    verdict = _check(claim.raw, instance, record)
    if not verdict.holds:
        return None  # open, or rejected: to be searched again
    question = build_question(claim, instance.key, instance.graph)
    return Outcome(record, verdict, instance.graph, question, stored=True)


def _find(claim: Claim, instance: Instance, limits: Limits) -> Outcome:
    """Search for the evidence of an instance of a claim, and have it checked."""
    question = build_question(claim, instance.key, instance.graph)
    if claim.growing is None:
        return _settle(claim.raw, instance, question, limits)
    row = row_of(claim, instance.key)
    evidence = find_endless(read_strip(claim, row), limits)
    record = write_endless_record(endless_key(claim, row), evidence)
    return _judge(claim.raw, instance, question, record)


def _settle(claim: bytes, instance: Instance, question: Question, limits: Limits) -> Outcome:
    """Search, write the record, and have it checked; what the limits do not settle is open."""
    record = write_record(instance.key, instance.graph, settle(question, limits))
    return _judge(claim, instance, question, record)


def _judge(claim: bytes, instance: Instance, question: Question, record: Record) -> Outcome:
    """Have a fresh record checked."""
    verdict = _check(claim, instance, record)
    if not (verdict.holds or verdict.is_open):
        raise UnsoundError(
            f"instance {instance.name}: the search found {record.kind} evidence, and the checker "
            f"rejects it: {verdict.reason}\n  this is a fault of the program; nothing was stored"
        )
    return Outcome(record, verdict, instance.graph, question)


def _keep_reason(
    claim: bytes, instance: Instance, outcome: Outcome, last: Outcome | None
) -> Outcome | None:
    """Return the instance with the last one's reason, if it holds here and is no longer.

    So a paper can say once what refutes several graphs in a row.
    """
    if last is None or outcome.record.answer != "impossible":
        return None
    evidence = carry_over(last.record.kind, last.record.evidence, last.graph, instance.graph)
    if evidence is None or evidence.length > outcome.record.length:
        return None
    record = write_record(instance.key, instance.graph, evidence)
    verdict = _check(claim, instance, record)
    if not verdict.holds:
        return None
    return Outcome(record, verdict, instance.graph, outcome.question)


def _check(claim: bytes, instance: Instance, record: Record) -> Verdict:
    source = instance.source or b""
    return check_line(claim, instance.key, record.line, record.files, source)


def decide_file(
    path: Path | str,
    structure: str,
    *,
    form: str | None = None,
    limits: Limits = DEFAULTS,
) -> Iterator[Outcome]:
    """Answer the question for each graph of a file, without a claim.

    form: the format of the file; its ending decides if None. limits: for each
    graph. Yields the outcomes in the order of the file; the evidence is
    checked as that of a survey over this list.
    Errors: GraphFileError, saying where.
    """
    file = Path(path)
    form = form or format_of(file)
    for position, (graph, source) in enumerate(read_sources(file, form), 1):
        instance = Instance(position, graph, source)
        yield decide_instance(instance, structure, form, limits=limits)


def decide_instance(
    instance: Instance,
    structure: str,
    form: str,
    *,
    limits: Limits = DEFAULTS,
) -> Outcome:
    """Answer the question for one graph, given with its text in a format of lists."""
    claim = f'structure = "{structure}"\n[graph]\nlist = "graphs"\nformat = "{form}"\n'
    build = BUILDERS[structure]
    return _settle(claim.encode(), instance, build(instance.graph), limits)


def read_stored_claim(folder: Path) -> Claim:
    """Read the claim whose evidence a folder holds. Errors: InputError."""
    return read_claim(folder / claim_name(folder))


def find_outcome(folder: Path, name: str) -> tuple[Outcome, Lasting | None]:
    """Read the stored evidence of one instance, and the run with the same reason around it.

    name: the instance as messages write it: `n=18`, `m=3,n=4`, `17`. The evidence is
    checked before it is told.
    Errors: InputError when there is no such instance or no evidence; a
    ContradictionError when the checker rejects what is stored.
    """
    claim = read_stored_claim(folder)
    claim_path = folder / claim.name
    store = Store(folder, claim, claim_path)
    stored = store.read_stored()
    wanted = name.replace(" ", "")
    for instance in instances(claim, folder):
        if instance.name != wanted:
            continue
        line = stored.get(name_of(instance.key))
        outcome = _take_stored(claim, instance, line, store) if line else None
        if outcome is None:
            raise ContradictionError(
                f"{folder}: the evidence stored for {instance.name} is missing, open or rejected\n"
                f"  next: certify check {folder}"
            )

        if claim.growing is not None:
            return outcome, None

        def look_up(key: Key) -> Settled | None:
            other = stored.get(name_of(key))
            if other is None or not isinstance(key, dict):
                return None
            return Settled(json.loads(other), build_graph(claim, key))

        return outcome, find_lasting_around(outcome.settled, look_up)
    raise InputError(
        f"{claim_path}: there is no instance {name!r}; write n=18, m=3,n=4, "
        "or 17 for a graph of a list"
    )
