"""One record: does its evidence show its answer for one instance?"""

from __future__ import annotations

import json
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from .cases import check_cases
from .claims import Claim, Key
from .clauses import check_clauses
from .counting import check_counting
from .endless import check_endless, find_counterexample
from .graphs import Graph, Question
from .obstruction import check_obstruction
from .packed import unpack
from .strict import (
    Rejected,
    need_integer,
    need_keys,
    need_list,
    need_object,
    need_text,
    read_canonical,
)
from .sweep import check_sweep
from .witness import check_witness

ReadFile = Callable[[str], bytes]

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
        answer = need_text(record["answer"], "answer")
        kind = need_text(record["kind"], "kind")
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
        reason = f"{kind} checked"
        complaint = None
        if claim.growing is not None:
            reason, complaint = _check_all(claim, answer, kind, body, key)
        else:
            _check_kind(claim.question(key, graph), answer, kind, body, key, read_file)
        if need_integer(record["length"], "length") != measure(kind, body):
            raise Rejected(f"the reading length is {measure(kind, body)}, not {record['length']}")
    except Rejected as error:
        return Verdict(key, answer, kind, False, False, str(error))
    except MemoryError:
        return Verdict(key, answer, kind, False, False, "too large for the memory of this machine")
    claimed = claim.claimed(key) if claim.growing is None else None
    if claimed is not None and claimed != (answer == "exists"):
        complaint = _contradict(claimed, "")
    return Verdict(key, answer, kind, True, complaint is None, complaint or reason)


def _contradict(claimed: bool, where: str) -> str:
    """Return what to say when the answer is the opposite of what is claimed."""
    said, shown = ("exists", "impossible") if claimed else ("impossible", "exists")
    return f"the claim says {said}{where}, and the evidence shows {shown}"


def _check_all(
    claim: Claim, answer: str, kind: str, body: dict[str, Any], key: Key
) -> tuple[str, str | None]:
    """Accept evidence for all n, and return what was checked, and where the claim is wrong."""
    if (answer, kind) != ("settled", "endless"):
        raise Rejected(f"{kind!r} is no evidence for {answer!r} in an endless claim")

    def refuse(name: str) -> bytes:
        raise Rejected(f"evidence for one n of an endless claim has no files, such as {name}")

    family = claim.family(key)
    settled = check_endless(
        family,
        body,
        lambda question, answer, kind, part: _check_kind(question, answer, kind, part, key, refuse),
    )
    n = find_counterexample(family, settled)
    complaint = (
        None if n is None else _contradict(not settled.exists(n), f" for {family.growing} = {n}")
    )
    return f"endless checked, {settled.visited} states", complaint


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
        cnf, lrat, drat = (unpack(read(name), name) for name in names)
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


def measure(kind: str, body: dict[str, Any]) -> int:
    """Return the reading length of evidence (FORMAT.md, section 7)."""
    if kind == "sweep":
        return sum(body["states"])
    if kind == "clauses":
        return int(body["clauses"]) + int(body["steps"])
    if kind == "endless":
        return sum(sum(found["states"]) for found in body["classes"]) + sum(
            measure(small["kind"], small["evidence"]) for small in body["small"]
        )
    nodes = len(need_list(body["nodes"], "nodes")) if kind == "cases" else 0
    return _count_integers(body) + nodes


def _count_integers(value: object) -> int:
    if isinstance(value, list):
        return sum(map(_count_integers, value))
    if isinstance(value, dict):
        return sum(map(_count_integers, value.values()))
    return int(isinstance(value, int))
