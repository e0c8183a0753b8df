"""The names of the rule language, and which of them a rule can see."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from math import gcd

FUNCTIONS: Mapping[str, Callable[..., int]] = {"abs": abs, "gcd": gcd, "max": max, "min": min}
"""The functions that give an integer; the predicates are in their own module."""

CONSTANTS: Mapping[str, bool] = {"true": True, "false": False}
"""Truth values that Python would take for names."""


@dataclass(frozen=True)
class Scope:
    """What a rule may speak of.

    parameters: names of integers that are known for an instance.
    vertices: which of "a" and "b" there are.
    coordinates: their names when a vertex has several; empty when it is one
    integer.
    bare: whether a coordinate of `a` may be written without `a.`.
    """

    parameters: tuple[str, ...] = ()
    vertices: tuple[str, ...] = ()
    coordinates: tuple[str, ...] = ()
    bare: bool = False

    def of_vertex(self, vertex: str) -> tuple[str, ...]:
        """Return how the integers of a vertex are written."""
        return tuple(f"{vertex}.{name}" for name in self.coordinates) or (vertex,)

    @property
    def names(self) -> tuple[str, ...]:
        """Return every way to write an integer of the scope."""
        bare = self.coordinates if self.bare else ()
        written = [name for vertex in self.vertices for name in self.of_vertex(vertex)]
        return (*bare, *written, *self.parameters)
