"""Long lists: how the rate grows with the jobs, what a graph costs, and what the check does.

Cubic graphs come from the program geng of nauty, as the package passagemath-nauty has it.
Every run is the command line itself, in a process of its own. Seconds are of the clock and,
because other work on the machine disturbs the clock, of the processor: of all
processes of the run, their start included.
"""

from __future__ import annotations

import argparse
import importlib.resources
import json
import os
import subprocess
import sys
import tempfile
import time
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from rich.console import Console
from rich.table import Table

from benchmark.measure import PACKAGES

CLAIM = 'structure = "hamiltonian-cycle"\n[graph]\nlist = "graphs.g6"\n'

CHILD = """\
import json, os, sys
from pathlib import Path
def leave():
    clock = os.sysconf("SC_CLK_TCK")
    seconds = 0.0
    for path in Path("/proc").glob("[0-9]*/stat"):
        try:
            fields = path.read_text().rpartition(")")[2].split()
        except (FileNotFoundError, ProcessLookupError):
            continue
        if int(fields[3]) == os.getpid():  # the session: this process and all it started
            seconds += sum(map(int, fields[11:15])) / clock
    lines = dict(line.split(":", 1) for line in Path("/proc/self/status").read_text().splitlines())
    peak = int(lines["VmHWM"].split()[0]) / 1024
    Path(os.environ["MEASURED"]).write_text(json.dumps([seconds, peak]))
try:
    from certify.commands import main
    main()
finally:
    leave()
"""


@dataclass(frozen=True)
class Run:
    """What one run took: seconds of the clock and the processor, MiB of its first process."""

    wall: float
    processor: float
    peak: float


def find_geng() -> Path | None:
    """Return where the program is; None when the package is not installed."""
    try:
        folder = importlib.resources.files("sage_wheels")
    except ModuleNotFoundError:
        return None
    program = Path(str(folder / "bin" / "geng"))
    return program if program.is_file() else None


def cubic_graphs(geng: Path, vertices: int, most: int | None = None) -> list[bytes]:
    """Return the connected cubic graphs as lines, or the first of them."""
    command: list[str | Path] = [geng, "-q", "-c", "-d3", "-D3", str(vertices)]
    with subprocess.Popen(command, stdout=subprocess.PIPE) as process:
        assert process.stdout is not None
        lines = [line for line, _ in zip(process.stdout, range(most or sys.maxsize), strict=False)]
        process.kill()
    return lines


def run_certify(*arguments: str, folder: Path) -> Run:
    """Run the command line, and measure it. Errors: CalledProcessError."""
    measured = folder / "measured.json"
    path = os.pathsep.join([*PACKAGES, os.environ.get("PYTHONPATH", "")])
    start = time.perf_counter()
    subprocess.run(
        [sys.executable, "-c", CHILD, *arguments],
        env={**os.environ, "MEASURED": str(measured), "PYTHONPATH": path},
        stdout=subprocess.DEVNULL,
        start_new_session=True,
        check=True,
    )
    wall = time.perf_counter() - start
    processor, peak = json.loads(measured.read_text())
    return Run(wall, processor, peak)


def prove(lines: Sequence[bytes], jobs: int, folder: Path) -> Run:
    """Prove a claim about these graphs into a new folder `out`."""
    (folder / "graphs.g6").write_bytes(b"".join(lines))
    (folder / "claim.toml").write_text(CLAIM)
    out = folder / "out"
    if out.exists():
        for path in out.iterdir():
            path.unlink()
    arguments = ("prove", str(folder / "claim.toml"), "--out", str(out), "--jobs", str(jobs))
    return run_certify(*arguments, folder=folder)


def render_jobs(lines: Sequence[bytes], jobs: Sequence[int], folder: Path) -> Table:
    """Measure one list with more and more jobs."""
    title = f"{len(lines):,} graphs, by jobs (search and check of each graph)"
    table = Table("jobs", "seconds", "graphs/s", "processor s", "graphs/processor s", title=title)
    for number in jobs:
        run = prove(lines, number, folder)
        table.add_row(
            str(number),
            f"{run.wall:.2f}",
            f"{len(lines) / run.wall:,.0f}",
            f"{run.processor:.2f}",
            f"{len(lines) / run.processor:,.0f}",
        )
    return table


def render_lengths(lines: Sequence[bytes], jobs: int, folder: Path) -> Table:
    """Measure lists of increasing length: a beginning of the list, twice as long each time."""
    title = f"lists of increasing length, --jobs {jobs}"
    table = Table("graphs", "processor s", "ms/graph", "ms/graph more", "peak MiB", title=title)
    lengths = [len(lines) >> shift for shift in (4, 3, 2, 1, 0)]
    before: tuple[int, float] | None = None
    for length in lengths:
        run = prove(lines[:length], jobs, folder)
        more = ""
        if before is not None:
            # Without what every run costs: the start of the program.
            more = f"{1000 * (run.processor - before[1]) / (length - before[0]):.2f}"
        each = f"{1000 * run.processor / length:.2f}"
        table.add_row(f"{length:,}", f"{run.processor:.2f}", each, more, f"{run.peak:.1f}")
        before = length, run.processor
    return table


def render_check(lines: Sequence[bytes], folder: Path) -> Table:
    """Measure the check of a folder beside the search that made it."""
    search = prove(lines, 1, folder)
    check = run_certify("check", str(folder / "out"), folder=folder)
    table = Table("", "processor s", "peak MiB", title=f"{len(lines):,} graphs: search and check")
    table.add_row(
        "prove (search, and check of each)", f"{search.processor:.2f}", f"{search.peak:.1f}"
    )
    table.add_row("check (the folder)", f"{check.processor:.2f}", f"{check.peak:.1f}")
    return table


def main(words: Sequence[str]) -> int:
    """Measure lists, and print the tables."""
    parser = argparse.ArgumentParser(prog="bench lists", description="Measure long lists.")
    parser.add_argument(
        "--vertices", type=int, default=16, help="of the cubic graphs by jobs (default: 16)"
    )
    parser.add_argument(
        "--length", type=int, default=16_000, help="of the longest list (default: 16,000)"
    )
    cores = len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count()
    parser.add_argument("--jobs", type=int, default=cores, help="at most (default: the cores)")
    arguments = parser.parse_args(words)
    console = Console()
    geng = find_geng()
    if geng is None:
        console.print("the program geng is missing; next: pip install passagemath-nauty")
        return 2
    all_graphs = cubic_graphs(geng, arguments.vertices)
    long = cubic_graphs(geng, arguments.vertices + 2, arguments.length)
    jobs = [number for number in (1, 2, 3, 4, 6, 8, 12, 16) if number <= arguments.jobs]
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        console.print(render_jobs(all_graphs, jobs, folder))
        console.print(render_jobs(long, jobs, folder))
        console.print(render_lengths(long, 1, folder))
        console.print(render_lengths(long, max(2, arguments.jobs), folder))
        console.print(render_check(all_graphs, folder))
    return 0
