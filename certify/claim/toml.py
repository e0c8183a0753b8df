"""The TOML file of a claim, with the line on which each key stands.

Python's `tomllib` reads the values but keeps no positions, and it is slow or
overflows on hostile nesting. So the text is first looked through once: this
finds the line of each key, and refuses what is nested beyond any claim.
"""

from __future__ import annotations

import re
import stat
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from certify.errors import ClaimError

MAX_BYTES = 1 << 20
MAX_DEPTH = 20

_TOKEN = re.compile(
    r'"""(?:[^"\\]|\\.|"(?!""))*+(?:"{3,5}|\Z)'
    r"|'''(?:[^']|'(?!''))*+(?:'{3,5}|\Z)"
    r'|"(?:[^"\\\n]|\\[^\n])*+"?'
    r"|'[^'\n]*+'?"
    r"|#[^\n]*+"
    r"|[A-Za-z0-9_-]++"
    r"|[\[\]{}=.,\n]",
    re.DOTALL,
)
_POSITION = re.compile(r"\s*\(at (?:line (\d+), column (\d+)|end of document)\)")


@dataclass(frozen=True)
class Document:
    """A TOML file: its bytes, its values, and where its keys stand.

    shown: the file as messages name it.
    lines: for the path of a key (table names first) its line, counted from 1.
    """

    shown: str
    raw: bytes
    data: dict[str, Any]
    lines: Mapping[tuple[str, ...], int]

    def where(self, *path: str) -> str:
        """Return file, line and key, the beginning of a message about a value."""
        known = next((path[:k] for k in range(len(path), 0, -1) if path[:k] in self.lines), None)
        line = self.lines[known] if known else 1
        if len(path) == 1 and isinstance(self.data.get(path[0]), dict):
            return f"{self.shown}:{line}: [{path[0]}]"
        table = f"[{path[0]}] " if len(path) > 1 else ""
        return f"{self.shown}:{line}: {table}{'.'.join(path[1:] or path)}"


def read_document(path: Path) -> Document:
    """Read a TOML file of at most 1 MiB.

    Errors: ClaimError, when the file cannot be read, is no regular file, is too
    large, is not UTF-8, or is not TOML.
    """
    return parse_document(_read_bytes(path, str(path)), str(path))


def parse_document(raw: bytes, shown: str) -> Document:
    """Read the bytes of a TOML file; shown: the file as messages name it.

    Errors: ClaimError.
    """
    if raw.startswith(b"\xef\xbb\xbf"):
        raise ClaimError(
            f"{shown}:1: the file begins with a byte order mark; save it as plain UTF-8"
        )
    try:
        text = raw.decode("utf-8")
    except UnicodeDecodeError as error:
        line = raw.count(b"\n", 0, error.start) + 1
        raise ClaimError(
            f"{shown}:{line}: this line is not UTF-8; save the file as UTF-8"
        ) from None
    text = text.replace("\r\n", "\n")
    lines = _find_lines(text, shown)
    try:
        data = tomllib.loads(text)
    except RecursionError:
        raise ClaimError(f"{shown}: the file is nested too deeply") from None
    except ValueError as error:  # TOMLDecodeError is one; so is an integer of too many digits
        raise _not_toml(error, shown, text) from None
    return Document(shown, raw, data, lines)


def _read_bytes(path: Path, shown: str) -> bytes:
    try:
        if not stat.S_ISREG(path.stat().st_mode):
            raise ClaimError(f"{shown}: this is not a file; name the claim file itself")
        with path.open("rb") as file:
            raw = file.read(MAX_BYTES + 1)
    except (OSError, ValueError) as error:  # ValueError: a NUL in the path
        reason = getattr(error, "strerror", None) or str(error)
        raise ClaimError(f"{shown}: the claim cannot be read: {reason}") from None
    if len(raw) > MAX_BYTES:
        raise ClaimError(f"{shown}: the file is larger than 1 MiB; a claim is a few lines")
    return raw


def _not_toml(error: ValueError, shown: str, text: str) -> ClaimError:
    if not isinstance(error, tomllib.TOMLDecodeError):
        return ClaimError(f"{shown}: the file is not TOML: a value in it is out of range")
    position = _POSITION.search(str(error))
    reason = _POSITION.sub("", str(error))
    if position and position[1]:
        return ClaimError(f"{shown}:{position[1]}: column {position[2]}: not TOML: {reason}")
    line = text.count("\n") + 1
    return ClaimError(f"{shown}:{line}: the end of the file comes too early: not TOML: {reason}")


def _find_lines(text: str, shown: str) -> dict[tuple[str, ...], int]:
    """Return the line of each key and table header; right for every text that is TOML.

    Errors: ClaimError for brackets or dotted names nested beyond MAX_DEPTH.
    """
    lines: dict[tuple[str, ...], int] = {}
    table: tuple[str, ...] = ()
    parts: list[str] = []  # of the key or header that is being written
    line, depth, dots = 1, 0, 0
    in_value = False
    for match in _TOKEN.finditer(text):
        token = match.group()
        if token == "\n":
            if depth == 0:
                parts, in_value = [], False
            line += 1
        elif token in "[{":
            depth += 1
        elif token in "]}":
            depth = max(0, depth - 1)
            if not in_value and depth == 0 and parts:
                table, parts = tuple(parts), []
                lines.setdefault(table, line)
        elif token == "=" and not in_value:
            lines.setdefault((*table, *parts), line)
            in_value = True
        elif token == ".":
            dots += 1
        elif not in_value and token[0] not in "#,=":
            parts.append(token.strip("\"'"))
        if token in "=,[]{}\n":
            dots = 0
        if depth > MAX_DEPTH or dots > MAX_DEPTH:
            raise ClaimError(f"{shown}:{line}: nested too deeply; a claim is flat")
        line += token.count("\n") if len(token) > 1 else 0
    return lines
