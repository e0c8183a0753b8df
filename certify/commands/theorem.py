"""The command theorem: evidence as theorems that Coq proves."""

from __future__ import annotations

from pathlib import Path

import click

from certify.commands.group import commands, existing_folder
from certify.errors import InputError, OpenError
from certify.report.accepted import need_accepted
from certify.report.kernel.program import cache_folder
from certify.report.theorem.coq import (
    compile_kernel,
    find_coq,
    kernel_place,
    prove_theorems,
    write_folder,
)
from certify.report.theorem.sheet import Sheet, write_sheet


@commands.command("theorem")
@click.argument("folder", type=existing_folder)
@click.argument("instance", required=False)
@click.option(
    "--out",
    type=click.Path(file_okay=False, path_type=Path),
    default="theorem",
    show_default=True,
    metavar="DIR",
    help="Where the kernel and the theorems go.",
)
@click.option("--write-only", is_flag=True, help="Write the files, and do not run Coq.")
def theorem_command(folder: Path, instance: str | None, out: Path, write_only: bool) -> None:
    """Check FOLDER, and have Coq prove it.

    Writes a file of theorems with the kernel they rest on, and runs coqc (Coq 8.16): for
    each impossible instance that the path or cycle does not exist, and for the
    whole table for which instances it does; or for INSTANCE alone (n=18, m=3,n=4, or 17).
    Of an endless claim the theorem is about all n.
    Whoever doubts then believes Coq, kernel/Statement.v and the top of that file.
    """
    need_accepted(folder, may_be_open=True)
    sheet = write_sheet(folder, instance)
    (path,) = write_folder(out, [sheet])
    click.echo(f"{path}: {_count(len(sheet.theorems), 'theorem')} written")
    for name, reason in sheet.not_taken.items():
        click.echo(f"  no theorem for {name}: {reason}")
    if instance is None and not sheet.table:
        click.echo("  so there is none for the whole table either")
    if sheet.theorems and not write_only:
        _compile(path, sheet)
    if sheet.not_taken:
        raise OpenError(f"no theorem for {_count(len(sheet.not_taken), 'instance')}, as said above")


def _compile(path: Path, sheet: Sheet) -> None:
    coq = find_coq()
    if coq is None:
        raise InputError(
            "coqc is not on the PATH: the theorems are written and not proved\n"
            f"  next: install Coq 8.16 (Debian: apt-get install coq), then: "
            f"sh {path.parent / 'compile'}"
        )
    kernel = kernel_place(cache_folder(), coq)
    for name in compile_kernel(kernel, coq):
        click.echo(f"  compiling the kernel: {name}")
    proved = prove_theorems(path, coq, sheet, kernel)
    click.echo(f"{proved.path}: {_count(len(proved.theorems), 'theorem')} proved, nothing assumed")


def _count(number: int, noun: str) -> str:
    return f"{number} {noun}" if number == 1 else f"{number} {noun}s"
