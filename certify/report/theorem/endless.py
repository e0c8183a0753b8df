"""The theorems of an endless claim: one for each row, about all values of the growing parameter.

What Coq computes again is the sweep (kernel/Endless.v); of the evidence only the numbers
after which its states come again are used. That the rule makes a strip is proved from
the rule itself, by arithmetic; here only the strip's numbers are found. Nothing of it is
trusted: with numbers that are not right the theorem does not compile.
"""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from math import gcd, lcm, prod
from pathlib import Path
from typing import Any

from certify.claim.claim import Claim
from certify.claim.endless import claimed_set, endless_key, row_of
from certify.claim.instances import Row, name_key
from certify.claim.parts import Rule
from certify.claim.periodic import PeriodicSet
from certify.errors import ClaimError
from certify.evidence.endless import read_answers
from certify.evidence.lines import read_evidence
from certify.graph.strip import Strip, read_strip
from certify.report.theorem.certificate import NotTakenError
from certify.report.theorem.gallina import (
    write_integer,
    write_list,
    write_name,
    write_range,
    write_rule,
)
from certify.report.theorem.gallina import write_vertex as write_pattern
from certify.report.theorem.queries import Family

HEAD = """\
From Coq Require Import Bool List ZArith Lia ZifyBool.
From Certify Require Import Packed Statement Rules RulesSpec EndlessLayers Endless EndlessRules.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.
"""

LONG = "x'"
"""The number of a layer; no name of a claim has a prime."""


@dataclass
class EndlessTheorems:
    """The definitions and theorems of an endless claim, as parts of a file.

    theorems: their names. not_taken: the rows that have none, each with the reason.
    """

    parts: list[str] = field(default_factory=list)
    theorems: list[str] = field(default_factory=list)
    not_taken: dict[str, str] = field(default_factory=dict)


@dataclass(frozen=True)
class Numbers:
    """What the kernel asks of a strip, in the words of kernel/EndlessLayers.v.

    height, span, zone: how many vertices a layer has at most, how many layers an edge
    leads on, and how many at the end are fixed. enough: from which n on. cut: the
    layer after which a period is put in. preperiod, again: how many periods the states, and
    then the answers, take until they come again.
    """

    height: int
    span: int
    zone: int
    enough: int
    cut: int
    preperiod: int
    again: int


def write_endless(claim: Claim, folder: Path, wanted: str | None) -> EndlessTheorems:
    """Write the theorems of an endless claim that the checker has accepted.

    wanted: one row, as messages write it; None: all.
    Cost: as to recognise the strips; linear in the evidence.
    """
    assert isinstance(claim.graphs, Rule)
    written = EndlessTheorems()
    family = Family(claim, claim.graphs)
    for line in read_evidence(folder):
        record = json.loads(line)
        row = row_of(claim, record["instance"])
        name = name_key(endless_key(claim, row))
        if wanted is not None and name != wanted.replace(" ", ""):
            continue
        if not written.parts:
            written.parts.append("\n".join(family.define()))
            if claim.answers.truth is not None:
                written.parts.append(family.define_claimed([]))
        try:
            written.parts += _Theorem(family, row, record).parts()
        except NotTakenError as error:
            written.not_taken[name] = str(error)
        else:
            written.theorems.append(_theorem_name(claim, row))
    if _is_table(claim, written, wanted):
        written.parts.append(_write_table(family))
        written.theorems.append("table")
    return written


def _is_table(claim: Claim, written: EndlessTheorems, wanted: str | None) -> bool:
    """Return whether all rows, more than one, make one theorem more."""
    whole = wanted is None and not written.not_taken and len(written.theorems) > 1
    return whole and claim.keep is None and claim.answers.truth is not None


def _write_table(family: Family) -> str:
    """Write the theorem about all rows: their parameters have one of finitely many values."""
    claim = family.claim
    names = list(map(write_name, claim.parameters))
    fixed = [k for k, name in enumerate(claim.parameters) if name != claim.growing]
    bounds = [
        f"{write_integer(r.low)} <= {name}" + ("" if r.endless else f" <= {write_integer(r.high)}")
        for name, r in zip(names, claim.ranges, strict=True)
    ]
    cases = " \\/\n    ".join(
        " /\\ ".join(f"{names[k]} = {_number(row[k])}" for k in fixed) for row in claim.rows
    )
    applied = family.row(names)
    rows = " | ".join(f"apply {_theorem_name(claim, row)}" for row in claim.rows)
    return (
        f"Theorem table : forall {' '.join(names)}, {' -> '.join(bounds)} ->\n"
        f"  ((exists h, ham_{_structure(claim)} (Q {applied}) h) <-> claimed {applied} = true).\n"
        f"Proof.\n  intros {' '.join(names)}{' ?' * len(names)}.\n"
        f"  assert (one :\n    {cases})\n    by lia.\n"
        f"  by_rows one; (first [{rows}]; lia).\nQed."
    )


