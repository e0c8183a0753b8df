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
from certify.graph.graph6 import Readable, read_line, split_lines
from certify.graph.graphml import read_graphml
from certify.graph.wordfiles import read_dimacs, read_edges

MAX_BYTES = 1 << 28
MAX_LIST = 1 << 32
"""How large a file of one graph a line may be, and one of any other format."""
MAX_GRAPHS = 10_000_000

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
    format = format or format_of(path)
    with open_list(path, format) as file:
        for position, source in split_sources(file, format, str(path)):
            yield read_source(source, format, str(path), position), source


def split_sources(file: Readable, format: str, shown: str) -> Iterator[tuple[int, bytes]]:
    """Yield the position, from 1, and the source of each graph, without reading the graphs.

    file: from its beginning, such as a pipe. shown: as messages name it. In between there are
    no lines without a graph, so a position is also the number of a line.
    Errors: GraphFileError for what only the whole file shows; the rest is for `read_source`.
    Cost: linear; of graph6 and sparse6 one line is in memory.
    """
    try:
        if format in _OF_LINES:
            for position, line in split_lines(file, shown):
                if position > MAX_GRAPHS:
                    raise GraphFileError(f"{shown}: more than {MAX_GRAPHS:,} graphs; split it")
                yield position, line
            return
        data = file.read(MAX_BYTES)
        if file.read(1):
            raise GraphFileError(_too_large(shown, MAX_BYTES))
    except OSError as error:
        raise _unreadable(shown, error) from None
    yield 1, data


def read_source(source: bytes, format: str, shown: str, position: int = 1) -> Graph:
    """Return the graph of a source, as `split_sources` yields it.

    Errors: GraphFileError, with file and line.
    """
    if format in _OF_LINES:
        return read_line(source.removesuffix(b"\n"), f"{shown}:{position}")
    if format not in FORMATS:
        raise _unknown(shown, format)
    text = _decoded(source, shown)
    if format == "graphml":
        return read_graphml(source, shown)
    return _OF_TEXT[format](_plain(text, shown), shown)


def open_list(path: Path, format: str) -> BinaryIO:
    """Open a file of graphs. Errors: GraphFileError, before a file that is too large is read."""
    shown = str(path)
    if format not in FORMATS:
        raise _unknown(shown, format)
    most = MAX_LIST if format in _OF_LINES else MAX_BYTES
    try:
        found = path.stat()
        if not stat.S_ISREG(found.st_mode):
            raise GraphFileError(f"{shown}: this is not a file of graphs")
        if found.st_size > most:
            raise GraphFileError(_too_large(shown, most))
        return path.open("rb")
    except (OSError, ValueError) as error:  # ValueError: a NUL in the path
        raise _unreadable(shown, error) from None


def format_of(path: Path) -> str:
    """Return the format that the ending of a file tells.

    Errors: GraphFileError for an unknown ending.
    """
    for format, endings in FORMATS.items():
        if path.suffix in endings:
            return format
    known = ", ".join(ending for endings in FORMATS.values() for ending in endings)
    raise GraphFileError(f"{path}: the ending does not tell the format; known are {known}")


def _unknown(shown: str, format: str) -> GraphFileError:
    return GraphFileError(f"{shown}: no format {format!r}; there are {', '.join(FORMATS)}")


def _too_large(shown: str, most: int) -> str:
    return f"{shown}: the file is larger than {most >> 20} MiB"


def _unreadable(shown: str, error: OSError | ValueError) -> GraphFileError:
    reason = getattr(error, "strerror", None) or str(error)
    return GraphFileError(f"{shown}: the file cannot be read: {reason}")


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
