"""A sweep: an order of the vertices along which no state survives."""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar

from certify.evidence.base import Body


@dataclass(frozen=True)
class Sweep:
    """An order of the vertices along which no state survives."""

    order: tuple[int, ...]
    states: tuple[int, ...]
    digest: str
    kind: ClassVar[str] = "sweep"

    @property
    def length(self) -> int:
        return sum(self.states)

    def body(self) -> Body:
        return {"order": list(self.order), "states": list(self.states), "digest": self.digest}
