"""What commands register with, and the options and arguments that several of them take."""

from __future__ import annotations

from pathlib import Path

import click

from certify.commands.registry import commands as commands
from certify.engine.executors import count_cores
from certify.search.ladder import Limits

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
jobs_option = click.option(
    "--jobs",
    type=click.IntRange(min=1),
    default=count_cores,
    show_default="the cores there are",
    metavar="N",
    help="Instances at a time, each in a process of its own.",
)
cluster_option = click.option(
    "--cluster",
    metavar="ADDRESS",
    help="Have the workers of this Dask scheduler do it (needs certify[cluster]).",
)
existing_file = click.Path(exists=True, dir_okay=False, path_type=Path)
existing_folder = click.Path(exists=True, file_okay=False, path_type=Path)
