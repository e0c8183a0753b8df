"""A claim, as the checker reads it (FORMAT.md, section 2)."""

from __future__ import annotations

import keyword
import re
import tomllib
from collections.abc import Callable, Iterator
from itertools import product
from typing import Any

from .graphs import Edge, Graph, Question, edge, make_question
from .lists import ENDINGS, read_list
from .predicates import FUNCTIONS, PREDICATES
from .rules import INTEGER, TRUTH, Evaluate, compile_rule
from .strict import BadClaim

Key = dict[str, int] | int

MOST_INSTANCES, MOST_VERTICES, MOST_CANDIDATES = 100_000, 4_000, 100_000
MOST_BYTES = 1 << 20
_TAKEN = {"a", "b", "where", "true", "false", "abs", *PREDICATES, *FUNCTIONS}


class Claim:
    """What is claimed, for which instances, and how to build each graph."""

    def __init__(self, data: bytes) -> None:
        top = _read_toml(data)
        _only(top, {"title", "statement", "structure", "ends", "required", "forbidden",
                    "graph", "instances", "answers"}, "the claim")  # fmt: skip
        for name in ("title", "statement"):
            if not isinstance(top.get(name, ""), str):
                raise BadClaim(f"{name} is not a string")
        structure = top.get("structure")
        if structure not in ("hamiltonian-path", "hamiltonian-cycle"):
            raise BadClaim("structure is neither 'hamiltonian-path' nor 'hamiltonian-cycle'")
        self.path = structure == "hamiltonian-path"
        self.ends = _list(top.get("ends", []), "ends")
        if "ends" in top and not (self.path and 1 <= len(self.ends) <= 2):
            raise BadClaim("ends are one or two vertices, and only for a path")
        self.required = _edges(top.get("required", []), "required")
        self.forbidden = _edges(top.get("forbidden", []), "forbidden")
        self.graph_table = _table(top, "graph")
        self.list_name: str | None = None
        self.list_format = ""
        self.parameters: list[str] = []
        if "list" in self.graph_table:
            self._read_list_table("instances" in top)
        else:
            self._read_rule_table(_table(top, "instances"))
        self._read_answers(_table(top, "answers"))

    def _read_list_table(self, has_instances: bool) -> None:
        _only(self.graph_table, {"list", "format"}, "[graph]")
        name = self.graph_table["list"]
        if has_instances or not isinstance(name, str):
            raise BadClaim("a list of graphs is named by a string and has no [instances]")
        ending = name[name.rfind(".") :]
        self.list_name = name
        self.list_format = str(self.graph_table.get("format", ENDINGS.get(ending)))
        if self.list_format not in ENDINGS.values():
            raise BadClaim(f"the format of {name!r} is not known")

    def _read_rule_table(self, ranges: dict[str, Any]) -> None:
        table = self.graph_table
        _only(table, {"vertices", "adjacent", "where"}, "[graph]")
        self.row_filter = ranges.pop("where", None)
        self.ranges = ranges
        self.parameters = list(ranges)
        vertices = table.get("vertices")
        self.coordinates = list(vertices) if isinstance(vertices, dict) else []
        for name in (*self.parameters, *self.coordinates):
            fits = re.fullmatch(r"[A-Za-z][A-Za-z0-9_]*", name)
            if not fits or name in _TAKEN or keyword.iskeyword(name):
                raise BadClaim(f"{name!r} cannot be the name of a parameter or coordinate")
        if set(self.parameters) & set(self.coordinates) or vertices in (None, {}):
            raise BadClaim("no vertices, or a name is both a parameter and a coordinate")
        # The values: parameters first, then the coordinates of a, then those of b.
        self.at_parameter = {name: i for i, name in enumerate(self.parameters)}
        first, width = len(self.parameters), max(1, len(self.coordinates))
        of_a = {f"a.{x}" if x else "a": first + i for i, x in enumerate(self.coordinates or [""])}
        of_b = {"b" + name[1:]: place + width for name, place in of_a.items()}
        bare = {x: first + i for i, x in enumerate(self.coordinates)}
        self.adjacent = compile_rule(
            table.get("adjacent"), {**self.at_parameter, **of_a, **of_b}, TRUTH
        )
        self.where: Evaluate = lambda values: True
        if "where" in table:
            self.where = compile_rule(table["where"], {**self.at_parameter, **of_a, **bare}, TRUTH)
        self.bounds = [
            _range(text, self.at_parameter)
            for text in (vertices.values() if isinstance(vertices, dict) else [vertices])
        ]

    def _read_answers(self, table: dict[str, Any]) -> None:
        _only(table, {"exists", "impossible"}, "[answers]")
        self.counts: dict[str, int] = {}
        self.says: Callable[[list[int]], bool] | None = None
        for name, value in table.items():
            if type(value) is int and value >= 0:
                self.counts[name] = value
                continue
            if len(table) != 1 or (isinstance(value, str) and self.list_name is not None):
                raise BadClaim("an answer is a count, or one expression for a rule")
            holds = (
                (lambda values, value=value: value)
                if type(value) is bool
                else compile_rule(value, self.at_parameter, TRUTH)
            )
            self.says = holds if name == "exists" else lambda values, holds=holds: not holds(values)

    def claimed(self, key: Key) -> bool | None:
        """Return what is claimed of an instance: exists, impossible (False), nothing (None)."""
        if self.says is None:
            return None
        values = [key[name] for name in self.parameters] if isinstance(key, dict) else []
        return bool(self.says(values))

    def instances(self, read_file: Callable[[str], bytes]) -> Iterator[tuple[Key, Graph]]:
        """Yield every instance with its graph, in order."""
        if self.list_name is not None:
            yield from enumerate(read_list(read_file(self.list_name), self.list_format), 1)
            return
        for key in self.keys():
            yield key, self.build(list(key.values()))

    def keys(self) -> list[dict[str, int]]:
        """Return the rows of a rule's table."""
        rows: list[list[int]] = [[]]
        for depth, name in enumerate(self.parameters):
            places = {known: i for i, known in enumerate(self.parameters[:depth])}
            bounds = _range(self.ranges[name], places)
            longer: list[list[int]] = []
            for row in rows:
                low, high = bounds(row)
                if len(longer) + high - low + 1 > MOST_INSTANCES * 10:
                    raise BadClaim("too many instances")
                longer += [[*row, value] for value in range(low, high + 1)]
            rows = longer
        if self.row_filter is not None:
            keep = compile_rule(self.row_filter, self.at_parameter, TRUTH)
            rows = [row for row in rows if keep(row)]
        if not 1 <= len(rows) <= MOST_INSTANCES:
            raise BadClaim(f"there are {len(rows)} instances, not 1 to {MOST_INSTANCES}")
        return [dict(zip(self.parameters, row, strict=True)) for row in rows]

    def build(self, row: list[int]) -> Graph:
        """Build the graph of one row from the rule, asking it for both orders of each pair."""
        spans, candidates = [], 1
        for bounds in self.bounds:
            low, high = bounds(row)
            if high < low - 1:
                raise BadClaim(f"the vertex range {low}..{high} is empty")
            candidates *= high - low + 1
            if candidates > MOST_CANDIDATES:
                raise BadClaim("too many vertices")
            spans.append(range(low, high + 1))
        cells = [cell for cell in map(list, product(*spans)) if self.where(row + cell)]
        if len(cells) > MOST_VERTICES:
            raise BadClaim(f"more than {MOST_VERTICES} vertices")
        adjacent, pairs = self.adjacent, []
        for u, at_u in enumerate(cells):
            start = row + at_u
            for v in range(u + 1, len(cells)):
                at_v = cells[v]
                joined = adjacent(start + at_v)
                if joined is not adjacent(row + at_v + at_u):
                    raise BadClaim(f"the rule is not symmetric for {at_u} and {at_v}")
                if joined:
                    pairs.append((u, v))
        names: list[object] = [tuple(cell) if self.coordinates else cell[0] for cell in cells]
        return Graph(names, pairs)

    def question(self, key: Key, graph: Graph) -> Question:
        """Return the question in normal form about an instance."""
        if not (self.ends or self.required or self.forbidden):
            return make_question(graph, self.path, [], [], [])
        numbers = graph.numbers()
        row = list(key.values()) if isinstance(key, dict) else []

        def number(vertex: object) -> int | None:
            return numbers.get(self._name(vertex, row, graph))

        def pair(ends: list[object]) -> Edge | None:
            u, v = number(ends[0]), number(ends[1])
            return None if u is None or v is None else edge(u, v)

        return make_question(
            graph,
            self.path,
            [number(v) for v in self.ends],
            [pair(e) for e in self.required],
            [pair(e) for e in self.forbidden],
        )

    def _name(self, vertex: object, row: list[int], graph: Graph) -> object:
        if self.list_name is not None:
            if type(vertex) not in (int, str):
                raise BadClaim(f"{vertex!r} names no vertex")
            named_by_text = bool(graph.names) and isinstance(graph.names[0], str)
            return str(vertex) if named_by_text else _whole(vertex)
        parts = vertex if isinstance(vertex, list) and self.coordinates else [vertex]
        if len(parts) != max(1, len(self.coordinates)):
            raise BadClaim(f"{vertex!r} names no vertex")
        values = [_integer(part, self.at_parameter)(row) for part in parts]
        return tuple(values) if self.coordinates else values[0]


