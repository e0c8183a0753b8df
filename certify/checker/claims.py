"""A claim, as the checker reads it (FORMAT.md, section 2)."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping
from typing import Any

from .endless import Family
from .graph6 import read_lines
from .graphs import Graph, Question
from .lists import ENDINGS, MOST_GRAPHS, OF_LINES, read_list
from .named import Demands, Name, read_list_vertex, read_rule_vertex
from .ranges import Table, list_cells, read_range
from .rules import MOST_RESULT, TRUTH, Evaluate, compile_rule
from .strict import BadClaim, Rejected
from .strip import Texts
from .tables import get_table, get_text, need_names, need_only, read_toml

Key = Mapping[str, int | str] | int
"""The parameters of a row, the growing one as the text of its range; or a position in a list."""

_KEYS = {
    "title", "statement", "structure", "ends", "required", "forbidden",
    "graph", "instances", "answers",
}  # fmt: skip


class Claim:
    """What is claimed, for which instances, and how to build each graph."""

    def __init__(self, data: bytes) -> None:
        top = read_toml(data)
        need_only(top, _KEYS, "the claim")
        get_text(top, "title", "")
        get_text(top, "statement", "")
        structure = get_text(top, "structure")
        if structure not in ("hamiltonian-path", "hamiltonian-cycle"):
            raise BadClaim("structure is neither 'hamiltonian-path' nor 'hamiltonian-cycle'")
        graph = get_table(top, "graph")
        self.list_name: str | None = None
        self.list_format = ""
        self.coordinates: list[str] = []
        self.table = Table({})
        if "list" in graph:
            self._read_list(graph, "instances" in top)
        else:
            if "instances" in top:
                self.table = _read_instances(get_table(top, "instances"))
            self._read_rule(graph)
        self.demands = Demands(
            top,
            path=structure == "hamiltonian-path",
            by_list=self.list_name is not None,
            read=self._read_vertex,
        )
        self._read_answers(get_table(top, "answers"))
        if self.growing is not None and (
            {"ends", "required", "forbidden"} & set(top) or self.counts
        ):
            raise BadClaim(
                "an endless claim has no ends, no required or forbidden edges, no counts"
            )

    @property
    def growing(self) -> str | None:
        """The parameter that has no end, in an endless claim."""
        return self.table.growing

    @property
    def parameters(self) -> list[str]:
        return list(self.table.at)

    def _read_list(self, graph: dict[str, Any], has_instances: bool) -> None:
        need_only(graph, {"list", "format"}, "[graph]")
        if has_instances:
            raise BadClaim("a list of graphs has no [instances]")
        self.list_name = get_text(graph, "list")
        ending = self.list_name[self.list_name.rfind(".") :]
        self.list_format = get_text(graph, "format", ENDINGS.get(ending))
        if self.list_format not in ENDINGS.values():
            raise BadClaim(f"the format of {self.list_name!r} is not known")

    def _read_rule(self, graph: dict[str, Any]) -> None:
        need_only(graph, {"vertices", "adjacent", "where"}, "[graph]")
        vertices, at_parameter = graph.get("vertices"), self.table.at
        ranges = [vertices]
        if isinstance(vertices, dict):
            self.coordinates = need_names(vertices, "coordinates")
            ranges = list(vertices.values())
            if len(ranges) < 2 or set(self.coordinates) & set(at_parameter):
                raise BadClaim("one coordinate alone, or one that is a parameter too")
        self.ranges = [read_range(value, at_parameter) for value in ranges]
        # The values: parameters first, then the coordinates of a, then those of b.
        first, width = len(at_parameter), max(1, len(self.coordinates))
        own = [f".{name}" for name in self.coordinates] or [""]
        of_a = {f"a{name}": first + i for i, name in enumerate(own)}
        of_b = {f"b{name}": first + width + i for i, name in enumerate(own)}
        bare = {name: first + i for i, name in enumerate(self.coordinates)}
        self.adjacent = compile_rule(graph.get("adjacent"), {**at_parameter, **of_a, **of_b}, TRUTH)
        self.keep: Evaluate | None = None
        if "where" in graph:
            self.keep = compile_rule(graph["where"], {**at_parameter, **of_a, **bare}, TRUTH)
        self.texts = Texts(self.coordinates, ranges, graph["adjacent"], graph.get("where"))

    def _read_vertex(self, value: object) -> Name:
        if self.list_name is not None:
            return read_list_vertex(value)
        return read_rule_vertex(value, len(self.coordinates), self.table.at)

    def _read_answers(self, answers: dict[str, Any]) -> None:
        need_only(answers, {"exists", "impossible"}, "[answers]")
        self.counts: dict[str, int] = {}
        self.says: Callable[[list[int]], bool] | None = None
        self.says_text: str | None = None
        self.says_exists = "exists" in answers
        for name, value in answers.items():
            if type(value) is int and 0 <= value <= MOST_RESULT:
                self.counts[name] = value
            elif len(answers) > 1:
                raise BadClaim("two answers are two counts; anything else stands alone")
            elif type(value) is bool:
                self.says = lambda row, value=value: value
            elif self.list_name is not None:
                raise BadClaim("an answer about a list of graphs is a count or a truth value")
            else:
                self.says = compile_rule(value, self.table.at, TRUTH)
                self.says_text = value

    def claimed(self, key: Key) -> bool | None:
        """Return what is claimed of an instance: exists, impossible (False), nothing (None)."""
        return None if self.says is None else self.claims(self.row(key))

    def claims(self, row: list[int]) -> bool:
        """Return whether a claim with an expression or a truth value says exists for a row."""
        return self.says is not None and bool(self.says(row)) == self.says_exists

    def row(self, key: Key) -> list[int]:
        """Return the values of the parameters in an instance, for the growing one the least."""
        row: list[int] = []
        if not isinstance(key, int):
            for name, place in self.table.at.items():
                value = key[name]
                if name == self.growing:
                    low = self.table.ranges[place](row)[0]
                    if value != f"{low}..":
                        raise Rejected(f"{name} has the range {low}.. and not {value}")
                    value = low
                if type(value) is not int:
                    raise Rejected(f"{name} is not an integer")
                row.append(value)
        return row

    def key(self, row: list[int]) -> Key:
        """Return the name of the instance that a row is."""
        return {
            name: f"{value}.." if name == self.growing else value
            for name, value in zip(self.parameters, row, strict=True)
        }

    def family(self, key: Key) -> Family:
        """Return the graphs of an instance of an endless claim."""
        row = self.row(key)
        place = self.parameters.index(self.growing or "")

        def graph(n: int) -> Graph:
            return self.build([*row[:place], n, *row[place + 1 :]])

        def says(n: int) -> bool:
            return self.claims([*row[:place], n, *row[place + 1 :]])

        fixed = {name: row[at] for name, at in self.table.at.items() if at != place}
        return Family(
            self.texts,
            fixed,
            self.parameters[place],
            row[place],
            graph,
            lambda built: self.demands.question(built, row),
            None if self.says is None else says,
            self.says_text,
        )

    @property
    def has_lines(self) -> bool:
        """Whether there is a list in which every line is a graph."""
        return self.list_format in OF_LINES

    def instances(
        self,
        read_file: Callable[[str], bytes],
        open_lines: Callable[[str], Iterable[bytes]] | None = None,
    ) -> Iterator[tuple[Key, Graph]]:
        """Yield every instance with its graph, in order.

        open_lines: gives the lines of a file one by one, so that a list in which every line is
        a graph is never in memory.
        """
        if self.list_name is None:
            for row in self.table.rows():
                yield self.key(row), self.draw(row)
            return
        if open_lines is not None and self.has_lines:
            graphs = read_lines(open_lines(self.list_name))
        else:
            graphs = read_list(read_file(self.list_name), self.list_format)
        for position, graph in enumerate(graphs, 1):
            if position > MOST_GRAPHS:
                raise BadClaim(f"the list has more than {MOST_GRAPHS} graphs")
            yield position, graph

    def draw(self, row: list[int]) -> Graph:
        """Return the graph of an instance; in an endless claim, which has many, the empty one."""
        return self.build(row) if self.growing is None else Graph([], [])

    def build(self, row: list[int]) -> Graph:
        """Build the graph of one row from the rule, asking it for both orders of each pair."""
        cells = list_cells(row, self.ranges, self.keep)
        adjacent, pairs = self.adjacent, []
        for u, at_u in enumerate(cells):
            start = row + at_u
            for v in range(u + 1, len(cells)):
                at_v = cells[v]
                joined = adjacent(start + at_v)
                if joined != adjacent(row + at_v + at_u):
                    raise BadClaim(f"the rule is not symmetric for {at_u} and {at_v}")
                if joined:
                    pairs.append((u, v))
        names: list[object] = [tuple(cell) if self.coordinates else cell[0] for cell in cells]
        return Graph(names, pairs)

    def question(self, key: Key, graph: Graph) -> Question:
        """Return the question in normal form about an instance."""
        return self.demands.question(graph, self.row(key))


def _read_instances(entries: dict[str, Any]) -> Table:
    if not need_names((name for name in entries if name != "where"), "parameters"):
        raise BadClaim("[instances] names no parameter")
    return Table(entries)