def _structure(claim: Claim) -> str:
    return "path" if claim.structure == "hamiltonian-path" else "cycle"


def _theorem_name(claim: Claim, row: Row) -> str:
    return f"all{_suffix(claim, row)}"


def _suffix(claim: Claim, row: Row) -> str:
    """Return what tells the definitions of a row from those of others."""
    fixed = [
        f"_{name}_{value}".replace("-", "minus_")
        for name, value in zip(claim.parameters, row, strict=True)
        if name != claim.growing
    ]
    return "".join(fixed)


@dataclass(frozen=True)
class _Theorem:
    """Writes what one row takes."""

    family: Family
    row: Row
    record: Mapping[str, Any]

    def parts(self) -> Iterator[str]:
        """Yield the definitions and the theorem. Errors: NotTakenError."""
        claim, rule = self.family.claim, self.family.rule
        growing = str(claim.growing)
        if self.record["answer"] == "open":
            raise NotTakenError("it is open")
        if rule.keep is not None and rule.keep.mentions(growing):
            raise NotTakenError(f"the kernel takes no `where` that names {growing}")
        try:
            strip = read_strip(claim, self.row)
        except ClaimError as error:
            raise NotTakenError(str(error)) from None
        body = self.record["evidence"]
        answers = claimed_set(claim, self.row) or read_answers(body)
        return self._write(strip, find_numbers(strip, body, answers), answers)

    def _write(self, strip: Strip, numbers: Numbers, answers: PeriodicSet) -> Iterator[str]:
        claim = self.family.claim
        suffix, n = _suffix(claim, self.row), write_name(strip.growing)
        query, claimed, name = "Q", "claimed", f"layout{suffix}"
        applied = self.family.row(
            [n if p == claim.growing else _number(v) for p, v in self._values()]
        )
        said = f"claimed {applied}"
        if claim.answers.truth is None:
            claimed = f"found{suffix}"
            said = f"{claimed} {n}"
            yield _define_found(claimed, n, answers)
        elif suffix:
            claimed = f"claimed{suffix}"
            yield _define_with("claimed", suffix, f"({n} : Z) : bool", applied)
        if suffix:
            query = f"Q{suffix}"
            yield _define_with("Q", suffix, f"({n} : Z) : query {self._vertex_type}", applied)
        path = _structure(claim)
        flag = "true" if path == "path" else "false"
        yield self._strip(name, strip, numbers)
        yield (
            f"Lemma fits{suffix} : like_strip {query} {name}.\nProof. by_rule {query} {name}. Qed."
        )
        yield (
            f"Theorem {_theorem_name(claim, self.row)} : "
            f"forall {n}, {_number(strip.low)} <= {n} ->\n"
            f"  ((exists h, ham_{path} (Q {applied}) h) <-> {said} = true).\n"
            "Proof.\n"
            f"  apply (endless {query} {flag} {name} {numbers.preperiod} {numbers.again} {claimed} "
            f"fits{suffix}).\n"
            f"  - by_claim {claimed} {name}.\n"
            f"  - apply (check_small_spec {query} {flag} {name} {claimed} fits{suffix}).\n"
            "    vm_cast_no_check (eq_refl true).\n"
            "  - vm_cast_no_check (eq_refl true).\n"
            "Qed."
        )

    @property
    def _vertex_type(self) -> str:
        size = len(self.family.rule.coordinates)
        return f"({' * '.join(['Z'] * size)})" if size > 1 else "Z"

    def _values(self) -> Iterator[tuple[str, int]]:
        yield from zip(self.family.claim.parameters, self.row, strict=True)

    def _strip(self, name: str, strip: Strip, numbers: Numbers) -> str:
        claim, rule = self.family.claim, self.family.rule
        long = strip.long or 0
        values = [
            f"let {write_name(p)} := {_number(v)} in "
            for p, v in self._values()
            if p != claim.growing
        ]
        let = "".join(values).rstrip()
        opening = f"Eval cbv zeta in {let}\n  " if let else ""
        ranges = [f"[{LONG}]" if k == long else write_range(r) for k, r in enumerate(rule.ranges)]
        layer = ranges[0]
        for other in ranges[1:]:
            layer = f"extend ({layer}) (fun _ => {other})"
        if rule.keep is not None:
            pattern = write_pattern(rule.keep.scope, "a")
            layer = f"filter (fun {pattern} => {write_rule(rule.keep)}) ({layer})"
        parts = [f"a_{c}" for c in rule.coordinates] or ["a"]
        pattern = write_pattern(rule.adjacent.scope, "a")
        moved = [f"{v} + {strip.modulus}" if k == long else v for k, v in enumerate(parts)]
        move = moved[0] if len(moved) == 1 else f"({', '.join(moved)})"
        return (
            f"Definition {name} : strip {self._vertex_type} :=\n"
            f"  {opening}{{| layer := fun {LONG} => {layer};\n"
            f"     move := fun {pattern} => {move};\n"
            f"     low := {_number(strip.offset)}; up := {_number(strip.reach)}; "
            f"height := {numbers.height}; span := {numbers.span}; zone := {numbers.zone};\n"
            f"     period := {strip.modulus}; least := {_number(strip.low)}; "
            f"enough := {_number(numbers.enough)}; cut := {_number(numbers.cut)} |}}."
        )


