"""Tours of the knight and other leapers, and paths in rectangular grids."""

from __future__ import annotations

import pytest

from tests.published.conftest import ProveClaim, unreadable

CELLS = 64


def boards(structure: str, r: int, s: int, exists: str) -> str:
    """Return the claim about an (r, s)-leaper on all boards of m <= n, up to CELLS cells."""
    return f"""\
structure = "hamiltonian-{structure}"
[graph]
vertices = {{ x = "1..m", y = "1..n" }}
adjacent = "{{abs(a.x - b.x), abs(a.y - b.y)}} == {{{r}, {s}}}"
[instances]
m = "1..8"
n = "m..{CELLS}"
where = "m * n <= {CELLS}"
[answers]
exists = "{exists}"
"""


LEAPERS = {
    # Schwenk, Mathematics Magazine 64 (1991) 325-332 (the wording from memory).
    "closed knight": boards(
        "cycle",
        1,
        2,
        "not (m % 2 == n % 2 == 1 or m in {1, 2, 4} or m == 3 and n in {4, 6, 8})",
    ),
    # m >= 5: Cull and De Curtins, Fibonacci Quarterly 16 (1978) 276-285; m = 3 and 4: as
    # OEIS A169696 and A079137 count them (0 for 3 x 3, 3 x 5, 3 x 6; for 4 x 4).
    "open knight": boards(
        "path",
        1,
        2,
        "m == n == 1 or m == 3 and (n == 4 or n >= 7) or m == 4 and n >= 5 or m >= 5",
    ),
    # A (1,3)-leaper never leaves the cells of one colour: elementary.
    "open camel": boards("path", 1, 3, "m == n == 1"),
    "closed camel": boards("cycle", 1, 3, "false"),
}


@pytest.mark.parametrize("name", LEAPERS)
def test_leaper(name: str, prove_claim: ProveClaim) -> None:
    assert unreadable(prove_claim(LEAPERS[name]).values()) == []


def test_leapers_that_cannot_reach_every_cell(prove_claim: ProveClaim) -> None:
    """Knuth, Leaper graphs, Mathematical Gazette 78 (1994) 274-297, theorem 1.

    For r <= s and 2 <= m <= n, the graph is connected exactly if r + s and s - r have no
    common divisor, n >= 2s and m >= r + s.
    """
    outcomes = prove_claim("""\
structure = "hamiltonian-path"
[graph]
vertices = { x = "1..m", y = "1..n" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {r, s}"
[instances]
r = "1..4"
s = "r..5"
m = "2..8"
n = "m..12"
where = "gcd(r + s, s - r) > 1 or n < 2 * s or m < r + s"
[answers]
exists = false
""")
    assert len(outcomes) > 600
    assert {outcome.record.kind for outcome in outcomes.values()} == {"obstruction"}


def test_knight_on_five_by_five_starts_on_the_colour_of_the_corners(
    prove_claim: ProveClaim,
) -> None:
    """OEIS A165134: no path starts on a cell of the rarer colour; elementary.

    That each of the other 13 cells starts one: from memory.
    """
    prove_claim("""\
structure = "hamiltonian-path"
ends = [["i", "j"]]
[graph]
vertices = { x = "1..5", y = "1..5" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
[instances]
i = "1..5"
j = "1..5"
[answers]
exists = "(i + j) % 2 == 0"
""")


GRID = """\
[graph]
vertices = { x = "1..m", y = "1..n" }
adjacent = "abs(a.x - b.x) + abs(a.y - b.y) == 1"
[instances]
m = "1..9"
n = "m..9"
[answers]
"""


def test_grids(prove_claim: ProveClaim) -> None:
    """A path always; a cycle exactly on an even number of cells in two rows or more.

    Itai, Papadimitriou and Szwarcfiter, SIAM Journal on Computing 11 (1982) 676-686.
    """
    prove_claim('structure = "hamiltonian-path"\n' + GRID + "exists = true\n")
    prove_claim(
        'structure = "hamiltonian-cycle"\n' + GRID + 'exists = "m >= 2 and m * n % 2 == 0"\n'
    )


def test_grid_paths_between_two_cells(prove_claim: ProveClaim) -> None:
    """From (i, j) to (k, l) in m <= n rows and columns, for all pairs of cells.

    Itai, Papadimitriou and Szwarcfiter, as above (from memory): there is a path unless the
    colours are against it (both ends of the commoner colour on an odd board, of different
    colours on an even one), or
    - one row, and the ends are not its ends;
    - two rows, and the ends are the two cells of a column that is not the first or last;
    - three rows of even length, the end p of the odd colour in a column before that of the
      other end q, and one of them in the middle row or the columns not next to each other.
    """
    outcomes = prove_claim(r'''
structure = "hamiltonian-path"
ends = [["i", "j"], ["k", "l"]]
[graph]
vertices = { x = "1..m", y = "1..n" }
adjacent = "abs(a.x - b.x) + abs(a.y - b.y) == 1"
[instances]
m = "1..5"
n = "m..6"
i = "1..m"
j = "1..n"
k = "i..m"
l = "1..n"
where = "i < k or j < l"
[answers]
impossible = """
m * n % 2 == 0 and (i + j + k + l) % 2 == 0 \
or m * n % 2 == 1 and 1 in {(i + j) % 2, (k + l) % 2} \
or m == 1 and {j, l} != {1, n} \
or m == 2 and j == l and 1 < j < n \
or m == 3 and n % 2 == 0 and (j < l if (i + j) % 2 == 1 else l < j) \
and (i == 2 or k == 2 or abs(j - l) >= 2)"""
''')
    assert len(outcomes) > 1500
