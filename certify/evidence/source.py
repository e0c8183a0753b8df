"""The list of graphs of a run, hashed and, where it comes from elsewhere, copied as it is read.

So what the manifest says of the list is said of the bytes that the search has seen,
also when the list comes from a pipe and can be read only once.
"""

from __future__ import annotations

import hashlib
from collections.abc import Callable
from typing import BinaryIO


class ListSource:
    """A list of graphs that is read once, from its beginning to its end.

    file: where it comes from; it is not closed here. copy: writes what is read elsewhere
    too, before `readline` or `read` gives it. shown: as messages name the list.
    """

    def __init__(
        self, file: BinaryIO, shown: str, copy: Callable[[bytes], None] | None = None
    ) -> None:
        self.shown = shown
        self._file = file
        self._copy = copy
        self._hash = hashlib.sha256()
        self._ended = False

    def readline(self, limit: int) -> bytes:
        """Return the next line, or so many bytes of it; empty at the end. Errors: OSError."""
        return self._take(self._file.readline(limit), limit)

    def read(self, limit: int) -> bytes:
        """Return so many bytes, fewer only at the end. Errors: OSError."""
        return self._take(self._file.read(limit), limit)

    def _take(self, data: bytes, limit: int) -> bytes:
        self._hash.update(data)
        if self._copy is not None:
            self._copy(data)
        self._ended = self._ended or (not data and limit != 0)
        return data

    @property
    def digest(self) -> str | None:
        """Return the SHA-256 of the list, None before its end was read."""
        return self._hash.hexdigest() if self._ended else None