def _define_with(word: str, suffix: str, kind: str, applied: str) -> str:
    """Define the same with the other parameters put in, so that the tactics see the rule."""
    return (
        f"Definition {word}{suffix} {kind} :=\n"
        f"  Eval cbv beta iota zeta delta [{word}] in {word} {applied}."
    )


def _define_found(name: str, n: str, answers: PeriodicSet) -> str:
    """Define which n have what is asked for, where the claim does not say it."""
    start, period = answers.low + len(answers.head), len(answers.cycle)
    single = [_number(answers.low + k) for k, inside in enumerate(answers.head) if inside]
    residues = sorted((start + k) % period for k, inside in enumerate(answers.cycle) if inside)
    return (
        f"(** Not as claimed: as found. *)\nDefinition {name} ({n} : Z) : bool :=\n"
        f"  (member {n} {write_list(single)}) |||\n"
        f"  (({_number(start)} <=? {n}) &&& "
        f"(member ({n} mod {period}) {write_list(map(str, residues))}))."
    )


def _number(value: int) -> str:
    return str(value) if value >= 0 else f"({value})"


def find_numbers(strip: Strip, body: Mapping[str, Any], answers: PeriodicSet) -> Numbers:
    """Find what the kernel asks of a strip. answers: for which n the object exists.

    The zone at the low end has at most Z layers, and so has the one at the high end; between
    them there must be a period and, after the cut, more vertices than the window has.
    Cost: the graphs of n = first, ..., first + p - 1.
    """
    rule = strip.claim.graphs
    assert isinstance(rule, Rule)
    sizes = [
        high - low + 1
        for k, bounds in enumerate(rule.ranges)
        if k != (strip.long or 0)
        for low, high in [bounds.bounds(strip.row)]
    ]
    height = prod(sizes)
    # The form of the rule shows that no edge leads Z layers on, except around a ring.
    span, zone = max(1, strip.zone - 1), strip.zone if _is_ring(strip) else 0
    enough, cut = _bounds(strip, (span + 1) * height - 1, zone)
    swept = cut - strip.offset + 1  # layers, when the first states are compared
    preperiod, again = 0, 1
    for k, part in enumerate(body["classes"]):
        n = strip.first + k
        before = strip.layers(n) - 3 * strip.zone + part["preperiod"] * strip.modulus
        preperiod = max(preperiod, -((swept - before) // strip.modulus))
        again = lcm(again, part["period"])
    preperiod = max(preperiod, -((enough - answers.start) // strip.modulus))
    again = lcm(again, answers.period // gcd(answers.period, strip.modulus))
    return Numbers(height, span, zone, enough, cut, preperiod, again)


def _is_ring(strip: Strip) -> bool:
    """Return whether edges join the first layers with the last."""
    for n in range(strip.first, strip.first + strip.modulus):
        graph = strip.graph(n)
        for u, v in graph.edges:
            apart = strip.layer(graph.labels[u]) - strip.layer(graph.labels[v])
            if abs(apart) >= strip.zone:
                return True
    return False


def _bounds(strip: Strip, width: int, zone: int) -> tuple[int, int]:
    """Return from which n on the strip is taken for one, and the layer to cut after."""
    low, p, z = strip.low, strip.modulus, strip.zone
    cut = strip.offset + z + p - 1
    usual = max(low, 5 * z + 2 * p, 5 * z + 2 * p - strip.reach + strip.offset - 1)
    least = strip.first if strip.first > usual else low
    enough = max(least, cut + z + zone - strip.reach)
    while True:
        graph = strip.graph(enough)
        high = enough + strip.reach - zone - strip.offset
        after = sum(cut - strip.offset < strip.layer(v) <= high for v in graph.labels)
        if after > max(2, width):
            return enough, cut
        enough += 1
