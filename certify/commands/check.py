"""Commands that check evidence: check."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from pathlib import Path

import click

from certify.checker import check_folder
from certify.checker.__main__ import check_and_print, find_folders
from certify.commands.group import commands, existing_folder, json_option
from certify.report.kernel.ask import ask_kernel
from certify.report.kernel.program import build_program, cache_folder, find_compiler
from certify.report.referee import PROGRAM, Opinion, ask_referee, describe, find_referee

KERNEL = "kernel"
_ACCEPTED = {
    PROGRAM: f"clause proofs accepted by {PROGRAM}",
    KERNEL: "instances accepted by the kernel (of graphs built in Python; "
    "in `certify theorem` Coq builds them)",
}


@commands.command("check")
@click.argument("folders", type=existing_folder, nargs=-1, required=True, metavar="FOLDER...")
@click.option(
    "--referee",
    "referees",
    type=click.Choice([PROGRAM, KERNEL]),
    multiple=True,
    help="Ask another program as well. drat-trim: an outside one, for the clause proofs. "
    "kernel: checks that are proved right in Coq, as a program of OCaml (needs ocamlopt); "
    "its graphs are built by certify from the claim, and it sees answer and evidence alone.",
)
@json_option
def check_command(folders: tuple[Path, ...], referees: tuple[str, ...], as_json: bool) -> None:
    """Check evidence, from its files alone."""
    found = [folder for item in folders for folder in find_folders(item)]
    codes = [check_and_print(check_folder(folder), as_json=as_json) for folder in found]
    for referee in dict.fromkeys(referees):
        ask = _find(referee)
        codes += [_ask(referee, ask, folder, as_json=as_json) for folder in found]
    sys.exit(3 if 3 in codes else max(codes))


def _find(referee: str) -> Callable[[Path], Iterator[Opinion]]:
    """Return what asks a referee; InputError when there is no such program."""
    if referee == PROGRAM:
        outside = find_referee()
        return lambda folder: ask_referee(folder, outside)
    program = build_program(find_compiler(), cache_folder())
    return lambda folder: ask_kernel(folder, program)


def _ask(
    referee: str, ask: Callable[[Path], Iterator[Opinion]], folder: Path, *, as_json: bool
) -> int:
    """Print what a referee says of a folder; return 3 if it rejects, 4 if it takes not all."""
    fine, count, code = 0, 0, 0
    for opinion in ask(folder):
        count += 1
        fine += opinion.accepted
        if not opinion.accepted:
            code = 3 if opinion.taken or code == 3 else 4
        if as_json:
            click.echo(describe(opinion, referee))
        elif not opinion.accepted:
            click.echo(f"{folder}: {opinion.verdict}: instance {opinion.name}: {opinion.reason}")
    if not as_json:
        click.echo(f"{folder}: {fine} of {count} {_ACCEPTED[referee]}")
    return code
