"""What is read from the rows: ratios, undecided instances, growth."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import asdict
from math import exp, log
from typing import Any

from rich.console import Console
from rich.table import Table

from benchmark.measure import Limits, Row

TITLES = {
    "a": "this tool",
    "b": "constraint solver, circuit constraint",
    "c": "textbook clauses, SAT solver with proof",
}
TOTAL = "total"
# Times below this are noise of the clock; a ratio takes this much instead.
LEAST_SECONDS = 1e-4


def ratio(rows: Iterable[Row], over: str, under: str = "a") -> float | None:
    """Return the geometric mean of the ratio of seconds where both methods decide.

    None when there is no such instance.
    """
    logs = [
        log(max(row.outcomes[over].seconds, LEAST_SECONDS))
        - log(max(row.outcomes[under].seconds, LEAST_SECONDS))
        for row in rows
        if row.decided(over, under)
    ]
    return exp(sum(logs) / len(logs)) if logs else None


def check_share(rows: Iterable[Row]) -> float | None:
    """Return the checker's seconds over the search's, summed where this tool decides."""
    outcomes = [row.outcomes["a"] for row in rows if row.decided("a")]
    searched = sum(outcome.search_seconds for outcome in outcomes)
    return sum(outcome.check_seconds for outcome in outcomes) / searched if searched else None


def undecided(rows: Iterable[Row], method: str) -> list[str]:
    """Return the names of the instances that a method did not decide, with the reason."""
    return [
        f"{row.instance.name} ({row.outcomes[method].kind or 'gave up'})"
        for row in rows
        if not row.decided(method)
    ]


def group(rows: Sequence[Row]) -> dict[str, list[Row]]:
    """Return the rows by family, in order of appearance, and all of them as the total."""
    groups: dict[str, list[Row]] = {}
    for row in rows:
        groups.setdefault(row.instance.family, []).append(row)
    return {**groups, TOTAL: list(rows)}


def growth(rows: Iterable[Row]) -> list[Row]:
    """Return the odd flower snarks and the GP(n, 2) without a cycle, for cost a vertex."""
    return [
        row
        for row in rows
        if row.instance.answer == "impossible"
        and (
            row.instance.family == "flower-snarks"
            or (row.instance.name.startswith("GP(") and row.instance.name.endswith(",2)"))
        )
    ]


def summarise(rows: Sequence[Row], methods: Sequence[str]) -> dict[str, dict[str, Any]]:
    """Return the figures of each family and of the total, for the JSON file."""
    return {
        family: {
            "instances": len(members),
            "decided": {m: sum(row.decided(m) for row in members) for m in methods},
            "ratio": {m: ratio(members, m) for m in methods if m != "a"},
            "check_share": check_share(members),
        }
        for family, members in group(rows).items()
    }


def to_json(rows: Sequence[Row], methods: Sequence[str], limits: Limits) -> dict[str, Any]:
    """Return everything measured as a JSON object."""
    return {
        "limits": asdict(limits),
        "methods": {method: TITLES[method] for method in methods},
        "rows": [
            {
                "instance": row.instance.name,
                "family": row.instance.family,
                "tags": sorted(row.instance.tags),
                "known": row.instance.answer,
                "source": row.instance.source,
                "vertices": row.n,
                "edges": row.m,
                "outcomes": {m: asdict(outcome) for m, outcome in row.outcomes.items()},
            }
            for row in rows
        ],
        "summary": summarise(rows, methods),
        "undecided": {method: undecided(rows, method) for method in methods},
        "complaints": [text for row in rows if (text := row.complaint())],
    }


def show(value: float | None, form: str = "{:.3g}") -> str:
    """Return a figure as text, a dash where there is none."""
    return "-" if value is None else form.format(value)


def render(rows: Sequence[Row], methods: Sequence[str], limits: Limits, console: Console) -> None:
    """Print the tables."""
    rivals = [method for method in methods if method != "a"]
    for method in methods:
        console.print(f"{method}: {TITLES[method]}", highlight=False)
    console.print(
        f"limit {limits.seconds:g} processor seconds and {limits.gibibytes:g} GiB a run; a ratio is"
        " the geometric mean of seconds over seconds, where both decide",
        highlight=False,
    )
    table = Table(title="Instances of a family, how many are decided, ratios")
    table.add_column("family", no_wrap=True)
    for heading in ("all", *methods, *(f"{m}/a" for m in rivals), "check/search"):
        table.add_column(heading, justify="right")
    for family, figures in summarise(rows, methods).items():
        if family == TOTAL:
            table.add_section()
        table.add_row(
            family,
            str(figures["instances"]),
            *(str(figures["decided"][m]) for m in methods),
            *(show(figures["ratio"][m]) for m in rivals),
            show(figures["check_share"], "{:.1%}"),
        )
    console.print(table)
    for method in methods:
        names = undecided(rows, method)
        console.print(f"{method} left open: {len(names)}", highlight=False)
        for name in names:
            console.print(f"    {name}", highlight=False, soft_wrap=True)
    render_growth(growth(rows), methods, console)


def render_growth(rows: Sequence[Row], methods: Sequence[str], console: Console) -> None:
    """Print milliseconds a vertex along the two families that grow by a repeated piece."""
    if not rows:
        return
    console.print("Growth in milliseconds a vertex; a level column is linear growth")
    table = Table()
    table.add_column("instance", no_wrap=True)
    table.add_column("vertices", justify="right")
    for method in methods:
        table.add_column(method, justify="right")
    for row in rows:
        figures = [
            1000 * row.outcomes[m].seconds / row.n if row.decided(m) else None for m in methods
        ]
        table.add_row(row.instance.name, str(row.n), *(show(figure) for figure in figures))
    console.print(table)
