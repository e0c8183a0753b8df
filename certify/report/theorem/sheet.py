"""The theorems of a folder as one file of Coq.

A theorem for each impossible instance says `~ exists h, ham_path (Q 24) h`, of queries
that are defined at the top of the file. When every instance has its certificate, one
theorem more says for the whole table where the object exists, or for how many graphs. Of an
endless claim there is a theorem for each row, about all n (endless.py).
"""

from __future__ import annotations

import gzip
import json
import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from itertools import islice
from pathlib import Path
from typing import Any

from certify.claim.claim import Claim, read_claim
from certify.claim.instances import Key, name_key
from certify.claim.parts import Rule
from certify.errors import InputError
from certify.evidence.lines import claim_name, read_evidence
from certify.graph.build import instances
from certify.report.theorem.certificate import NotTakenError, write_certificate
from certify.report.theorem.endless import HEAD as ENDLESS_HEAD
from certify.report.theorem.endless import write_endless
from certify.report.theorem.gallina import write_comment, write_name
from certify.report.theorem.queries import Family, define_graph

HEAD = """\
From Coq Require Import Bool List ZArith String.
From Certify Require Import Packed Statement Rules RulesSpec EdgeGraph Graph6 Normal Certificate
  Table.
From Certify Require Obstruction Counting Cases Sweep.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.
"""

_GRAPHS = "(** ** The graphs, and what is claimed *)"
_EVIDENCE = """\
(** ** The evidence

    Nothing of it has to be read: with evidence that is not right the theorems do not compile. *)"""
_THEOREMS = "(** ** The theorems *)"


@dataclass
class Sheet:
    """A file of theorems.

    name: the file's, without ending. text: what it holds. theorems: their names.
    not_taken: the instances that have no theorem, each with the reason.
    table: whether there is a theorem about the whole table. searched: whether Coq searches for a
    part of the proof, so that it may refuse what is so.
    """

    name: str
    text: str
    theorems: list[str]
    not_taken: dict[str, str]
    table: bool
    searched: bool = False


def write_sheet(folder: Path, wanted: str | None = None) -> Sheet:
    """Write the theorems of a folder that the checker has accepted.

    wanted: one instance, as messages write it; None: all, and the table.
    Errors: InputError when there is no such instance.
    Cost: linear in the evidence, which is held in memory once, as text.
    """
    claim = read_claim(folder / claim_name(folder))
    title = folder.resolve().name + (f" {wanted}" if wanted else "")
    if claim.growing is not None:
        sheet = _write_endless(claim, folder, wanted, _identifier(title))
    else:
        sheet = _Writer(claim, folder, wanted).write(_identifier(title))
    if not (sheet.theorems or sheet.not_taken):
        raise InputError(
            f"{folder}: there is no instance {wanted!r}; write n=18, m=3,n=4, "
            "17 for a graph of a list, or n=2.. for an endless claim"
        )
    return sheet


def _write_endless(claim: Claim, folder: Path, wanted: str | None, name: str) -> Sheet:
    """Write the theorems of an endless claim: one for each row, about all n."""
    written = write_endless(claim, folder, wanted)
    title = write_comment(claim.title) or "A claim without a title"
    growing = write_name(str(claim.growing))
    comment = (
        f"(** * {title}\n\n    For all {growing}, without an end.\n"
        "    To be read are the definitions of Q and claimed, and the theorems, and of the kernel\n"
        "    - Statement.v: what a Hamiltonian path or cycle is\n"
        "    - Rules.v, or in its place RulesSpec.v: what the words of a rule mean *)"
    )
    parts = [*written.parts, _gather(written.theorems)]
    text = f"{comment}\n{ENDLESS_HEAD}\n" + "\n\n".join(parts) + "\n"
    whole = not written.not_taken
    return Sheet(name, text, written.theorems, written.not_taken, whole, searched=True)


def _identifier(text: str) -> str:
    """Return a name of a file that Coq can load, or of a theorem: letters, digits and _.

    Of two instances of a claim the names differ, for the signs of numbers are told.
    """
    signed = text.replace("=-", "=minus_")
    word = re.sub(r"\W+", "_", signed, flags=re.ASCII).strip("_")
    return word if word[:1].isalpha() else f"claim_{word}"


