"""From a claim to its graphs, and from a graph to the question in normal form.

This is the only place that knows what each structure of a claim asks.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product
from pathlib import Path
from typing import cast

from certify.claim.claim import Claim, Key
from certify.claim.endless import endless_key
from certify.claim.instances import Row, in_instance, name_key, number
from certify.claim.parts import Rule, Vertex
from certify.errors import ClaimError
from certify.graph.files import format_of, open_list, read_source, split_sources
from certify.graph.graph import Edge, Graph, Label, edge_between
from certify.graph.graph6 import Readable
from certify.graph.question import Ends, Question, build_cycle_question, build_path_question

MAX_VERTICES = 4_000
MAX_CANDIDATES = 100_000


@dataclass(frozen=True)
class Instance:
    """An instance and its graph.

    An instance of an endless claim has no single graph: its graph is empty here, and
    its key holds the text of the endless range.
    source: for a graph of a list, a file of the list's format that holds it
    alone; None for a rule.
    """

    key: Key
    graph: Graph
    source: bytes | None = None

    @property
    def name(self) -> str:
        """Return the key as one word."""
        return name_key(self.key)


def instances(claim: Claim, folder: Path, stream: Readable | None = None) -> Iterator[Instance]:
    """Yield each instance with its graph, in order, one graph at a time.

    folder: where the claim's list of graphs is, if it has one. stream: that list, open,
    if it is to be read from there.
    Errors: ClaimError for a rule, GraphFileError for a list, when the instance
    concerned is asked for.
    """
    if claim.growing is not None:
        for row in claim.rows:
            # Who does arithmetic with keys never meets those of endless claims.
            yield Instance(cast(Key, endless_key(claim, row)), Graph((), ()))
        return
    if isinstance(claim.graphs, Rule):
        for key in claim.instance_keys():
            yield Instance(key, build_graph(claim, key))
        return
    for position, source in list_sources(claim, folder, stream):
        yield read_instance(claim, folder, position, source)


def list_sources(
    claim: Claim, folder: Path, stream: Readable | None = None
) -> Iterator[tuple[int, bytes]]:
    """Yield position and source of each graph of a claim's list, without reading the graphs.

    As `instances` otherwise; `read_instance` makes an instance of each.
    """
    path, format = _list_of(claim, folder)
    if stream is not None:
        yield from split_sources(stream, format, str(path))
        return
    with open_list(path, format) as file:
        yield from split_sources(file, format, str(path))


def read_instance(claim: Claim, folder: Path, position: int, source: bytes) -> Instance:
    """Return the instance of a source, as `list_sources` yields it.

    Errors: GraphFileError, with file and line.
    """
    path, format = _list_of(claim, folder)
    return Instance(position, read_source(source, format, str(path), position), source)


def _list_of(claim: Claim, folder: Path) -> tuple[Path, str]:
    if isinstance(claim.graphs, Rule):
        raise ClaimError(f"{claim.where}: this claim has a rule, and no list of graphs")
    path = folder / claim.graphs.name
    return path, claim.graphs.format or format_of(path)


def build_graph(claim: Claim, key: dict[str, int]) -> Graph:
    """Build the graph of an instance from the claim's rule.

    Errors: ClaimError when the rule has no value for two vertices or is not
    symmetric in them, and when there are too many vertices.
    Cost: two evaluations of the rule for each pair of vertices.
    """
    rule = claim.graphs
    if not isinstance(rule, Rule):
        raise ClaimError(f"{claim.where}: this claim has a list of graphs, and no rule")
    row = claim.row(key)
    try:
        labels, spans = _vertices(rule, row)
    except ClaimError as error:
        raise in_instance(error, key) from None
    adjacent = rule.adjacent.bind(row, spans)
    edges: list[Edge] = []
    for u, a in enumerate(labels):
        for v in range(u + 1, len(labels)):
            b = labels[v]
            try:
                joined = adjacent(a, b)
                if joined != adjacent(b, a):
                    raise _asymmetric(rule, bool(joined), a, b)
            except ClaimError as error:
                place = f"between {shown_label(a)} and {shown_label(b)}"
                raise in_instance(error, key, place) from None
            if joined:
                edges.append((u, v))
    return Graph(tuple(labels), tuple(edges))


def build_labels(claim: Claim, key: dict[str, int]) -> tuple[Label, ...]:
    """Return the labels of the graph of an instance, in order; nothing for a list.

    Errors: ClaimError. Cost: linear in the vertices; no rule for edges is looked at.
    """
    if not isinstance(claim.graphs, Rule):
        return ()
    try:
        return tuple(_vertices(claim.graphs, claim.row(key))[0])
    except ClaimError as error:
        raise in_instance(error, key) from None


def shown_label(label: Label) -> str:
    """Return a label as a message shows it: `7`, `(1, 2)`, or the name."""
    return str(label)


def build_question(claim: Claim, key: Key, graph: Graph) -> Question:
    """Build the question that the claim asks of an instance's graph.

    An end or a required edge that the graph lacks makes the question absent; a
    forbidden edge that it lacks is ignored.
    Errors: ClaimError when a vertex that the claim names has no value.
    Cost: O(n + m).
    """
    try:
        find = _Finder(graph, claim.row(key))
        required = [find.edge(pair) for pair in claim.required]
        forbidden = [find.edge(pair) for pair in claim.forbidden]
        ends = [find.vertex(vertex) for vertex in claim.ends]
    except ClaimError as error:
        raise in_instance(error, key) from None
    wanted = [edge for edge in required if edge is not None]
    gone = [edge for edge in forbidden if edge is not None]
    absent = len(wanted) < len(required)
    if claim.structure == "hamiltonian-cycle":
        return build_cycle_question(graph, required=wanted, forbidden=gone, absent=absent)
    present = tuple(end for end in ends if end is not None)
    return build_path_question(
        graph,
        ends=Ends(present, absent=len(present) < len(ends)),
        required=wanted,
        forbidden=gone,
        absent=absent,
    )


@dataclass(frozen=True)
class NamedVertices:
    """The vertices that a claim names, by number; None where the graph does not have one."""

    ends: tuple[int | None, ...]
    required: tuple[tuple[int | None, int | None], ...]
    forbidden: tuple[tuple[int | None, int | None], ...]


def name_vertices(claim: Claim, key: Key, graph: Graph) -> NamedVertices:
    """Return the vertices that a claim names, in an instance's graph.

    Errors: ClaimError when one has no value.
    """
    find = _Finder(graph, claim.row(key))
    return NamedVertices(
        tuple(find.vertex(end) for end in claim.ends),
        tuple((find.vertex(u), find.vertex(v)) for u, v in claim.required),
        tuple((find.vertex(u), find.vertex(v)) for u, v in claim.forbidden),
    )


class _Finder:
    """Finds the vertex numbers that belong to the vertices a claim names."""

    def __init__(self, graph: Graph, row: Row) -> None:
        self.row = row
        self.number: dict[Label, int] = {}
        for v, label in enumerate(graph.labels):
            self.number[label] = v
        self.by_name = {str(label): v for label, v in self.number.items()}

    def vertex(self, vertex: Vertex) -> int | None:
        """Return the number of a vertex; None when the graph does not have it."""
        if isinstance(vertex, str):
            return self.by_name.get(vertex)
        values = tuple(number(part, self.row) for part in vertex)
        return self.number.get(values if len(values) > 1 else values[0])

    def edge(self, pair: tuple[Vertex, Vertex]) -> Edge | None:
        """Return the edge between two vertices; None when the graph cannot have it."""
        u, v = self.vertex(pair[0]), self.vertex(pair[1])
        return None if u is None or v is None or u == v else edge_between(u, v)


def _vertices(rule: Rule, row: Row) -> tuple[list[Label], list[tuple[int, int]]]:
    """Return the labels of the vertices, and for each coordinate the values it can have."""
    spans: list[tuple[int, int]] = []
    candidates = 1
    for range_ in rule.ranges:
        low, high = range_.bounds(row)
        if high < low - 1:
            raise ClaimError(f"{range_.where}: the range {low}..{high} runs backwards")
        spans.append((low, high))
        candidates *= high - low + 1
    if candidates > MAX_CANDIDATES:
        raise ClaimError(
            f"{rule.ranges[0].where}: the ranges have {candidates:,} vertices; "
            f"at most {MAX_CANDIDATES:,} are allowed, before where drops some"
        )
    labels = _kept(rule, row, spans) if candidates else []
    if len(labels) > MAX_VERTICES:
        raise ClaimError(
            f"{rule.ranges[0].where}: the graph has {len(labels):,} vertices; "
            f"at most {MAX_VERTICES:,} are allowed"
        )
    return labels, spans


def _kept(rule: Rule, row: Row, spans: Sequence[tuple[int, int]]) -> list[Label]:
    ranges = [range(low, high + 1) for low, high in spans]
    labels: list[Label] = list(product(*ranges) if rule.coordinates else ranges[0])
    if rule.keep is None:
        return labels
    keep = rule.keep.bind(row, spans)
    kept: list[Label] = []
    for label in labels:
        try:
            if keep(label, label):
                kept.append(label)
        except ClaimError as error:
            raise ClaimError(f"{error} (at {shown_label(label)})") from None
    return kept


def _asymmetric(rule: Rule, joined: bool, a: Label, b: Label) -> ClaimError:
    one, other = shown_label(a), shown_label(b)
    values = ("true", "false") if joined else ("false", "true")
    return ClaimError(
        f"{rule.adjacent.source.where}: the rule is not symmetric: {values[0]} for "
        f"a = {one}, b = {other} and {values[1]} for a = {other}, b = {one}; "
        "it has to join two vertices both ways or not at all"
    )
