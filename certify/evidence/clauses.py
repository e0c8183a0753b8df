"""Facts as clauses, and a proof that they contradict each other."""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar

from certify.evidence.base import Body


@dataclass(frozen=True)
class Clauses:
    """Facts as clauses, and a proof that they contradict each other.

    cnf, lrat, drat: the texts of the three files, ASCII. The store gives them
    their names.
    """

    clauses: int
    steps: int
    cnf: bytes
    lrat: bytes
    drat: bytes
    kind: ClassVar[str] = "clauses"

    @property
    def length(self) -> int:
        return self.clauses + self.steps

    def body(self) -> Body:
        return {"clauses": self.clauses, "steps": self.steps}
