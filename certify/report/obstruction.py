"""What is said about a direct obstruction, by the name the literature gives it.

The argument is the one of the form (FORMAT.md, section 6) turned into a statement
on the graph asked about: "the path falls into at most so many parts", "there is
room for at most so many vertices". The numbers are recomputed (structure.py).
"""

from __future__ import annotations

from itertools import pairwise
from typing import Any

from certify.graph.graph import Edge, edge_between
from certify.report.blocks import Block, Paragraph
from certify.report.room import render_independence, render_separation
from certify.report.structure import (
    inner_neighbours,
    is_end,
    is_forced,
    measure_independent,
    possible_ends,
    separate,
)
from certify.report.words import Words, capital, count_of


def render_obstruction(words: Words, body: dict[str, Any]) -> list[Block]:
    """Return why the obstruction leaves no Hamiltonian path or cycle.

    Errors: ContradictionError when the obstruction is none.
    """
    match body["form"]:
        case "absent":
            return _absent(words)
        case "small":
            return _small(words)
        case "leaf":
            return _leaf(words, body["vertex"])
        case "crowded":
            return _crowded(words, body["vertex"], body["neighbours"])
        case "ring":
            return _ring(words, body["vertices"])
        case "separator":
            return render_separation(words, separate(words.question, body["set"]))
        case "independent":
            return render_independence(words, measure_independent(words.question, body["set"]))
        case form:
            raise words.fail(f"there is no form {form!r}")


def _absent(words: Words) -> list[Block]:
    named = "an end or a required edge" if words.is_path else "a required edge"
    return [
        Paragraph(f"The claim names {named} that this graph does not have or that is forbidden.")
    ]


def _small(words: Words) -> list[Block]:
    if words.is_path:
        return [Paragraph("The graph has no vertices.")]
    return [
        Paragraph(
            f"The graph has {count_of(words.order, 'vertex')}; a cycle has at least three vertices."
        )
    ]


def _leaf(words: Words, v: int) -> list[Block]:
    question = words.question
    if len(question.neighbours[v]) > 1:
        raise words.fail("the vertex has two edges")
    if v == words.apex:
        ends = possible_ends(question)
        if not ends:
            return [Paragraph("No vertex may be an end of the path, but a path has two ends.")]
        return [
            Paragraph(
                f"Only {words.vertex(ends[0])} may be an end of the path, but a path on more than "
                "one vertex has two different ends."
            )
        ]
    near = inner_neighbours(question, v)
    has = f"has {words.neighbours_left(near)}"
    if not words.is_path:
        return [
            Paragraph(
                f"{capital(words.vertex(v))} {has}, but a Hamiltonian cycle passes through it and "
                "needs two."
            )
        ]
    if is_end(question, v):
        return [
            Paragraph(
                f"{capital(words.vertex(v))} {has}, so a path on more than one vertex does not "
                "reach it."
            )
        ]
    return [
        Paragraph(
            f"{capital(words.vertex(v))} cannot be an end of the path, so the path needs two edges "
            f"there; but it {has}."
        )
    ]


def _crowded(words: Words, v: int, three: list[int]) -> list[Block]:
    _need_forced(words, [(v, w) for w in three])
    if v == words.apex:
        return _crowded_ends(words, three)
    inner = [w for w in three if w != words.apex]
    name = words.vertex(v)
    if len(inner) == 3:
        reasons = "; ".join(_why_used(words, v, w) for w in inner)
        used = words.edge_names([(v, w) for w in inner])
        return [
            Paragraph(
                f"Every Hamiltonian {words.thing} uses the three edges {used} at {name}: "
                f"{reasons}. But a {words.thing} has at most two edges at a vertex."
            )
        ]
    reasons = "; ".join(_why_used(words, v, w) for w in inner)
    return [
        Paragraph(
            f"{capital(_why_end(words, v))}, so the path has only one edge there. But it must use "
            f"both {words.edge_names([(v, w) for w in inner])}: {reasons}."
        )
    ]


def _crowded_ends(words: Words, three: list[int]) -> list[Block]:
    """Say that three vertices would have to be ends."""
    forced = [v for v in three if (v, words.apex) not in words.question.required]
    if len(forced) == 3 and all(len(inner_neighbours(words.question, v)) == 1 for v in three):
        edges = sorted({edge_between(v, inner_neighbours(words.question, v)[0]) for v in three})
        return [
            Paragraph(
                f"The {words.vertices(three)} have only one neighbour{words.left} each; the edges "
                f"there are {words.edge_names(edges)}. So each of the three would be an end of a "
                "Hamiltonian path, but a path has only two ends."
            )
        ]
    reasons = "; ".join(_why_end(words, v) for v in three)
    return [Paragraph(f"{capital(reasons)}. But a path has only two ends.")]


def _ring(words: Words, ring: list[int]) -> list[Block]:
    _need_forced(words, list(zip(ring, [*ring[1:], ring[0]], strict=True)))
    if not 3 <= len(ring) < words.question.n:
        raise words.fail("the ring is no shorter cycle")
    if words.apex in ring:
        place = ring.index(words.apex)
        chain = ring[place + 1 :] + ring[:place]
        steps = list(pairwise(chain))
        reasons = [_why_end(words, v) for v in (chain[0], chain[-1])]
        reasons += [_why_used(words, u, v) for u, v in steps]
        return [
            Paragraph(f"Some parts of the path are forced: {'; '.join(reasons)}."),
            Paragraph(
                f"So the path would run {words.sequence(chain)} from one end to the other, and "
                f"miss the other {count_of(words.order - len(chain), 'vertex')}."
            ),
        ]
    steps = list(zip(ring, [*ring[1:], ring[0]], strict=True))
    reasons = [_why_used(words, u, v) for u, v in steps]
    miss = (
        "which a path does not contain"
        if words.is_path
        else f"and miss the other {count_of(words.order - len(ring), 'vertex')}"
    )
    return [
        Paragraph(f"Some edges are forced: {'; '.join(reasons)}."),
        Paragraph(f"These edges close the cycle {words.sequence([*ring, ring[0]])}, {miss}."),
    ]


def _need_forced(words: Words, pairs: list[Edge]) -> None:
    if not all(is_forced(words.question, u, v) for u, v in pairs):
        raise words.fail("an edge is not forced")


def _why_end(words: Words, v: int) -> str:
    """Return why the path ends at v: the edge between v and the apex is forced."""
    question = words.question
    if (v, words.apex) in question.required:
        how = "is an end of the path" if words.in_case else "is a prescribed end of the path"
        return f"{words.vertex(v)} {how}"
    near = inner_neighbours(question, v)
    if len(near) == 1:
        return f"{words.vertex(v)} has {words.neighbours_left(near)}, so it is an end of the path"
    return f"only {words.names(possible_ends(question))} may be ends, so {words.vertex(v)} is one"


def _why_used(words: Words, v: int, w: int) -> str:
    """Return why the edge {v, w} of the graph is used, as a clause that names the edge."""
    question = words.question
    edge = words.edge((v, w))
    if edge_between(v, w) in question.required:
        return f"{edge} is {words.demanded}"
    at = w if len(question.neighbours[w]) == 2 else v
    near = inner_neighbours(question, at)
    no_end = " and cannot be an end of the path" if words.is_path and len(near) == 2 else ""
    return f"{edge}, because {words.name(at)} has {words.neighbours_left(near)}{no_end}"
