"""Commands that show evidence to readers: explain, appendix, page, pack."""

from __future__ import annotations

from pathlib import Path

import click

from certify.commands.group import commands, existing_folder
from certify.errors import OpenError
from certify.interface import explain
from certify.report.appendix import FORMS, render_appendix, write_text
from certify.report.pack import write_pack
from certify.report.page.page import write_site


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
