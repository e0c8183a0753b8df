"""The Python interface: what the command line does, as functions."""

from __future__ import annotations

from collections.abc import Hashable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import networkx

from certify.checker import FolderCheck, check_folder
from certify.claim.endless import endless_key, find_row
from certify.claim.instances import name_key
from certify.errors import InputError
from certify.flow import Outcome, decide_graph, find_outcome, prove, read_stored_claim
from certify.graph.graph import Graph, edge_between
from certify.graph.question import BUILDERS
from certify.graph.strip import read_strip
from certify.report.endless import render_endless
from certify.report.explain import render_reason
from certify.report.lasting import Lasting
from certify.search.ladder import Limits

__all__ = ["Decision", "check", "decide", "explain", "prove"]


@dataclass(frozen=True)
class Decision:
    """The answer about one graph, accepted by the checker.

    answer: exists, impossible, or open. kind: of the evidence. witness: the nodes
    in order, for exists. reason: the evidence in plain English. evidence: the JSON
    object of FORMAT.md, in vertex numbers: the nodes in the order of the graph.
    """

    answer: str
    kind: str
    witness: tuple[Hashable, ...] | None
    reason: str
    evidence: dict[str, Any]


def decide(graph: networkx.Graph, structure: str, *, budget: float = Limits.seconds) -> Decision:
    """Answer whether a graph has the structure, with evidence that was checked.

    graph: a networkx graph, undirected, without loops; multiple edges count once.
    structure: "hamiltonian-path" or "hamiltonian-cycle". budget: in seconds.
    Errors: InputError for a directed graph, a loop, or an unknown structure.
    """
    if structure not in BUILDERS:
        raise InputError(f"structure: {structure!r} is none of {', '.join(BUILDERS)}")
    if graph.is_directed():
        raise InputError("the graph is directed; only undirected graphs are understood")
    nodes = list(graph)
    number = {node: i for i, node in enumerate(nodes)}
    edges = sorted({edge_between(number[u], number[v]) for u, v in graph.edges()})
    if any(u == v for u, v in edges):
        raise InputError("the graph has a loop; remove it")
    source = networkx.Graph()
    source.add_nodes_from(range(len(nodes)))
    source.add_edges_from(edges)
    text = networkx.to_graph6_bytes(source, header=False)
    outcome = decide_graph(text, structure, "graph6", limits=Limits(seconds=budget))
    named = Graph(tuple(map(str, nodes)), tuple(edges))
    return _decision(outcome, named, structure, nodes)


def _decision(outcome: Outcome, graph: Graph, structure: str, nodes: list[Hashable]) -> Decision:
    record = outcome.record
    order = record.evidence.get("order") if record.answer == "exists" else None
    witness = tuple(nodes[v] for v in order) if order is not None else None
    reason = render_reason(graph, BUILDERS[structure](graph), record.content)
    return Decision(record.answer, record.kind, witness, reason, record.evidence)


def render_outcome(outcome: Outcome, lasting: Lasting | None = None) -> str:
    """Return the reason for an outcome in plain English."""
    record = outcome.record
    return render_reason(
        outcome.graph, outcome.question, record.content, record.files.__getitem__, lasting
    )


def check(folder: Path | str) -> FolderCheck:
    """Check a folder of evidence; the verdicts are read, and `accepted` says the result."""
    result = check_folder(folder)
    for _ in result.verdicts():
        pass
    return result


def explain(folder: Path | str, instance: str) -> str:
    """Return the reason for one instance (`n=18`, `m=3,n=4`, `17`) in plain English.

    Of an endless claim: for a row (`n=2..`), or for one of its graphs (`n=1000003`).
    """
    claim = read_stored_claim(Path(folder))
    if claim.growing is not None:
        row, n = find_row(claim, instance)
        outcome, _ = find_outcome(Path(folder), name_key(endless_key(claim, row)))
        return render_endless(read_strip(claim, row), outcome.record.evidence, n)
    outcome, lasting = find_outcome(Path(folder), instance)
    return render_outcome(outcome, lasting)
