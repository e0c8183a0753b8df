"""Counts in a claim of which instances are open: the second checker says what the first does."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.checker.folders import write_files
from tests.checker.test_open_counts import ACCEPTED, CASES, OPEN, expected, make_files, with_open
from tests.page.node import CHECKER, NODE, run

pytestmark = pytest.mark.skipif(not NODE, reason="there is no `node` on the PATH: NOT TESTED")


def test_every_count(tmp_path: Path) -> None:
    files = make_files(tmp_path)
    wanted = {}
    for number, (left, exists, impossible) in enumerate(CASES):
        folder = write_files(tmp_path / str(number), with_open(files, left, (exists, impossible)))
        wanted[str(folder)] = expected(left, (exists, impossible))
    said = run([NODE, str(CHECKER / "main.js"), *wanted]).stdout.splitlines()
    last = [line for line in said if line.partition(": ")[0] in wanted]
    for folder, code in wanted.items():
        line = [text for text in last if text.startswith(f"{folder}: ")][-1]
        found = ACCEPTED if ": accepted: " in line else 3
        found = OPEN if ": rejected: an instance is not accepted; " in line else found
        assert found == code, line
