"""The vertices that a claim names in `ends`, `required` and `forbidden` (FORMAT.md, section 2)."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from .graphs import Edge, Graph, Question, edge, make_question
from .ranges import read_integer
from .rules import MOST_RESULT
from .strict import BadClaim
from .tables import get_list

Name = Callable[[list[int]], object]
"""From the values of the parameters to the name that the graph gives the vertex."""


def read_list_vertex(value: object) -> Name:
    """Read a vertex of a graph of a list: its name, or the integer that the name shows."""
    if type(value) is int and abs(value) <= MOST_RESULT:
        value = str(value)
    if not isinstance(value, str):
        raise BadClaim("a vertex of a list of graphs is not named by a string or an integer")
    return lambda row: value


def read_rule_vertex(value: object, coordinates: int, places: Mapping[str, int]) -> Name:
    """Read a vertex of a rule: an integer expression, or a list of several."""
    if coordinates == 0:
        return read_integer(value, places)
    if not isinstance(value, list) or len(value) != coordinates:
        raise BadClaim(f"a vertex is not a list of {coordinates} coordinates")
    parts = [read_integer(part, places) for part in value]
    return lambda row: tuple([part(row) for part in parts])


class Demands:
    """What a claim demands of the path or cycle: its ends, and edges used or not used."""

    def __init__(
        self, top: dict[str, Any], *, path: bool, by_list: bool, read: Callable[[object], Name]
    ) -> None:
        self.path, self.by_list = path, by_list
        self.ends = [read(vertex) for vertex in get_list(top, "ends")]
        if "ends" in top and not (path and 1 <= len(self.ends) <= 2):
            raise BadClaim("ends are one or two vertices, and only for a path")
        self.required, self.forbidden = (
            [_read_pair(item, read) for item in get_list(top, name)]
            for name in ("required", "forbidden")
        )

    def question(self, graph: Graph, row: list[int]) -> Question:
        """Return the question in normal form about a graph."""
        if not (self.ends or self.required or self.forbidden):
            return make_question(graph, self.path, [], [], [])
        names = map(str, graph.names) if self.by_list else graph.names
        number = {name: place for place, name in enumerate(names)}

        def find(pair: tuple[Name, Name]) -> Edge | None:
            u, v = (number.get(name(row)) for name in pair)
            return None if u is None or v is None else edge(u, v)

        return make_question(
            graph,
            self.path,
            [number.get(name(row)) for name in self.ends],
            [find(pair) for pair in self.required],
            [find(pair) for pair in self.forbidden],
        )


def _read_pair(item: object, read: Callable[[object], Name]) -> tuple[Name, Name]:
    if not isinstance(item, list) or len(item) != 2:
        raise BadClaim("an edge is not a list of two vertices")
    return read(item[0]), read(item[1])
