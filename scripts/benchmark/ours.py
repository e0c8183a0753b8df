"""This tool as a method of the benchmark: the one place that knows how to call it."""

from __future__ import annotations

import json

import networkx

from benchmark.outcome import Answer, Outcome, processor_seconds
from certify.checker import check_line
from certify.evidence.record import write_record
from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.search.ladder import Limits, settle


def run_certify(question: Question, limit: float) -> Outcome:
    """Decide with this tool: search for evidence, then have the checker accept it.

    limit: seconds for search and check together; the answer is `open` beyond it.
    The two figures are differences of `outcome.processor_seconds`, the clock of all
    methods. The check reads the claim and the graph from their bytes, as it does for
    a referee. The outcome's kind is the kind of evidence that was accepted.
    """
    claim, graph, source = _write_claim(question)
    start = processor_seconds()
    evidence = settle(question, Limits(seconds=limit))
    record = write_record(1, graph, evidence)
    found = processor_seconds()
    verdict = check_line(claim, 1, record.line, record.files, source)
    checked = processor_seconds()
    if evidence is not None and not verdict.accepted:
        raise RuntimeError(f"the checker rejects what was found: {verdict.reason}")
    answer: Answer = "open"
    if evidence is not None:
        answer = "exists" if record.answer == "exists" else "impossible"
    kind = "budget" if evidence is None else record.kind
    steps = int(record.evidence.get("steps", 0))
    return Outcome(answer, found - start, checked - found, kind, steps)


def _write_claim(question: Question) -> tuple[bytes, Graph, bytes]:
    """Return a claim that asks this question, its graph, and the graph as graph6."""
    apex = question.apex
    n = question.n if apex is None else apex
    edges = tuple(e for e in question.edges if e[1] != apex)
    ends = sorted(u for u, v in question.required if v == apex)
    required = sorted(list(e) for e in question.required if e[1] != apex)
    lines = [f'structure = "hamiltonian-{"cycle" if apex is None else "path"}"']
    lines += [f"ends = {json.dumps(ends)}"] if ends else []
    lines += [f"required = {json.dumps(required)}", "[graph]", 'list = "graph.g6"']
    plain = networkx.Graph()
    plain.add_nodes_from(range(n))
    plain.add_edges_from(edges)
    source: bytes = networkx.to_graph6_bytes(plain, header=False)
    return "\n".join(lines).encode(), Graph(tuple(range(n)), edges), source
