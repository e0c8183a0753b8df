"""An endless claim, settled: the sweep of a strip repeats, and so do the answers.

FORMAT.md, section 8, says what the parts are and why they prove what they prove.
"""

from __future__ import annotations

import json
from dataclasses import dataclass
from math import lcm
from typing import Any, ClassVar

from certify.claim.instances import EndlessKey
from certify.claim.periodic import PeriodicSet
from certify.evidence.base import Body, Evidence, Json
from certify.evidence.record import Record


@dataclass(frozen=True)
class ResidueClass:
    """The sweep of all n >= first with one residue: n(0), n(1), ...

    states: the sizes of the sets T(0), ..., T(preperiod + period - 1), after which
    they repeat. answers: for each of these whether the object exists for n(i).
    """

    states: tuple[int, ...]
    preperiod: int
    period: int
    answers: tuple[bool, ...]

    def body(self) -> Body:
        return {
            "states": list(self.states),
            "preperiod": self.preperiod,
            "period": self.period,
            "answers": "".join("1" if answer else "0" for answer in self.answers),
        }


@dataclass(frozen=True)
class Recipe:
    """A witness for n with two equal stretches of `step` layers, the first after layer `cut`.

    order: of the graph's vertices.
    """

    n: int
    cut: int
    step: int
    order: tuple[int, ...]

    def body(self) -> Body:
        return {"n": self.n, "cut": self.cut, "step": self.step, "order": list(self.order)}


@dataclass(frozen=True)
class Endless:
    """The answer for every n >= low.

    small: the evidence for n = low, ..., first - 1. classes: for n(0) = first, ...,
    first + modulus - 1. recipes: for readers, no part of the proof.
    """

    first: int
    modulus: int
    zone: int
    small: tuple[Evidence, ...]
    classes: tuple[ResidueClass, ...]
    recipes: tuple[Recipe, ...]
    kind: ClassVar[str] = "endless"

    @property
    def length(self) -> int:
        states = sum(sum(part.states) for part in self.classes)
        return states + sum(evidence.length for evidence in self.small)

    def body(self) -> Body:
        return {
            "first": self.first,
            "modulus": self.modulus,
            "zone": self.zone,
            "small": [
                {
                    "answer": "exists" if evidence.kind == "witness" else "impossible",
                    "evidence": evidence.body(),
                    "kind": evidence.kind,
                }
                for evidence in self.small
            ],
            "classes": _listed([part.body() for part in self.classes]),
            "recipes": _listed([recipe.body() for recipe in self.recipes]),
        }


def _listed(bodies: list[Body]) -> list[Json]:
    return [dict(body) for body in bodies]


def read_answers(body: dict[str, Any]) -> PeriodicSet:
    """Return for which n the object exists, from the body of the evidence.

    Cost: linear in the small n, the longest preperiod and the least common period.
    """
    first, modulus = body["first"], body["modulus"]
    small = [part["answer"] == "exists" for part in body["small"]]
    classes = body["classes"]
    low = first - len(small)

    def holds(n: int) -> bool:
        if n < first:
            return bool(small[n - low])
        i, place = divmod(n - first, modulus)
        part = classes[place]
        if i >= part["preperiod"]:
            i = part["preperiod"] + (i - part["preperiod"]) % part["period"]
        digits: str = part["answers"]
        return digits[i] == "1"

    start = first + modulus * max(part["preperiod"] for part in classes)
    period = modulus * lcm(*(part["period"] for part in classes))
    return PeriodicSet.sample(low, start, period, holds)


def find_recipe(body: dict[str, Any], n: int) -> Recipe | None:
    """Return a recipe that reaches n, the one with the shortest stretch; None if none does."""
    found = [
        part for part in body["recipes"] if n >= part["n"] and (n - part["n"]) % part["step"] == 0
    ]
    if not found:
        return None
    best = min(found, key=lambda part: (part["step"], part["n"]))
    return Recipe(best["n"], best["cut"], best["step"], tuple(best["order"]))


def exists_for(record: Record) -> str | None:
    """Return for which n the object exists, in words; None if the record is not a settled one."""
    key = record.content["instance"]
    if record.kind != Endless.kind:
        return None
    name = next(name for name, value in key.items() if isinstance(value, str))
    return read_answers(record.evidence).text(name)


def write_endless_record(key: EndlessKey, evidence: Endless | None) -> Record:
    """Return the record of a row of an endless claim; without evidence it is open."""
    content: dict[str, Any] = {
        "instance": key,
        "vertices": 0,
        "edges": 0,
        "answer": "open" if evidence is None else "settled",
        "kind": "none" if evidence is None else evidence.kind,
        "evidence": {} if evidence is None else evidence.body(),
        "length": 0 if evidence is None else evidence.length,
    }
    line = json.dumps(content, sort_keys=True, separators=(",", ":")).encode() + b"\n"
    return Record(line, content, {})
