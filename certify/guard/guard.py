"""The guard of everything below a folder."""

from __future__ import annotations

import multiprocessing
from collections.abc import Callable, Iterable, Iterator, Sequence
from concurrent.futures import BrokenExecutor, ProcessPoolExecutor
from itertools import chain
from pathlib import Path

from certify.claim.toml import read_document
from certify.errors import ClaimError, InputError
from certify.guard.cache import Cache, digest_tools, key_of
from certify.guard.check import (
    check_evidence,
    check_lone_claim,
    check_trouble,
    tell_unfinished,
)
from certify.guard.files import digest_of, read_manifest
from certify.guard.find import Found, Trouble, find
from certify.guard.report import ACCEPTED, Case, Report

Contents = tuple[str, str] | None


def guard(root: Path, *, cache: Cache | None = None, jobs: int = 1) -> Iterator[Report]:
    """Check everything below a folder, and yield a report for each claim, in order.

    cache: verdicts of earlier runs, for folders that have not changed; it is not saved
    here. jobs: how many folders are checked at once, each by a process of its own.
    Errors: InputError when there is no claim and no evidence: a guard with nothing to
    guard must not pass.
    Cost: that of the checker; with a cache that of reading what has not changed.
    """
    found = find(root)
    if not (found.claims or found.folders or found.troubles):
        raise InputError(
            f"{root}: there is no claim and no evidence here or below, so nothing is guarded\n"
            "  next: certify guard FOLDER, with the folder of your claims"
        )
    reports = chain(
        map(check_trouble, found.troubles),
        _check_folders(found.folders, cache, jobs),
        _check_claims(found),
    )
    return iter(reports)


def _check_claims(found: Found) -> Iterator[Report]:
    """Report the claims that are not the claim of their own folder.

    The evidence of such a one may lie in another folder, with a copy of the claim.
    """
    own = {folder / (read_manifest(folder).claim or "") for folder in found.folders}
    others = [claim for claim in found.claims if claim not in own]
    copies = find_copies(found.folders) if others else {}
    for claim in others:
        home = copies.get(contents_of(claim))
        if home is None:
            yield check_lone_claim(claim)
        else:
            yield Report(claim, claim, notes=(f"its evidence is in {home}",))


def find_copies(folders: Iterable[Path]) -> dict[Contents, Path]:
    """Return the evidence folders by the contents of their claims; of equal ones the first."""
    copies: dict[Contents, Path] = {}
    for folder in folders:
        name = read_manifest(folder).claim
        contents = None if name is None else contents_of(folder / name)
        if contents is not None:
            copies.setdefault(contents, folder)
    return copies


def contents_of(claim: Path) -> Contents:
    """Return the digests of a claim and of its list of graphs, which tell it from others.

    None for a claim that cannot be read; it is a copy of none.
    """
    try:
        graph = read_document(claim).data.get("graph")
        name = graph.get("list") if isinstance(graph, dict) else None
        listed = digest_of(claim.parent / name) if isinstance(name, str) else ""
        own = digest_of(claim)
    except (ClaimError, OSError, ValueError):
        return None
    return None if own is None or listed is None else (own, listed)


def _check_folders(folders: Sequence[Path], cache: Cache | None, jobs: int) -> Iterator[Report]:
    """Check the evidence folders, all but those whose verdict is remembered."""
    tools = digest_tools() if cache is not None else ""
    keys = {folder: key_of(folder, tools) if cache is not None else None for folder in folders}
    known = {folder: cache.get(keys[folder]) if cache is not None else None for folder in folders}
    fresh = [folder for folder in folders if not known[folder]]
    checked = _check_all(fresh, jobs)
    for folder in folders:
        names = known[folder]
        if names:
            yield _recall(folder, names)
            continue
        report = next(checked)
        key = keys[folder]
        if cache is not None and key is not None and _is_accepted(report):
            # The bytes that were checked are those of the key only if they are still the same.
            again = key_of(folder, tools)
            if again == key:
                cache.add(key, [case.name for case in report.cases])
        yield report


def _is_accepted(report: Report) -> bool:
    """Return whether the checker accepts the folder: nothing is wrong, and nothing open."""
    cases = report.cases
    return bool(cases) and not report.troubles and all(case.state == ACCEPTED for case in cases)


def _recall(folder: Path, names: list[str]) -> Report:
    """Return the report of a folder that was accepted before with the same bytes."""
    claim = folder / (read_manifest(folder).claim or "")
    cases = tuple(Case(name, ACCEPTED) for name in names)
    notes = tuple(tell_unfinished(folder))
    return Report(claim, claim, cases, notes=notes, remembered=True)


def _check_all(folders: Sequence[Path], jobs: int) -> Iterator[Report]:
    if jobs == 1 or len(folders) < 2:
        yield from map(check_evidence, folders)
        return
    context = multiprocessing.get_context("spawn")
    with ProcessPoolExecutor(min(jobs, len(folders)), mp_context=context) as pool:
        waiting = [(folder, pool.submit(check_evidence, folder)) for folder in folders]
        for folder, future in waiting:
            yield _take(folder, future.result)


def _take(folder: Path, result: Callable[[], Report]) -> Report:
    """Return what a process found; if it died, that is a failure like any other."""
    try:
        return result()
    except BrokenExecutor:
        text = (
            "not checked: a process that checked was ended from outside, perhaps for its memory\n"
            "next: run it again with --jobs 1"
        )
        return check_trouble(Trouble(folder, text))
