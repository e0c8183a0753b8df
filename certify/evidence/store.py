"""A folder of evidence on disk.

While a run goes on, its records gather in the folder `.unfinished` inside the
evidence folder: a record's bulky files first, then its line in a journal. When
the run is through, they become `evidence.jsonl`, `clauses/` and `manifest.json`,
each by an atomic rename. So a killed run is taken up where it ended, and until
then the last finished state stays in place.
"""

from __future__ import annotations

import contextlib
import hashlib
import json
import os
import shutil
from pathlib import Path
from typing import IO, Self

from filelock import FileLock, Timeout

from certify.claim.claim import Claim
from certify.errors import InputError
from certify.evidence.record import Record

MANIFEST = "manifest.json"
EVIDENCE = "evidence.jsonl"
CLAUSES = "clauses"
UNFINISHED = ".unfinished"


class Store:
    """The evidence folder of one claim, held by one run at a time.

    claim_path: where the claim was read; it and the list it names are copied into
    the folder when they lie elsewhere.
    """

    def __init__(self, folder: Path, claim: Claim, claim_path: Path) -> None:
        self.folder = folder
        self.claim = claim
        self._home = claim_path.parent
        self._unfinished = folder / UNFINISHED
        self._lock = FileLock(self._unfinished / "lock")
        self._journal: IO[bytes] | None = None
        self._lines: list[bytes] = []
        self._files: list[str] = []
        self._made: list[Path] = []

    def __enter__(self) -> Self:
        """Take the folder, or raise InputError saying why that cannot be."""
        try:
            self._refuse_other_claim()
            self._make(self._unfinished)
            self._lock.acquire(timeout=0)
            self._open_journal()
        except Timeout:
            raise InputError(
                f"{self.folder}: another run is writing here; wait for it to end, "
                "or give another folder with --out"
            ) from None
        except OSError as error:
            raise InputError(f"{self.folder}: cannot write here: {error.strerror}") from None
        return self

    def __exit__(self, *_: object) -> None:
        if self._journal is not None:
            self._journal.close()
        self._lock.release()

    def _make(self, folder: Path) -> None:
        for missing in reversed([folder, *folder.parents]):
            if not missing.exists():
                missing.mkdir()
                self._made.append(missing)

    def discard(self) -> None:
        """Undo what this run made, if it was the first to write here."""
        if self._unfinished in self._made:
            self.__exit__()
            shutil.rmtree(self._unfinished)
            for folder in reversed(self._made):
                with contextlib.suppress(OSError):
                    folder.rmdir()

    def _refuse_other_claim(self) -> None:
        name = self._read_manifest().get("claim", self.claim.name)
        if name != self.claim.name:
            raise InputError(
                f"{self.folder}: holds the evidence of {name}; give another folder with --out"
            )

    def _read_manifest(self) -> dict[str, object]:
        try:
            manifest = json.loads((self.folder / MANIFEST).read_bytes())
        except (OSError, ValueError):
            return {}
        return manifest if isinstance(manifest, dict) else {}

    def _inputs(self) -> list[str]:
        """Return the names of the files that are given and not found."""
        return [self.claim.name, *([self.claim.list_name] if self.claim.list_name else [])]

    def _open_journal(self) -> None:
        """Keep the journal of a run for the same input that was cut short, or start one."""
        head = self._unfinished / "input"
        digests = {name: _digest(self._home / name) for name in self._inputs()}
        text = json.dumps(digests, sort_keys=True).encode()
        if not head.is_file() or head.read_bytes() != text:
            for item in (EVIDENCE, CLAUSES):
                _remove(self._unfinished / item)
            _write_atomically(head, text)
        self._journal = (self._unfinished / EVIDENCE).open("ab")
        if self._journal.tell() and not (self._unfinished / EVIDENCE).read_bytes().endswith(b"\n"):
            # The run was killed inside a line: end it, so that the next one is whole.
            self._journal.write(b"\n")

    def read_stored(self) -> dict[str, bytes]:
        """Return the stored lines for the same input, by the text of their instance.

        Lines of a run cut short come before those of the last finished one. They are
        not trusted: whoever uses one has it checked again.
        """
        stored: dict[str, bytes] = {}
        digests = self._read_manifest().get("sha256")
        same = isinstance(digests, dict) and all(
            digests.get(name) == _digest(self._home / name) for name in self._inputs()
        )
        for root in (self.folder,) * same + (self._unfinished,):
            with contextlib.suppress(OSError):
                for line in (root / EVIDENCE).read_bytes().splitlines(keepends=True):
                    with contextlib.suppress(ValueError, KeyError, TypeError, RecursionError):
                        stored[name_of(json.loads(line)["instance"])] = line
        return stored

    def read_files(self, names: list[str]) -> dict[str, bytes]:
        """Return those of the bulky files that are stored."""
        found: dict[str, bytes] = {}
        for name in names:
            for root in (self.folder, self._unfinished):
                with contextlib.suppress(OSError):
                    found[name] = (root / name).read_bytes()
        return found

    def add(self, record: Record, *, stored: bool = False) -> None:
        """Add a record that the checker has accepted, in the order of the instances.

        stored: it was read from here and need not be written again.
        """
        if not stored and self._journal is not None:
            for name, data in record.files.items():
                _write_atomically(self._unfinished / name, data)
            self._journal.write(record.line)
            self._journal.flush()
        self._lines.append(record.line)
        self._files += record.files

    def finish(self) -> None:
        """Turn what was added into the finished state of the folder."""
        for name in self._inputs():
            source, target = self._home / name, self.folder / name
            if source.resolve() != target.resolve():
                _write_atomically(target, source.read_bytes())
        for name in self._files:
            fresh = self._unfinished / name
            if fresh.exists():
                (self.folder / name).parent.mkdir(parents=True, exist_ok=True)
                fresh.replace(self.folder / name)
        _write_atomically(self.folder / EVIDENCE, b"".join(self._lines))
        names = sorted([*self._inputs(), EVIDENCE, *self._files])
        manifest = {
            "claim": self.claim.name,
            "format": 1,
            "sha256": {name: _digest(self.folder / name) for name in names},
        }
        text = json.dumps(manifest, indent=1, sort_keys=True) + "\n"
        _write_atomically(self.folder / MANIFEST, text.encode())
        self._remove_leftovers()

    def _remove_leftovers(self) -> None:
        """Remove what only an unfinished or an earlier state named."""
        kept = set(self._files)
        clauses = self.folder / CLAUSES
        if clauses.is_dir():
            for path in sorted(clauses.iterdir()):
                if f"{CLAUSES}/{path.name}" not in kept:
                    _remove(path)
            with contextlib.suppress(OSError):
                clauses.rmdir()
        self.__exit__()
        _remove(self._unfinished)


