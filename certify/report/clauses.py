"""What is said about clauses: honestly, that it is a proof for machines."""

from __future__ import annotations

import gzip
from collections import Counter
from collections.abc import Callable
from typing import Any

from certify.report.blocks import Block, Paragraph, Rows
from certify.report.words import HOW_TO_CHECK, Words, count_of, join, number

ReadFile = Callable[[str], bytes]

_FACTS = {
    "degree": "degrees (exactly two edges are used at a vertex)",
    "cut": "cuts (some edge leaves a given set of vertices)",
    "required": "required edges",
    "mirror": "symmetries (of all images under them only the first need be excluded)",
}
_FACTS_OF_PATHS = {
    "degree": "degrees (two edges of the path are used at a vertex, or one if it is an end)",
    "cut": "cuts (some edge of the path leaves a given set of vertices, or an end lies in it)",
    "required": "required edges and prescribed ends",
}


def render_clauses(
    words: Words, body: dict[str, Any], read_file: ReadFile | None = None
) -> list[Block]:
    """Return what was proved by clauses, where the proof lies and how to check it.

    read_file: gives the bytes of a file that the record names; None leaves out how many
    facts there are of each type, which only the file says.
    """
    thing = words.thing
    ends = " and every possible end" if words.is_path else ""
    rows = [
        (body["cnf"], f"the facts and their {count_of(body['clauses'], 'clause')} (DIMACS)"),
        (body["lrat"], f"the proof, {count_of(body['steps'], 'step')} (LRAT)"),
        (body["drat"], "the same proof without hints (DRAT), for other proof checkers"),
    ]
    return [
        Paragraph(
            "This was settled by a proof in propositional logic, which a machine can check; it is "
            "no argument to be read. It starts from facts that hold for every Hamiltonian "
            f"{thing} of this graph{_count_facts(words, body, read_file)}. Written as clauses, "
            f"with one variable for every edge{ends}, these facts contradict each other. "
            f"So there is no Hamiltonian {thing}."
        ),
        Paragraph("The files:"),
        Rows(tuple(rows)),
        Paragraph(
            f"To check it: {HOW_TO_CHECK}. Both derive the facts from the graph, compare "
            "the clauses with them, and follow the proof step by step."
        ),
    ]


def _count_facts(words: Words, body: dict[str, Any], read_file: ReadFile | None) -> str:
    """Return how many facts there are of each type, as an aside; "" when unknown."""
    if read_file is None:
        return ""
    found: Counter[str] = Counter()
    for line in gzip.decompress(read_file(body["cnf"])).decode("ascii").splitlines():
        if not line.startswith("c fact "):
            break
        found[line.split()[2]] += 1
    names = _FACTS | _FACTS_OF_PATHS if words.is_path else _FACTS
    return ": " + join(
        [f"{number(found[name])} about {names[name]}" for name in names if found[name]]
    )
