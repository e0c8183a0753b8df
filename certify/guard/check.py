"""The check of one folder, or of one claim without a folder of its own."""

from __future__ import annotations

import os
import shlex
from collections.abc import Iterator
from pathlib import Path

from certify.checker import FolderCheck, Verdict, check_folder
from certify.claim.claim import read_claim
from certify.claim.instances import name_key
from certify.errors import ClaimError
from certify.guard.allowances import Allowances, read_allowances
from certify.guard.files import digest_of, find_unlisted, read_manifest
from certify.guard.find import ALLOWANCES, EVIDENCE, MANIFEST, UNFINISHED, Trouble
from certify.guard.report import (
    ACCEPTED,
    ALLOWED,
    FAILED,
    OPEN,
    Case,
    Report,
    name_instance,
    one_line,
)

_MOST_UNLISTED = 20
_COUNTS = ("the claim says ", "the counts of the claim ")
"""How the checker begins what no further search can put right."""


class FolderGuard:
    """The check of one evidence folder: iterate over `cases()`, then ask for the report."""

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self._manifest = read_manifest(folder)
        name = self._manifest.claim
        self.claim = folder / (name or MANIFEST)
        named = [item for item in EVIDENCE if item in self._manifest.digests]
        self.evidence = folder / named[0] if len(named) == 1 else self.claim
        self._shown = shlex.quote(one_line(self.claim if name else folder / "CLAIM.toml"))
        self._troubles: list[Trouble] = []
        self._cases: list[Case] = []
        self._is_through = False
        self._allowances = self._read_allowances()

    def _read_allowances(self) -> Allowances:
        try:
            return read_allowances(self.folder)
        except ClaimError as error:
            self._troubles.append(_of_reader(error, self.folder / ALLOWANCES))
            return Allowances(self.folder / ALLOWANCES)

    def cases(self) -> Iterator[Case]:
        """Check the folder, and yield every instance with its verdict. To be used once."""
        check = check_folder(self.folder)
        for verdict in check.verdicts():
            case = self._judge(verdict)
            self._cases.append(case)
            yield case
        self._look_over(check)
        self._is_through = True

    def report(self) -> Report:
        """Return what was found. A check that did not come to its end is a trouble."""
        troubles = list(self._troubles)
        if not self._is_through:
            text = "the check did not come to its end\nnext: run certify check here to see why"
            troubles.append(Trouble(self.folder, text))
        return Report(
            self.claim,
            self.evidence,
            tuple(self._cases),
            tuple(troubles),
            tuple(tell_unfinished(self.folder)),
        )

    def _judge(self, verdict: Verdict) -> Case:
        name, said = name_key(_plain(verdict)), name_instance(verdict.instance)
        if verdict.accepted:
            return Case(name, ACCEPTED, "", verdict.line)
        prove = f"certify prove {self._shown}"
        if verdict.is_open and name in self._allowances.open:
            return Case(name, ALLOWED, f"{said}: left open, as {ALLOWANCES} allows", verdict.line)
        if verdict.is_open:
            text = (
                f"{said}: left open: neither a witness nor a reason against one is stored\n"
                f"next: {prove} --budget SECONDS, or allow it in {ALLOWANCES}: "
                f'open = ["{name}"]'
            )
            return Case(name, OPEN, text, verdict.line)
        if verdict.holds:
            text = (
                f"{said}: {verdict.reason}\nnext: correct the claim, or its rule, and run: {prove}"
            )
        elif not verdict.line:
            text = f"{said}: there is no evidence for this instance\nnext: {prove}"
        else:
            text = (
                f"{said}: the stored evidence does not hold: {verdict.reason}\n"
                f"next: {prove} --redo {shlex.quote(name)}"
            )
        return Case(name, FAILED, text, verdict.line)

    def _look_over(self, check: FolderCheck) -> None:
        """Find what is wrong with the folder as a whole."""
        changed = self._changed()
        if changed:
            self._troubles.append(
                Trouble(
                    self.claim,
                    "the claim changed, and its evidence did not: the evidence is for the claim "
                    f"as it was\nnext: certify prove {self._shown}",
                    1,
                )
            )
        step = f"certify prove {self._shown}"
        if not os.path.lexists(self.claim):
            step = "put the claim file back that this evidence is for"
        for complaint in check.complaints:
            if not (changed and complaint.startswith(f"{self.claim.name} has changed")):
                fix = "correct the claim, and run: " if complaint.startswith(_COUNTS) else ""
                self._troubles.append(Trouble(self.folder, f"{complaint}\nnext: {fix}{step}"))
        unlisted = self._find_unlisted()
        if not check.complaints:
            left = [case.name for case in self._cases if case.state in (OPEN, ALLOWED)]
            self._troubles += self._allowances.find_needless(left, unlisted)
        if not (check.accepted or check.only_open or self._is_told):
            self._troubles.append(Trouble(self.folder, "the checker does not accept this folder"))

    @property
    def _is_told(self) -> bool:
        return bool(self._troubles) or any(case.state == FAILED for case in self._cases)

    def _changed(self) -> bool:
        """Return whether the claim has other bytes than its evidence was made for."""
        known = self._manifest.digests.get(self.claim.name)
        if self._manifest.claim is None or known is None:
            return False
        try:
            return digest_of(self.claim) not in (known, None)
        except OSError:
            return False  # the checker says so

    def _find_unlisted(self) -> list[str]:
        """Return the files that the manifest does not list, and tell those not allowed."""
        try:
            found = find_unlisted(self.folder, self._manifest.digests)
        except OSError as error:
            text = f"the folder cannot be read: {error.strerror}"
            self._troubles.append(Trouble(self.folder, text))
            return []
        strange = [name for name in found if not self._allowances.allows_file(name)]
        for name in strange[:_MOST_UNLISTED]:
            self._troubles.append(
                Trouble(
                    self.folder / name,
                    f"the manifest does not list this file, so nothing checks it\n"
                    f"next: remove it, or allow it in {ALLOWANCES}: "
                    f'files = ["{one_line(name)}"]',
                )
            )
        if len(strange) > _MOST_UNLISTED:
            more = f"{len(strange) - _MOST_UNLISTED} more files are not in the manifest"
            self._troubles.append(Trouble(self.folder, more))
        return found


