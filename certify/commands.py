"""The command line: prove, check, decide, explain, appendix, page, pack.

Exit codes: 0 all is as claimed and accepted; 2 bad input or usage; 3 a claim is
contradicted, or evidence rejected; 4 something is left open.
"""

from __future__ import annotations

import json
import sys
from collections.abc import Iterable, Iterator
from pathlib import Path

import click
from rich.console import Console
from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

from certify.checker import check_folder
from certify.checker.__main__ import check_and_print, find_folders
from certify.errors import CertifyError, ContradictionError, InputError, OpenError
from certify.evidence.endless import exists_for
from certify.flow import Outcome, decide_file, prove
from certify.graph.question import BUILDERS
from certify.interface import explain
from certify.report.appendix import FORMS, render_appendix, write_text
from certify.report.lasting import find_lasting
from certify.report.pack import write_pack
from certify.report.page.page import write_site
from certify.report.referee import PROGRAM, ask_referee, describe, find_referee
from certify.report.table import Row, render_endless_table, render_table
from certify.search.ladder import KINDS, Limits

budget_option = click.option(
    "--budget",
    type=click.FloatRange(min=0, min_open=True),
    default=Limits.seconds,
    show_default=True,
    metavar="SECONDS",
    help="Time for each instance; what it does not settle is left open.",
)
json_option = click.option(
    "--json", "as_json", is_flag=True, help="Print one JSON object a line, and nothing else."
)
existing_file = click.Path(exists=True, dir_okay=False, path_type=Path)
existing_folder = click.Path(exists=True, file_okay=False, path_type=Path)


