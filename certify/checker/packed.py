"""Gzip files of one member and nothing after it, unpacked piece by piece or as a whole."""

from __future__ import annotations

import io
import zlib
from collections.abc import Iterable
from typing import Any

from .strict import Rejected

MOST_TEXT = 1 << 28


class Unpacked(io.RawIOBase):
    """What a gzip file holds, as a file to read from.

    It comes to its end only when the member is whole, its check sum is right, and nothing
    follows it; otherwise reading is `Rejected`, at the latest there. So whoever has read to
    the end has read all of one member, and nobody can be shown a part of it as the whole.
    In memory there is a piece of the file and what is asked for, however well it is packed.
    pieces: small ones, because what is left of a piece is copied each time. most: of bytes,
    a power of 2.
    """

    def __init__(self, pieces: Iterable[bytes], name: str, most: int) -> None:
        super().__init__()
        self._pieces = iter(pieces)
        self._name = name
        self._left = self._most = most
        self._member = zlib.decompressobj(wbits=31)

    def readable(self) -> bool:
        return True

    def readinto(self, buffer: Any) -> int:
        """Fill a buffer, perhaps in part; 0 says that the end was reached, and is right."""
        data = b""
        while not data and not self._member.eof:
            packed = self._member.unconsumed_tail or next(self._pieces, b"")
            try:
                data = self._member.decompress(packed, len(buffer))
            except zlib.error:
                raise Rejected(f"{self._name} is not a gzip file, or a broken one") from None
            if not (data or packed or self._member.eof):
                raise Rejected(f"{self._name} is cut short")
        if not data and (self._member.unused_data or any(self._pieces)):
            raise Rejected(f"{self._name} goes on after its end")
        self._left -= len(data)
        if self._left < 0:
            raise Rejected(f"{self._name} holds more than 2^{self._most.bit_length() - 1} bytes")
        buffer[: len(data)] = data
        return len(data)


def unpack(data: bytes, name: str) -> bytes:
    """Return what a gzip file of one member holds, refusing one that unpacks without end."""
    member = zlib.decompressobj(wbits=31)
    try:
        text = member.decompress(data, MOST_TEXT + 1)
    except zlib.error:
        raise Rejected(f"{name} is not a gzip file, or a broken one") from None
    if len(text) > MOST_TEXT:
        raise Rejected(f"{name} holds more than 2^28 bytes")
    if not member.eof or member.unused_data:
        raise Rejected(f"{name} is cut short, or goes on after its end")
    return text
