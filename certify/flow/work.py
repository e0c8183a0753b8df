"""What a worker does for one instance: build the graph, search, and have the record checked.

A worker gets bytes and gives bytes. What it stores nowhere and remembers between
instances is the claim, read.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from functools import lru_cache

from certify.checker import Verdict, check_line
from certify.claim.claim import Claim, build_claim
from certify.claim.endless import endless_key, row_of
from certify.claim.instances import Key
from certify.claim.toml import parse_document
from certify.errors import InputError
from certify.evidence.endless import write_endless_record
from certify.evidence.record import Record, read_record, write_record
from certify.flow.outcome import Origin
from certify.graph.build import build_question
from certify.graph.strip import read_strip
from certify.search.endless import find_endless
from certify.search.ladder import Limits, settle
from certify.search.split import Part, split_question

MOST_SPLIT = 500
"""Vertices of a question that is split: in larger ones the splitting itself is long work."""


@dataclass(frozen=True)
class ClaimFile:
    """A claim as it is sent to workers: the bytes, and what messages call the file."""

    raw: bytes
    shown: str
    name: str

    @classmethod
    def of(cls, claim: Claim) -> ClaimFile:
        """Return the file of a claim."""
        return cls(claim.raw, claim.where, claim.name)


@dataclass(frozen=True)
class Job:
    """One instance for a worker.

    key, source, shown: as of an Origin. stored: the line that is stored for it, if any;
    files: those that this line names. parts: into how many parts the instance is to be
    split if the search leaves it open; 0 for none.
    """

    claim: ClaimFile
    key: Key
    limits: Limits
    source: bytes | None = None
    shown: str = ""
    stored: bytes | None = None
    files: Mapping[str, bytes] = field(default_factory=dict)
    parts: int = 0

    @property
    def origin(self) -> Origin:
        """Return where the instance comes from."""
        return Origin(_read_claim(self.claim), self.key, self.source, self.shown)


def make_job(file: ClaimFile, origin: Origin, limits: Limits, *, parts: int = 0) -> Job:
    """Make the job of an instance, with nothing stored for it."""
    return Job(file, origin.key, limits, origin.source, origin.shown, parts=parts)


@dataclass(frozen=True)
class Finding:
    """What a worker found: the bytes of a record, and the verdict on these bytes.

    stored: they are those that the job brought. error: why the instance is open
    although the search found something; None otherwise. parts: of an instance that the
    search left open, for other workers to settle.
    """

    line: bytes
    files: Mapping[str, bytes]
    verdict: Verdict
    stored: bool = False
    error: str | None = None
    parts: tuple[Part, ...] = ()


@dataclass(frozen=True)
class Refusal:
    """The input is wrong: there is no such graph. It ends the run."""

    error: InputError


@lru_cache(maxsize=8)
def _read_claim(file: ClaimFile) -> Claim:
    return build_claim(parse_document(file.raw, file.shown), file.name)


def settle_job(job: Job) -> Finding | Refusal:
    """Settle an instance: by what is stored if the checker says that it holds, or by search.

    What the limits do not settle is open.
    """
    try:
        found = check_stored(job) if job.stored is not None else None
        return found or _search(job)
    except InputError as error:
        return Refusal(error)


def check_stored(job: Job) -> Finding | None:
    """Check what is stored for an instance; None if it does not hold, or is open."""
    try:
        record = read_record(job.stored or b"", lambda names: {n: job.files[n] for n in names})
    except (ValueError, KeyError, TypeError, AttributeError, RecursionError):
        return None
    verdict = check_record(job.origin, record)
    if not verdict.holds:
        return None
    return Finding(record.line, record.files, verdict, stored=True)


def _search(job: Job) -> Finding:
    origin = job.origin
    if origin.claim.growing is not None:
        row = row_of(origin.claim, job.key)
        endless = find_endless(read_strip(origin.claim, row), job.limits)
        return judge(origin, write_endless_record(endless_key(origin.claim, row), endless))
    graph = origin.build_graph()
    question = build_question(origin.claim, job.key, graph)
    evidence = settle(question, job.limits)
    finding = judge(origin, write_record(job.key, graph, evidence))
    if evidence is None and question.n <= MOST_SPLIT and "clauses" in job.limits.kinds:
        return replace(finding, parts=split_question(question, job.parts))
    return finding


def judge(origin: Origin, record: Record) -> Finding:
    """Have a fresh record checked, on the very bytes that are to be stored.

    When the checker rejects what the search found, one of the two is at fault: a fault
    of the program, never an answer. The instance is open then, with this error.
    """
    verdict = check_record(origin, record)
    if verdict.holds or verdict.is_open:
        return Finding(record.line, record.files, verdict)
    left = origin.write_open()
    return Finding(
        left.line,
        left.files,
        check_record(origin, left),
        error=f"the search found {record.kind} evidence, and the checker rejects it: "
        f"{verdict.reason} (a fault of the program; this evidence is not stored)",
    )


def check_record(origin: Origin, record: Record) -> Verdict:
    """Return the checker's verdict on a record of an instance."""
    source = origin.source or b""
    return check_line(origin.claim.raw, origin.key, record.line, record.files, source)
