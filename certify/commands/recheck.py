"""The command recheck: somebody else's table against a rule."""

from __future__ import annotations

import json
import sys
from collections.abc import Iterator
from pathlib import Path

import click
from rich.console import Console
from rich.progress import track

from certify.commands.group import (
    budget_option,
    commands,
    existing_file,
    jobs_option,
    json_option,
)
from certify.errors import ContradictionError, OpenError
from certify.recheck.compare import AGREES, DISAGREES, OPEN, Finding, compare
from certify.recheck.parts import Plan, make_plan
from certify.recheck.report import find_form, render_counts, render_line, write_report
from certify.recheck.table import read_sheet
from certify.search.ladder import Limits


@commands.command("recheck")
@click.argument("table", type=existing_file, metavar="TABLE.csv")
@click.option(
    "--claim",
    "claim_path",
    type=existing_file,
    required=True,
    metavar="CLAIM.toml",
    help="The rule and the structure. [instances] may be left out: the rows say which there are.",
)
@click.option(
    "--column",
    default="claimed",
    show_default=True,
    metavar="NAME",
    help="The column with what is claimed: exists/impossible, yes/no, true/false or 1/0.",
)
@click.option(
    "--out",
    type=click.Path(file_okay=False, path_type=Path),
    metavar="FOLDER",
    help="Keep the evidence of every row here; it can be checked, explained and printed.",
)
@click.option(
    "--report",
    type=click.Path(dir_okay=False, path_type=Path),
    metavar="FILE",
    help="Write the rows that do not agree, with reasons, to FILE.md or FILE.csv.",
)
@budget_option
@jobs_option
@json_option
def recheck_command(
    table: Path,
    claim_path: Path,
    column: str,
    out: Path | None,
    report: Path | None,
    budget: float,
    jobs: int,
    as_json: bool,
) -> None:
    """Compare a published table with what is found.

    TABLE.csv has a column for each parameter of the rule (position for a list of graphs),
    and one with what is claimed of the instance. Every row is searched,
    and its evidence checked: it agrees, disagrees, or is open.
    """
    if report is not None:
        find_form(report)
    plan = make_plan(read_sheet(table), claim_path, column)
    for note in plan.table.notes:
        click.echo(f"certify: note: {note}", err=True)
    coming = compare(plan, out=out, limits=Limits(budget), jobs=jobs)
    findings = list(_show(plan, coming, as_json=as_json))
    if report is not None:
        write_report(report, plan, findings)
    if not as_json:
        click.echo(render_counts(findings))
        if out is not None:
            click.echo(f"evidence: {out}")
        if report is not None:
            click.echo(f"report: {report}")
    _raise_for(findings, out)


def _show(plan: Plan, findings: Iterator[Finding], *, as_json: bool) -> Iterator[Finding]:
    """Pass findings on, and say those that matter as they come: all with --json."""
    followed = track(
        findings,
        "searching",
        total=len(plan.table.rows),
        console=Console(stderr=True),
        transient=True,
        disable=as_json or not sys.stderr.isatty(),
    )
    for finding in followed:
        if as_json:
            click.echo(json.dumps(_describe(finding), sort_keys=True))
        elif finding.result != AGREES:
            click.echo(render_line(plan, finding))
            for line in finding.reason.splitlines():
                click.echo(f"    {line}".rstrip())
        yield finding


def _describe(finding: Finding) -> dict[str, object]:
    return {
        "line": finding.row.line,
        "instance": finding.key,
        "claimed": finding.row.claimed,
        "answer": finding.answer,
        "kind": finding.kind,
        "length": finding.length,
        "result": finding.result,
        "reason": finding.reason,
        "evidence": {"part": finding.part, "instance": finding.stored},
    }


def _raise_for(findings: list[Finding], out: Path | None) -> None:
    """Raise what the exit code has to say."""
    wrong = [finding for finding in findings if finding.result == DISAGREES]
    left = [finding for finding in findings if finding.result == OPEN]
    if wrong:
        first = wrong[0]
        step = "run it again with --out FOLDER to keep the evidence"
        if out is not None:
            step = f"certify explain {out / first.part} {first.stored}"
        raise ContradictionError(
            f"the table is contradicted in {len(wrong)} of {len(findings)} rows\n  next: {step}"
        )
    if left:
        step = "give more time with --budget SECONDS"
        raise OpenError(f"left open: {len(left)} of {len(findings)} rows\n  next: {step}")