@dataclass
class _Row:
    """One instance: its record, and its certificate if the kernel takes it."""

    key: Key
    record: dict[str, Any]
    identifier: str
    query: str
    definition: str | None = None
    reason: str = ""


@dataclass
class _Writer:
    """Writes the file of one claim."""

    claim: Claim
    folder: Path
    wanted: str | None
    parts: list[str] = field(default_factory=list)

    def write(self, name: str) -> Sheet:
        rule = self.claim.graphs
        family = Family(self.claim, rule) if isinstance(rule, Rule) else None
        self.parts.append(_GRAPHS)
        if family is not None:
            self.parts.append("\n".join(family.define()))
        rows = list(self._rows(family))
        whole = self.wanted is None and bool(rows) and all(row.definition for row in rows)
        existing = [row.key for row in rows if row.record["answer"] == "exists"]
        tabled = whole and family is not None and bool(family.parameters)
        if tabled and family is not None:
            self.parts += [family.define_claimed(existing), family.define_instances()]
        elif whole and family is None:
            graphs = _wrap([row.query for row in rows])
            self.parts.append(f"Definition graphs : list (query Z) :=\n  {graphs}.")
        self.parts.append(_EVIDENCE)
        for row in rows:
            self._define(row)
        if tabled or (whole and family is None):
            self.parts.append(_list_certificates(rows))
        self.parts.append(_THEOREMS)
        theorems = [self._state(row) for row in rows if self._is_stated(row)]
        if tabled and family is not None:
            theorems += self._state_table(family, len(existing))
        elif whole and family is None:
            theorems.append(self._count("graphs", len(existing)))
        self.parts.append(_gather(theorems))
        text = f"{self._comment(rows)}\n{HEAD}\n" + "\n\n".join(self.parts) + "\n"
        not_taken = {name_key(row.key): row.reason for row in rows if row.definition is None}
        return Sheet(name, text, theorems, not_taken, whole)

    @property
    def _by_rule(self) -> bool:
        return isinstance(self.claim.graphs, Rule)

    @property
    def _structure(self) -> str:
        return "cycle" if self.claim.structure == "hamiltonian-cycle" else "path"

    def _comment(self, rows: Sequence[_Row]) -> str:
        """Return the first lines: what is shown here, and what has to be read to believe it."""
        title = write_comment(self.claim.title) or "A claim without a title"
        impossible = sum(row.record["answer"] == "impossible" for row in rows)
        left = sum(row.definition is None for row in rows)
        if self.wanted is not None:
            shown = (
                f"Of this claim the instance {', '.join(name_key(row.key) for row in rows)} alone."
            )
        else:
            shown = (
                f"Without a Hamiltonian {self._structure}: {impossible} of {len(rows)} instances."
            )
        if left:
            shown += f" Without a theorem: {left}."
        lines = "".join(f"\n    - {line}" for line in self._reading())
        return (
            f"(** * {title}\n\n    {shown}\n"
            f"    To be read are the graphs and the theorems below, and of the kernel{lines} *)"
        )

    def _reading(self) -> Iterator[str]:
        """Yield what of the kernel has to be read to know what the theorems say."""
        yield f"Statement.v: what a Hamiltonian {self._structure} is"
        text = "\n".join(self.parts)
        if self._by_rule:
            yield "Rules.v, or in its place RulesSpec.v: what the words of a rule mean"
        for word, line in (
            ('graph6 "', "Graph6.v: which graph a text of graph6 or sparse6 is"),
            (
                "edge_graph ",
                "EdgeGraph.v: edge_graph, of so many vertices 0, 1, ..., and its edges",
            ),
            ("demand (", "EdgeGraph.v: demand, with ends, required and forbidden edges"),
            ("holds (same row)", "Normal.v: holds (same row), for a row of the list"),
            ("  counted (", "Table.v: counted, for how many there are"),
        ):
            if word in text:
                yield line

    def _rows(self, family: Family | None) -> Iterator[_Row]:
        for instance, line in zip(
            instances(self.claim, self.folder), read_evidence(self.folder), strict=True
        ):
            if self.wanted is not None and instance.name != self.wanted.replace(" ", ""):
                continue
            record = json.loads(line)
            word = _identifier(instance.name) if family is not None else instance.name
            if family is None:
                query = f"graph_{instance.key}"
                self.parts.append(define_graph(self.claim, instance))
            else:
                query = family.apply("Q", family.row_of(instance.key)) if family.parameters else "Q"
            row = _Row(instance.key, record, word, query)
            try:
                row.definition = write_certificate(record, self._read_text)
            except NotTakenError as error:
                row.reason = str(error)
            yield row

    def _read_text(self, name: str) -> bytes:
        return gzip.decompress((self.folder / name).read_bytes())

    def _define(self, row: _Row) -> None:
        if row.definition is not None:
            self.parts.append(
                f"Definition certificate_{row.identifier} : certificate :=\n  {row.definition}."
            )

    def _is_stated(self, row: _Row) -> bool:
        """Return whether a row gets a theorem of its own: if impossible, or asked for."""
        alone = self.wanted is not None or (not self.claim.parameters and self._by_rule)
        return row.definition is not None and (row.record["answer"] == "impossible" or alone)

    def _state(self, row: _Row) -> str:
        answer = row.record["answer"]
        name = f"{answer}_{row.identifier}"
        sign = "~ " if answer == "impossible" else ""
        lemma = f"{self._structure}_{answer}"
        query = f"({row.query})" if " " in row.query else row.query
        self.parts.append(
            f"Theorem {name} : {sign}exists h, ham_{self._structure} {query} h.\n"
            f"Proof. apply ({lemma} {query} certificate_{row.identifier}). "
            "vm_cast_no_check (eq_refl true). Qed."
        )
        return name

    def _state_table(self, family: Family, existing: int) -> list[str]:
        variables = family.row(family.parameters)
        conditions = len(self.claim.ranges) + (self.claim.keep is not None)
        names = " ".join(family.parameters)
        object_ = f"exists h, ham_{self._structure} (Q {variables}) h"
        self.parts.append(
            f"Theorem table : forall {names}, {family.conditions().rstrip()}\n"
            f"  (({object_}) <-> claimed {variables} = true).\n"
            f"Proof.\n  intros{' ?' * (len(family.parameters) + conditions)}.\n"
            f"  apply ({self._structure}_table Q claimed instances certificates).\n"
            "  - vm_cast_no_check (eq_refl true).\n  - in_table.\nQed."
        )
        counts = self.claim.answers.counts
        return ["table", *([self._count("(map Q instances)", existing)] if counts else [])]

    def _count(self, queries: str, existing: int) -> str:
        """State of how many queries the object exists."""
        self.parts.append(
            f"Theorem count :\n  counted (fun Q => exists h, ham_{self._structure} Q h) "
            f"{queries} {existing}%nat.\n"
            f"Proof.\n  apply ({self._structure}_count {queries} certificates).\n"
            f"  vm_cast_no_check (eq_refl (Some {existing}%nat)).\nQed."
        )
        return "count"


def _list_certificates(rows: Sequence[_Row]) -> str:
    names = _wrap([f"certificate_{row.identifier}" for row in rows])
    return f"Definition certificates : list certificate :=\n  {names}."


def _gather(theorems: Sequence[str]) -> str:
    """Return the end of the file: what all its theorems together assume."""
    lines = "".join(f"\n  let _ := {theorem} in" for theorem in theorems)
    return (
        "(** What they assume, all together: Coq says so when it has compiled this. *)\n"
        f"Definition all_theorems : True :={lines} I.\n\nPrint Assumptions all_theorems."
    )


def _wrap(words: Sequence[str]) -> str:
    """Return a list of Coq with a few words a line."""
    left = iter(words)
    lines = []
    while line := list(islice(left, 4)):
        lines.append("; ".join(line))
    return "[" + ";\n   ".join(lines) + "]"
