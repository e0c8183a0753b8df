"""A record: one instance with its answer and evidence, as bytes to be stored."""

from __future__ import annotations

import gzip
import json
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from certify.claim.instances import Key, name_key
from certify.evidence.base import Body, Evidence
from certify.evidence.clauses import Clauses
from certify.graph.graph import Graph

FILE_FORMS = ("cnf", "drat", "lrat")


@dataclass(frozen=True)
class Record:
    """A line of `evidence.jsonl` with the bulky files it names, by file name.

    content: the line, read.
    """

    line: bytes
    content: dict[str, Any]
    files: dict[str, bytes]

    @property
    def key(self) -> Key:
        """Return the instance."""
        key: Key = self.content["instance"]
        return key

    @property
    def answer(self) -> str:
        """Return exists, impossible or open."""
        return str(self.content["answer"])

    @property
    def kind(self) -> str:
        """Return the kind of evidence, none if open."""
        return str(self.content["kind"])

    @property
    def length(self) -> int:
        """Return the reading length."""
        return int(self.content["length"])

    @property
    def evidence(self) -> dict[str, Any]:
        """Return the evidence, by kind as FORMAT.md says."""
        evidence: dict[str, Any] = self.content["evidence"]
        return evidence


def write_record(key: Key, graph: Graph, evidence: Evidence | None) -> Record:
    """Return the record of an instance; without evidence it is open.

    The bytes depend on the arguments alone: sorted keys, no clock in the gzip
    headers.
    """
    body: Body = evidence.body() if evidence is not None else {}
    files: dict[str, bytes] = {}
    if isinstance(evidence, Clauses):
        for form, text in zip(
            FILE_FORMS, (evidence.cnf, evidence.drat, evidence.lrat), strict=True
        ):
            name = f"clauses/{name_key(key)}.{form}.gz"
            files[name] = gzip.compress(text, mtime=0)
            body[form] = name
    kind = evidence.kind if evidence is not None else "none"
    content = {
        "instance": key,
        "vertices": graph.n,
        "edges": graph.m,
        "answer": "open" if evidence is None else "exists" if kind == "witness" else "impossible",
        "kind": kind,
        "evidence": body,
        "length": evidence.length if evidence is not None else 0,
    }
    line = json.dumps(content, sort_keys=True, separators=(",", ":")).encode() + b"\n"
    return Record(line, content, files)


def read_record(line: bytes, read_files: Callable[[list[str]], dict[str, bytes]]) -> Record:
    """Read a stored line and the files it names; whether it holds is not looked at.

    Errors: ValueError, KeyError, TypeError, AttributeError when it is no record.
    """
    content = json.loads(line)
    named = [content["evidence"].get(form) for form in FILE_FORMS]
    files = read_files([name for name in named if isinstance(name, str)])
    record = Record(line, content, files)
    _ = (record.key, record.answer, record.kind, record.length)
    return record
