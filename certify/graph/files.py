"""Lists of graphs in files (FORMAT.md, section 3.2).

Each format has its reader, in a module beside this one; all of them refuse what
is malformed or cut short, and loops, with file and line. Graphs keep the names
that the format gives their vertices: integers from 0 or 1, or words.
"""

from __future__ import annotations

import codecs
import re
import stat
from collections.abc import Callable, Iterator, Mapping
from pathlib import Path
from typing import BinaryIO

from certify.claim.parts import FORMATS
from certify.errors import GraphFileError
from certify.graph.graph import Graph
from certify.graph.graph6 import read_lines
from certify.graph.graphml import read_graphml
from certify.graph.wordfiles import read_dimacs, read_edges

MAX_BYTES = 1 << 28

_STRANGE = re.compile(r"[^\S\t\n ]|[\x00-\x08\x0e-\x1f\x7f-\x9f\ufeff]")
_OF_LINES = ("graph6", "sparse6")
_OF_TEXT: Mapping[str, Callable[[str, str], Graph]] = {"dimacs": read_dimacs, "edges": read_edges}


def read_graphs(path: Path, format: str | None = None) -> Iterator[Graph]:
    """Yield the graphs of a file, in order.

    format: a key of FORMATS; None lets the ending of the file decide. graph6 and
    sparse6 are read line by line; the others hold one graph and are read whole.
    Errors: GraphFileError, with file and line, when the graph concerned is
    asked for.
    """
    for graph, _ in read_sources(path, format):
        yield graph


def read_sources(path: Path, format: str | None = None) -> Iterator[tuple[Graph, bytes]]:
    """Yield each graph with its source: a file of this format that holds it alone.

    As `read_graphs` otherwise.
    """
    shown = str(path)
    if format is None:
        format = format_of(path)
    elif format not in FORMATS:
        raise GraphFileError(f"{shown}: no format {format!r}; there are {', '.join(FORMATS)}")
    with _opened(path, shown) as file:
        if format in _OF_LINES:
            yield from read_lines(file, shown)
            return
        data = file.read(MAX_BYTES + 1)
    if len(data) > MAX_BYTES:
        raise GraphFileError(f"{shown}: the file is larger than {MAX_BYTES >> 20} MiB")
    text = _decoded(data, shown)
    if format == "graphml":
        yield read_graphml(data, shown), data
    else:
        yield _OF_TEXT[format](_plain(text, shown), shown), data


def format_of(path: Path) -> str:
    """Return the format that the ending of a file tells.

    Errors: GraphFileError for an unknown ending.
    """
    for format, endings in FORMATS.items():
        if path.suffix in endings:
            return format
    known = ", ".join(ending for endings in FORMATS.values() for ending in endings)
    raise GraphFileError(f"{path}: the ending does not tell the format; known are {known}")


def _opened(path: Path, shown: str) -> BinaryIO:
    try:
        if not stat.S_ISREG(path.stat().st_mode):
            raise GraphFileError(f"{shown}: this is not a file of graphs")
        return path.open("rb")
    except (OSError, ValueError) as error:  # ValueError: a NUL in the path
        reason = getattr(error, "strerror", None) or str(error)
        raise GraphFileError(f"{shown}: the file cannot be read: {reason}") from None


def _decoded(data: bytes, shown: str) -> str:
    """Return the text of a file, UTF-8, with plain line ends."""
    if data.startswith(codecs.BOM_UTF8):
        raise GraphFileError(f"{shown}:1: the file begins with a byte order mark; remove it")
    try:
        return data.decode("utf-8").replace("\r\n", "\n")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise GraphFileError(f"{shown}:{line}: this line is not UTF-8") from None


def _plain(text: str, shown: str) -> str:
    """Refuse control characters, and spaces that do not look like one."""
    strange = _STRANGE.search(text)
    if strange:
        line = text.count("\n", 0, strange.start()) + 1
        raise GraphFileError(
            f"{shown}:{line}: the character U+{ord(strange.group()):04X} has no place in a list"
        )
    return text
