"""The two formats made of lines of words: DIMACS edge files, and plain edge lists.

networkx has no reader for the first; of the second its reader drops lines with a
single word, which are vertices here.
"""

from __future__ import annotations

from collections.abc import Iterator

from certify.errors import GraphFileError
from certify.graph.graph import Edge, Graph
from certify.graph.simple import check_size, edge_of, numbers, simple_graph

_MOST_DIGITS = 12


def read_dimacs(text: str, shown: str) -> Graph:
    """Return the graph of a DIMACS edge file: lines `c`, one `p edge N M`, M lines `e U V`.

    Errors: GraphFileError with the line.
    """
    n: int | None = None
    promised = found = last = 0
    edges: list[Edge] = []
    for last, line in _lines(text):
        where = f"{shown}:{last}"
        match line.split():
            case ["c", *_]:
                pass
            case ["p", "edge" | "col", vertices, count]:
                if n is not None:
                    raise GraphFileError(f"{where}: a second line p; one graph a file")
                n, promised = _number(vertices, where), _number(count, where)
                check_size(n, where)
            case ["e", first, second]:
                if n is None:
                    raise GraphFileError(f"{where}: an edge before the line p edge N M")
                u, v = _number(first, where), _number(second, where)
                for vertex in (u, v):
                    if not 1 <= vertex <= n:
                        raise GraphFileError(f"{where}: there is no vertex {vertex} in 1..{n}")
                edges.append(edge_of(u - 1, v - 1, where))
                found += 1
            case _:
                raise GraphFileError(
                    f"{where}: not a line of this format; there are c ..., p edge N M and e U V"
                )
    if n is None:
        raise GraphFileError(f"{shown}: the line p edge N M is missing")
    if found != promised:
        raise GraphFileError(
            f"{shown}:{last}: the file ends after {found} lines e; line p promises {promised}"
        )
    return simple_graph(numbers(1, n), edges)


def read_edges(text: str, shown: str) -> Graph:
    """Return the graph of an edge list: two words a line are an edge, one is a vertex.

    Errors: GraphFileError with the line, and for a file that names no vertex.
    """
    index: dict[str, int] = {}
    edges: list[Edge] = []
    for number, line in _lines(text):
        where = f"{shown}:{number}"
        words = line.partition("#")[0].split()
        if len(words) > 2:
            raise GraphFileError(
                f"{where}: {len(words)} words; a line holds two (an edge) or one (a vertex)"
            )
        for word in words:
            index.setdefault(word, len(index))
        check_size(len(index), where)
        if len(words) == 2:
            edges.append(edge_of(index[words[0]], index[words[1]], where))
    if not index:
        raise GraphFileError(f"{shown}: the file names no vertex")
    return simple_graph(index, edges)


def _lines(text: str) -> Iterator[tuple[int, str]]:
    """Yield number and text of each line; what follows the last line end counts if not empty."""
    return enumerate(text.removesuffix("\n").split("\n") if text else [], 1)


def _number(word: str, where: str) -> int:
    if not (word.isascii() and word.isdigit() and len(word) <= _MOST_DIGITS):
        raise GraphFileError(f"{where}: {word[:20]!r} is not a number of vertices or edges")
    return int(word)
