"""The claim: what is said about which graphs.

A claim file (FORMAT.md, section 2) names a structure, a rule or a list of
graphs, the instances, and possibly the answers. Reading it finds every error
that can be found without a graph; what is left over here unevaluated, the
vertices named by `ends`, `required` and `forbidden`, is for `certify.graph`.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from certify.claim import keys
from certify.claim.hints import shown
from certify.claim.instances import Key as Key
from certify.claim.instances import (
    Range,
    Row,
    check_integer,
    find_rows,
    in_instance,
    read_range,
)
from certify.claim.instances import name_key as name_key
from certify.claim.language import INTEGER, TRUTH, Expression, check_name, read_expression
from certify.claim.names import Scope
from certify.claim.parts import FORMATS, STRUCTURES, Answers, GraphList, Rule, Vertex
from certify.claim.toml import Document, read_document
from certify.errors import ClaimError

MAX_NAMES = 20
"""How many parameters, and how many coordinates, there may be."""


@dataclass(frozen=True, eq=False)
class Claim:
    """A claim file that was read.

    name, raw: the file's name and its bytes. where: the file as messages name it.
    title, statement: for readers, empty when they are left out.
    ranges, keep: one range a parameter, and which rows are instances (None: all).
    rows: the values of the parameters, one row an instance; of no meaning for a
    list of graphs. growing: the parameter of an endless claim that has no last value,
    of which the rows hold the first one; None for other claims.
    """

    name: str
    raw: bytes
    where: str
    title: str
    statement: str
    structure: str
    graphs: Rule | GraphList
    ends: tuple[Vertex, ...]
    required: tuple[tuple[Vertex, Vertex], ...]
    forbidden: tuple[tuple[Vertex, Vertex], ...]
    parameters: tuple[str, ...]
    ranges: tuple[Range, ...]
    keep: Expression | None
    rows: tuple[Row, ...]
    answers: Answers
    growing: str | None = None

    @property
    def list_name(self) -> str | None:
        """Return the name of the list of graphs, None for a rule."""
        return self.graphs.name if isinstance(self.graphs, GraphList) else None

    @property
    def counts(self) -> dict[str, int]:
        """Return in how many instances the object is claimed to exist, or to be impossible.

        Only what is claimed as a count: a dictionary with none, one or both of
        "exists" and "impossible".
        """
        return dict(self.answers.counts)

    def instance_keys(self) -> Iterator[dict[str, int]]:
        """Yield the key of each instance of a rule, in order; nothing for a list.

        Of an endless claim, whose instances module `endless` knows, those of the first
        value of the growing parameter.
        """
        if isinstance(self.graphs, Rule):
            for row in self.rows:
                yield dict(zip(self.parameters, row, strict=True))

    def row(self, key: Key) -> Row:
        """Return the values of the parameters in the order of the claim; empty for a list."""
        return () if isinstance(key, int) else tuple(key[name] for name in self.parameters)

    def claimed(self, key: Key) -> bool | None:
        """Return whether the object is claimed to exist in this instance.

        None: the claim does not say it of single instances.
        """
        truth = self.answers.truth
        if truth is None:
            return None
        value = truth if isinstance(truth, bool) else bool(truth.evaluate(self.row(key)))
        return value != self.answers.inverted

    def check_counts(self, answers: Iterable[str]) -> str | None:
        """Return how the answers of all instances differ from the counts claimed, if they do.

        Those that are open differ only if no way to settle them would make the counts right.
        """
        counts, found = self.answers.counts, Counter(answers)
        wrong = [
            f"{answer} in {count:,} instances is claimed, and found is {found[answer]:,}"
            for answer, count in counts.items()
            if not found[answer] <= count <= found[answer] + found["open"]
        ]
        total = sum(counts.values())
        if not wrong and len(counts) == 2 and total != found.total():
            wrong = [f"{total:,} instances are claimed in all, and there are {found.total():,}"]
        return "; ".join(wrong) or None


def count_instances(claim: Claim) -> int | None:
    """Return the number of instances; None for a list, which has to be read to know."""
    return len(claim.rows) if isinstance(claim.graphs, Rule) else None


def read_claim(path: Path) -> Claim:
    """Read a claim file.

    Errors: ClaimError, with the file, the line, the key and what is wrong there.
    Cost: linear in the file and in the number of instances.
    """
    return build_claim(read_document(path), path.name)


def build_claim(document: Document, name: str) -> Claim:
    """Build the claim of a document; name: of its file. Errors: as `read_claim`."""
    keys.check_keys(document)
    return _Reader(document).claim(name)


class _Reader:
    """Reads the parts of a claim; every method raises ClaimError."""

    def __init__(self, document: Document) -> None:
        self.document = document
        self.top = document.data
        self.graph = keys.table(document, "graph")
        self.instances = keys.table(document, "instances")
        self.answers = keys.table(document, "answers")
        self.parameters = tuple(name for name in self.instances if name != "where")
        self.coordinates: tuple[str, ...] = ()
        self.ranges: tuple[Range, ...] = ()
        self.keep: Expression | None = None
        self.growing: str | None = None

    def fault(self, key: str, problem: str) -> ClaimError:
        """Return the error for a problem with a key, written `table.key` in a table."""
        return ClaimError(f"{self.document.where(*key.split('.'))}: {problem}")

    def claim(self, name: str) -> Claim:
        structure = self._structure()
        rows = self._rows()
        graphs = self._graphs()
        claim = Claim(
            name=name,
            raw=self.document.raw,
            where=self.document.shown,
            title=keys.text(self.document, self.top.get("title", ""), "title"),
            statement=keys.text(self.document, self.top.get("statement", ""), "statement"),
            structure=structure,
            graphs=graphs,
            ends=self._ends(),
            required=self._edges("required"),
            forbidden=self._edges("forbidden"),
            parameters=self.parameters,
            ranges=self.ranges,
            keep=self.keep,
            rows=rows,
            answers=self._answers(),
            growing=self.growing,
        )
        for key in claim.instance_keys():
            try:
                claim.claimed(key)
            except ClaimError as error:
                raise in_instance(error, key) from None
        return claim

    def _structure(self) -> str:
        if "structure" not in self.top:
            raise ClaimError(
                f"{self.document.shown}: the key structure is missing; write "
                + " or ".join(f'structure = "{name}"' for name in STRUCTURES)
            )
        structure = keys.one_of(self.document, self.top["structure"], STRUCTURES, "structure")
        for name, own in STRUCTURES.items():
            for key in own:
                if key in self.top and key not in STRUCTURES[structure]:
                    raise self.fault(key, f'only structure = "{name}" has {key}')
        return structure

    def _rows(self) -> tuple[Row, ...]:
        if "list" in self.graph and "instances" in self.top:
            raise self.fault(
                "instances", "a list of graphs has no parameters; leave [instances] out"
            )
        if "instances" not in self.top:
            return ((),)
        if not self.parameters:
            raise self.fault("instances", "no parameter is named here; leave [instances] out")
        self._check_names(self.parameters, "instances")
        ranges = []
        for k, name in enumerate(self.parameters):
            where = self.document.where("instances", name)
            try:
                range_ = read_range(self.instances[name], self.parameters[:k], where, may_grow=True)
            except ClaimError as error:
                raise ClaimError(f"{error}{keys.belongs(name)}") from None
            ranges.append(range_)
            self._check_growth(name, range_)
        self.ranges = tuple(ranges)
        if "where" in self.instances:
            self.keep = self._truth(
                self.instances["where"], Scope(self.parameters), "instances", "where"
            )
            self._check_steady("instances.where", self.keep)
        return find_rows(self.parameters, ranges, self.keep, self.document.where("instances"))

    def _check_growth(self, name: str, range_: Range) -> None:
        """Take a parameter without a last value for the growing one, if nothing forbids it."""
        for bound in (range_.low, range_.high):
            if isinstance(bound, Expression):
                self._check_steady(f"instances.{name}", bound)
        if not range_.endless:
            return
        path = f"instances.{name}"
        if self.growing is not None:
            raise self.fault(
                path, f"only one parameter may be endless, and {self.growing} is; give an upper end"
            )
        self.growing = name
        for key in ("ends", "required", "forbidden"):
            if key in self.top:
                raise self.fault(key, f"an endless claim has no {key}; give {name} an upper end")

    def _check_steady(self, path: str, rule: Expression) -> None:
        if self.growing is not None and rule.mentions(self.growing):
            raise self.fault(
                path, f"{self.growing} is endless, so nothing else under [instances] may name it"
            )

    def _check_names(self, names: Sequence[str], path: str) -> None:
        if len(names) > MAX_NAMES:
            raise self.fault(path, f"{len(names)} names are too many; at most {MAX_NAMES}")
        for name in names:
            check_name(name, self.document.where(*path.split("."), name))

    def _truth(self, value: object, scope: Scope, *path: str) -> Expression:
        text = keys.text(self.document, value, *path)
        where = self.document.where(*path)
        return read_expression(text, sort=TRUTH, scope=scope, where=where)

    def _graphs(self) -> Rule | GraphList:
        if "graph" not in self.top:
            raise ClaimError(
                f"{self.document.shown}: the table [graph] is missing; it holds vertices and "
                "adjacent, or list"
            )
        if "list" in self.graph:
            return self._list()
        for key in ("vertices", "adjacent"):
            if key not in self.graph:
                raise self.fault("graph", f"the key {key} is missing (or list, for a file)")
        if "format" in self.graph:
            raise self.fault("graph.format", "a format is for a list of graphs; there is none")
        ranges = self._vertices(self.graph["vertices"])
        names = self.parameters
        both = Scope(names, ("a", "b"), self.coordinates)
        adjacent = self._truth(self.graph["adjacent"], both, "graph", "adjacent")
        keep = None
        if "where" in self.graph:
            one = Scope(names, ("a",), self.coordinates, bare=True)
            keep = self._truth(self.graph["where"], one, "graph", "where")
        return Rule(self.coordinates, ranges, adjacent, keep)

    def _vertices(self, value: object) -> tuple[Range, ...]:
        path = "graph.vertices"
        where = self.document.where("graph", "vertices")
        if not isinstance(value, dict):
            return (read_range(value, self.parameters, where),)
        if len(value) < 2:
            raise self.fault(path, 'one coordinate needs no name; write vertices = "1..n"')
        self._check_names(list(value), path)
        for name in value:
            if name in self.parameters:
                raise self.fault(path, f'"{name}" is a parameter and a coordinate; rename one')
        self.coordinates = tuple(value)
        return tuple(
            read_range(part, self.parameters, self.document.where("graph", "vertices", name))
            for name, part in value.items()
        )

    def _list(self) -> GraphList:
        for key in self.graph:
            if key not in ("list", "format"):
                raise self.fault(f"graph.{key}", f"with list there is no {key}; choose one of them")
        name = keys.file_name(self.document, self.graph["list"], "graph", "list")
        if "format" not in self.graph:
            return GraphList(name, None)
        value = self.graph["format"]
        return GraphList(name, keys.one_of(self.document, value, FORMATS, "graph", "format"))

    def _ends(self) -> tuple[Vertex, ...]:
        if "ends" not in self.top:
            return ()
        value = self.top["ends"]
        if not isinstance(value, list) or len(value) not in (1, 2):
            raise self.fault(
                "ends", f"a list of one or two vertices is needed, and this is {shown(value)}"
            )
        return tuple(self._vertex(part, f"vertex {k}", "ends") for k, part in enumerate(value, 1))

    def _edges(self, key: str) -> tuple[tuple[Vertex, Vertex], ...]:
        value = self.top.get(key, [])
        if not isinstance(value, list):
            raise self.fault(key, f"a list of edges is needed, and this is {shown(value)}")
        edges = []
        for k, edge in enumerate(value, 1):
            if not isinstance(edge, list) or len(edge) != 2:
                raise self.fault(
                    key, f"edge {k}: a list of two vertices is needed, and this is {shown(edge)}"
                )
            u, v = (self._vertex(part, f"edge {k}", key) for part in edge)
            edges.append((u, v))
        return tuple(edges)

    def _vertex(self, value: Any, place: str, key: str) -> Vertex:
        """Read a vertex that the claim names."""
        where = f"{self.document.where(key)}: {place}"
        integer = isinstance(value, int) and not isinstance(value, bool)
        if "list" in self.graph:
            if not isinstance(value, str) and not integer:
                raise ClaimError(f"{where}: a vertex's name is needed, and this is {shown(value)}")
            return str(check_integer(value, where)) if integer else str(value)
        if not self.coordinates:
            return (self._coordinate(value, where),)
        size = len(self.coordinates)
        if not isinstance(value, list) or len(value) != size:
            names = ", ".join(self.coordinates)
            raise ClaimError(
                f"{where}: a vertex is a list of {size} coordinates [{names}], "
                f"and this is {shown(value)}"
            )
        return tuple(self._coordinate(part, where) for part in value)

    def _coordinate(self, value: Any, where: str) -> Expression | int:
        if isinstance(value, str):
            scope = Scope(self.parameters)
            return read_expression(value, sort=INTEGER, scope=scope, where=where)
        if isinstance(value, bool) or not isinstance(value, int):
            raise ClaimError(
                f"{where}: an integer is needed, or an expression in quotes, "
                f"and this is {shown(value)}"
            )
        return check_integer(value, where)

    def _answers(self) -> Answers:
        counts: dict[str, int] = {}
        truth: Expression | bool | None = None
        for key, value in self.answers.items():
            if isinstance(value, int) and not isinstance(value, bool):
                if self.growing is not None:
                    raise self.fault(
                        f"answers.{key}",
                        "an endless claim has endlessly many answers, and no count of them; "
                        f"write an expression in {self.growing}, true or false",
                    )
                if value < 0:
                    raise self.fault(f"answers.{key}", f"{shown(value)} is not a count")
                counts[key] = check_integer(value, self.document.where("answers", key))
                continue
            if len(self.answers) > 1:
                raise self.fault(
                    f"answers.{key}",
                    "exists and impossible together are two counts; "
                    "an expression or a truth value stands alone",
                )
            if isinstance(value, bool):
                truth = value
            elif "list" in self.graph:
                raise self.fault(
                    f"answers.{key}",
                    "a list of graphs has no parameters; write a count, true or false",
                )
            else:
                truth = self._truth(value, Scope(self.parameters), "answers", key)
        return Answers(truth, "impossible" in self.answers, counts)