@click.group(context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(package_name="certify")
def commands() -> None:
    """Turn "it does not exist" into evidence that a reader can check.

    A claim is a small TOML file: a family of graphs, and for which of them a
    Hamiltonian path or cycle exists. See README.md.
    """


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
@json_option
def prove_command(
    claim: Path,
    out: Path | None,
    budget: float,
    kinds: str | None,
    shortest: bool,
    memory: int,
    redo: tuple[str, ...],
    as_json: bool,
) -> None:
    """Find, check and store evidence.

    For every instance of CLAIM, a TOML file.
    """
    limits = Limits(budget, memory << 20, _read_kinds(kinds), shortest)
    run = prove(claim, out=out, limits=limits, redo=redo)
    outcomes = list(_show(run.outcomes, run.count, as_json=as_json))
    if not as_json and run.claim.growing is not None:
        click.echo(render_endless_table([_row_of(outcome) for outcome in outcomes]))
        click.echo(f"evidence: {run.folder}")
    elif not as_json:
        rows = [Row(o.record.key, o.record.answer, o.record.kind, o.contradicts) for o in outcomes]
        click.echo(render_table(rows))
        for lasting in find_lasting(o.settled for o in outcomes):
            click.echo(f"one reason for {lasting.render()}")
        click.echo(f"evidence: {run.folder}")
    raise_for(outcomes, run.claim.check_counts(o.record.answer for o in outcomes))


@commands.command("decide")
@click.argument("graphfile", type=existing_file)
@click.option("--structure", type=click.Choice(list(BUILDERS)), required=True)
@click.option(
    "--format",
    "form",
    metavar="FORMAT",
    help="graph6, sparse6, dimacs, graphml or edges; the file's ending decides if not given.",
)
@budget_option
@json_option
def decide_command(
    graphfile: Path, structure: str, form: str | None, budget: float, as_json: bool
) -> None:
    """Answer for each graph in a file.

    A quick question about the graphs in GRAPHFILE; no claim is needed.
    """
    outcomes = decide_file(graphfile, structure, form=form, limits=Limits(budget))
    raise_for(list(_show(outcomes, None, as_json=as_json)), None)


@commands.command("check")
@click.argument("folders", type=existing_folder, nargs=-1, required=True, metavar="FOLDER...")
@click.option(
    "--referee",
    type=click.Choice(["drat-trim"]),
    help="Have the clause proofs checked by this outside program too.",
)
@json_option
def check_command(folders: tuple[Path, ...], referee: str | None, as_json: bool) -> None:
    """Check evidence, from its files alone."""
    found = [folder for item in folders for folder in find_folders(item)]
    codes = [check_and_print(check_folder(folder), as_json=as_json) for folder in found]
    if referee is not None:
        codes += [_ask_referee(folder, as_json=as_json) for folder in found]
    sys.exit(3 if 3 in codes else max(codes))


def _ask_referee(folder: Path, *, as_json: bool) -> int:
    """Print what the outside referee says of a folder's clause proofs."""
    opinions = list(ask_referee(folder, find_referee()))
    for opinion in opinions:
        if as_json:
            click.echo(describe(opinion))
        elif not opinion.accepted:
            click.echo(f"{folder}: rejected: instance {opinion.name}: {opinion.reason}")
    if not as_json:
        fine = sum(opinion.accepted for opinion in opinions)
        click.echo(f"{folder}: {fine} of {len(opinions)} clause proofs accepted by {PROGRAM}")
    return 0 if all(opinion.accepted for opinion in opinions) else 3


@commands.command("explain")
@click.argument("folder", type=existing_folder)
@click.argument("instance")
def explain_command(folder: Path, instance: str) -> None:
    """Print the reason for one instance.

    In plain English; INSTANCE is n=18, m=3,n=4, or 17 for a graph of a list.
    """
    click.echo(explain(folder, instance))


@commands.command("appendix")
@click.argument("folder", type=existing_folder)
@click.option(
    "--format", "form", type=click.Choice(list(FORMS)), default="latex", show_default=True
)
@click.option(
    "--out",
    type=click.Path(dir_okay=False, path_type=Path),
    metavar="FILE",
    help="Where the text goes; printed if not given.",
)
def appendix_command(folder: Path, form: str, out: Path | None) -> None:
    """Check FOLDER, and write its claim, table and proofs as the appendix of a paper."""
    appendix = render_appendix(folder, form)
    if out is None:
        click.echo(appendix.text, nl=False)
    else:
        write_text(out, appendix.text)
    _tell_open(appendix.left_open, "appendix")


@commands.command("page")
@click.argument("folders", type=existing_folder, nargs=-1, required=True, metavar="FOLDER...")
@click.option(
    "--out",
    "site",
    type=click.Path(file_okay=False, path_type=Path),
    default="site",
    show_default=True,
    metavar="SITE",
    help="The folder that the pages go to.",
)
def page_command(folders: tuple[Path, ...], site: Path) -> None:
    """Check each FOLDER, and write it as a page that checks itself.

    A page is one file that needs no server and no net: to put on a site, or to send.
    """
    written, left_open = write_site(folders, site)
    for path in written:
        click.echo(f"page: {path}")
    _tell_open(left_open, "page")


@commands.command("pack")
@click.argument("folders", type=existing_folder, nargs=-1, required=True, metavar="FOLDER...")
@click.option(
    "-o",
    "--out",
    "archive",
    type=click.Path(dir_okay=False, path_type=Path),
    required=True,
    metavar="FILE.zip",
    help="The archive to write.",
)
def pack_command(folders: tuple[Path, ...], archive: Path) -> None:
    """Check each FOLDER, and pack it for a deposit.

    With the checker as one file, the format, an appendix and a page of each.
    """
    names = write_pack(folders, archive)
    click.echo(f"{archive}: {len(names)} files; README.md in it says how to check them")


def _tell_open(left_open: int, where: str) -> None:
    """Raise what the exit code has to say when something published is open."""
    if left_open:
        noun = "instance" if left_open == 1 else "instances"
        raise OpenError(f"left open: {left_open} {noun}, as the {where} says")


def _read_kinds(text: str | None) -> frozenset[str]:
    if text is None:
        return Limits.kinds
    kinds = frozenset(part.strip() for part in text.split(","))
    for kind in sorted(kinds):
        if kind not in KINDS:
            raise InputError(f"--kinds: {kind!r} is none of {', '.join(KINDS)}")
    return kinds


def _show(outcomes: Iterable[Outcome], count: int | None, *, as_json: bool) -> Iterator[Outcome]:
    """Pass outcomes on, and say each as it comes: a bar on a terminal, lines elsewhere."""
    if as_json or not sys.stdout.isatty():
        for outcome in outcomes:
            click.echo(
                json.dumps(_describe(outcome), sort_keys=True) if as_json else _line(outcome)
            )
            yield outcome
        return
    columns = (
        TextColumn("{task.description}"),
        BarColumn(),
        MofNCompleteColumn(),
        TimeRemainingColumn(),
    )
    with Progress(*columns, console=Console(stderr=True), transient=True) as progress:
        task = progress.add_task("searching", total=count)
        for outcome in outcomes:
            progress.update(task, advance=1, description=outcome.name)
            yield outcome


def _line(outcome: Outcome) -> str:
    record = outcome.record
    text = f"{outcome.name}: {record.answer}"
    if record.answer != "open":
        text += f", {record.kind} of length {record.length}"
        exists = exists_for(record)
        text += "" if exists is None else f"; exists for {exists}"
    return text + (f" -- {outcome.verdict.reason}" if outcome.contradicts else "")


def _row_of(outcome: Outcome) -> tuple[str, str]:
    """Return the name of a row of an endless claim, and for which values the object exists."""
    note = " (not as claimed)" if outcome.contradicts else ""
    return outcome.name, (exists_for(outcome.record) or "left open") + note


def _describe(outcome: Outcome) -> dict[str, object]:
    record, verdict = outcome.record, outcome.verdict
    exists = exists_for(record)
    return {
        **({} if exists is None else {"exists_for": exists}),
        "instance": record.key,
        "answer": record.answer,
        "kind": record.kind,
        "length": record.length,
        "verdict": "accepted" if verdict.accepted else "rejected",
        "reason": verdict.reason,
    }


def raise_for(outcomes: list[Outcome], complaint: str | None) -> None:
    """Raise what the exit code has to say: a contradiction, or something left open."""
    against = [outcome for outcome in outcomes if outcome.contradicts]
    if against:
        lines = [f"instance {o.name}: {o.verdict.reason}" for o in against[:10]]
        raise ContradictionError("the claim is contradicted:\n  " + "\n  ".join(lines))
    left = [outcome.name for outcome in outcomes if outcome.record.answer == "open"]
    if left:
        raise OpenError(
            f"left open: {', '.join(left[:10])}{' ...' if len(left) > 10 else ''}"
            "\n  next: give more time with --budget SECONDS"
        )
    if complaint is not None:
        raise ContradictionError(f"the claim is contradicted: {complaint}")


def main() -> None:
    """Run the command line, and turn our own errors into a message and an exit code."""
    try:
        commands(standalone_mode=True)
    except CertifyError as error:
        click.echo(f"certify: {error}", err=True)
        sys.exit(error.exit_code)
    except KeyboardInterrupt:
        sys.exit(130)
