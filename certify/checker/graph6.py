"""Reading lines of graph6 and sparse6 (FORMAT.md, 3.2)."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from .graphs import Edge, Graph
from .simple import build_graph, limit_vertices
from .strict import BadClaim

MOST_LINE = 1 << 26
_BITS = [format(value, "06b") for value in range(64)]


def read_lines(lines: Iterable[bytes]) -> Iterator[Graph]:
    """Yield the graph of each line, with one line in memory."""
    for number, line in enumerate(lines, 1):
        if number == 1:
            header = line[: line.find(b"<<") + 2]
            if header in (b">>graph6<<", b">>sparse6<<"):
                line = line[len(header) :]
                if not line:
                    continue  # a header alone, without the end of a line
        try:
            if len(line) >= MOST_LINE and not line.endswith(b"\n"):
                raise BadClaim("the line is too long")
            yield _read_line(line)
        except BadClaim as error:
            raise BadClaim(f"line {number}: {error}") from None


def _read_line(line: bytes) -> Graph:
    body = line.removesuffix(b"\r\n").removesuffix(b"\n")
    if not body.startswith(b":"):
        return _read_graph6(body)
    if not line.endswith(b"\n"):
        # graph6 shows by its length that a line is whole; sparse6 does not.
        raise BadClaim("the last line has no end: the file may be cut short")
    return _read_sparse6(body[1:])


def _read_size(line: bytes) -> tuple[int, list[int]]:
    """Return the number of vertices and the 6-bit values that follow it."""
    values = [byte - 63 for byte in line]
    if not values or min(values) < 0 or max(values) > 63:
        raise BadClaim("not graph6 or sparse6")
    # One value; or three after one 63; or six after two: the shortest that will do.
    marks, width, least = (0, 1, 0) if values[0] < 63 else (1, 3, 63)
    if values[:2] == [63, 63]:
        marks, width, least = 2, 6, 258_048
    n = 0
    for value in values[marks : marks + width]:
        n = n * 64 + value
    if len(values) < marks + width or n < least:
        raise BadClaim("the number of vertices is cut short or not in its form")
    limit_vertices(n)
    return n, values[marks + width :]


def _write_bits(values: list[int]) -> str:
    """Return the bits of 6-bit values. Of the 64 texts there is one each, however long the line."""
    return "".join([_BITS[value] for value in values])


def _read_graph6(line: bytes) -> Graph:
    n, values = _read_size(line)
    size = n * (n - 1) // 2
    if len(values) != (size + 5) // 6:
        raise BadClaim("the line has the wrong length")
    bits = _write_bits(values)
    if "1" in bits[size:]:
        raise BadClaim("the padding is not zero")
    return build_graph(range(n), _read_columns(n, bits))


def _read_columns(n: int, bits: str) -> Iterator[Edge]:
    """Yield the pairs of the upper triangle, column by column: (0,1), (0,2), (1,2), (0,3), ..."""
    place = 0
    for v in range(1, n):
        u = bits.find("1", place, place + v)
        while u >= 0:
            yield u - place, v
            u = bits.find("1", u + 1, place + v)
        place += v


def _read_sparse6(line: bytes) -> Graph:
    n, values = _read_size(line)
    width = max(n - 1, 0).bit_length()
    bits = _write_bits(values)
    pairs: set[Edge] = set()  # An edge may be repeated as often as there is room in a line.
    v = place = end = 0
    while n > 1 and place + 1 + width <= len(bits):
        v += int(bits[place])
        x = int(bits[place + 1 : place + 1 + width], 2)
        if v >= n or x >= n:
            break
        place += 1 + width
        if x > v:
            v = x
        else:
            pairs.add((x, v))
            end = place
    # After the last edge: ones up to the end of the byte; a zero first where ones
    # alone could be read as an edge.
    rest = bits[end:]
    if n == 1 << width and len(rest) > width:
        rest = rest.removeprefix("0")
    if "0" in rest or len(bits) - end > (5 if n > 1 else 0):
        raise BadClaim("the line is cut short, or goes on after the last edge")
    return build_graph(range(n), pairs)
