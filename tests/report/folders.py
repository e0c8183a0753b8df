"""Folders of evidence for the tests of appendices: claims of our own, proved on the spot."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

from certify.flow import prove
from certify.search.ladder import DEFAULTS

HOPS = """\
title = "Hops of three or five & more"
statement = "The posts 1, ..., n can be visited by hops of 3 or 5 for n = 1, 7 <= n <= 10, n >= 12."
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {3, 5}"
[instances]
n = "1..14"
[answers]
exists = "n == 1 or 7 <= n <= 10 or n >= 12"
"""
SQUARES = """\
title = "Rows with square sums"
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "square(a + b)"
[instances]
n = "2..25"
"""
BOARDS = """\
title = "Boards of height three and four"
structure = "hamiltonian-cycle"
[graph]
vertices = { row = "1..m", column = "1..n" }
adjacent = "{abs(a.row - b.row), abs(a.column - b.column)} == {1, 2}"
[instances]
m = "3..4"
n = "m..8"
[answers]
impossible = true
"""
RINGS = """\
title = "Two rings"
structure = "hamiltonian-cycle"
[graph]
vertices = { r = "0..1", i = "0..n - 1" }
adjacent = '''(a.r == b.r == 0 and (a.i - b.i) % n in {1, n - 1}
  or a.r == b.r == 1 and (a.i - b.i) % n in {2, n - 2} or a.r != b.r and a.i == b.i)'''
[instances]
n = "5..11"
where = "n % 6 == 5"
[answers]
exists = false
"""
NAMES = """\
title = "Names with Ünusual_letters: 100% & more #1"
structure = "hamiltonian-path"
ends = ["Köln", "a_1"]
required = [["b^2", "c%3"]]
forbidden = [["a_1", "e{5}"]]
[graph]
list = "names.edges"
[answers]
impossible = true
"""
NAMES_EDGES = """\
Köln b^2
b^2 c%3
c%3 e{5}
e{5} a_1
a_1 東京
a_1 f\\6
"""
PETERSENS = """\
title = "The Petersen graph, twice"
structure = "hamiltonian-cycle"
[graph]
list = "petersen.g6"
"""
PETERSEN = "IsP@OoUHO"
"""The graph of tests/report/examples.py in graph6."""


def prove_text(folder: Path, text: str, **files: str) -> Path:
    """Write a claim and the files it names into a folder, and prove it there."""
    folder.mkdir(parents=True, exist_ok=True)
    for name, content in files.items():
        (folder / name.replace("__", ".")).write_text(content, encoding="utf-8")
    (folder / "claim.toml").write_text(text, encoding="utf-8")
    return prove_file(folder / "claim.toml", folder)


def prove_file(claim: Path, folder: Path, *, kinds: set[str] | None = None) -> Path:
    """Prove a claim into a folder. kinds: of evidence, all if None."""
    limits = DEFAULTS if kinds is None else replace(DEFAULTS, kinds=frozenset(kinds))
    for _ in prove(claim, out=folder, limits=limits).outcomes:
        pass
    return folder
