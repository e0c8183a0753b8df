"""Tables and rules to recheck, and the command line as a function."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from tests.flow.conftest import Command as Command
from tests.flow.conftest import Result
from tests.flow.conftest import certify as command_line  # noqa: F401

RULE = """\
title = "Hops"
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {3, 5}"
"""
BOUNDED = RULE + '[instances]\nn = "1..14"\n[answers]\nexists = "n != 11"\n'
EXISTS = {1, 7, 8, 9, 10, 12, 13, 14}
"""For which n up to 14 the numbers 1..n can be put in a row with steps of 3 or 5."""

Write = Callable[[str, str | bytes], Path]


@pytest.fixture
def certify(command_line: Command) -> Command:  # noqa: F811
    """Run the command line in this process, a recheck without processes of its own."""

    def run(command: str, *arguments: object) -> Result:
        alone = command == "recheck" and "--jobs" not in arguments
        return command_line(command, *arguments, *(("--jobs", 1) if alone else ()))

    return run


@pytest.fixture
def write(tmp_path: Path) -> Write:
    """Write a file into the test's folder."""

    def run(name: str, text: str | bytes) -> Path:
        path = tmp_path / name
        path.write_bytes(text.encode() if isinstance(text, str) else text)
        return path

    return run


def table(wrong: int = 0, first: int = 1, last: int = 14) -> str:
    """Return the table of the hops, with one row turned round."""
    rows = (f"{n},{int((n in EXISTS) != (n == wrong))}" for n in range(first, last + 1))
    return "\n".join(["n,claimed", *rows, ""])
