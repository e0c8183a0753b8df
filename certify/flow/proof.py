"""Proving a claim: every instance through the engine, and into the store in order."""

from __future__ import annotations

import contextlib
from collections.abc import Callable, Collection, Iterator
from dataclasses import dataclass, replace
from pathlib import Path
from typing import BinaryIO, cast

from certify.claim.claim import Claim, count_instances, read_claim
from certify.claim.endless import claimed_set, endless_key
from certify.claim.instances import Key
from certify.claim.parts import GraphList
from certify.engine.executors import Workers
from certify.engine.open import open_workers
from certify.errors import InputError
from certify.evidence.carry import CARRIED, carry_over
from certify.evidence.lines import read_manifest
from certify.evidence.record import read_record, write_record
from certify.evidence.source import ListSource
from certify.evidence.store import UNFINISHED, Store
from certify.flow.outcome import Origin, Outcome, form_of
from certify.flow.settle import PRELOAD, settle_all
from certify.flow.split import PARTS
from certify.flow.work import ClaimFile, Job, check_record, make_job
from certify.graph.files import open_list, split_sources
from certify.graph.strip import read_strip
from certify.search.ladder import DEFAULTS, Limits

GraphFile = Path | BinaryIO


@dataclass(frozen=True)
class Run:
    """A claim that is about to be proved; iterate over `outcomes` to do it.

    count: how many instances there will be; None if that is not known before.
    """

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
    jobs: int = 1,
    cluster: str | None = None,
    graphs: GraphFile | None = None,
) -> Run:
    """Find and store evidence for every instance of a claim.

    out: the evidence folder; the claim's own folder if None. limits: for each
    instance. redo: instances to be searched again although evidence is
    stored, by their text (`n=18`, `m=3,n=4`, `17`), or `all`.
    jobs: how many instances at a time, each in a process of its own; 1 is this process.
    cluster: the address of a Dask scheduler, whose workers take them instead.
    graphs: a file, or one open for reading, that holds the claim's list instead. It replaces
    no other list beside the claim; in another folder one that a run put there.
    The evidence does not depend on the last three; but several workers take what one would
    leave open in parts, and so leave less open.
    Errors: InputError and below, before anything is written or with it undone.
    """
    path = Path(claim_path)
    claim = read_claim(path)
    _check_rows(claim)
    if graphs is not None and claim.list_name is None:
        raise InputError(f"{path}: --graphs is for a claim with a list of graphs; this has a rule")
    folder = Path(out) if out is not None else path.parent
    if graphs is not None:
        _keep_list(folder, claim, graphs)
    count = _count(claim, path, graphs)
    # An instance is one task, or its parts are some more; further processes would be idle.
    useful = jobs if count is None else max(1, PARTS * count)
    workers = open_workers(min(jobs, useful), cluster, PRELOAD)
    store = Store(folder, claim, path, graphs)
    outcomes = _outcomes(_Plan(claim, path, limits, frozenset(redo)), workers, store)
    return Run(claim, folder, count, outcomes)


def _check_rows(claim: Claim) -> None:
    """Refuse an endless claim whose rows are not all strips with periodic answers, in time."""
    if claim.growing is not None:
        for row in claim.rows:
            claimed_set(claim, row)
            read_strip(claim, row)


def _keep_list(folder: Path, claim: Claim, graphs: GraphFile) -> None:
    """Refuse to put graphs from elsewhere in the place of a list that no run put there."""
    target = folder / str(claim.list_name)
    states = (folder, folder / UNFINISHED / "ready")  # the second: killed while it was put in place
    listed = [read_manifest(state).get("sha256") for state in states]
    ours = any(isinstance(names, dict) and claim.list_name in names for names in listed)
    same = isinstance(graphs, Path) and graphs.exists() and target.exists()
    if target.exists() and not ours and not (same and target.samefile(cast(Path, graphs))):
        raise InputError(
            f"{target}: this list is there already, and --graphs would replace it\n"
            "  next: give another folder with --out, or leave out --graphs"
        )


