"""Reading lists of graphs (FORMAT.md, 3.2)."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from io import BytesIO

from .graph6 import read_lines
from .graphml import read_graphml
from .graphs import Edge, Graph
from .simple import build_graph, limit_vertices
from .strict import BadClaim

ENDINGS = {
    ".g6": "graph6", ".s6": "sparse6", ".col": "dimacs", ".dimacs": "dimacs",
    ".graphml": "graphml", ".edges": "edges", ".txt": "edges",
}  # fmt: skip

# In these every line is a graph; they are read line by line.
OF_LINES = ("graph6", "sparse6")
MOST_GRAPHS = 10_000_000

# Of white space only space, tab and line end; no control character; no byte order mark.
_STRANGE = re.compile(r"[^\S\t\n ]|[\x00-\x08\x0e-\x1f\x7f-\x9f\ufeff]")


def read_list(data: bytes, form: str) -> Iterator[Graph]:
    """Yield the graphs of a file, one after the other."""
    if form not in READERS:
        raise BadClaim(f"unknown format {form!r}")
    yield from READERS[form](data)


def _read_text(data: bytes) -> str:
    try:
        text = data.decode("utf-8").replace("\r\n", "\n")
    except UnicodeDecodeError:
        raise BadClaim("the file is not UTF-8 text") from None
    if text.startswith("\ufeff"):
        raise BadClaim("the file begins with a byte order mark")
    return text


def _read_words(data: bytes) -> Iterator[tuple[int, str]]:
    """Yield number and text of each line of a file of words."""
    text = _read_text(data)
    strange = _STRANGE.search(text)
    if strange:
        raise BadClaim(f"the file has the character {strange[0]!r}")
    start, number = 0, 0
    while start < len(text):
        end = text.find("\n", start)
        end = len(text) if end < 0 else end
        number += 1
        yield number, text[start:end]
        start = end + 1


def _read_number(word: str) -> int:
    if not re.fullmatch(r"[0-9]{1,12}", word):
        raise BadClaim(f"{word!r} is not a number of up to 12 digits")
    return int(word)


def _read_dimacs(data: bytes) -> Iterator[Graph]:
    n = promised = -1

    def read_pairs() -> Iterator[Edge]:
        nonlocal n, promised
        found = 0
        for number, line in _read_words(data):
            words = line.split()
            try:
                if words[:1] == ["c"]:
                    continue
                kind, rest = words[:-2], [_read_number(word) for word in words[-2:]]
                if kind in (["p", "edge"], ["p", "col"]) and n < 0:
                    n, promised = rest
                    limit_vertices(n)
                elif kind == ["e"] and min(rest) >= 1 and max(rest) <= n:
                    found += 1
                    yield rest[0] - 1, rest[1] - 1
                else:
                    raise BadClaim("not one 'p edge N M', and after it 'e U V' with U, V in 1..N")
            except BadClaim as error:
                raise BadClaim(f"line {number}: {error}") from None
        if found != promised:
            raise BadClaim("there is no line 'p', or it promises other lines 'e' than there are")

    graph = build_graph([], read_pairs())
    graph.names.extend(range(1, n + 1))
    yield graph


def _read_edges(data: bytes) -> Iterator[Graph]:
    place: dict[object, int] = {}

    def read_pairs() -> Iterator[Edge]:
        for number, line in _read_words(data):
            words = line.partition("#")[0].split()
            if len(words) > 2:
                raise BadClaim(f"line {number}: more than two words")
            ends = [place.setdefault(word, len(place)) for word in words]
            limit_vertices(len(place))
            if len(ends) == 2:
                yield ends[0], ends[1]

    graph = build_graph(place, read_pairs())
    if not place:
        raise BadClaim("the file names no vertex")
    yield graph


def _read_graphs(data: bytes) -> Iterator[Graph]:
    yield from read_lines(BytesIO(data))


def _read_graphml(data: bytes) -> Iterator[Graph]:
    _read_text(data)
    yield from read_graphml(data)


READERS: dict[str, Callable[[bytes], Iterator[Graph]]] = {
    "graph6": _read_graphs,
    "sparse6": _read_graphs,
    "dimacs": _read_dimacs,
    "graphml": _read_graphml,
    "edges": _read_edges,
}
