"""The queries of a claim as definitions of Coq: the graphs, the instances, what is claimed.

Of a rule the definition is the rule itself: the kernel evaluates it. A graph of a list is
its graph6 text, which the kernel decodes, or its edges if it has another format.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

from certify.claim.claim import Claim
from certify.claim.instances import Key
from certify.claim.language import Expression
from certify.claim.parts import Rule, Vertex
from certify.graph.build import Instance, name_vertices
from certify.graph.graph import Graph
from certify.report.theorem.gallina import (
    write_comment,
    write_integer,
    write_list,
    write_name,
    write_range,
    write_rule,
    write_vertex,
)

NOWHERE = -1
"""Stands for a vertex that a graph of a list does not have."""


@dataclass(frozen=True)
class Family:
    """The queries of a claim by rule, as functions of its parameters."""

    claim: Claim
    rule: Rule

    @property
    def parameters(self) -> tuple[str, ...]:
        """Return the parameters as variables of Coq."""
        return tuple(map(write_name, self.claim.parameters))

    @property
    def row_type(self) -> str:
        """Return the type of a row of the table."""
        return _product(len(self.parameters))

    def row(self, values: Sequence[str]) -> str:
        """Return a row: of numbers, or of the variables for the statement about all."""
        return values[0] if len(values) == 1 else f"({', '.join(values)})"

    def row_of(self, key: Key) -> str:
        """Return the row of an instance."""
        return self.row([write_integer(value) for value in self.claim.row(key)])

    def apply(self, name: str, row: str) -> str:
        """Return a function of the rows, applied: `Q 24`; without parameters just `Q`."""
        return f"{name} {row}" if self.parameters else name

    def define(self) -> Iterator[str]:
        """Yield the definition of the queries, line by line, with the claim's own words."""
        yield f"(** As in the claim: adjacent = {_told(self.rule.adjacent)} *)"
        if self.rule.keep is not None:
            yield f"(** where = {_told(self.rule.keep)} *)"
        if not self.parameters:
            yield f"Definition Q : query {self._vertex_type} :="
        elif len(self.parameters) == 1:
            yield f"Definition Q ({self.parameters[0]} : Z) : query {self._vertex_type} :="
        else:
            yield f"Definition Q (row : {self.row_type}) : query {self._vertex_type} :="
            yield f"  let '({', '.join(self.parameters)}) := row in"
        scope = self.rule.adjacent.scope
        a, b = write_vertex(scope, "a"), write_vertex(scope, "b")
        yield f"  {{| vertices := {self._vertices()};"
        yield f"     adjacent := fun {a} {b} =>"
        yield f"       {write_rule(self.rule.adjacent)};"
        yield f"     ends := {write_list(map(_vertex, self.claim.ends))};"
        yield f"     required := {_edges(self.claim.required)};"
        yield f"     forbidden := {_edges(self.claim.forbidden)} |}}."

    @property
    def _vertex_type(self) -> str:
        size = len(self.rule.coordinates)
        return f"({_product(size)})" if size else "Z"

    def _vertices(self) -> str:
        first, *others = map(write_range, self.rule.ranges)
        rows = first
        for other in others:
            rows = f"extend {_operand(rows)} (fun _ => {other})"
        keep = self.rule.keep
        if keep is None:
            return rows
        pattern = write_vertex(keep.scope, "a")
        return f"filter (fun {pattern} => {write_rule(keep)})\n       {_operand(rows)}"

    def define_instances(self) -> str:
        """Return the definition of the rows that are instances."""
        first, *others = self.claim.ranges
        rows = write_range(first)
        for k, bounds in enumerate(others, 1):
            pattern = self._pattern(self.parameters[:k])
            rows = f"extend {_operand(rows)} (fun {pattern} => {write_range(bounds)})"
        if self.claim.keep is not None:
            pattern = self._pattern(self.parameters)
            rows = f"filter (fun {pattern} => {write_rule(self.claim.keep)})\n    {_operand(rows)}"
        return f"Definition instances : list {_operand(self.row_type)} :=\n  {rows}."

    def conditions(self) -> str:
        """Return what the statement about all instances assumes, as `A -> B -> `."""
        parts = [
            f"{write_integer(bounds.low)} <= {name} <= {write_integer(bounds.high)}"
            for name, bounds in zip(self.parameters, self.claim.ranges, strict=True)
        ]
        if self.claim.keep is not None:
            parts.append(f"({write_rule(self.claim.keep)}) = true")
        return "".join(f"{part} -> " for part in parts)

    def define_claimed(self, existing: Iterable[Key]) -> str:
        """Return the definition of which rows have what is asked for.

        As claimed, or, where the claim does not say it of single instances, those found.
        """
        answers = self.claim.answers
        head = f"Definition claimed (row : {self.row_type}) : bool :=\n  "
        if answers.truth is None:
            found = ";\n     ".join(self.row_of(key) for key in existing)
            test = "member row" if len(self.parameters) == 1 else "holds (same row)"
            listed = f"{test}\n    [{found}]" if found else "false"
            return f"(** Not as claimed: as found. *)\n{head}{listed}."
        if isinstance(answers.truth, bool):
            return f"{head}{'true' if answers.truth != answers.inverted else 'false'}."
        text = write_rule(answers.truth)
        key = "impossible" if answers.inverted else "exists"
        head = f"(** As in the claim: {key} = {_told(answers.truth)} *)\n{head}"
        if answers.inverted:
            text = f"negb ({text})"
        if len(self.parameters) == 1:
            return f"{head}let {self.parameters[0]} := row in\n  {text}."
        return f"{head}let '({', '.join(self.parameters)}) := row in\n  {text}."

    def _pattern(self, names: Sequence[str]) -> str:
        return names[0] if len(names) == 1 else f"'({', '.join(names)})"


