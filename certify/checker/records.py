"""One record: does its evidence show its answer for one instance?"""

from __future__ import annotations

import gzip
import json
import zlib
from collections.abc import Callable
from dataclasses import dataclass
from io import BytesIO
from typing import Any

from .cases import check_cases
from .claims import Claim, Key
from .clauses import check_clauses
from .counting import check_counting
from .graphs import Graph, Question
from .obstruction import check_obstruction
from .strict import Rejected, need_integer, need_keys, need_list, need_object, read_canonical
from .sweep import check_sweep
from .witness import check_witness

ReadFile = Callable[[str], bytes]

MOST_TEXT = 1 << 28
KEYS = {"instance", "vertices", "edges", "answer", "kind", "evidence", "length"}
LEFT_OPEN = "left open: no evidence was found within the limits of the search"


@dataclass(frozen=True)
class Verdict:
    """What the checker says of one instance.

    holds: the evidence shows the answer. accepted: and the claim does not say the
    opposite. reason: why not, or what was checked. line: of evidence.jsonl, from 1;
    0 when there is none. is_open: the record itself says that nothing is known.
    """

    instance: Key
    answer: str
    kind: str
    holds: bool
    accepted: bool
    reason: str
    line: int = 0
    is_open: bool = False


def name_key(key: Key) -> str:
    """Return the name of an instance as files and messages have it."""
    if isinstance(key, int):
        return str(key)
    return ",".join(f"{name}={key[name]}" for name in sorted(key)) or "only"


def check_record(claim: Claim, key: Key, graph: Graph, line: bytes, read_file: ReadFile) -> Verdict:
    """Return the verdict on a line of evidence for the instance that is expected there."""
    answer, kind = "open", "none"
    try:
        record = need_keys(read_canonical(line), KEYS, "record")
        # Compared as text: in Python true == 1.
        if json.dumps(record["instance"]) != json.dumps(key, sort_keys=True):
            raise Rejected(f"the record is of another instance, {record['instance']}")
        answer, kind = str(record["answer"]), str(record["kind"])
        counts = (
            need_integer(record["vertices"], "vertices"),
            need_integer(record["edges"], "edges"),
        )
        if counts != (len(graph.names), len(graph.edges)):
            raise Rejected(
                f"the graph has {len(graph.names)} vertices and {len(graph.edges)} edges, "
                f"and not {counts[0]} and {counts[1]}"
            )
        body = need_object(record["evidence"], "evidence")
        if (answer, kind) == ("open", "none"):
            if body or need_integer(record["length"], "length") != 0:
                raise Rejected("an open instance has no evidence")
            return Verdict(key, answer, kind, False, False, LEFT_OPEN, is_open=True)
        _check_kind(claim.question(key, graph), answer, kind, body, key, read_file)
        if need_integer(record["length"], "length") != measure(kind, body):
            raise Rejected(f"the reading length is {measure(kind, body)}, not {record['length']}")
    except Rejected as error:
        return Verdict(key, answer, kind, False, False, str(error))
    claimed = claim.claimed(key)
    if claimed is not None and claimed != (answer == "exists"):
        said = "exists" if claimed else "impossible"
        reason = f"the claim says {said}, and the evidence shows {answer}"
        return Verdict(key, answer, kind, True, False, reason)
    return Verdict(key, answer, kind, True, True, f"{kind} checked")


def _check_kind(
    question: Question, answer: str, kind: str, body: dict[str, Any], key: Key, read: ReadFile
) -> None:
    """Accept evidence of a kind that fits the answer."""
    if answer == "exists" and kind == "witness":
        check_witness(question, body)
        return
    # The path on one vertex has a normal form without a cycle, and yet it exists.
    if answer != "impossible" or question.is_one_vertex_path:
        raise Rejected(f"{kind!r} is no evidence for {answer!r} here")
    if kind == "clauses":
        names = [f"clauses/{name_key(key)}.{form}.gz" for form in ("cnf", "lrat", "drat")]
        if [body.get(form) for form in ("cnf", "lrat", "drat")] != names:
            raise Rejected(f"the files are not named {', '.join(names)}")
        cnf, lrat, drat = (_unpack(read(name), name) for name in names)
        check_clauses(question, body, cnf, lrat, drat)
    elif kind in _READABLE:
        _READABLE[kind](question, body)
    else:
        raise Rejected(f"{kind!r} is no kind of evidence for {answer!r}")


_READABLE = {
    "obstruction": check_obstruction,
    "counting": check_counting,
    "cases": check_cases,
    "sweep": check_sweep,
}


def _unpack(data: bytes, name: str) -> str:
    """Return the text of a gzip file, refusing one that unpacks without end."""
    try:
        with gzip.GzipFile(fileobj=BytesIO(data)) as packed:
            text = packed.read(MOST_TEXT + 1)
        if len(text) > MOST_TEXT:
            raise Rejected(f"{name} holds more than 2^28 characters")
        return text.decode("ascii")
    except (OSError, EOFError, zlib.error, UnicodeDecodeError):
        raise Rejected(f"{name} is not gzip of ASCII text") from None


def measure(kind: str, body: dict[str, Any]) -> int:
    """Return the reading length of evidence (FORMAT.md, section 7)."""
    if kind == "sweep":
        return sum(body["states"])
    if kind == "clauses":
        return int(body["clauses"]) + int(body["steps"])
    nodes = len(need_list(body["nodes"], "nodes")) if kind == "cases" else 0
    return _count_integers(body) + nodes


def _count_integers(value: object) -> int:
    if isinstance(value, list):
        return sum(map(_count_integers, value))
    if isinstance(value, dict):
        return sum(map(_count_integers, value.values()))
    return int(isinstance(value, int))
