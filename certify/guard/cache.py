"""Verdicts of earlier runs, by content.

What is remembered is only that a folder was accepted, under a key: the SHA-256 of
everything its verdict depends on, which is every byte of every file of the folder,
read now, the source code of what checks it, and the version of Python. No time
of a file is looked at. If one of these differs, so does the key, and the
folder is checked.

The file is as trustworthy as whoever can write it: the keys are no secret, so who
can write it can have any folder accepted. Keep it where the CI keeps its own state,
never in the repository, and leave it out of the run before a release. An accident is
found: the file carries the digest of its own contents, and a file that does not fit it
is not used.
"""

from __future__ import annotations

import hashlib
import json
import sys
from collections.abc import Iterator, Mapping
from pathlib import Path

from filelock import FileLock, Timeout

import certify
from certify.evidence.disk import write_atomically
from certify.guard.files import digest_of, list_files, read_manifest

_HEAD = b"certify guard: accepted folders, format 1\n"
_MOST_BYTES = 1 << 28
_MOST_ENTRIES = 1000
_SECONDS = 60
_SOURCES = ("checker/**/*.py", "claim/*.py", "guard/*.py", "evidence/disk.py", "errors.py")

Entries = dict[str, list[str]]
"""The names of the instances of an accepted folder, by key; the last used ones last."""


class Cache:
    """A file of remembered verdicts. notes: what was wrong with it."""

    def __init__(self, path: Path) -> None:
        self.path = path
        self.notes: list[str] = []
        self._foreign = False
        self._known = self._read(tell=True)
        self._used: Entries = {}

    def get(self, key: str | None) -> list[str] | None:
        """Return the instances of a folder that was accepted with this key, or None."""
        names = self._known.get(key or "")
        if key and names:
            self._used[key] = names
        return names

    def add(self, key: str, names: list[str]) -> None:
        """Remember a folder that was accepted just now, with at least one instance."""
        if names:
            self._used[key] = names

    def save(self) -> None:
        """Write what was used and added, together with what another run wrote meanwhile."""
        if self._foreign:
            return
        try:
            self.path.parent.mkdir(parents=True, exist_ok=True)
            with FileLock(self.path.with_name(self.path.name + ".lock"), timeout=_SECONDS):
                kept = {k: v for k, v in self._read(tell=False).items() if k not in self._used}
                entries = list((kept | self._used).items())[-_MOST_ENTRIES:]
                write_atomically(self.path, pack(dict(entries)))
        except (OSError, Timeout) as error:
            self.notes.append(f"{self.path}: the cache cannot be written: {error}")

    def _read(self, *, tell: bool) -> Entries:
        try:
            with self.path.open("rb") as file:
                data = file.read(_MOST_BYTES + 1)
        except FileNotFoundError:
            return {}
        except OSError as error:
            self._foreign = True
            if tell:
                self.notes.append(f"{self.path}: the cache cannot be read: {error.strerror}")
            return {}
        entries = unpack(data)
        if entries is None:
            self._foreign = bool(data) and not data.startswith(_HEAD)
            if tell:
                what = "no cache of this program; it is left alone" if self._foreign else "damaged"
                self.notes.append(f"{self.path}: the cache is not used: it is {what}")
        return entries or {}


def pack(entries: Entries) -> bytes:
    """Return the file for some entries: a head, the digest of the rest, and the rest."""
    body = json.dumps(entries, separators=(",", ":")).encode()
    return _HEAD + hashlib.sha256(body).hexdigest().encode() + b"\n" + body


def unpack(data: bytes) -> Entries | None:
    """Return the entries of a file, None for one that `pack` did not write."""
    if len(data) > _MOST_BYTES or not data.startswith(_HEAD):
        return None
    digest, _, body = data[len(_HEAD) :].partition(b"\n")
    if hashlib.sha256(body).hexdigest().encode() != digest:
        return None
    try:
        entries = json.loads(body)
    except (ValueError, RecursionError):
        return None
    return entries if _is_entries(entries) else None


def _is_entries(value: object) -> bool:
    return isinstance(value, dict) and all(
        isinstance(names, list) and names and all(isinstance(name, str) for name in names)
        for names in value.values()
    )


def key_of(folder: Path, tools: str) -> str | None:
    """Return the key of a folder: a digest of all that its verdict depends on.

    tools: from `digest_tools`. None when the folder is not to be remembered: a file of it
    is no regular one, cannot be read, or is listed and not among the files of the folder.
    Cost: linear in the bytes of the folder, which are all read.
    """
    try:
        listed = read_manifest(folder).digests
        digests = {name: digest_of(folder / name) for name in list_files(folder, listed)}
    except OSError:
        return None
    if None in digests.values() or not listed.keys() <= digests.keys():
        return None
    return _digest([tools, sorted(digests.items())])


def digest_tools() -> str:
    """Return a digest of what checks: the version of Python, and the source code."""
    root = Path(certify.__file__).parent
    sources = {path for pattern in _SOURCES for path in root.glob(pattern)}
    named: Mapping[str, str | None] = {
        path.relative_to(root).as_posix(): digest_of(path) for path in sources
    }
    return _digest([sys.version, list(_flags()), sorted(named.items())])


def _flags() -> Iterator[object]:
    """Yield what else changes how Python runs the same source."""
    yield sys.implementation.name
    yield sys.flags.optimize


def _digest(value: object) -> str:
    text = json.dumps(value, separators=(",", ":"))
    return hashlib.sha256(text.encode()).hexdigest()
