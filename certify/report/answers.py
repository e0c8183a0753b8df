"""The table of an appendix: how every instance is settled, and where it is proved."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass
from typing import Any

from certify.report.document import Grid, Sheet
from certify.report.formula import name_symbol
from certify.report.inline import formula, refer
from certify.report.runs import AnyKey, Run, find_runs, span
from certify.report.statement import ClaimWords

MOST_ACROSS, MOST_DOWN = 18, 40
"""A grid fits on a page up to this size."""

_KINDS = {
    "obstruction": ("an obstruction", "o"),
    "counting": ("weights", "w"),
    "cases": ("cases", "c"),
    "sweep": ("a computation (states)", "s"),
    "clauses": ("a computation (clauses)", "l"),
    "endless": ("repeating states", "e"),
    "none": ("", "?"),
}
_ANSWERS = {"exists": "exists", "impossible": "none", "open": "open"}


@dataclass(frozen=True)
class Shown:
    """An instance of the table, or what follows for ever.

    proposition: its name where it is proved, "" if there is none. said: the answer, "" if
    the record says it.
    """

    key: AnyKey
    record: dict[str, Any]
    proposition: str
    said: str = ""


def show_answers(words: ClaimWords, shown: Sequence[Shown]) -> Grid | Sheet:
    """Return the table of all instances: a grid for two parameters if it fits, else a list of runs.

    shown: all instances, in order.
    """
    if len(words.claim.parameters) == 2:
        grid = _grid(words, shown)
        if grid is not None:
            return grid
    return _sheet(words, shown)


def _tell_kind(words: ClaimWords, kind: str) -> str:
    return f"a {words.thing}" if kind == "witness" else _KINDS[kind][0]


def _sheet(words: ClaimWords, shown: Sequence[Shown]) -> Sheet:
    runs = find_runs(
        [item.key for item in shown],
        lambda i: (shown[i].record["answer"], shown[i].record["kind"]),
    )
    heads = ["k"] if words.is_list else [name_symbol(name) for name in words.claim.parameters]
    rows = []
    for run in runs:
        items = [shown[i] for i in run.places]
        record = items[0].record
        rows.append(
            (
                *_values(run),
                items[0].said or _ANSWERS[record["answer"]],
                _tell_kind(words, record["kind"]),
                span(item.record["length"] for item in items) if record["kind"] != "none" else "",
                _refer(items),
            )
        )
    lengths = explain_lengths(words, [item.record["kind"] for item in shown])
    caption = f"For which {_what(words)} there is a {words.structure}."
    return Sheet(
        f"{caption} The length is {lengths}." if lengths else caption,
        (*map(formula, heads), "answer", "shown by", "length", "proved in"),
        tuple(rows),
    )


def _values(run: Run) -> list[str]:
    if isinstance(run.first, int):
        return [_values_of(run.first, run.last)]
    last = run.last if isinstance(run.last, dict) else {}
    return [_values_of(value, last[name]) for name, value in run.first.items()]


def _values_of(first: object, last: object) -> str:
    if isinstance(first, str):
        low = int(first.removesuffix(".."))
        return formula(rf"{low}, {low + 1}, \dots")
    if isinstance(first, int) and last == first + 1:
        return formula(f"{first}, {last}")
    return formula(str(first) if first == last else rf"{first}, \dots, {last}")


def _refer(items: Sequence[Shown]) -> str:
    names = list(dict.fromkeys(item.proposition for item in items if item.proposition))
    if not names:
        return ""
    if len(names) == 1:
        return f"Prop.\xa0{refer(names[0])}"
    return f"Prop.\xa0{refer(names[0])} to {refer(names[-1])}"


def _what(words: ClaimWords) -> str:
    return "graphs of the list" if words.is_list else "instances"


def explain_lengths(words: ClaimWords, kinds: Collection[str]) -> str:
    """Return what the reading length of evidence of these kinds is; "" if there is none."""
    kinds, parts = set(kinds), []
    if "witness" in kinds:
        parts.append(f"the number of vertices of a {words.thing}")
    if kinds & {"obstruction", "counting", "cases"}:
        parts.append("the number of integers that a reason is written with")
    if kinds & {"sweep", "endless"}:
        parts.append("the number of states of a computation")
    if "clauses" in kinds:
        parts.append("the number of clauses and steps of a computation")
    return ", or ".join(parts)


def _grid(words: ClaimWords, shown: Sequence[Shown]) -> Grid | None:
    one, other = words.claim.parameters
    cells: dict[tuple[int, int], Shown] = {}
    for item in shown:
        if isinstance(item.key, int):
            return None
        x, y = item.key[one], item.key[other]
        if not (isinstance(x, int) and isinstance(y, int)):
            return None
        cells[x, y] = item
    down, across = sorted({x for x, _ in cells}), sorted({y for _, y in cells})
    if len(across) > MOST_ACROSS or len(down) > MOST_DOWN:
        return None
    rows = []
    for x in down:
        marks = tuple(_mark(cells[x, y].record) if (x, y) in cells else "" for y in across)
        rows.append((formula(str(x)), marks))
    corner = formula(rf"{name_symbol(one)} \backslash {name_symbol(other)}")
    heads = tuple(formula(str(y)) for y in across)
    return Grid(_legend(words, shown), corner, heads, tuple(rows))


def _mark(record: dict[str, Any]) -> str:
    return formula("+") if record["kind"] == "witness" else _KINDS[record["kind"]][1]


def _legend(words: ClaimWords, shown: Sequence[Shown]) -> str:
    kinds = {item.record["kind"] for item in shown}
    parts, plus = [], formula("+")
    if "witness" in kinds:
        parts.append(f"where there is one, {plus} is written, and it is listed below")
    told = [_KINDS[kind] for kind in _KINDS if kind in kinds and kind != "none"]
    none = [f"{letter} {said}" for said, letter in told]
    if none:
        parts.append(f"where there is none, a letter says what shows it: {', '.join(none)}")
    if "none" in kinds:
        parts.append("? is written for what is left open")
    return f"For which {_what(words)} there is a {words.structure}. {_capital('; '.join(parts))}."


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]
