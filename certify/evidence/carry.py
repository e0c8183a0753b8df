"""Carrying a reason over from one instance to the next.

In a family where the graphs grow, one set or one choice of weights often refutes
several graphs in a row. A reason is carried over by the names of its vertices;
whether it holds there too is for the checker to say.
"""

from __future__ import annotations

from typing import Any

from certify.evidence.base import Evidence
from certify.evidence.counting import Counting
from certify.evidence.obstruction import Obstruction
from certify.graph.graph import Graph, edge_between

CARRIED = frozenset({"counting", "obstruction"})
"""The kinds that are carried over."""


class _GoneError(Exception):
    """A vertex of the reason is not in the other graph."""


def carry_over(kind: str, body: dict[str, Any], source: Graph, target: Graph) -> Evidence | None:
    """Return the same reason for another graph: the same vertices by name, the same weights.

    kind, body: as stored for `source`. The apex of a path question goes to the apex.
    None: the reason is of a kind that is not carried over, or a vertex is not there.
    Cost: O(n) and the size of the body.
    """
    number = {label: v for v, label in enumerate(target.labels)}

    def moved(v: int) -> int:
        if v == source.n:
            return target.n
        label = source.labels[v]
        if label not in number:
            raise _GoneError
        return number[label]

    def moved_set(vertices: list[int]) -> tuple[int, ...]:
        return tuple(sorted(map(moved, vertices)))

    try:
        if kind == "counting":
            return Counting(
                tuple(sorted((moved(v), y) for v, y in body["vertex"])),
                tuple((moved_set(s), z) for s, z in body["cut"]),
                tuple(
                    (moved_set(s), tuple(sorted(edge_between(*map(moved, e)) for e in f)), z)
                    for s, f, z in body["parity"]
                ),
            )
        if kind == "obstruction" and len(body) > 1:
            details: dict[str, int | tuple[int, ...]] = {}
            for key, value in body.items():
                if isinstance(value, int):
                    details[key] = moved(value)
                elif key == "vertices":  # a ring, in its order
                    details[key] = tuple(map(moved, value))
                elif key != "form":
                    details[key] = moved_set(value)
            return Obstruction(body["form"], details)
    except _GoneError:
        return None
    return None
