"""The command guard: everything below a folder is checked again, for CI."""

from __future__ import annotations

import json
import os
from collections.abc import Iterable
from itertools import islice
from pathlib import Path

import click

from certify.commands.group import commands, existing_folder, json_option
from certify.errors import ContradictionError, OpenError
from certify.guard.annotations import is_wanted, render_annotations
from certify.guard.cache import Cache
from certify.guard.guard import guard
from certify.guard.junit import write_junit
from certify.guard.report import (
    ACCEPTED,
    ALLOWED,
    FAILED,
    OPEN,
    Report,
    one_line,
    render_trouble,
)

_MOST_SHOWN = 20


@commands.command("guard")
@click.argument("root", type=existing_folder, default=".")
@click.option(
    "--junit",
    type=click.Path(dir_okay=False, path_type=Path),
    metavar="FILE",
    help="Write a JUnit XML report too, with a test case for each instance.",
)
@click.option(
    "--cache",
    "cache_file",
    type=click.Path(dir_okay=False, path_type=Path),
    metavar="FILE",
    help="Do not check a folder again of which every byte is as it was when it was accepted. "
    "Whoever can write this file can have anything accepted: keep it with the CI's own "
    "state, not in the repository.",
)
@click.option(
    "--jobs",
    type=click.IntRange(min=1),
    default=1,
    show_default=True,
    help="How many folders are checked at once.",
)
@json_option
def guard_command(
    root: Path, junit: Path | None, cache_file: Path | None, jobs: int, as_json: bool
) -> None:
    """Check everything below ROOT again.

    Finds every claim and every folder of evidence below ROOT (or here), and fails
    when a claim has no evidence or changed without it, when an instance is missing,
    rejected, contradicted or open, or when a file lies in a folder of evidence that its manifest
    does not list. Claims are TOML files. Folders and files whose names begin with a point,
    node_modules and virtual environments are not looked into.

    A file guard.toml beside a claim may allow instances to be open, and further files:
    open = ["n=31"], files = ["notes/*"]. An allowance that is not needed fails.
    """
    cache = Cache(cache_file) if cache_file is not None else None
    reports: list[Report] = []
    for report in guard(root, cache=cache, jobs=jobs):
        reports.append(report)
        click.echo(_describe(report) if as_json else _render(report))
        if is_wanted(os.environ) and not as_json:
            for line in render_annotations(report, os.environ):
                click.echo(line)
    if cache is not None:
        cache.save()
        for note in cache.notes:
            click.echo(f"certify: note: {one_line(note)}", err=True)
    if junit is not None:
        write_junit(junit, reports)
    if not as_json:
        click.echo(_summarise(reports))
    _raise_for(root, reports)


def _render(report: Report) -> str:
    """Return a line for a claim, and below it what is wrong."""
    counts = report.count()
    words = [f"{counts[ACCEPTED]} of {len(report.cases)} instances accepted"]
    words += [f"{counts[state]} {state}" for state in (ALLOWED, OPEN, FAILED) if counts[state]]
    if report.remembered:
        words.append("by the cache")
    if not report.cases:
        words = []
    head = f"{report.state}: {one_line(report.claim)}" + (f": {', '.join(words)}" if words else "")
    lines = [head, *(f"  note: {one_line(note)}" for note in report.notes)]
    problems = list(islice(report.problems(), _MOST_SHOWN))
    for problem in problems:
        first, *rest = render_trouble(problem).split("\n")
        lines += [f"  {first}", *(f"    {line}" for line in rest)]
    more = len(report.troubles) + counts[OPEN] + counts[FAILED] - len(problems)
    if more:
        lines.append(f"  ... and {more} more")
    return "\n".join(lines)


def _describe(report: Report) -> str:
    """Return a report as a JSON object on one line."""
    problems = [
        {"file": str(problem.path), "line": problem.line, "text": problem.text}
        for problem in report.problems()
    ]
    value = {
        "claim": str(report.claim),
        "state": report.state,
        "instances": len(report.cases),
        "counts": dict(report.count()),
        "notes": list(report.notes),
        "problems": problems,
        "remembered": report.remembered,
    }
    return json.dumps(value, sort_keys=True)


def _summarise(reports: list[Report]) -> str:
    states = [report.state for report in reports]
    noun = "claim" if len(reports) == 1 else "claims"
    parts = [f"{states.count(state)} {state}" for state in (ACCEPTED, OPEN, FAILED)]
    return f"{len(reports)} {noun}: {', '.join(parts)}"


def _raise_for(root: Path, reports: Iterable[Report]) -> None:
    """Raise what the exit code has to say."""
    states = [report.state for report in reports]
    if FAILED in states:
        raise ContradictionError(f"{one_line(root)}: {states.count(FAILED)} failed, as said above")
    if OPEN in states:
        raise OpenError(f"{one_line(root)}: {states.count(OPEN)} left open, as said above")
