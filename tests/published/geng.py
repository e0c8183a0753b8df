"""All graphs on n vertices, one of each isomorphism class, as graph6 lines.

They come from the program geng of nauty (McKay and Piperno, Journal of Symbolic
Computation 60 (2014) 94-112), as the package passagemath-nauty ships it.
"""

from __future__ import annotations

import importlib.resources
import subprocess
from collections.abc import Iterator
from pathlib import Path

import pytest

MISSING = (
    "NOT CHECKED: the counts over all graphs, and over all cubic graphs; "
    "next: pip install passagemath-nauty"
)


def find_geng() -> Path | None:
    """Return where the program is; None when the package is not installed."""
    try:
        folder = importlib.resources.files("sage_wheels")
    except ModuleNotFoundError:
        return None
    program = Path(str(folder / "bin" / "geng"))
    return program if program.is_file() else None


def graph6_lines(n: int, *options: str) -> Iterator[bytes]:
    """Yield the graphs on n vertices; the calling test is skipped without the program.

    options: geng's own: -c connected, -d3 degrees of 3 at least, -D3 of 3 at most,
    14:14 from 14 to 14 edges.
    """
    program = find_geng()
    if program is None:
        pytest.skip(MISSING)
    done = subprocess.run([program, "-q", str(n), *options], capture_output=True, check=True)
    yield from done.stdout.splitlines(keepends=True)


def graph6_list(n: int, *options: str) -> bytes:
    """Return the same as the bytes of a list file."""
    return b"".join(graph6_lines(n, *options))
