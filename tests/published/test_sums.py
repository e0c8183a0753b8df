"""1, ..., n in a row or a ring, neighbours adding up to (or differing by) numbers of a kind."""

from __future__ import annotations

from pathlib import Path

import pytest

from certify.checker import check_folder
from certify.flow import prove
from tests.published.conftest import ProveClaim, unreadable


def rows(structure: str, rule: str, n: str, exists: str, first: int = 1) -> str:
    """Return the claim about the numbers first..n in a row (path) or a ring (cycle)."""
    return f"""\
structure = "hamiltonian-{structure}"
[graph]
vertices = "{first}..n"
adjacent = "{rule}"
[instances]
n = "{n}"
[answers]
exists = "{exists}"
"""


SQUARE_ROWS = "n in {15, 16, 17, 23} or n >= 25"
"""OEIS A090461, with R. Gerbicz's proof (2018) that all n >= 25 belong to it; A071983
counts the rows (0 for 18..22 and 24); A078107 lists the n without one. The row of the
single number 1, of which the entries do not agree, is left out."""

TABLES = {
    "square sums, row": rows("path", "square(a + b)", "2..60", SQUARE_ROWS),
    # OEIS A071984 counts the rings: none up to 31, some from 32 on. Its comment: at n = 31
    # no number has fewer than two partners any more, and still there is no ring.
    "square sums, ring": rows("cycle", "square(a + b)", "1..60", "n >= 32"),
    # OEIS A108658, listed there up to 50.
    "square sums from 0, row": rows(
        "path", "square(a + b)", "0..50", "n in {0, 1, 14, 15, 16, 17} or n >= 20", first=0
    ),
    # OEIS A108661: no ring for 2..30; the first is at 31.
    "square sums from 0, ring": rows("cycle", "square(a + b)", "2..34", "n >= 31", first=0),
    # OEIS A116980, listed up to 35.
    "triangular sums, row": rows("path", "triangular(a + b)", "1..35", "n <= 2 or n >= 9"),
    # OEIS A079734; Fox, Kinnersley, McDonald, Orlow and Puleo, Fibonacci Quarterly 52 (2014)
    # 46-49: n = 9, 11, a Fibonacci number, or one less.
    "Fibonacci sums, row": rows(
        "path",
        "fibonacci(a + b)",
        "1..150",
        "n in {1, 2, 3, 4, 5, 7, 8, 9, 11, 12, 13, 20, 21, 33, 34, 54, 55, 88, 89, 143, 144}",
    ),
    "Fibonacci sums, ring": rows("cycle", "fibonacci(a + b)", "1..60", "false"),  # as above
    # OEIS A051252 counts the rings of an even n, which are reported to exist for all even n up
    # to 2,000,000 (n = 2 is left out: 1, 2 is a ring there, and no cycle here); an odd n has
    # none, for neighbours differ in parity. Without its last number a ring becomes a row, so
    # there is a row for each n; OEIS A051239 counts them up to 24.
    "prime sums, ring": rows("cycle", "prime(a + b)", "3..60", "n % 2 == 0"),
    "prime sums, row": rows("path", "prime(a + b)", "1..60", "true"),
    # OEIS A367704 (rows) and A228626 (rings); that there is a ring for each n >= 5 is a
    # theorem of Y.-G. Chen, see Chen, Fu and Guo, arXiv:2003.00729.
    "prime differences, row": rows("path", "prime(abs(a - b))", "1..40", "n == 1 or n >= 4"),
    "prime differences, ring": rows("cycle", "prime(abs(a - b))", "1..40", "n >= 5"),
    # Elementary: a number a with 2^(k-1) < a < 2^k has the one smaller partner 2^k - a, and a
    # power of two has none; so the graph is a forest with a tree for each power of two.
    "power-of-two sums, row": rows("path", "a + b in {2, 4, 8, 16, 32, 64}", "1..32", "n == 1"),
    "power-of-two sums, ring": rows("cycle", "a + b in {2, 4, 8, 16, 32, 64}", "1..32", "false"),
}


@pytest.mark.parametrize("name", TABLES)
def test_table(name: str, prove_claim: ProveClaim) -> None:
    assert unreadable(prove_claim(TABLES[name]).values()) == []


@pytest.mark.parametrize("n", [24, 25])
def test_a_misprint_in_a_table_is_found(n: int, tmp_path: Path) -> None:
    """24 is the last number without a row of square sums, 25 the first of the endless run."""
    wrong = rows("path", "square(a + b)", "20..30", f"({SQUARE_ROWS}) != (n == {n})")
    claim = tmp_path / "claim.toml"
    claim.write_text(wrong)
    assert [o.name for o in prove(claim).outcomes if o.contradicts] == [f"n={n}"]
    check = check_folder(tmp_path)
    assert [v.instance for v in check.verdicts() if not v.accepted] == [{"n": n}]
    assert not check.accepted