def check_evidence(folder: Path) -> Report:
    """Check one evidence folder. Cost: that of the checker, and of listing the folder."""
    guard = FolderGuard(folder)
    for _ in guard.cases():
        pass
    return guard.report()


def check_lone_claim(claim: Path) -> Report:
    """Return the report of a claim that has no evidence: always a failure, and why."""
    quoted = shlex.quote(one_line(claim))
    try:
        read_claim(claim)
    except ClaimError as error:
        return Report(claim, claim, troubles=(_of_reader(error, claim),))
    other = read_manifest(claim.parent).claim
    text = f"this claim has no evidence\nnext: certify prove {quoted}"
    if other is not None:
        text = (
            f"this claim has no evidence; the folder holds that of {one_line(other)}, and each "
            f"claim needs a folder of its own\nnext: certify prove {quoted} --out FOLDER"
        )
    return Report(
        claim,
        claim,
        troubles=(Trouble(claim, text, 1),),
        notes=tuple(tell_unfinished(claim.parent)),
    )


def check_trouble(trouble: Trouble) -> Report:
    """Return the report of something that cannot be looked into."""
    return Report(trouble.path, trouble.path, troubles=(trouble,))


def tell_unfinished(folder: Path) -> Iterator[str]:
    """Tell a run that has not ended; what it found so far is not looked at."""
    if os.path.lexists(folder / UNFINISHED):
        yield "a run of certify prove has begun here and not ended; its findings do not count yet"


def _of_reader(error: ClaimError, path: Path) -> Trouble:
    """Return what a reader says as a trouble; it begins with the file, and often the line."""
    text = str(error).removeprefix(f"{path}:")
    line, _, rest = text.partition(":")
    if line.isdecimal() and line.isascii() and rest:
        return Trouble(path, rest.strip(), int(line[:9]))
    return Trouble(path, text.strip(), 1)


def _plain(verdict: Verdict) -> dict[str, int | str] | int:
    key = verdict.instance
    return key if isinstance(key, int) else dict(key)
