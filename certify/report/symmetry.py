"""How a symmetry of the question is told to a reader."""

from __future__ import annotations

from collections.abc import Sequence

from certify.report.words import Words

_MOST_MOVED = 60


def tell_symmetry(words: Words, p: Sequence[int]) -> str:
    """Return a permutation of the vertices in cycle notation: "(1 4)(2 5 3)".

    A symmetry of a path question can move the apex, when some vertex v is joined to all
    others; then it turns the edges at v into ends and ends into edges, and is told so.
    """
    apex = words.apex
    if apex is None or p[apex] == apex:
        cycles = _write_cycles(words, p)
        if not cycles:
            return "that moves nothing"
        return f"{cycles} of the graph"
    into, source = p[apex], p.index(apex)
    moves = [
        f"{words.name(v)} to {words.name(p[v])}"
        for v in range(words.order)
        if v != source and p[v] != v
    ]
    listed = f" that takes {', '.join(moves)}" if moves else ""
    return (
        f"between Hamiltonian paths{listed}, makes the neighbours of {words.name(source)} on the "
        f"path (their images) the new ends, and joins the images of the old ends to "
        f"{words.name(into)},"
    )


def _write_cycles(words: Words, p: Sequence[int]) -> str:
    seen: set[int] = set()
    cycles = []
    for start in range(len(p)):
        if start in seen or p[start] == start:
            continue
        cycle, v = [start], p[start]
        seen.add(start)
        while v != start:
            cycle.append(v)
            seen.add(v)
            v = p[v]
        cycles.append(f"({' '.join(words.name(v) for v in cycle)})")
    return " ".join(cycles)
