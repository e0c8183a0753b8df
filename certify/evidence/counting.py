"""A counting argument: weights whose sum a Hamiltonian cycle cannot afford."""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar

from certify.evidence.base import Body, count_integers
from certify.graph.graph import Edge


@dataclass(frozen=True)
class Counting:
    """Weights whose sum a Hamiltonian cycle cannot afford.

    vertex: (v, y) with y != 0, sorted by v. cut: (sorted set, z) with z > 0.
    parity: (sorted set, sorted odd edge set F, z) with z > 0.
    """

    vertex: tuple[tuple[int, int], ...] = ()
    cut: tuple[tuple[tuple[int, ...], int], ...] = ()
    parity: tuple[tuple[tuple[int, ...], tuple[Edge, ...], int], ...] = ()
    kind: ClassVar[str] = "counting"

    @property
    def length(self) -> int:
        return count_integers(self.body())

    def body(self) -> Body:
        return {
            "vertex": [[v, y] for v, y in self.vertex],
            "cut": [[list(s), z] for s, z in self.cut],
            "parity": [[list(s), [list(e) for e in f], z] for s, f, z in self.parity],
        }
