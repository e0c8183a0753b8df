"""What a folder holds: its claim, and the evidence of one instance."""

from __future__ import annotations

import json
from collections.abc import Callable
from contextlib import ExitStack
from dataclasses import replace
from pathlib import Path

from certify.claim.claim import Claim, read_claim
from certify.claim.instances import Key
from certify.errors import ContradictionError, InputError
from certify.evidence.record import read_record
from certify.evidence.store import Store, claim_name
from certify.flow.outcome import Origin, Outcome
from certify.flow.proof import read_files, read_origins
from certify.flow.work import ClaimFile, check_stored, make_job
from certify.graph.build import build_labels
from certify.graph.graph import Graph
from certify.report.lasting import Lasting, Settled, find_lasting_around
from certify.search.ladder import DEFAULTS


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
    store = Store(folder, claim, folder / claim.name)
    wanted = name.replace(" ", "")
    with ExitStack() as stack:
        stack.push(store)  # It is only read here, so it is not entered.
        for origin in read_origins(claim, store.open_list):
            if origin.name == wanted:
                outcome = _read_outcome(origin, store)
                if claim.growing is not None:
                    return outcome, None
                return outcome, find_lasting_around(outcome.settled, _look_up(claim, store))
    raise InputError(
        f"{folder / claim.name}: there is no instance {name!r}; write n=18, m=3,n=4, "
        "or 17 for a graph of a list"
    )


def _read_outcome(origin: Origin, store: Store) -> Outcome:
    line = store.find_stored(origin.key)
    found = None
    if line is not None:
        job = make_job(ClaimFile.of(origin.claim), origin, DEFAULTS)
        found = check_stored(replace(job, stored=line, files=read_files(line, store)))
    if found is None:
        raise ContradictionError(
            f"{store.folder}: the evidence stored for {origin.name} is missing, open or rejected\n"
            f"  next: certify check {store.folder}"
        )
    record = read_record(found.line, lambda _: dict(found.files))
    return Outcome(record, found.verdict, origin, stored=True)


def _look_up(claim: Claim, store: Store) -> Callable[[Key], Settled | None]:
    def look_up(key: Key) -> Settled | None:
        other = store.find_stored(key)
        if other is None or not isinstance(key, dict):
            return None
        return Settled(json.loads(other), Graph(build_labels(claim, key), ()))

    return look_up