def _count(claim: Claim, path: Path, graphs: GraphFile | None) -> int | None:
    """Return the number of instances: of a list as its file tells, else as is claimed."""
    if not isinstance(claim.graphs, GraphList):
        return count_instances(claim)
    source = graphs if graphs is not None else path.parent / claim.graphs.name
    if isinstance(source, Path) and source.is_file():
        return count_graphs(source, form_of(claim.graphs))
    return sum(claim.counts.values()) if len(claim.counts) == 2 else None


def count_graphs(path: Path, form: str) -> int:
    """Return how many graphs a file seems to hold: by its lines, unread.

    Errors: GraphFileError when it cannot be read or is too large.
    """
    if form not in ("graph6", "sparse6"):
        return 1
    with open_list(path, form) as file:
        return sum(piece.count(b"\n") for piece in iter(lambda: file.read(1 << 20), b""))


@dataclass(frozen=True)
class _Plan:
    """What is to be proved, and how."""

    claim: Claim
    path: Path
    limits: Limits
    redo: frozenset[str]


def _outcomes(plan: _Plan, workers: Workers, store: Store) -> Iterator[Outcome]:
    """Yield the outcome of every instance, in order, when it is stored."""
    with workers, store:
        unknown = set(plan.redo - {"all"})
        last: Outcome | None = None
        try:
            for outcome in settle_all(workers, _jobs(plan, workers, store, unknown)):
                outcome = _keep_reason(outcome, last) or outcome
                last = outcome
                store.add(outcome.record)
                yield outcome
            if unknown:
                raise InputError(
                    f"{plan.path}: there is no instance {min(unknown)}; "
                    "--redo takes an instance such as n=18, or all"
                )
        except InputError:
            store.discard()
            raise
        store.finish()


def _jobs(
    plan: _Plan, workers: Workers, store: Store, unknown: set[str]
) -> Iterator[tuple[Origin, Job]]:
    """Yield each instance with what is stored for it; drop those seen from `unknown`."""
    file = ClaimFile.of(plan.claim)
    parts = PARTS if workers.batches else 0
    for origin in read_origins(plan.claim, store.open_list):
        unknown.discard(origin.name)
        again = "all" in plan.redo or origin.name in plan.redo
        stored = None if again else store.find_stored(origin.key)
        job = make_job(file, origin, plan.limits, parts=parts)
        if stored is not None:
            job = replace(job, stored=stored, files=read_files(stored, store))
        yield origin, job


def read_origins(claim: Claim, open_list: Callable[[], ListSource]) -> Iterator[Origin]:
    """Yield the instances of a claim in order. open_list: opens its list of graphs."""
    if isinstance(claim.graphs, GraphList):
        file = open_list()
        for position, source in split_sources(file, form_of(claim.graphs), file.shown):
            yield Origin(claim, position, source, file.shown)
    elif claim.growing is not None:
        for row in claim.rows:
            # Who does arithmetic with keys never meets those of endless claims.
            yield Origin(claim, cast(Key, endless_key(claim, row)))
    else:
        for key in claim.instance_keys():
            yield Origin(claim, key)


def read_files(line: bytes, store: Store) -> dict[str, bytes]:
    """Return the files that a stored line names, for a worker that has no access to them."""
    files: dict[str, bytes] = {}
    with contextlib.suppress(ValueError, KeyError, TypeError, AttributeError, RecursionError):
        files.update(read_record(line, store.read_files).files)
    return files


def _keep_reason(outcome: Outcome, last: Outcome | None) -> Outcome | None:
    """Return the instance with the last one's reason, if it holds here and is no longer.

    So a paper can say once what refutes several graphs in a row. The graphs of a list
    are not in a row, and are left as they are.
    """
    origin, record = outcome.origin, outcome.record
    if last is None or origin.source is not None or outcome.stored:
        return None
    if record.answer != "impossible" or last.record.kind not in CARRIED:
        return None
    before, here = last.origin.build_labels(), origin.build_labels()
    evidence = carry_over(last.record.kind, last.record.evidence, before, here)
    if evidence is None or evidence.length > record.length:
        return None
    carried = write_record(origin.key, origin.build_graph(), evidence)
    if carried.line == record.line:
        return None
    verdict = check_record(origin, carried)
    return Outcome(carried, verdict, origin) if verdict.holds else None
