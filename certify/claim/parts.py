"""The parts of a claim: what it can be about, where its graphs come from, what it says."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from certify.claim.instances import Range
from certify.claim.language import Expression

FORMATS: Mapping[str, tuple[str, ...]] = {
    "graph6": (".g6",),
    "sparse6": (".s6",),
    "dimacs": (".col", ".dimacs"),
    "graphml": (".graphml",),
    "edges": (".edges", ".txt"),
}
"""The formats of lists of graphs, and the endings by which files of each are known."""

STRUCTURES: Mapping[str, tuple[str, ...]] = {
    "hamiltonian-path": ("ends",),
    "hamiltonian-cycle": (),
}
"""The structures a claim can be about, and the keys that only some of them have."""

Vertex = str | tuple[Expression | int, ...]
"""A vertex as a claim names it: its name in a list, or its coordinates by a rule."""


@dataclass(frozen=True)
class Rule:
    """A graph for each instance, given by a rule.

    coordinates: their names, empty when a vertex is one integer; ranges: one for
    each coordinate (one in all when there are no names).
    """

    coordinates: tuple[str, ...]
    ranges: tuple[Range, ...]
    adjacent: Expression
    keep: Expression | None


@dataclass(frozen=True)
class GraphList:
    """A graph for each instance, from a file; format None: its ending decides."""

    name: str
    format: str | None


@dataclass(frozen=True)
class Answers:
    """What is claimed. Either `truth` or `counts` says something, or neither.

    truth: whether the object exists (is impossible, if `inverted`) for an
    instance; None when this is not claimed.
    counts: for "exists" and "impossible", in how many instances.
    """

    truth: Expression | bool | None = None
    inverted: bool = False
    counts: dict[str, int] = field(default_factory=dict)
