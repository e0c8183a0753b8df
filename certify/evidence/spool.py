"""Lines of evidence that were stored before, to be looked up by their instance.

Kept in a file with an index of offsets, so that a list of millions of graphs takes
eight bytes of memory for each of them. The instance of a line is read off its
canonical form; a line of another form may be found under a wrong instance or not
at all, which does no harm, because no line is used before the checker has read it.
"""

from __future__ import annotations

import json
from array import array
from collections.abc import Iterable, Iterator, Mapping
from typing import BinaryIO

from certify.evidence.lines import MOST_LINE

MOST_POSITION = 10_000_000
_BEFORE, _BEHIND = b',"instance":', b',"kind":'


class Spool:
    """Stored lines in a file, by instance; of two for one instance the later counts.

    file: open for reading and writing in binary; what is in it already is kept.
    by_position: whether the instances are positions in a list.
    """

    def __init__(self, file: BinaryIO, *, by_position: bool) -> None:
        self._file = file
        self._by_position = by_position
        self._at = array("Q")  # by position: 0 for none, else the offset and one
        self._by_text: dict[bytes, int] = {}
        self._size = self._entered = self._known = 0
        file.seek(0)
        for line in self._whole_lines():
            self._enter(line)

    def _whole_lines(self) -> Iterable[bytes]:
        """Yield the lines in the file, and end a last one that was cut short."""
        for line in iter(lambda: self._file.readline(MOST_LINE), b""):
            if len(line) < MOST_LINE and not line.endswith(b"\n"):
                self._file.seek(0, 2)
                self._file.write(b"\n")
                line += b"\n"
            if line.endswith(b"\n"):
                yield line
            self._size += len(line)

    def gather(self, lines: Iterable[bytes]) -> None:
        """Add lines, each with its end. Errors: OSError."""
        self._file.seek(0, 2)
        for line in lines:
            self._file.write(line)
            self._enter(line)
            self._size += len(line)
        self._file.flush()

    def _enter(self, line: bytes) -> None:
        """Note that the line at the end of what is known belongs to its instance."""
        behind = line.rfind(_BEHIND)
        before = line.rfind(_BEFORE, 0, max(0, behind))
        text = line[before + len(_BEFORE) : behind] if before >= 0 else b""
        if not text:
            return
        self._entered += 1
        if not self._by_position:
            self._by_text[text] = self._size
            self._known = len(self._by_text)
        elif len(text) < 9 and text.isdigit() and 0 < int(text) <= MOST_POSITION:
            position = int(text)
            if position >= len(self._at):
                self._at.frombytes(bytes(8 * (position + 1 - len(self._at))))
            self._known += self._at[position] == 0
            self._at[position] = self._size + 1

    def find(self, key: Mapping[str, int | str] | int) -> bytes | None:
        """Return the line stored for an instance, None if there is none. Errors: OSError."""
        if isinstance(key, int):
            at = self._at[key] - 1 if 0 < key < len(self._at) else -1
        else:
            text = json.dumps(key, sort_keys=True, separators=(",", ":"))
            at = self._by_text.get(text.encode(), -1)
        return self._read(at) if at >= 0 else None

    def _read(self, at: int) -> bytes:
        self._file.seek(at)
        return self._file.readline(MOST_LINE)

    @property
    def is_stale(self) -> bool:
        """Return whether most of the lines do not count, so that it should be written anew."""
        return self._entered > 2 * self._known + 1_000

    def live_lines(self) -> Iterator[bytes]:
        """Yield the lines that count. Errors: OSError."""
        places = (place - 1 for place in self._at if place)
        for at in places if self._by_position else self._by_text.values():
            yield self._read(at)

    def close(self) -> None:
        """Close the file."""
        self._file.close()