def claim_name(folder: Path) -> str:
    """Return the name of the claim file whose evidence a folder holds.

    Errors: InputError when there is no readable manifest.
    """
    try:
        name = json.loads((folder / MANIFEST).read_bytes())["claim"]
    except (OSError, ValueError, KeyError, TypeError):
        raise InputError(
            f"{folder}: there is no evidence here\n  next: certify prove CLAIM.toml"
        ) from None
    if not isinstance(name, str) or "/" in name:
        raise InputError(f"{folder / MANIFEST}: names no claim file")
    return name


def name_of(key: object) -> str:
    """Return an instance as a text that tells it from every other one."""
    return json.dumps(key, sort_keys=True)


def _digest(path: Path) -> str:
    with path.open("rb") as file:
        return hashlib.file_digest(file, "sha256").hexdigest()


def _remove(path: Path) -> None:
    if path.is_dir():
        shutil.rmtree(path)
    else:
        path.unlink(missing_ok=True)


def _write_atomically(path: Path, data: bytes) -> None:
    """Write a file so that it is there whole or not at all."""
    path.parent.mkdir(parents=True, exist_ok=True)
    fresh = path.with_name(path.name + ".new")
    with fresh.open("wb") as file:
        file.write(data)
        file.flush()
        os.fsync(file.fileno())
    fresh.replace(path)
