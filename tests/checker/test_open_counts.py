"""Counts in a claim of which instances are open: merely open while they can come out right.

`tests/page/test_open_counts_twins.py` gives the same folders to the second checker.
"""

from __future__ import annotations

from itertools import product
from pathlib import Path
from typing import Any

import pytest

from certify.checker.__main__ import main
from certify.claim.claim import read_claim
from tests.checker.folders import (
    LIST,
    LIST_CLAIM,
    Files,
    lines_of,
    make_folder,
    read_files,
    with_lines,
    write_files,
)

Counts = tuple[int | None, int | None]
CASES = list(product([(), (0,), (3,), (0, 3)], [None, *range(6)], [None, *range(6)]))
ACCEPTED, REJECTED, OPEN = 0, 3, 4


def make_files(top: Path) -> Files:
    """Return an accepted folder of four graphs; the object exists in the first three."""
    files = read_files(make_folder(top / "list", LIST_CLAIM, graphs_g6=LIST))
    assert [item["answer"] for item in lines_of(files)] == ["exists"] * 3 + ["impossible"]
    return files


def with_open(files: Files, left: tuple[int, ...], counts: Counts) -> Files:
    """Leave some records open, and claim other counts; None for none."""
    records: list[Any] = lines_of(files)
    for at in left:
        records[at] |= {"answer": "open", "kind": "none", "evidence": {}, "length": 0}
    said = zip(("exists", "impossible"), counts, strict=True)
    claimed = "".join(f"{name} = {count}\n" for name, count in said if count is not None)
    text = files["claim.toml"].replace(b"exists = 3\n", claimed.encode())
    return with_lines(files | {"claim.toml": text}, records)


def expected(left: tuple[int, ...], counts: Counts) -> int:
    """Return the exit code, from every way in which the open instances could come out."""
    shown = [True, True, True, False]
    for outcome in product([True, False], repeat=len(left)):
        for at, exists in zip(left, outcome, strict=True):
            shown[at] = exists
        found = (shown.count(True), shown.count(False))
        if all(count in (None, real) for count, real in zip(counts, found, strict=True)):
            return OPEN if left else ACCEPTED
    return REJECTED


def test_every_count(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    files = make_files(tmp_path)
    codes = []
    for number, (left, *counts) in enumerate(CASES):
        wanted = expected(left, (counts[0], counts[1]))
        folder = tmp_path / str(number)
        write_files(folder, with_open(files, left, (counts[0], counts[1])))
        assert main([str(folder)]) == wanted, (left, counts)
        # The claim itself, which `prove` asks, says the same of the answers.
        answers = [
            "open" if at in left else "exists" if at < 3 else "impossible" for at in range(4)
        ]
        complaint = read_claim(folder / "claim.toml").check_counts(answers)
        assert (complaint is not None) == (wanted == REJECTED), (left, counts)
        codes.append(wanted)
    capsys.readouterr()
    assert set(codes) == {ACCEPTED, REJECTED, OPEN}
