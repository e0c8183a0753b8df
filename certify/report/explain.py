"""The reason for one instance, as a referee would want to read it in a paper."""

from __future__ import annotations

from typing import Any

from certify.errors import InputError
from certify.graph.graph import Graph
from certify.graph.question import Question
from certify.report.blocks import Block, Paragraph
from certify.report.cases import render_cases
from certify.report.classical import name_classical
from certify.report.clauses import ReadFile, render_clauses
from certify.report.counting import render_counting
from certify.report.lasting import Lasting
from certify.report.obstruction import render_obstruction
from certify.report.plain import set_plain
from certify.report.sweep import render_sweep
from certify.report.witness import render_witness
from certify.report.words import Words, capital, plural


def render_reason(
    graph: Graph,
    question: Question,
    record: dict[str, Any],
    read_file: ReadFile | None = None,
    lasting: Lasting | None = None,
) -> str:
    """Return the reason that a record gives, in plain mathematical English.

    graph: the graph of the instance, with the labels that a reader knows. question:
    what the claim asks about it. record: a line of evidence.jsonl, parsed, which the
    checker has accepted. read_file: gives the bytes of a file that the record names; None
    leaves out what only such a file says. lasting: the run of instances with the same
    reason, if there is one.
    Errors: ContradictionError when the evidence does not show what it should.
    Cost: O(n + m) for each set, or node of a tree of cases, in the evidence.
    """
    blocks = explain(graph, question, record, read_file)
    if lasting is not None:
        span = lasting.render()
        blocks[-1:] = [
            Paragraph(_say_lasting(question, record, span)),
            Paragraph(
                f"This speaks of the graphs for {span} alone, under the rule of the claim, "
                "and says nothing about other instances."
            ),
        ]
    return set_plain(blocks)


def explain(
    graph: Graph, question: Question, record: dict[str, Any], read_file: ReadFile | None = None
) -> list[Block]:
    """Return what `render_reason` says, before it is set."""
    instance = _name_instance(record["instance"])
    words = Words(graph, question, instance)
    answer, body = record["answer"], record["evidence"]
    blocks: list[Block] = [Paragraph(_say_answer(words, answer))]
    match record["kind"]:
        case "none":
            return [*blocks, Paragraph(_say_limits(words, answer))]
        case "witness":
            blocks += render_witness(words, body)
        case "obstruction":
            blocks += render_obstruction(words, body)
        case "counting":
            blocks += render_counting(words, body)
        case "cases":
            blocks += render_cases(words, body)
        case "sweep":
            blocks += render_sweep(words, body)
        case "clauses":
            blocks += render_clauses(words, body, read_file)
        case kind:
            raise InputError(
                f"instance {instance}: no explanation is known for evidence of kind {kind!r}"
            )
    return [*blocks, Paragraph(_say_limits(words, answer))]


def _say_lasting(question: Question, record: dict[str, Any], span: str) -> str:
    """Return what of a reason the other instances of its run share, and what not."""
    same = f"The same vertices give the reason for {span}."
    if set(record["evidence"].get("set", [question.n])) <= {question.apex}:
        same = f"The reason is of the same kind for {span}."  # no vertex is removed
    if record["kind"] == "counting":
        same = f"The same weights give the reason for {span}."
        if name_classical(question, record["evidence"]) is not None:
            same = f"This was read from weights, which are the same for {span}."
    return (
        f"{same} What is said here of edges, pieces and numbers is about "
        f"{_name_instance(record['instance'])}, and may be different for the others."
    )


def _name_instance(key: object) -> str:
    """Return "n = 18", "graph 17 of the list", or "" for the only instance."""
    if isinstance(key, dict):
        return ", ".join(f"{name} = {value}" for name, value in key.items())
    return f"graph {key} of the list"


def _say_answer(words: Words, answer: str) -> str:
    graph = words.graph
    size = f"{graph.n} {plural('vertex', graph.n)} and {graph.m} {plural('edge', graph.m)}"
    what = f"Hamiltonian {words.thing}{words.conditions()}"
    if words.instance.startswith("graph "):
        start = f"{capital(words.instance)} ({size})"
    else:
        start = f"{f'For {words.instance} the' if words.instance else 'The'} graph ({size})"
    if answer == "exists":
        return f"{start} has a {what}."
    if answer == "impossible":
        return f"{start} has no {what}."
    place = f"For {words.instance} it" if words.instance else "It"
    return f"{place} is left open whether the graph ({size}) has a {what}."


def _say_limits(words: Words, answer: str) -> str:
    """Return the limits of all that was said, in one sentence."""
    if answer == "open":
        return (
            f"The search ended with neither a {words.thing} nor a reason against one, so nothing "
            "is claimed here."
        )
    if words.instance.startswith("graph "):
        return f"This speaks of {words.instance} alone and says nothing about other graphs."
    if words.instance:
        return (
            f"This speaks of the graph for {words.instance} alone, under the rule of the claim, "
            "and says nothing about other instances."
        )
    return "This speaks of this one graph alone and says nothing about others."
