"""A folder of evidence: every file as the manifest says, every instance accounted for."""

from __future__ import annotations

import hashlib
import re
from collections import Counter
from collections.abc import Iterator
from io import BufferedReader
from pathlib import Path
from typing import Any

from .claims import Claim, Key
from .graphs import Graph
from .records import Verdict, check_record, name_key
from .strict import Rejected, need_integer, need_keys, need_object, need_text, read_json

MANIFEST, EVIDENCE = "manifest.json", "evidence.jsonl"
MOST_MANIFEST, MOST_LINE = 1 << 28, 1 << 28


class FolderCheck:
    """The check of one folder.

    `verdicts()` yields one verdict an instance; when it is exhausted, `accepted`
    says whether the whole claim is, and `complaints` what else was wrong. Until
    then nothing is accepted.
    """

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.complaints: list[str] = []
        self.claim_name = ""
        self.answers: Counter[str] = Counter()
        self.rejected = self.left_open = 0
        self._whole = False
        self._digests: dict[str, str] = {}
        self._named: set[str] = set()

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
            self._read_manifest()
            claim = Claim(self._read_file(self.claim_name))
            yield from self._check_lines(claim)
            self._check_counts(claim)
            unused = sorted(set(self._digests) - self._named)
            if unused:
                raise Rejected(f"the manifest lists {unused[0]}, which no record names")
            self._whole = True
        except Rejected as error:
            self.complaints.append(str(error))

    def _read_manifest(self) -> None:
        try:
            with self._open(MANIFEST) as file:
                data = file.read(MOST_MANIFEST)
            text = data.decode("utf-8")
        except UnicodeDecodeError:
            raise Rejected(f"{MANIFEST} is not UTF-8 text") from None
        manifest = need_keys(read_json(text), {"claim", "format", "sha256"}, MANIFEST)
        if need_integer(manifest["format"], "format") != 1:
            raise Rejected(f"{MANIFEST} is of format {manifest['format']}, and this reads 1")
        self._digests = need_object(manifest["sha256"], "sha256")
        self.claim_name = need_text(manifest["claim"], "claim")
        for name, digest in self._digests.items():
            with self._open(name) as file:
                found = hashlib.file_digest(file, "sha256").hexdigest()
            if found != digest:
                raise Rejected(f"{name} has changed since the manifest was written")

    def _open(self, name: str) -> BufferedReader:
        """Open a regular file of the folder by its relative name."""
        parts = name.split("/")
        if any(part in ("", ".", "..") for part in parts) or re.search(r"[\\:\x00-\x1f]", name):
            raise Rejected(f"{name!r} is not the name of a file in the folder")
        path = self.folder.joinpath(*parts)
        try:
            if path.is_symlink() or not path.is_file():
                raise Rejected(f"{name} is missing or is not a regular file")
            return path.open("rb")
        except (OSError, ValueError) as error:
            raise Rejected(f"{name} cannot be read: {error}") from None

    def _read_file(self, name: str) -> bytes:
        """Return a file that the manifest lists, as it was when its digest was taken."""
        if name not in self._digests:
            raise Rejected(f"the manifest does not list {name}")
        self._named.add(name)
        with self._open(name) as file:
            data = file.read()
        if hashlib.sha256(data).hexdigest() != self._digests[name]:
            raise Rejected(f"{name} has changed while it was read")
        return data

    def _check_lines(self, claim: Claim) -> Iterator[Verdict]:
        lines = self._lines()
        number = 0
        for key, graph in claim.instances(self._read_file):
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
            raise Rejected(f"{EVIDENCE}:{number + 1}: a line too many")

    def _check_line(
        self, claim: Claim, key: Key, graph: Graph, line: bytes, number: int
    ) -> Verdict:
        verdict = check_record(claim, key, graph, line, self._read_file)
        return Verdict(**{**vars(verdict), "line": number})

    def _lines(self) -> Iterator[bytes]:
        if EVIDENCE not in self._digests:
            raise Rejected(f"the manifest does not list {EVIDENCE}")
        self._named.add(EVIDENCE)
        with self._open(EVIDENCE) as file:
            while line := file.readline(MOST_LINE):
                yield line

    def _check_counts(self, claim: Claim) -> None:
        if claim.counts and not (self.rejected or self.left_open):
            for answer, count in claim.counts.items():
                if self.answers[answer] != count:
                    raise Rejected(
                        f"the claim says {answer} for {count} instances, "
                        f"and the evidence shows it for {self.answers[answer]}"
                    )


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
    where = f"{check.folder / EVIDENCE}:{verdict.line}" if verdict.line else str(claim)
    return (
        f"{where}: {state}: instance {name}: {verdict.reason}\n"
        f"  run: certify prove {claim} --redo {name}"
    )
