"""Commands that search: prove, decide."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import BinaryIO

import click

from certify.commands.group import (
    budget_option,
    cluster_option,
    commands,
    existing_file,
    jobs_option,
    json_option,
)
from certify.commands.say import Verdicts, row_of, showing
from certify.errors import InputError
from certify.flow import Run, decide_file, prove
from certify.graph.question import BUILDERS
from certify.report.lasting import LastingRuns
from certify.report.table import Row, Tally, render_endless_table
from certify.search.ladder import KINDS, Limits

graph_file = click.Path(exists=True, dir_okay=False, allow_dash=True, path_type=Path)


@commands.command("prove")
@click.argument("claim", type=existing_file)
@click.option(
    "--out",
    type=click.Path(file_okay=False, path_type=Path),
    metavar="FOLDER",
    help="Where the evidence goes; beside the claim file if not given.",
)
@budget_option
@click.option(
    "--kinds", metavar="KIND,...", help=f"Use only these kinds of evidence: {', '.join(KINDS)}."
)
@click.option(
    "--shortest", is_flag=True, help="Spend the time on making each reason shorter to read."
)
@click.option(
    "--memory",
    type=click.IntRange(min=16),
    default=Limits.memory >> 20,
    show_default=True,
    metavar="MIB",
    help="Memory that the sweep of one instance may take.",
)
@click.option(
    "--redo",
    multiple=True,
    metavar="INSTANCE",
    help="Search again for n=18, m=3,n=4 or 17, or for all; may be repeated.",
)
@click.option(
    "--graphs",
    type=graph_file,
    metavar="FILE",
    help="Take the claim's list of graphs from here; - is standard input.",
)
@jobs_option
@cluster_option
@click.option("-v", "--verbose", is_flag=True, help="Print a line for each graph of a list.")
@json_option
def prove_command(
    claim: Path,
    out: Path | None,
    budget: float,
    kinds: str | None,
    shortest: bool,
    memory: int,
    redo: tuple[str, ...],
    graphs: Path | None,
    jobs: int,
    cluster: str | None,
    verbose: bool,
    as_json: bool,
) -> None:
    """Find, check and store evidence.

    For every instance of CLAIM, a TOML file. Of a long list a line is printed for those
    graphs that are left open or contradict the claim, and a summary.
    """
    run = prove(
        claim,
        out=out,
        limits=Limits(budget, memory << 20, _read_kinds(kinds), shortest),
        redo=redo,
        jobs=jobs,
        cluster=cluster,
        graphs=None if graphs is None else _opened(graphs),
    )
    _show_run(run, verbose=verbose, as_json=as_json)


def _show_run(run: Run, *, verbose: bool, as_json: bool) -> None:
    """Make a run, show what comes out, and raise what the exit code has to say."""
    is_list, is_endless = run.claim.list_name is not None, run.claim.growing is not None
    verdicts, tally, runs = Verdicts(), Tally(run.claim.parameters), LastingRuns()
    endless: list[tuple[str, str]] = []
    lasting: list[str] = []
    lines = "all" if verbose else "notable" if is_list else "off terminal"
    with showing(run.count, lines=lines, as_json=as_json) as show:
        for outcome in run.outcomes:
            show(outcome)
            verdicts.add(outcome)
            record = outcome.record
            if is_endless:
                endless.append(row_of(outcome))
                tally.answers[record.answer] += 1
                continue
            tally.add(Row(record.key, record.answer, record.kind, outcome.contradicts))
            if not is_list:
                lasting += [found.render() for found in runs.add(outcome.settled)]
    lasting += [found.render() for found in runs.end()]
    if not as_json:
        click.echo(render_endless_table(endless) if is_endless else tally.render())
        for text in lasting:
            click.echo(f"one reason for {text}")
        click.echo(f"evidence: {run.folder}")
    verdicts.raise_for(run.claim.check_counts(tally.answers.elements()))


@commands.command("decide")
@click.argument("graphfile", type=graph_file)
@click.option("--structure", type=click.Choice(list(BUILDERS)), required=True)
@click.option(
    "--format",
    "form",
    metavar="FORMAT",
    help="graph6, sparse6, dimacs, graphml or edges; the file's ending decides if not given.",
)
@budget_option
@jobs_option
@cluster_option
@json_option
def decide_command(
    graphfile: Path,
    structure: str,
    form: str | None,
    budget: float,
    jobs: int,
    cluster: str | None,
    as_json: bool,
) -> None:
    """Answer for each graph in a file.

    A quick question about the graphs in GRAPHFILE, or in standard input if it is -; no
    claim is needed.
    """
    outcomes = decide_file(
        _opened(graphfile),
        structure,
        form=form,
        limits=Limits(budget),
        jobs=jobs,
        cluster=cluster,
    )
    verdicts, tally = Verdicts(), Tally(())
    with showing(None, lines="all", as_json=as_json) as show:
        for outcome in outcomes:
            show(outcome)
            verdicts.add(outcome)
            record = outcome.record
            tally.add(Row(record.key, record.answer, record.kind, outcome.contradicts))
    if not as_json and tally.answers.total() > 1:
        click.echo(tally.render_counts("graph"))
    verdicts.raise_for(None)


def _opened(path: Path) -> Path | BinaryIO:
    """Return standard input for -, else the path."""
    return sys.stdin.buffer if str(path) == "-" else path


def _read_kinds(text: str | None) -> frozenset[str]:
    if text is None:
        return Limits.kinds
    kinds = frozenset(part.strip() for part in text.split(","))
    for kind in sorted(kinds):
        if kind not in KINDS:
            raise InputError(f"--kinds: {kind!r} is none of {', '.join(KINDS)}")
    return kinds
