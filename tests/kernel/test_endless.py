"""Endless claims as theorems about all n that Coq proves, and what it does not prove."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest

from certify.errors import InputError, OpenError
from certify.flow import prove
from certify.report.theorem.coq import find_coq, prove_theorems
from certify.report.theorem.sheet import Sheet, write_sheet
from tests.kernel.conftest import ROOT

Prove = Callable[[Path], Sheet]

HOPS = """\
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {2, 3}"
[instances]
n = "2.."
[answers]
exists = "n >= 4"
"""
"""No source: tests/checker/test_endless.py compares its answers with sweeps of whole graphs."""

FAMILIES = {
    # On 3 x n boards for even n >= 10, on 2 x n and 4 x n never:
    # Schwenk, Mathematics Magazine 64 (1991) 325-332.
    "closed knight's tours": """\
structure = "hamiltonian-cycle"
[graph]
vertices = { x = "1..n", y = "1..m" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
[instances]
m = "2..4"
n = "m.."
[answers]
exists = "m == 3 and n % 2 == 0 and n >= 10"
""",
    # GP(n, 2), exactly for n = 5 mod 6: Alspach, Journal of Combinatorial Theory B 34 (1983)
    # 293-312.
    "generalised Petersen graphs": """\
structure = "hamiltonian-cycle"
[graph]
vertices = { r = "0..1", i = "0..n-1" }
adjacent = \"\"\"(
a.r == b.r == 0 and (a.i - b.i) % n in {1, n - 1}
or a.r == b.r == 1 and (a.i - b.i) % n in {2, n - 2}
or a.r != b.r and a.i == b.i
)\"\"\"
[instances]
n = "5.."
[answers]
impossible = "n % 6 == 5"
""",
    # Residues modulo 4 in the rule, and of n; a condition on vertices; a seam. No source.
    "residues": HOPS.replace(
        "abs(a - b) in {2, 3}", "abs(a - b) in {1, 3} and (n % 2 == 0 or (a + b) % 4 != 1)"
    ).replace("n >= 4", "n % 2 == 0"),
    # A predicate that no pair of beds 3 apart meets: the form of the rule does not show it.
    "a predicate": HOPS.replace(
        "{2, 3}", "{1, 3} and prime(a % 6 + b % 6 + 1) or abs(a - b) == 2"
    ).replace("n >= 4", "n % 6 == 1"),
    "no edges": HOPS.replace("in {2, 3}", "== 0 and a != b").replace("n >= 4", "false"),
    "some layers empty": HOPS.replace(
        '3}"', '3} or abs(a - b) == 1"\nwhere = "a % 3 != 1"'
    ).replace("n >= 4", "n >= 2"),
    "two more parameters": HOPS.replace("{2, 3}", "{1, k, m}")
    .replace('n = "2.."', 'k = "2..3"\nn = "2.."\nm = "k..4"')
    .replace("n >= 4", "true"),
    "a seam": HOPS.replace("{2, 3}", "{2, n - 1, n - 2}").replace("n >= 4", "true"),
}


TWO_MORE = ["2_m_2", "2_m_3", "2_m_4", "3_m_3", "3_m_4"]


@pytest.fixture
def prove_all(compiled: Path, tmp_path: Path) -> Prove:
    """Return a function that has Coq prove the theorems of a folder."""

    def run(folder: Path) -> Sheet:
        sheet = write_sheet(folder)
        coq = find_coq()
        assert coq is not None
        proved = prove_theorems(tmp_path / f"{sheet.name}.v", coq, sheet, compiled)
        assert list(proved.theorems) == sheet.theorems
        return sheet

    return run


def settle(folder: Path, text: str) -> Path:
    """Prove a claim in a folder of its own."""
    folder.mkdir()
    claim = folder / "claim.toml"
    claim.write_text(text)
    for _ in prove(claim).outcomes:
        pass
    return folder


@pytest.mark.parametrize("name", ["endless-hops", "flower-rings"])
def test_demo_claims(name: str, prove_all: Prove) -> None:
    sheet = prove_all(ROOT / "proofs" / name)
    assert sheet.theorems == ["all"]
    assert sheet.table


@pytest.mark.parametrize("name", FAMILIES)
def test_families(name: str, prove_all: Prove, tmp_path: Path) -> None:
    sheet = prove_all(settle(tmp_path / "claim", FAMILIES[name]))
    assert sheet.table
    rows = {
        "closed knight's tours": ["all_m_2", "all_m_3", "all_m_4", "table"],
        "two more parameters": [*(f"all_k_{row}" for row in TWO_MORE), "table"],
    }
    assert sheet.theorems == rows.get(name, ["all"])
    for row in sheet.theorems:
        assert re.search(f"Theorem {row} : forall (m |k )?n", sheet.text)


TWINS = {
    "a small n": ('"n >= 4"', '"n >= 5"'),
    "an n in the middle": ('"n >= 4"', '"n >= 4 and n != 20"'),
    "a large n": ('"n >= 4"', '"n >= 4 and n != 4000"'),
    "a residue": ('"n >= 4"', '"n >= 4 and n % 7 != 0"'),
    "another rule": ("{2, 3}", "{2, 4}"),
    "a rule that is no such strip": ("abs(a - b) in {2, 3}", "abs(a - b) in {2, 3} and a + b != n"),
}


@pytest.mark.parametrize("name", TWINS)
def test_what_is_untrue_is_not_proved(name: str, prove_all: Prove, tmp_path: Path) -> None:
    folder = settle(tmp_path / "claim", HOPS)
    prove_all(folder)
    old, new = TWINS[name]
    (folder / "claim.toml").write_text(HOPS.replace(old, new))
    if "no such strip" in name:
        sheet = write_sheet(folder)
        assert not sheet.theorems
        assert "the family is no strip" in sheet.not_taken["n=2.."]
        return
    with pytest.raises(OpenError, match="Coq does not prove it"):
        prove_all(folder)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("span := 3", "span := 2"),
        ("low := 1", "low := 2"),
        ("up := 0", "up := 1"),
        ("least := 2", "least := 1"),
        ("1 claimed fits", "0 claimed fits"),
        ("fun x' => [x']", "fun x' => [x'; x']"),
        ("a + 1", "a + 2"),
    ],
)
def test_wrong_numbers_are_not_proved(
    old: str, new: str, compiled: Path, tmp_path: Path, prove_all: Prove
) -> None:
    sheet = prove_all(settle(tmp_path / "claim", HOPS))
    coq = find_coq()
    assert coq is not None
    assert old in sheet.text
    twin = replace(sheet, text=sheet.text.replace(old, new))
    with pytest.raises(OpenError, match="Coq does not prove it"):
        prove_theorems(tmp_path / "twin.v", coq, twin, compiled)


def test_what_is_not_claimed_is_as_found(prove_all: Prove, tmp_path: Path) -> None:
    sheet = prove_all(settle(tmp_path / "claim", HOPS[: HOPS.index("[answers]")]))
    assert sheet.theorems == ["all"]
    assert "(member n []) |||\n  ((4 <=? n) &&& (member (n mod 1) [0]))" in sheet.text


def test_what_has_no_theorem(tmp_path: Path) -> None:
    late = HOPS.replace('3}"', '3}"\nwhere = "a % 2 == 0 or a + 2 > n"')
    sheet = write_sheet(settle(tmp_path / "late", late.replace("n >= 4", "n in {2, 3, 5}")))
    assert not sheet.theorems
    assert not sheet.table
    assert "`where` that names n" in sheet.not_taken["n=2.."]


def test_rows_are_asked_for_by_name(tmp_path: Path) -> None:
    folder = settle(tmp_path / "claim", FAMILIES["closed knight's tours"])
    assert write_sheet(folder, "m=3,n=3..").theorems == ["all_m_3"]
    with pytest.raises(InputError, match=r"there is no instance 'm=5,n=3\.\.'"):
        write_sheet(folder, "m=5,n=3..")
