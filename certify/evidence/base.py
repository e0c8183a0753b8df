"""What every kind of evidence has in common.

One module a kind in this folder, one class each: `body()` gives the JSON object
of FORMAT.md, section 6, and `length` the reading length of section 7. All
vertices are vertex numbers of the question (of the graph, for a witness).
Finders make these values; whether they prove anything is for the checker to say.
"""

from __future__ import annotations

from typing import Protocol

Json = int | str | bool | None | list["Json"] | dict[str, "Json"]
Body = dict[str, Json]


class Evidence(Protocol):
    """What every kind of evidence offers."""

    @property
    def kind(self) -> str:
        """Return the name of the kind, as in FORMAT.md."""

    @property
    def length(self) -> int:
        """Return the reading length."""

    def body(self) -> Body:
        """Return the JSON object to be stored."""


def count_integers(value: Json) -> int:
    """Return how many integers a JSON value holds."""
    if isinstance(value, list):
        return sum(count_integers(part) for part in value)
    if isinstance(value, dict):
        return sum(count_integers(part) for part in value.values())
    return int(isinstance(value, int) and not isinstance(value, bool))
