"""How much time a finder may take.

A *budget* is a deadline on the monotonic clock. Finders look at it between
pieces of work and give up (return None) when it is spent: a limit that is
reached gives `open`, never an answer.
"""

from __future__ import annotations

import time
from dataclasses import dataclass


@dataclass(frozen=True)
class Budget:
    """A deadline, in seconds of the monotonic clock."""

    deadline: float

    @classmethod
    def of(cls, seconds: float) -> Budget:
        """Return a budget that ends `seconds` from now."""
        return cls(time.monotonic() + seconds)

    @property
    def left(self) -> float:
        """Return the seconds left, 0 when spent."""
        return max(0.0, self.deadline - time.monotonic())

    @property
    def spent(self) -> bool:
        """Return whether nothing is left."""
        return time.monotonic() >= self.deadline

    def share(self, fraction: float, *, at_most: float = float("inf")) -> Budget:
        """Return a budget of a fraction of what is left, `at_most` seconds long."""
        return Budget.of(min(self.left * fraction, at_most))
