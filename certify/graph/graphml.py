"""GraphML, as far as FORMAT.md takes it: one undirected graph of nodes and edges.

networkx reads GraphML too, but makes up nodes that no element declares and
skips what it does not know. Here the events of the XML parser are held against
a table of what may stand where. A document type declaration is refused at
sight, so no entity is ever expanded.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import NoReturn
from xml.parsers import expat

from certify.errors import GraphFileError
from certify.graph.graph import Edge, Graph
from certify.graph.simple import check_size, edge_of, simple_graph

_NAMESPACE = "http://graphml.graphdrawing.org/xmlns "
_INSIDE: Mapping[str, tuple[str, ...]] = {
    "": ("graphml",),
    "graphml": ("desc", "key", "data", "graph"),
    "key": ("desc", "default"),
    "graph": ("desc", "data", "node", "edge"),
    "node": ("desc", "data"),
    "edge": ("desc", "data"),
}
_ANYTHING = ("desc", "data", "default")  # what stands inside these is not looked at
_UNSUPPORTED = ("hyperedge", "port", "endpoint", "locator")


def read_graphml(data: bytes, shown: str) -> Graph:
    """Return the graph of a GraphML file, its vertices in the order of the node elements.

    Errors: GraphFileError with the line.
    """
    return _Reader(shown).read(data)


class _Reader:
    def __init__(self, shown: str) -> None:
        self.shown = shown
        self.parser = expat.ParserCreate("utf-8", " ")
        self.open: list[str] = [""]
        self.graphs = 0
        self.is_ascii = False
        self.nodes: dict[str, int] = {}
        self.edges: list[tuple[str, str, int]] = []  # source, target, line

    def read(self, data: bytes) -> Graph:
        parser = self.parser
        parser.StartDoctypeDeclHandler = self.refuse_doctype
        parser.XmlDeclHandler = self.check_declaration
        parser.StartElementHandler = self.start
        parser.EndElementHandler = self.end
        parser.CharacterDataHandler = self.text
        try:
            parser.Parse(data, True)
        except expat.ExpatError as error:
            raise GraphFileError(
                f"{self.shown}:{error.lineno}: not XML: {expat.ErrorString(error.code)}"
            ) from None
        if self.is_ascii and not data.isascii():
            raise GraphFileError(f"{self.shown}: the file says that it is ASCII, and is not")
        if not self.graphs:
            raise GraphFileError(f"{self.shown}: the file holds no graph element")
        return simple_graph(self.nodes, [self.edge(*edge) for edge in self.edges])

    def fault(self, problem: str) -> NoReturn:
        raise GraphFileError(f"{self.shown}:{self.parser.CurrentLineNumber}: {problem}")

    def refuse_doctype(self, *_: object) -> None:
        self.fault("a document type declaration is not allowed; remove it")

    def check_declaration(self, version: str, encoding: str | None, _standalone: int) -> None:
        if version != "1.0":
            self.fault(f"XML {version} is not supported; GraphML is XML 1.0")
        named = (encoding or "utf-8").lower()
        if named not in ("utf-8", "us-ascii", "ascii"):
            self.fault(f"the encoding {encoding} is not supported; save the file as UTF-8")
        self.is_ascii = named != "utf-8"

    def start(self, name: str, attributes: dict[str, str]) -> None:
        around = self.open[-1]
        local = name.removeprefix(_NAMESPACE)
        self.open.append(local)
        if around in _ANYTHING:
            self.open[-1] = around
            return
        if local not in _INSIDE[around]:
            if local in _UNSUPPORTED or local == "graph":
                self.fault(f"{local} inside {around} is not supported")
            place = f"inside {around}" if around else "at the top"
            self.fault(f"an element {local} has no place {place}")
        if local == "graph":
            self.start_graph(attributes)
        elif local == "node":
            self.start_node(attributes)
        elif local == "edge":
            self.start_edge(attributes)

    def end(self, _name: str) -> None:
        self.open.pop()

    def text(self, text: str) -> None:
        if text.strip(" \t\r\n") and self.open[-1] not in _ANYTHING:
            self.fault(f"text has no place inside {self.open[-1]}")

    def start_graph(self, attributes: dict[str, str]) -> None:
        self.graphs += 1
        if self.graphs > 1:
            self.fault("a second graph; put it into a file of its own")
        default = attributes.get("edgedefault")
        if default != "undirected":
            self.fault(
                "a directed graph is not supported"
                if default == "directed"
                else 'the graph needs edgedefault="undirected"'
            )

    def start_node(self, attributes: dict[str, str]) -> None:
        name = attributes.get("id", "")
        if not name:
            self.fault("a node without an id")
        if name in self.nodes:
            self.fault(f"a second node with the id {name!r}")
        self.nodes[name] = len(self.nodes)
        check_size(len(self.nodes), f"{self.shown}:{self.parser.CurrentLineNumber}")

    def start_edge(self, attributes: dict[str, str]) -> None:
        if attributes.get("directed", "false") != "false":
            self.fault("a directed edge is not supported")
        for side in ("source", "target"):
            if side not in attributes:
                self.fault(f"an edge without a {side}")
        self.edges.append(
            (attributes["source"], attributes["target"], self.parser.CurrentLineNumber)
        )

    def edge(self, source: str, target: str, line: int) -> Edge:
        where = f"{self.shown}:{line}"
        for name in (source, target):
            if name not in self.nodes:
                raise GraphFileError(f"{where}: the edge names {name!r}, which no node declares")
        return edge_of(self.nodes[source], self.nodes[target], where)
