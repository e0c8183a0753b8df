"""The part of the benchmark about lists runs, and counts what it says it counts."""

from __future__ import annotations

from pathlib import Path

import pytest
from benchmark import __main__ as command
from benchmark import lists

from certify.checker import check_folder


@pytest.fixture
def geng() -> Path:
    program = lists.find_geng()
    if program is None:
        pytest.skip("NOT CHECKED: lists of cubic graphs; next: pip install passagemath-nauty")
    return program


def test_the_lists_are_those_of_cubic_graphs(geng: Path) -> None:
    """OEIS A002851: the connected cubic graphs on 4, 6, ..., 12 vertices."""
    counts = [len(lists.cubic_graphs(geng, n)) for n in (4, 6, 8, 10, 12)]
    assert counts == [1, 2, 5, 19, 85]
    assert len(lists.cubic_graphs(geng, 12, 7)) == 7


def test_a_run_is_measured_and_proves_the_list(geng: Path, tmp_path: Path) -> None:
    lines = lists.cubic_graphs(geng, 10)
    for jobs in (1, 2):
        run = lists.prove(lines, jobs, tmp_path)
        assert run.processor > 0
        assert run.wall > 0
        assert 10 < run.peak < 4_000
        check = check_folder(tmp_path / "out")
        assert len(list(check.verdicts())) == len(lines)
        assert check.accepted


def test_the_tables_are_printed(geng: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert command.main(["lists", "--vertices", "8", "--length", "19", "--jobs", "2"]) == 0
    said = capsys.readouterr().out
    for text in ("graphs/s", "ms/graph more", "peak MiB", "--jobs 1", "--jobs 2", "check (the"):
        assert text in said
