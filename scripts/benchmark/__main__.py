"""The command line of the benchmark; see `python scripts/benchmark --help`."""

from __future__ import annotations

import argparse
import json
import sys
from collections.abc import Sequence
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path
from typing import Any

# Run as a folder, Python puts the folder itself on the path; needed are the one
# above it (this package) and the one above that (certify, also when not installed).
sys.path.insert(0, str(Path(__file__).resolve().parents[2]))
sys.path.insert(0, str(Path(__file__).resolve().parents[1]))

from rich.console import Console

from benchmark import lists
from benchmark.instance import CORE, HARD, Instance
from benchmark.measure import Limits, Row, measure
from benchmark.suite import build_suite
from benchmark.table import TITLES, render, to_json


def read_arguments(words: Sequence[str] | None) -> argparse.Namespace:
    """Read the command line."""
    parser = argparse.ArgumentParser(
        prog="bench",
        description="Measure methods side by side on the public suite.",
        epilog="bench lists --help: measure long lists of graphs, by jobs and by length.",
    )
    families = list(dict.fromkeys(instance.family for instance in build_suite()))
    parser.add_argument(
        "--limit", type=float, default=60.0, help="processor seconds a run (default: 60)"
    )
    parser.add_argument("--memory", type=float, default=6.0, help="GiB a run (default: 6)")
    parser.add_argument("--family", action="append", choices=families, help="may be repeated")
    parser.add_argument("--tag", choices=[CORE, HARD], help="only instances with this tag")
    parser.add_argument(
        "--name", action="append", metavar="TEXT", help="TEXT in the name; may be repeated"
    )
    parser.add_argument("--only", default="a,b,c", help="methods: a,b,c (default: all)")
    parser.add_argument("--jobs", type=int, default=1, help="instances at a time (default: 1)")
    parser.add_argument("--list", action="store_true", help="list the instances and end")
    parser.add_argument("--json", type=Path, metavar="FILE", help="write everything measured")
    arguments = parser.parse_args(words)
    arguments.only = arguments.only.split(",")
    unknown = [method for method in arguments.only if method not in TITLES]
    if unknown:
        parser.error(f"--only: no method {unknown[0]!r}; there are {', '.join(TITLES)}")
    if arguments.limit <= 0 or arguments.memory <= 0 or arguments.jobs < 1:
        parser.error("--limit and --memory have to be positive, --jobs at least 1")
    return arguments


def select(arguments: argparse.Namespace) -> list[Instance]:
    """Return the instances asked for."""
    return [
        instance
        for instance in build_suite()
        if (not arguments.family or instance.family in arguments.family)
        and (not arguments.tag or arguments.tag in instance.tags)
        and (not arguments.name or any(text in instance.name for text in arguments.name))
    ]


def list_instances(instances: Sequence[Instance], console: Console) -> None:
    """Print one line an instance."""
    for instance in instances:
        question = instance.build()
        console.print(
            f"{instance.family:22}{instance.name:62}{question.n:5}{question.m:6}"
            f"  {instance.answer or '?':11}{','.join(sorted(instance.tags))}",
            highlight=False,
            soft_wrap=True,
        )


def describe(row: Row) -> str:
    """Return a line of progress."""
    parts = [
        f"{method} {outcome.answer} {outcome.seconds:.3f} s {outcome.kind}"
        for method, outcome in row.outcomes.items()
    ]
    return f"{row.instance.name} ({row.n} vertices): " + " | ".join(parts)


def write_json(path: Path, content: dict[str, Any]) -> None:
    """Write the file as a whole or not at all."""
    part = path.with_name(path.name + ".part")
    part.write_text(json.dumps(content, indent=1) + "\n", encoding="utf-8")
    part.replace(path)


def main(words: Sequence[str] | None = None) -> int:
    """Run the benchmark; return 1 when answers disagree or a method crashed, 2 for bad usage."""
    words = sys.argv[1:] if words is None else words
    if words[:1] == ["lists"]:
        return lists.main(words[1:])
    arguments = read_arguments(words)
    console, progress = Console(), Console(stderr=True)
    instances = select(arguments)
    if not instances:
        progress.print("no instance is selected; see --list", style="bold red")
        return 2
    if arguments.list:
        list_instances(instances, console)
        return 0
    limits = Limits(seconds=arguments.limit, gibibytes=arguments.memory)
    rows: list[Row] = []
    with ThreadPoolExecutor(max_workers=arguments.jobs) as pool:
        for row in pool.map(lambda i: measure(i, arguments.only, limits), instances):
            rows.append(row)
            if arguments.json:
                # After every row, and never half: an ended run leaves what it has.
                write_json(arguments.json, to_json(rows, arguments.only, limits))
            progress.print(describe(row), highlight=False, soft_wrap=True, markup=False)
    render(rows, arguments.only, limits, console)
    complaints = [complaint for row in rows if (complaint := row.complaint())]
    for complaint in complaints:
        progress.print(f"WRONG: {complaint}", style="bold red", soft_wrap=True, markup=False)
    return 1 if complaints else 0


if __name__ == "__main__":
    sys.exit(main())
