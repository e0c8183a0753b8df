"""The last section of an appendix: what was checked, how to check it, what is not claimed."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from importlib.metadata import PackageNotFoundError, version

from certify.checker import FolderCheck
from certify.evidence.lines import PACKED, PLAIN
from certify.report.blocks import Paragraph, Rows, mark
from certify.report.cases import MOST_NODES
from certify.report.document import Heading, Part
from certify.report.formula import name_symbol
from certify.report.inline import formula, refer
from certify.report.items import Family, Item
from certify.report.statement import ClaimWords
from certify.report.words import HOW_TO_CHECK, count_of, plural

COMPUTATIONS = ("sweep", "clauses")
"""Kinds of evidence that are for machines, of one instance."""


def say_limits(
    words: ClaimWords,
    check: FolderCheck,
    digests: Mapping[str, str],
    items: Sequence[Item],
    families: Sequence[Family],
) -> list[Part]:
    """Return the section.

    check: of the folder, finished. digests: SHA-256, by the names of the files.
    families: the rows of an endless claim; items are then their small instances.
    """
    claim = words.claim
    said = [
        "The evidence for all of this is in files. When this text was made, the checker of "
        f"certify{_version()} read them, {_say_accepted(check, families)}. It shares nothing "
        "with the program that searched, and believes nothing but the files.",
        *_say_machine(items, families),
    ]
    given = [check.claim_name, *([claim.list_name] if claim.list_name else [])]
    files = given + [name for name in (PLAIN, PACKED) if name in digests]
    rows = tuple((mark(f"`{name}`"), mark(f"`{digests[name]}`")) for name in files)
    return [
        Heading("What was checked, and what is not claimed", 2),
        Paragraph(" ".join(said)),
        Paragraph(f"To check it again: {HOW_TO_CHECK}, where FOLDER holds these files:"),
        Rows(rows),
        Paragraph(
            "(The digests are SHA-256.) What is proved is a statement about the graphs of "
            f"Definition {refer('graphs')} and about {_say_range(words, items, families)} alone. "
            "It says nothing about other graphs, and whether the definition says what the paper "
            "means is for its readers to judge."
        ),
    ]


def _say_accepted(check: FolderCheck, families: Sequence[Family]) -> str:
    fine = check.answers.total()
    left = f"{check.left_open} {plural('is', check.left_open)} open"
    if not families:
        counts = f"{check.answers['exists']} exist, {check.answers['impossible']} impossible"
        open_too = f"; {left}" if check.left_open else ""
        total = fine + check.left_open
        return (
            "rebuilt every graph from its definition, and accepted "
            f"{fine} of {total} {plural('instance', total)} ({counts}{open_too})"
        )
    start = (
        "derived from the definition how the graphs grow, rebuilt the small graphs, made the sets "
        "of states again, and accepted "
    )
    if len(families) == 1:
        return f"{start}the evidence" if fine else "and found the claim open"
    return f"{start}{fine} of {len(families)} families{f' ({left})' if check.left_open else ''}"


def _say_machine(items: Sequence[Item], families: Sequence[Family]) -> list[str]:
    """Return for what the proof is a computation, in a sentence or none."""
    machine = sum(map(_is_for_machines, items))
    others = sum(item.record["answer"] == "impossible" for item in items) - machine
    settled = [family for family in families if not family.is_open]
    parts = [count_of(machine, "instance")] if machine else []
    if settled:
        small = f" and for {count_of(machine, 'small instance')}" if machine else ""
        parts = [f"the large graphs{small}"]
    if not parts:
        return []
    printed = "; the other proofs are printed above in full" if others else ""
    return [f"For {parts[0]} the proof is a computation that only a machine repeats{printed}."]


def _say_range(words: ClaimWords, items: Sequence[Item], families: Sequence[Family]) -> str:
    if families:
        return f"the values of {_parameters(words)} in the table"
    if words.is_list:
        return f"the {len(items)} graphs of the file" if len(items) > 1 else "the graph of the file"
    if not words.claim.parameters:
        return "this one graph"
    return f"the {len(items)} {plural('instance', len(items))} of the table"


def _parameters(words: ClaimWords) -> str:
    return formula(", ".join(map(name_symbol, words.claim.parameters)))


def _is_for_machines(item: Item) -> bool:
    """Return whether the proof is not printed: a computation, or too many cases."""
    kind, body = item.record["kind"], item.record["evidence"]
    return kind in COMPUTATIONS or (kind == "cases" and len(body["nodes"]) > MOST_NODES)


def _version() -> str:
    """Return the version as it is told, "" when the package is not installed."""
    try:
        return f" (version {version('certify')})"
    except PackageNotFoundError:
        return ""
