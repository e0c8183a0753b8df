"""Endless claims for the tests of the checker, and a writer of evidence for them.

The writer lets the checker's own sweeps say the sizes and answers: what is right about
them is compared in the tests with sweeps of whole graphs.
"""

from __future__ import annotations

import json
from dataclasses import dataclass
from typing import Any

from certify.checker.claims import Claim
from certify.checker.classes import Sets
from certify.checker.endless import Family, Settled, check_endless
from certify.checker.graphs import Question as CheckerQuestion
from certify.checker.layers import Plan
from certify.checker.strip import Strip, find_strip
from certify.graph.graph import Graph
from certify.graph.question import Question, build_cycle_question, build_path_question
from certify.search.budget import Budget
from certify.search.ladder import Limits, settle
from certify.search.sweep import sweep_along

NO_CLAUSES = Limits(seconds=30, kinds=frozenset({"witness", "obstruction", "counting", "sweep"}))


@dataclass(frozen=True)
class Rule:
    """What a test says of an endless claim; the parameters are those of `instances`."""

    vertices: str
    adjacent: str
    structure: str = "hamiltonian-path"
    where: str = ""
    instances: str = 'n = "1.."'
    answers: str = ""

    def claim(self) -> Claim:
        where = f"where = {json.dumps(self.where)}\n" if self.where else ""
        return Claim(
            f"structure = '{self.structure}'\n[graph]\nvertices = {self.vertices}\n"
            f"adjacent = {json.dumps(self.adjacent)}\n{where}"
            f"[instances]\n{self.instances}\n[answers]\n{self.answers}\n".encode()
        )

    def family(self) -> Family:
        """Return the family of the only row."""
        claim = self.claim()
        ((key, _),) = claim.instances(lambda name: b"")
        return claim.family(key)


def hops(*lengths: int, structure: str = "hamiltonian-path", lo: int = 1) -> Rule:
    texts = ", ".join(map(str, lengths))
    return Rule('"1..n"', f"abs(a - b) in {{{texts}}}", structure, "", f'n = "{lo}.."')


def strip_of(family: Family) -> Strip:
    return find_strip(family.texts, family.fixed, family.growing, family.lo, family.graph)


def search_question(family: Family, n: int) -> Question:
    """Return the question about the graph for n, in the search's form."""
    built = family.graph(n)
    graph = Graph(tuple(range(len(built.names))), tuple(built.edges))
    path = family.question(built).path
    return build_path_question(graph) if path else build_cycle_question(graph)


def settle_small(family: Family, n: int) -> dict[str, Any]:
    """Return evidence for one n, found by the search."""
    evidence = settle(search_question(family, n), NO_CLAUSES)
    assert evidence is not None
    answer = "exists" if evidence.kind == "witness" else "impossible"
    return {"answer": answer, "evidence": evidence.body(), "kind": evidence.kind}


def write_class(strip: Strip, family: Family, n: int) -> dict[str, Any]:
    """Return what is to be told of the class of n."""
    first, second = (Plan(strip, at, *family.ask(at)) for at in (n, n + strip.modulus))
    sets = Sets(strip, (first, second))
    sizes: list[int] = []
    seen: list[frozenset[bytes]] = []
    while frozenset(sets.current) not in seen:
        seen.append(frozenset(sets.current))
        sizes.append(len(sets.current))
        sets.advance(len(sizes) - 1)
    preperiod = seen.index(frozenset(sets.current))
    complete = sets.complete()
    return {
        "states": sizes,
        "preperiod": preperiod,
        "period": len(sizes) - preperiod,
        "answers": "".join("01"[complete >> i & 1] for i in range(len(sizes))),
    }


def write_body(family: Family) -> dict[str, Any]:
    """Return evidence for all n of a family, without recipes."""
    strip = strip_of(family)
    return {
        "first": strip.first,
        "modulus": strip.modulus,
        "zone": strip.zone,
        "small": [settle_small(family, n) for n in range(family.lo, strip.first)],
        "classes": [
            write_class(strip, family, n) for n in range(strip.first, strip.first + strip.modulus)
        ],
        "recipes": [],
    }


def check_small(question: CheckerQuestion, answer: str, kind: str, body: dict[str, Any]) -> None:
    """Stand in for the check of a record where the small n do not matter."""


def settle_family(family: Family) -> Settled:
    """Return the answers of a family for all n, the small ones taken on trust."""
    body = write_body(family)
    return check_endless(family, body, check_small)


def exists_in_whole(family: Family, n: int, long: int = 0) -> bool:
    """Return the answer for one n by the search's sweep of the whole graph.

    long: the coordinate along which it is swept.
    """
    names = [name if isinstance(name, tuple) else (name,) for name in family.graph(n).names]
    question = search_question(family, n)
    order = sorted(range(len(names)), key=lambda v: names[v][long])
    found = sweep_along(question, [*order, *range(len(order), question.n)], budget=Budget.of(60))
    assert found is not None
    return isinstance(found, tuple)
