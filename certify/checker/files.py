"""The files of a folder: regular ones, inside it, and as its manifest says."""

from __future__ import annotations

import hashlib
import os
import stat
from collections.abc import Iterator
from io import BufferedReader
from pathlib import Path
from typing import BinaryIO

from .packed import Unpacked
from .strict import Rejected, need_integer, need_keys, need_object, need_text, read_json

MANIFEST, EVIDENCE, PACKED = "manifest.json", "evidence.jsonl", "evidence.jsonl.gz"
KEPT = (MANIFEST, EVIDENCE, PACKED)
MOST_BYTES, MOST_LARGE, MOST_LINE = 1 << 28, 1 << 32, 1 << 26
MOST_MANIFEST = 1 << 26
# Never wait for a pipe, never follow a link put there between looking and opening.
_FLAGS = os.O_RDONLY | sum(
    getattr(os, name, 0) for name in ("O_NOFOLLOW", "O_NONBLOCK", "O_CLOEXEC", "O_BINARY")
)


class Files:
    """The files that a manifest lists.

    `named` are those that the claim and the records name; in the end it must be all.
    """

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.claim_name = ""
        self.evidence = EVIDENCE
        self.named: set[str] = set()
        self._digests: dict[str, str] = {}

    def read_manifest(self) -> None:
        """Read the manifest; what it lists is looked at in `compare` and in reading."""
        with self._open(MANIFEST, MOST_MANIFEST) as file:
            data = file.read()
        try:
            text = data.decode("utf-8")
        except UnicodeDecodeError:
            raise Rejected(f"{MANIFEST} is not UTF-8 text") from None
        manifest = need_keys(read_json(text), {"claim", "format", "sha256"}, MANIFEST)
        if need_integer(manifest["format"], "format") != 1:
            raise Rejected(f"{MANIFEST} is of format {manifest['format']}, and this reads 1")
        self._digests = need_object(manifest["sha256"], "sha256")
        self.claim_name = need_text(manifest["claim"], "claim")
        if "/" in self.claim_name or self.claim_name in KEPT or MANIFEST in self._digests:
            raise Rejected(f"{MANIFEST} lists itself, or names no claim file beside it")

    def compare(self, large: str | None) -> None:
        """Compare the digest of every file that is listed. large: one that may be large.

        One file of evidence, so that no two readers read two different ones.
        """
        listed = [name for name in (EVIDENCE, PACKED) if name in self._digests]
        if len(listed) != 1:
            wrong = "lists both" if listed else "does not list"
            raise Rejected(f"the manifest {wrong} {EVIDENCE} {'and' if listed else 'or'} {PACKED}")
        self.evidence = listed[0]
        for name in self._digests:
            most = MOST_LARGE if name in (large, self.evidence) else MOST_BYTES
            for _ in self._read_pieces(name, most):
                pass

    def read(self, name: str) -> bytes:
        """Return a file that the manifest lists."""
        self._need_listed(name)
        return b"".join(self._read_pieces(name, MOST_BYTES))

    def read_lines(self, name: str) -> Iterator[bytes]:
        """Yield the lines of the evidence or of a list, one at a time, with their ends.

        A line too long comes in pieces, which are no lines. What is hashed is what is
        handed out: when the last line has been, the digest of all of them was right, and
        until then nobody may accept anything for good.
        """
        self._need_listed(name)
        if name == PACKED:
            pieces = self._read_pieces(name, MOST_LARGE, 1 << 14)
            with BufferedReader(Unpacked(pieces, name, MOST_LARGE), 1 << 16) as text:
                while line := text.readline(MOST_LINE):
                    yield line
            return
        digest = hashlib.sha256()
        with self._open(name, MOST_LARGE) as file:
            while line := file.readline(MOST_LINE):
                digest.update(line)
                yield line
        self._compare(name, digest.hexdigest())

    def need_all_named(self) -> None:
        """Refuse a manifest that lists what nothing names."""
        unused = sorted(set(self._digests) - self.named)
        if unused:
            raise Rejected(f"the manifest lists {unused[0]}, which nothing names")

    def _need_listed(self, name: str) -> None:
        if name not in self._digests:
            raise Rejected(f"the manifest does not list {name}")
        self.named.add(name)

    def _compare(self, name: str, digest: str) -> None:
        if digest != self._digests[name]:
            raise Rejected(f"{name} has changed since the manifest was written")

    def _read_pieces(self, name: str, most: int, size: int = 1 << 20) -> Iterator[bytes]:
        """Yield a file's bytes in pieces; after the last one its digest was right."""
        digest = hashlib.sha256()
        with self._open(name, most) as file:
            while piece := file.read(size):
                digest.update(piece)
                yield piece
        self._compare(name, digest.hexdigest())

    def _open(self, name: str, most: int) -> BinaryIO:
        """Open a regular file of the folder by its relative name."""
        parts = name.split("/")
        strange = not name.isprintable() or "\\" in name or ":" in name
        if strange or any(part in ("", ".", "..") for part in parts):
            raise Rejected(f"{name!r} is not the name of a file in the folder")
        path = self.folder
        try:
            for part in parts:
                path = path / part
                if path.is_symlink():
                    raise Rejected(f"{name} is reached by a symbolic link")
            file = os.fdopen(os.open(path, _FLAGS), "rb")
        except FileNotFoundError:
            raise Rejected(f"{name} is missing") from None
        except (OSError, ValueError) as error:
            raise Rejected(f"{name} cannot be read: {error}") from None
        found = os.fstat(file.fileno())
        if stat.S_ISREG(found.st_mode) and found.st_size <= most:
            return file
        file.close()
        raise Rejected(f"{name} is not a regular file, or has more than {most} bytes")
