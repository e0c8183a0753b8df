"""Published tables, as CSV files, with and without a row that is wrong."""

from __future__ import annotations

from pathlib import Path

import pytest

from certify.checker import check_folder
from tests.recheck.conftest import Command, Write

SQUARES = """\
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "square(a + b)"
"""
# OEIS A090461: the n for which 1..n can be put in a row, neighbours adding up to squares;
# n = 1, on which the entries do not agree, is left out.
A090461 = {15, 16, 17, 23, *range(25, 46)}

KNIGHT = """\
structure = "hamiltonian-cycle"
[graph]
vertices = { x = "1..m", y = "1..n" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
"""


def schwenk(m: int, n: int) -> bool:
    """Whether the knight has a closed tour of m <= n rows and columns.

    Schwenk, Mathematics Magazine 64 (1991) 325-332 (the wording from memory).
    """
    return not (m % 2 == n % 2 == 1 or m in (1, 2, 4) or (m == 3 and n in (4, 6, 8)))


@pytest.mark.parametrize("wrong", [0, 18, 24, 25, 31])
def test_rows_of_square_sums(wrong: int, certify: Command, write: Write, tmp_path: Path) -> None:
    rows = [f"{n},{'yes' if (n in A090461) != (n == wrong) else 'no'}" for n in range(2, 46)]
    done = certify(
        "recheck",
        write("a090461.csv", "\n".join(["n,claimed", *rows, ""])),
        *("--claim", write("c.toml", SQUARES), "--out", tmp_path / "out", "--json"),
    )
    assert done.code == (3 if wrong else 0)
    assert [row["instance"] for row in done.rows if row["result"] != "agrees"] == (
        [{"n": wrong}] if wrong else []
    )
    check = check_folder(tmp_path / "out")
    assert len(list(check.verdicts())) == 44
    assert check.accepted


@pytest.mark.parametrize("wrong", [None, (3, 8), (5, 6)])
def test_closed_tours_of_the_knight(
    wrong: tuple[int, int] | None, certify: Command, write: Write, tmp_path: Path
) -> None:
    boards = [(m, n) for m in range(1, 7) for n in range(m, 13) if m * n <= 40]
    rows = [f"{m},{n},{str(schwenk(m, n) != ((m, n) == wrong)).lower()}" for m, n in boards]
    report = tmp_path / "report.md"
    done = certify(
        "recheck",
        write("schwenk.csv", "\n".join(["m,n,tour", *rows, ""])),
        *("--claim", write("c.toml", KNIGHT), "--column", "tour", "--json"),
        *("--report", report, "--out", tmp_path / "out"),
    )
    assert len(done.rows) == len(boards)
    differ = [row["instance"] for row in done.rows if row["result"] != "agrees"]
    assert differ == ([{"m": wrong[0], "n": wrong[1]}] if wrong else [])
    assert done.code == (3 if wrong else 0)
    assert report.read_text().count("## Line") == len(differ)
    check = check_folder(tmp_path / "out")
    assert len(list(check.verdicts())) == len(boards)
    assert check.accepted
