"""A witness: the object itself, as an order of the vertices."""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar

from certify.evidence.base import Body


@dataclass(frozen=True)
class Witness:
    """The order of the graph's vertices on a Hamiltonian path or cycle."""

    order: tuple[int, ...]
    kind: ClassVar[str] = "witness"

    @property
    def length(self) -> int:
        return len(self.order)

    def body(self) -> Body:
        return {"order": list(self.order)}
