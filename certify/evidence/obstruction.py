"""A direct obstruction: a few vertices that no Hamiltonian cycle can pass."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import ClassVar

from certify.evidence.base import Body, count_integers


@dataclass(frozen=True)
class Obstruction:
    """A direct obstruction; `form` and its further keys as in FORMAT.md."""

    form: str
    details: Mapping[str, int | tuple[int, ...]] = field(default_factory=dict)
    kind: ClassVar[str] = "obstruction"

    @property
    def length(self) -> int:
        return count_integers(self.body())

    def body(self) -> Body:
        body: Body = {"form": self.form}
        for key, value in self.details.items():
            body[key] = value if isinstance(value, int) else list(value)
        return body
