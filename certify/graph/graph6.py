"""Lines of graph6 and sparse6 (the file formats.txt of B. D. McKay's nauty defines both).

networkx reads both formats, but takes truncated lines of sparse6, and bits that
should be padding, without a word. The readers here check every bit; the one of
graph6 gets through 57,000 cubic graphs of 16 vertices a second where networkx
does 5,800, and lists in this format are long.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from functools import lru_cache
from itertools import compress
from typing import Protocol

from certify.errors import GraphFileError
from certify.graph.graph import Edge, Graph
from certify.graph.simple import MAX_EDGES, check_size, edge_of, numbers, simple_graph

MAX_LINE = 1 << 24

_HEADERS = (b">>graph6<<", b">>sparse6<<")
_USED = bytes(range(63, 127))
_BITS = {code + 63: bytes(code >> place & 1 for place in range(5, -1, -1)) for code in range(64)}
_DIGITS = bytes.maketrans(b"\0\1", b"01")
_FEW = 128  # vertices; above, the list of all pairs is not worth remembering


class Readable(Protocol):
    """What can be read from its beginning to its end: an open file, a pipe."""

    def readline(self, limit: int, /) -> bytes:
        """Return the next line, or so many bytes of it; empty at the end."""
        ...

    def read(self, limit: int, /) -> bytes:
        """Return so many bytes, fewer only at the end."""
        ...


def read_lines(file: Readable, shown: str) -> Iterator[tuple[Graph, bytes]]:
    """Yield the graph of each line, sparse6 after ":", else graph6, and the line.

    shown: the file as messages name it.
    Errors: GraphFileError with the line, for anything that is not a graph, cut
    short, or continued; and for a file without any graph.
    """
    for number, line in split_lines(file, shown):
        yield read_line(line.removesuffix(b"\n"), f"{shown}:{number}"), line


def split_lines(file: Readable, shown: str) -> Iterator[tuple[int, bytes]]:
    """Yield number and text of each line, with a plain end, and without the header.

    Whether a line is a graph is for `read_line` to see; what only the file shows, a line of
    sparse6 without an end and a file without any graph, is seen here.
    Errors: GraphFileError. Cost: linear, with one line in memory.
    """
    empty = True
    for number, line in enumerate(iter(lambda: file.readline(MAX_LINE + 1), b""), 1):
        where = f"{shown}:{number}"
        if len(line) > MAX_LINE:
            raise GraphFileError(f"{where}: this line is too long for a graph")
        ended = line.endswith(b"\n")
        line = line.removesuffix(b"\r\n").removesuffix(b"\n")
        if number == 1:
            headers = [header for header in _HEADERS if line.startswith(header)]
            line = line.removeprefix(headers[0]) if headers else line
        if line.startswith(b":") and not ended:
            # graph6 shows by its length that it is whole; sparse6 does not.
            read_line(line, where)  # what is wrong inside the line is said first
            raise GraphFileError(f"{where}: the line has no end, so it may be cut short")
        yield number, line + b"\n"
        empty = False
    if empty:
        raise GraphFileError(f"{shown}: the file holds no graph")


def read_line(line: bytes, where: str) -> Graph:
    """Return the graph of one line without its end."""
    if not line:
        raise GraphFileError(f"{where}: an empty line; every line is a graph")
    if line[:1] in b"&;":
        kind = "a directed graph (digraph6)" if line[:1] == b"&" else "incremental sparse6"
        raise GraphFileError(f"{where}: this is {kind}, which is not supported")
    sparse = line.startswith(b":")
    body = line[1:] if sparse else line
    strange = body.translate(None, _USED)
    if strange:
        column = line.index(strange[:1], int(sparse)) + 1
        raise GraphFileError(f"{where}: column {column}: a character that is not part of graph6")
    n, data = _count(body, where)
    check_size(n, where)
    bits = b"".join([_BITS[code] for code in data])
    if sparse:
        return simple_graph(numbers(0, n), _sparse_edges(n, bits, where))
    return _within_limits(Graph(numbers(0, n), tuple(_edges(n, bits, where))), where)


def _within_limits(graph: Graph, where: str) -> Graph:
    if graph.m > MAX_EDGES:
        raise GraphFileError(f"{where}: the graph has more than {MAX_EDGES:,} edges")
    return graph


def _count(body: bytes, where: str) -> tuple[int, bytes]:
    """Return the number of vertices and the rest: 1, 4 or 8 characters come first."""
    if body[:1] != b"~":
        marks, size, least = 0, 1, 0
    elif body[1:2] != b"~":
        marks, size, least = 1, 4, 63
    else:
        marks, size, least = 2, 8, 258_048
    if len(body) < size:
        raise GraphFileError(f"{where}: the line is cut short before the graph begins")
    n = 0
    for code in body[marks:size]:
        n = n << 6 | code - 63
    if n < least:
        raise GraphFileError(f"{where}: the number of vertices is not written as graph6 writes it")
    return n, body[size:]


def _edges(n: int, bits: bytes, where: str) -> list[Edge]:
    """Return the edges of graph6, sorted: one bit for each pair, by the larger vertex."""
    total = n * (n - 1) // 2
    if len(bits) != total + -total % 6:
        problem = "is cut short" if len(bits) < total else "goes on after the graph"
        raise GraphFileError(
            f"{where}: the line {problem}: {n} vertices need {(total + 5) // 6} characters, "
            f"and {len(bits) // 6} follow"
        )
    if any(bits[total:]):
        raise GraphFileError(f"{where}: the last character has bits beyond the last pair")
    return sorted(compress(_pairs(n) if n <= _FEW else _all_pairs(n), bits))


@lru_cache(maxsize=8)
def _pairs(n: int) -> tuple[Edge, ...]:
    return tuple(_all_pairs(n))


def _all_pairs(n: int) -> Iterable[Edge]:
    return ((u, v) for v in range(n) for u in range(v))


def _sparse_edges(n: int, bits: bytes, where: str) -> list[Edge]:
    """Return the edges of sparse6: steps of one bit ("next vertex") and a vertex x.

    A step with x above the current vertex moves there; any other is an edge.
    What follows the last edge is padding to a whole character: ones, or a zero
    and ones if n is a power of two (where ones could be read as a step).
    """
    width = max(n - 1, 0).bit_length()
    text = bits.translate(_DIGITS).decode("ascii")
    edges: list[Edge] = []
    v = at = end = 0
    while n > 1 and at + width < len(bits):
        x = int(text[at + 1 : at + 1 + width], 2)
        v += bits[at]
        if max(x, v) >= n:
            break
        at += 1 + width
        if x > v:
            v = x
        else:
            edges.append(edge_of(x, v, where))
            end = at
    padding = text[end:]
    if n == 1 << width and len(padding) > width:
        padding = padding.removeprefix("0")
    if len(text) - end > (5 if n > 1 else 0) or "0" in padding:
        raise GraphFileError(f"{where}: the line is cut short, or goes on after the last edge")
    return edges
