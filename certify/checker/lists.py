"""Reading lists of graphs (FORMAT.md, 3.2)."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ElementTree
from collections.abc import Callable, Iterator

from .graphs import Edge, Graph, edge
from .strict import BadClaim

MOST_VERTICES = 10_000
ENDINGS = {
    ".g6": "graph6", ".s6": "sparse6", ".col": "dimacs", ".dimacs": "dimacs",
    ".graphml": "graphml", ".edges": "edges", ".txt": "edges",
}  # fmt: skip


def read_list(data: bytes, form: str) -> Iterator[Graph]:
    """Yield the graphs of a file, one after the other."""
    if form not in READERS:
        raise BadClaim(f"unknown format {form!r}")
    yield from READERS[form](data)


def _build(names: list[object], pairs: list[Edge]) -> Graph:
    if len(names) > MOST_VERTICES:
        raise BadClaim(f"a graph has more than {MOST_VERTICES} vertices")
    if any(u == v for u, v in pairs):
        raise BadClaim("a graph has a loop")
    return Graph(names, sorted({edge(u, v) for u, v in pairs}))


def _read_nauty_lines(data: bytes) -> Iterator[Graph]:
    data = data.removeprefix(b">>graph6<<").removeprefix(b">>sparse6<<")
    lines = data.split(b"\n")
    if not lines[-1]:
        lines.pop()
    elif lines[-1][:1] == b":":
        # graph6 shows by its length that a line is whole; sparse6 does not.
        raise BadClaim("the last line has no end: the file may be cut short")
    for number, line in enumerate(lines, 1):
        line = line.removesuffix(b"\r")
        try:
            yield _read_sparse6(line[1:]) if line[:1] == b":" else _read_graph6(line)
        except BadClaim as error:
            raise BadClaim(f"line {number}: {error}") from None


def _read_size(line: bytes) -> tuple[int, list[int]]:
    """Return the number of vertices and the 6-bit values that follow it."""
    values = [byte - 63 for byte in line]
    if not values or min(values) < 0 or max(values) > 63:
        raise BadClaim("not graph6 or sparse6")
    if values[0] < 63:
        return values[0], values[1:]
    width = 6 if values[1:2] == [63] else 3
    start = 2 if width == 6 else 1
    digits = values[start : start + width]
    if len(digits) < width:
        raise BadClaim("the line is cut short")
    n = 0
    for digit in digits:
        n = n * 64 + digit
    return n, values[start + width :]


def _read_graph6(line: bytes) -> Graph:
    n, values = _read_size(line)
    if n > MOST_VERTICES:
        raise BadClaim(f"a graph has more than {MOST_VERTICES} vertices")
    size = n * (n - 1) // 2
    if len(values) != (size + 5) // 6:
        raise BadClaim("the line has the wrong length")
    bits = "".join([format(value, "06b") for value in values])
    if "1" in bits[size:]:
        raise BadClaim("the padding is not zero")
    # Column by column of the upper triangle: (0,1), (0,2), (1,2), (0,3), ...
    pairs, place = [], 0
    for v in range(1, n):
        column = bits[place : place + v]
        place += v
        if "1" in column:
            pairs += [(u, v) for u in range(v) if column[u] == "1"]
    return _build(list(range(n)), pairs)


def _read_sparse6(line: bytes) -> Graph:
    n, values = _read_size(line)
    if n > MOST_VERTICES:
        raise BadClaim(f"a graph has more than {MOST_VERTICES} vertices")
    width = max(n - 1, 0).bit_length()
    bits = "".join([format(value, "06b") for value in values])
    pairs: list[Edge] = []
    v = place = 0
    while place + 1 + width <= len(bits):
        v += int(bits[place])
        x = int(bits[place + 1 : place + 1 + width] or "0", 2)
        if v >= n or x >= n:
            # Only the padding, at most five ones at the end, may lead out of the graph.
            if len(bits) - place > 5 or "0" in bits[place:]:
                raise BadClaim("sparse6 names a vertex that is not in the graph")
            break
        place += 1 + width
        if x > v:
            v = x
        else:
            pairs.append((x, v))
    return _build(list(range(n)), pairs)


def _text(data: bytes) -> str:
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError:
        raise BadClaim("the file is not UTF-8 text") from None


def _read_dimacs(data: bytes) -> Iterator[Graph]:
    size: tuple[int, int] | None = None
    pairs: list[Edge] = []
    for number, line in enumerate(_text(data).splitlines(), 1):
        if not line.strip() or line.split()[0] == "c":
            continue
        if match := re.fullmatch(r"p\s+(?:edge|col)\s+(\d{1,9})\s+(\d{1,9})\s*", line, re.ASCII):
            if size is not None:
                raise BadClaim(f"line {number}: a second line 'p'")
            size = int(match[1]), int(match[2])
            continue
        match = re.fullmatch(r"e\s+(\d{1,9})\s+(\d{1,9})\s*", line, re.ASCII)
        if match is None or size is None:
            raise BadClaim(f"line {number}: neither 'p edge N M' nor, after it, 'e U V'")
        u, v = int(match[1]), int(match[2])
        if not (1 <= u <= size[0] and 1 <= v <= size[0]):
            raise BadClaim(f"line {number}: a vertex that is not in the graph")
        pairs.append((u - 1, v - 1))
    if size is None or size[0] > MOST_VERTICES or len(pairs) != size[1]:
        raise BadClaim("the line 'p' is missing, too large, or counts other edges than there are")
    yield _build(list(range(1, size[0] + 1)), pairs)


def _read_graphml(data: bytes) -> Iterator[Graph]:
    if b"<!DOCTYPE" in data or b"<!ENTITY" in data or b"\x00" in data:
        raise BadClaim("a GraphML file with a document type is not read")
    try:
        root = ElementTree.fromstring(data)
    except (ElementTree.ParseError, ValueError, LookupError, RecursionError) as error:
        raise BadClaim(f"not GraphML: {error}") from None
    space = "{http://graphml.graphdrawing.org/xmlns}"
    graphs = root.findall(space + "graph")
    if root.tag != space + "graphml" or len(graphs) != 1:
        raise BadClaim("not one GraphML graph")
    graph = graphs[0]
    if graph.get("edgedefault") != "undirected" or any(
        item.tag in (space + "hyperedge", space + "port") for item in graph.iter()
    ):
        raise BadClaim("the GraphML graph is not a plain undirected one")
    names: list[object] = [node.get("id") for node in graph.findall(space + "node")]
    place = {name: number for number, name in enumerate(names)}
    pairs = []
    for item in graph.findall(space + "edge"):
        ends = (item.get("source"), item.get("target"))
        if item.get("directed") == "true" or any(end is None or end not in place for end in ends):
            raise BadClaim(f"a GraphML edge {ends} is directed or has no declared ends")
        pairs.append((place[ends[0]], place[ends[1]]))
    nested = any(item is not graph for item in graph.iter(space + "graph"))
    if None in place or len(place) != len(names) or nested:
        raise BadClaim("a GraphML node has no id of its own, or graphs are nested")
    yield _build(names, pairs)


def _read_edges(data: bytes) -> Iterator[Graph]:
    place: dict[object, int] = {}
    pairs: list[Edge] = []
    for number, line in enumerate(_text(data).splitlines(), 1):
        words = line.split("#")[0].split()
        if len(words) > 2:
            raise BadClaim(f"line {number}: more than two words")
        ends = [place.setdefault(word, len(place)) for word in words]
        if len(ends) == 2:
            pairs.append((ends[0], ends[1]))
    yield _build(list(place), pairs)


READERS: dict[str, Callable[[bytes], Iterator[Graph]]] = {
    "graph6": _read_nauty_lines,
    "sparse6": _read_nauty_lines,
    "dimacs": _read_dimacs,
    "graphml": _read_graphml,
    "edges": _read_edges,
}
