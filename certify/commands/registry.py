"""Which module has which command; one is imported when it is called.

Some need a library that takes as long to import as a small claim takes to prove, and
workers import the main program too.
"""

from __future__ import annotations

from importlib import import_module

import click

MODULES = {
    "appendix": "publish",
    "check": "check",
    "decide": "search",
    "explain": "publish",
    "guard": "guard",
    "pack": "publish",
    "page": "publish",
    "prove": "search",
    "recheck": "recheck",
    "theorem": "theorem",
}
"""For each command the module beside this one that registers it."""


class _Commands(click.Group):
    def list_commands(self, ctx: click.Context) -> list[str]:
        return sorted({*MODULES, *super().list_commands(ctx)})

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        if cmd_name in MODULES:
            import_module(f"certify.commands.{MODULES[cmd_name]}")
        return super().get_command(ctx, cmd_name)


@click.group(cls=_Commands, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(package_name="certify")
def commands() -> None:
    """Turn "it does not exist" into evidence that a reader can check.

    A claim is a small TOML file: a family of graphs, and for which of them a
    Hamiltonian path or cycle exists. See README.md.
    """