def _told(rule: Expression) -> str:
    return write_comment(rule.source.text)


def define_graph(claim: Claim, instance: Instance) -> str:
    """Return the definition of the query about one graph of a list."""
    text = _graph(instance)
    named = name_vertices(claim, instance.key, instance.graph)
    if named.ends or named.required or named.forbidden:
        ends = write_list(_place(end) for end in named.ends)
        required, forbidden = map(_places, (named.required, named.forbidden))
        text = f"demand ({text})\n    {ends} {required} {forbidden}"
    head = f"Definition graph_{instance.key} : query Z :=\n  {text}."
    return "\n".join([*_explain(instance.graph, text), head])


def _explain(graph: Graph, text: str) -> Iterator[str]:
    """Yield comments that say what the numbers of the vertices stand for."""
    if graph.labels != tuple(range(graph.n)):
        names = ", ".join(write_comment(str(label)) for label in graph.labels)
        yield f"(** The vertices 0, 1, ... stand for: {names}. *)"
    if f"({NOWHERE})" in text:
        yield f"(** {NOWHERE} stands for a vertex that this graph does not have. *)"


def _graph(instance: Instance) -> str:
    """Return a line of graph6 or sparse6 as it is, a graph of another format by its edges.

    The other formats have characters that these lines do not have.
    """
    source = (instance.source or b"").strip()
    for header in (b">>graph6<<", b">>sparse6<<"):
        source = source.removeprefix(header)
    line = source and all(63 <= character <= 126 for character in source.removeprefix(b":"))
    if line and instance.graph.labels == tuple(range(instance.graph.n)):
        return f'graph6 "{source.decode("ascii")}"'
    return _edge_graph(instance.graph)


def _edge_graph(graph: Graph) -> str:
    edges = "; ".join(f"({u}, {v})" for u, v in graph.edges)
    return f"edge_graph {graph.n} [{edges}]"


def _place(v: int | None) -> str:
    return str(v) if v is not None else f"({NOWHERE})"


def _places(edges: Iterable[tuple[int | None, int | None]]) -> str:
    return write_list(f"({_place(u)}, {_place(v)})" for u, v in edges)


def _vertex(vertex: Vertex) -> str:
    parts = [write_integer(part) for part in vertex if not isinstance(part, str)]
    return parts[0] if len(parts) == 1 else f"({', '.join(parts)})"


def _edges(edges: Iterable[tuple[Vertex, Vertex]]) -> str:
    return write_list(f"({_vertex(u)}, {_vertex(v)})" for u, v in edges)


def _product(size: int) -> str:
    return " * ".join(["Z"] * size)


def _operand(text: str) -> str:
    return f"({text})" if " " in text else text