def _read_toml(data: bytes) -> dict[str, Any]:
    try:
        if len(data) > MOST_BYTES:
            raise BadClaim("the claim is larger than 1 MiB")
        return tomllib.loads(data.decode("utf-8"))
    except (ValueError, RecursionError) as error:
        raise BadClaim(f"the claim is not TOML: {error}") from None


def _only(table: dict[str, Any], keys: set[str], what: str) -> None:
    unknown = sorted(set(table) - keys)
    if unknown:
        raise BadClaim(f"unknown keys in {what}: {', '.join(unknown)}")


def _table(top: dict[str, Any], name: str) -> dict[str, Any]:
    table = top.get(name, {})
    if not isinstance(table, dict):
        raise BadClaim(f"[{name}] is not a table")
    return dict(table)


def _list(value: object, what: str) -> list[Any]:
    if not isinstance(value, list):
        raise BadClaim(f"{what} is not a list")
    return value


def _edges(value: object, what: str) -> list[list[object]]:
    pairs = [_list(item, f"an edge of {what}") for item in _list(value, what)]
    if any(len(pair) != 2 for pair in pairs):
        raise BadClaim(f"an edge of {what} has not two vertices")
    return pairs


def _whole(vertex: object) -> int | None:
    if isinstance(vertex, str):
        return int(vertex) if re.fullmatch(r"-?\d{1,18}", vertex, re.ASCII) else None
    return vertex if type(vertex) is int else None


def _integer(value: object, places: dict[str, int]) -> Evaluate:
    if type(value) is int:
        if abs(value) > 10**12:
            raise BadClaim(f"{value} is beyond 10^12")
        return lambda row: value
    return compile_rule(value, places, INTEGER)


def _range(value: object, places: dict[str, int]) -> Callable[[list[int]], tuple[int, int]]:
    if isinstance(value, str) and ".." in value:
        parts = value.split("..")
        if len(parts) != 2:
            raise BadClaim(f"{value!r} is not a range 'lo..hi'")
        low, high = (compile_rule(part, places, INTEGER) for part in parts)
        return lambda row: (low(row), high(row))
    one = _integer(value, places)
    return lambda row: (one(row), one(row))
