"""Questions of the tests put to the kernel's program, and folders to put to it whole."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from certify.graph.build import NamedVertices
from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.report.kernel.ask import Kernel
from certify.report.kernel.strict import RefusedError
from certify.report.kernel.words import write_evidence, write_question
from tests.checker.folders import write_files
from tests.checker.test_format_examples import examples


def refutes(kernel: Kernel, question: Question, kind: str, body: Any) -> bool:
    """Return whether the kernel accepts evidence that a question's answer is no."""
    structure, graph, named = _query(question)

    def read(form: str, name: object) -> str:
        raise AssertionError("no file is needed")

    try:
        evidence = list(write_evidence(kind, body, question.n, read))
    except RefusedError:
        return False
    said = kernel.ask([write_question(structure, "impossible", graph, named), *evidence])
    assert said in ("accepted", "rejected")
    return said == "accepted"


def _query(question: Question) -> tuple[str, Graph, NamedVertices]:
    """Return the query about a graph that has this question as its normal form."""
    apex = question.apex
    absent: tuple[tuple[int | None, int | None], ...] = ((None, None),) * question.absent
    required = tuple(e for e in sorted(question.required) if apex not in e)
    if apex is None:
        graph = Graph(tuple(range(question.n)), question.edges)
        return "hamiltonian-cycle", graph, NamedVertices((), required + absent, ())
    graph = Graph(tuple(range(apex)), tuple(e for e in question.edges if apex not in e))
    ends: tuple[int, ...] = tuple(u for u, v in sorted(question.required) if v == apex)
    if ends and len(question.neighbours[apex]) < graph.n:
        ends = (ends * 2)[:2] if len(ends) == 1 else ends
    return "hamiltonian-path", graph, NamedVertices(ends, required + absent, ())


def write_example(folder: Path, kind: str, position: int = 0) -> Path:
    """Write a worked example of FORMAT.md as a folder of evidence."""
    found = [example for example in examples() if json.loads(example[1])["kind"] == kind]
    claim, line, files = found[position]
    folder.mkdir(parents=True)
    manifest = json.dumps({"claim": "claim.toml", "format": 1, "sha256": {}}).encode()
    named = {"claim.toml": claim, "evidence.jsonl": line, "manifest.json": manifest}
    return write_files(folder, named | files)
