"""A folder of evidence: every file as the manifest says, every instance accounted for."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path
from typing import Any

from .claims import Claim, Key
from .files import KEPT, Files
from .graphs import Graph
from .records import Verdict, check_record, name_key
from .strict import Rejected, printable


class FolderCheck:
    """The check of one folder.

    `verdicts()` yields one verdict an instance; when it is exhausted, `accepted`
    says whether the whole claim is, and `complaints` what else was wrong. Until
    then nothing is accepted.
    """

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.complaints: list[str] = []
        self.answers: Counter[str] = Counter()
        self.rejected = self.left_open = 0
        self._whole = False
        self._files = Files(folder)

    @property
    def claim_name(self) -> str:
        """The name of the claim file, empty until the manifest is read."""
        return self._files.claim_name

    @property
    def evidence_name(self) -> str:
        """The name of the file of evidence, as the manifest says."""
        return self._files.evidence

    @property
    def accepted(self) -> bool:
        """Whether every instance was read, each was accepted, and nothing else was wrong."""
        fine = not (self.rejected or self.left_open or self.complaints)
        return self._whole and fine and self.answers.total() > 0

    @property
    def only_open(self) -> bool:
        """Whether instances left open are all that keeps the claim from being accepted."""
        return self._whole and self.left_open > 0 and not (self.rejected or self.complaints)

    def verdicts(self) -> Iterator[Verdict]:
        """Yield the verdict on every instance, in order."""
        try:
            self._files.read_manifest()
            claim = Claim(self._files.read(self.claim_name))
            if claim.list_name in (self.claim_name, *KEPT):
                raise Rejected(f"the list of graphs cannot be {claim.list_name}")
            self._files.compare(claim.list_name if claim.has_lines else None)
            yield from self._check_lines(claim)
            self._check_counts(claim)
            self._files.need_all_named()
            self._whole = True
        except Rejected as error:
            self.complaints.append(str(error))
        except (OSError, MemoryError) as error:
            self.complaints.append(printable(f"the folder cannot be read: {error!r}"))

    def _check_lines(self, claim: Claim) -> Iterator[Verdict]:
        lines = self._files.read_lines(self.evidence_name)
        number = 0
        for key, graph in claim.instances(self._files.read, self._files.read_lines):
            line = next(lines, None)
            number += 1
            if line is None:
                verdict = Verdict(key, "open", "none", False, False, "there is no record of it")
            else:
                verdict = self._check_line(claim, key, graph, line, number)
            self.rejected += not verdict.accepted and not verdict.is_open
            self.left_open += verdict.is_open
            if verdict.accepted:
                self.answers[verdict.answer] += 1
            yield verdict
        if number == 0:
            raise Rejected("the claim has no instances")
        if next(lines, None) is not None:
            raise Rejected(f"{self.evidence_name}:{number + 1}: a line too many")

    def _check_line(
        self, claim: Claim, key: Key, graph: Graph, line: bytes, number: int
    ) -> Verdict:
        verdict = check_record(claim, key, graph, line, self._files.read)
        return replace(verdict, line=number)

    def _check_counts(self, claim: Claim) -> None:
        """Refuse counts that are wrong, whatever the answers to what is open will be.

        With nothing open, none may be missing; else only as many as are open.
        """
        if self.rejected:
            return
        besides = f", with {self.left_open} left open" if self.left_open else ""
        missing = {answer: count - self.answers[answer] for answer, count in claim.counts.items()}
        for answer, count in missing.items():
            if not 0 <= count <= self.left_open:
                raise Rejected(
                    f"the claim says {answer} for {claim.counts[answer]} instances, "
                    f"and the evidence shows it for {self.answers[answer]}{besides}"
                )
        if len(missing) == 2 and sum(missing.values()) != self.left_open:
            raise Rejected("the counts of the claim do not add up to the number of instances")


def describe(check: FolderCheck, verdict: Verdict) -> dict[str, Any]:
    """Return a verdict as the JSON object that the command line prints."""
    return {
        "folder": str(check.folder),
        "instance": verdict.instance,
        "answer": verdict.answer,
        "kind": verdict.kind,
        "verdict": "accepted" if verdict.accepted else "rejected",
        "reason": verdict.reason,
    }


def complain(check: FolderCheck, verdict: Verdict) -> str:
    """Return the lines that say where a verdict is not an acceptance, why, and what next."""
    claim = check.folder / check.claim_name
    state = "open" if verdict.is_open else "rejected"
    name = name_key(verdict.instance)
    where = f"{check.folder / check.evidence_name}:{verdict.line}" if verdict.line else str(claim)
    return (
        f"{where}: {state}: instance {name}: {verdict.reason}\n"
        f"  run: certify prove {claim} --redo {name}"
    )
