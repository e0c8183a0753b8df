"""Forced moves, retold as clauses of a sentence; only those that matter.

The moves come from the search's own replay (search/forced.py), in the order made. A
move rests on edges decided before it. Reading backwards from what is needed (a
contradiction, or what a later case rests on), the moves that nothing rests on are
left out; moves at the same vertex for the same reason become one clause.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from certify.graph.graph import Edge, edge_between
from certify.report.words import Words, join, plural
from certify.search.forced import Move, Reason

_FEW = 3
"""From so many vertices on, those with two neighbours only are told together."""

Known = dict[Edge, bool]
"""For decided edges: used (True) or unused (False)."""


@dataclass(frozen=True)
class Tale:
    """What is told of some forced moves.

    clauses: one for each group of moves. end: the contradiction, or "". rests_on:
    the edges, decided before these moves, on which the told ones rest.
    """

    clauses: tuple[str, ...]
    end: str
    rests_on: frozenset[Edge]


@dataclass(frozen=True)
class _Group:
    """Moves for one reason at one place, and the decided edges that they rest on."""

    reason: Reason
    vertices: tuple[int, ...]
    rests_on: frozenset[Edge]
    edges: list[Edge]


def tell_moves(
    words: Words,
    before: Known,
    moves: Sequence[Move],
    needed: Iterable[Edge],
    assumed: frozenset[Edge] = frozenset(),
) -> Tale:
    """Return the tale of the moves that the needed edges or the contradiction rest on.

    before: the edges decided before. assumed: those used by the assumption just told,
    which need not be told again as a reason. Cost: O(degree) for each move.
    """
    known = dict(before)
    rests: list[frozenset[Edge]] = []
    for move in moves:
        rests.append(_rests_on(words, known, move))
        if move.edge is not None:
            known[move.edge] = move.reason is Reason.LAST_TWO
    wanted, told = set(needed), []
    for move, rest in zip(reversed(moves), reversed(rests), strict=True):
        if move.edge is None or move.edge in wanted:
            wanted |= rest
            told.append((move, rest))
    groups: dict[tuple[Reason, tuple[int, ...]], _Group] = {}
    end = ""
    for move, rest in reversed(told):
        if move.edge is None:
            end = _tell_contradiction(words, known, move)
        else:
            fresh = _Group(move.reason, move.vertices, rest, [])
            groups.setdefault((move.reason, move.vertices), fresh).edges.append(move.edge)
    plain = [group for group in groups.values() if _has_two_neighbours(words, group)]
    if len(plain) < _FEW:
        plain = []
    clauses = [_tell_two_neighbours(words, plain)] if plain else []
    others = [group for group in groups.values() if group not in plain]
    clauses += [_tell_group(words, group, assumed) for group in others]
    return Tale(tuple(clauses), end, frozenset(e for e in wanted if e in before))


def _edges_at(words: Words, v: int) -> list[Edge]:
    return [edge_between(v, w) for w in words.question.neighbours[v]]


def _rests_on(words: Words, known: Known, move: Move) -> frozenset[Edge]:
    """Return the decided edges that a move rests on."""
    match move.reason:
        case Reason.TOO_FEW | Reason.LAST_TWO:
            at = _edges_at(words, move.vertices[0])
            return frozenset(e for e in at if known.get(e) is False)
        case Reason.TOO_MANY | Reason.FULL:
            at = _edges_at(words, move.vertices[0])
            return frozenset(e for e in at if known.get(e) is True)
        case Reason.SHORTCUT:
            steps = zip(move.vertices, move.vertices[1:], strict=False)
        case Reason.SHORT_CYCLE:
            steps = zip(move.vertices, (*move.vertices[1:], move.vertices[0]), strict=True)
    return frozenset(edge_between(u, v) for u, v in steps)


def _split(words: Words, edges: Iterable[Edge]) -> tuple[list[Edge], list[int]]:
    """Return the edges of the graph, and the vertices that edges at the apex make ends."""
    edges = list(edges)
    return (
        [e for e in edges if e[1] != words.apex],
        [u for u, v in edges if v == words.apex],
    )


def _has_two_neighbours(words: Words, group: _Group) -> bool:
    """Return whether the graph itself has only two edges at an inner vertex."""
    if group.reason is not Reason.LAST_TWO or group.rests_on or group.vertices[0] == words.apex:
        return False
    return words.apex not in words.question.neighbours[group.vertices[0]]


def _tell_two_neighbours(words: Words, groups: Sequence[_Group]) -> str:
    vertices = words.vertices(sorted(group.vertices[0] for group in groups))
    edges = sorted({edge for group in groups for edge in group.edges})
    only = "are no ends and " if words.is_path else ""
    return (
        f"the {vertices} {only}have only two neighbours each, so {words.edge_names(edges)} are used"
    )


def _tell_group(words: Words, group: _Group, assumed: frozenset[Edge]) -> str:
    v = group.vertices[0]
    inner, ends = _split(words, group.edges)
    if group.reason is Reason.SHORTCUT:
        return _tell_shortcut(words, group.vertices)
    if group.reason is Reason.FULL:
        used, used_ends = _split(words, sorted(group.rests_on))
        if v == words.apex:
            others = "no other vertex" if len(ends) > 1 else words.name(ends[0])
            negation = "is" if len(ends) > 1 else "is not"
            return f"{words.names(used_ends)} are the two ends, so {others} {negation} an end"
        unused = []
        if inner:
            unused.append(f"{words.edge_names(inner)} {plural('is', len(inner))} unused")
        if ends:
            unused.append(f"{words.name(v)} is not an end")
        if group.rests_on <= assumed:
            return join(unused)
        if used_ends:
            return (
                f"the path ends at {words.name(v)} with {words.edge_names(used)}, so {join(unused)}"
            )
        return f"{words.edge_names(used)} are used, so {join(unused)}"
    left, left_ends = _split(words, (e for e in _edges_at(words, v) if e not in group.rests_on))
    still = " left" if group.rests_on else ""
    if v == words.apex:
        both = "both are" if len(ends) == 2 else f"{words.name(ends[0])} is"
        return f"only {words.names(left_ends)} can be ends, so {both}"
    if left_ends:
        so = []
        if ends:
            so.append(f"the path ends at {words.name(v)}")
        if inner:
            so.append(f"{words.edge_names(inner)} is used")
        return f"{words.name(v)} has only the edge {words.edge_names(left)}{still}, so {join(so)}"
    both = "both are" if len(inner) == 2 else f"{words.edge_names(inner)} is"
    no_end = ""
    if words.apex is not None:
        no_end = " is not an end and"
    has = f"{words.name(v)}{no_end} has only the edges {words.edge_names(left)}{still}"
    return f"{has}, so {both} used"


def _tell_shortcut(words: Words, vertices: tuple[int, ...]) -> str:
    """Say that an edge would close a used path to a cycle that misses vertices."""
    start, stop = vertices[0], vertices[-1]
    if words.apex not in vertices:
        return (
            f"{words.edge((start, stop))} is unused, because it would close the path "
            f"{words.sequence(vertices)} to a cycle that misses other vertices"
        )
    if words.apex in (start, stop):
        chain = vertices[1:] if start == words.apex else vertices[:-1][::-1]
        return (
            f"{words.name(chain[-1])} is not an end, because then {words.sequence(chain)} would be "
            "the whole path"
        )
    place = vertices.index(words.apex)
    chain = vertices[place + 1 :] + vertices[:place]
    return (
        f"{words.edge((start, stop))} is unused, because then {words.sequence(chain)} would be "
        "the whole path"
    )


def _tell_contradiction(words: Words, known: Known, move: Move) -> str:
    v = move.vertices[0]
    at = _edges_at(words, v) if len(move.vertices) == 1 else []
    match move.reason:
        case Reason.TOO_FEW:
            left, left_ends = _split(words, (e for e in at if known.get(e) is not False))
            if v == words.apex:
                if left_ends:
                    return f"only {words.name(left_ends[0])} can be an end of the path"
                return "no vertex can be an end of the path"
            what = f"only the edge {words.edge_names(left)}" if left else "no edge"
            still = " left" if any(known.get(e) is False for e in at) else ""
            no_end = " and is not an end" if words.is_path and not left_ends else ""
            return f"{words.vertex(v)} has {what}{still}{no_end}"
        case Reason.TOO_MANY:
            used, used_ends = _split(words, (e for e in at if known.get(e) is True))
            if v == words.apex:
                return f"{words.names(used_ends)} would all be ends of the path"
            if used_ends:
                return f"{words.vertex(v)} is an end, but {words.edge_names(used)} are both used"
            return f"three edges are used at {words.vertex(v)}, namely {words.edge_names(used)}"
        case _:
            ring = move.vertices
            if words.apex in ring:
                place = ring.index(words.apex)
                chain = ring[place + 1 :] + ring[:place]
                return (
                    f"the path {words.sequence(chain)} is complete from end to end, and misses the "
                    "other vertices"
                )
            closed = words.sequence([*ring, ring[0]])
            return f"the used edges close the cycle {closed}, which misses other vertices"
