"""Reading a GraphML file (FORMAT.md, 3.2), by Python's own XML parser.

The parser is told that the file is UTF-8, and a document type ends the reading,
so there are no entities to expand and no other file is opened.
"""

from __future__ import annotations

from collections.abc import Iterator
from xml.parsers import expat

from .graphs import Edge, Graph
from .simple import build_graph, limit_vertices
from .strict import BadClaim

_SPACE = "http://graphml.graphdrawing.org/xmlns "
_INSIDE = {
    "": {"graphml"},
    "graphml": {"desc", "key", "data", "graph"},
    "key": {"desc", "default"},
    "graph": {"desc", "data", "node", "edge"},
    "node": {"desc", "data"},
    "edge": {"desc", "data"},
}
_NOTES = {"desc", "data", "default"}


def read_graphml(data: bytes) -> Iterator[Graph]:
    """Yield the one graph of a file."""
    reader = _Reader()
    try:
        reader.parser.Parse(data, True)
        if reader.is_ascii and not data.isascii():
            raise BadClaim("the GraphML file says that it is ASCII, and is not")
    except expat.ExpatError as error:
        raise BadClaim(f"not XML: {error}") from None
    if not reader.graphs:
        raise BadClaim("the GraphML file has no graph")
    yield build_graph(reader.number, reader.pairs())


class _Reader:
    """Notes the nodes and edges; `path` holds the names of the open elements."""

    def __init__(self) -> None:
        self.path = [""]
        self.graphs = 0
        self.is_ascii = False
        self.number: dict[str, int] = {}
        self.ends: list[tuple[str, str]] = []
        self.parser = expat.ParserCreate("utf-8", " ")
        self.parser.StartDoctypeDeclHandler = self._refuse_doctype
        self.parser.XmlDeclHandler = self._check_declaration
        self.parser.StartElementHandler = self._start
        self.parser.EndElementHandler = self._end
        self.parser.CharacterDataHandler = self._text

    def pairs(self) -> Iterator[Edge]:
        """Yield the edges as pairs of vertex numbers."""
        for pair in self.ends:
            if not (pair[0] in self.number and pair[1] in self.number):
                raise BadClaim(f"a GraphML edge has no declared ends: {pair}")
            yield self.number[pair[0]], self.number[pair[1]]

    def _refuse_doctype(self, *_: object) -> None:
        raise BadClaim("a GraphML file with a document type is not read")

    def _check_declaration(self, version: str, encoding: str | None, _alone: int) -> None:
        named = (encoding or "utf-8").lower()
        if version != "1.0" or named not in ("utf-8", "us-ascii", "ascii"):
            raise BadClaim("the GraphML file says that it is not XML 1.0, or not UTF-8")
        self.is_ascii = named != "utf-8"

    def _start(self, full: str, attributes: dict[str, str]) -> None:
        around, name = self.path[-1], full.removeprefix(_SPACE)
        if around in _NOTES:
            self.path.append(around)
            return
        if name not in _INSIDE[around]:
            raise BadClaim(f"the GraphML element {name!r} inside {around!r} is not read")
        self.path.append(name)
        if name == "graph":
            self.graphs += 1
            if self.graphs > 1 or attributes.get("edgedefault") != "undirected":
                raise BadClaim("not one undirected GraphML graph")
        elif name == "node":
            node = attributes.get("id", "")
            if not node or node in self.number:
                raise BadClaim(f"a GraphML node without an id of its own: {node!r}")
            self.number[node] = len(self.number)
            limit_vertices(len(self.number))
        elif name == "edge":
            if attributes.get("directed", "false") != "false" or not (
                "source" in attributes and "target" in attributes
            ):
                raise BadClaim("a GraphML edge is directed or lacks an end")
            self.ends.append((attributes["source"], attributes["target"]))

    def _end(self, _name: str) -> None:
        self.path.pop()

    def _text(self, text: str) -> None:
        if self.path[-1] not in _NOTES and text.strip(" \t\r\n"):
            raise BadClaim(f"text inside the GraphML element {self.path[-1]!r}")
