"""Endless claims from the command line: prove, check, explain, and what goes wrong."""

from __future__ import annotations

from collections.abc import Callable
from itertools import pairwise
from pathlib import Path

import pytest

from certify import interface
from tests.flow.conftest import Command, folder_bytes

HOPS = """\
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {3, 5}"
[instances]
n = "1.."
[answers]
exists = "n == 1 or 7 <= n <= 10 or n >= 12"
"""
KNIGHT = """\
structure = "hamiltonian-cycle"
[graph]
vertices = { x = "1..n", y = "1..m" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
[instances]
m = "2..4"
n = "m.."
[answers]
exists = "m == 3 and n % 2 == 0 and n >= 10"
"""


def test_prove_check_and_explain_agree(certify: Command, write_claim: Callable[..., Path]) -> None:
    claim = write_claim(HOPS)
    proved = certify("prove", claim)
    assert proved.code == 0, proved.err
    assert "n=1..: settled, endless of length" in proved.out
    assert proved.out.count("n in {1, 7, 8, 9, 10} or n >= 12") == 2
    checked = certify("check", claim.parent, "--json")
    assert checked.code == 0, checked.out
    assert [row["answer"] for row in checked.rows] == ["settled"]
    assert set(folder_bytes(claim.parent)) == {"claim.toml", "evidence.jsonl", "manifest.json"}
    text = certify("explain", claim.parent, "n=1..").out
    for said in ("has a Hamiltonian path", "n in {1, 7, 8, 9, 10} or n >= 12", "T(n + "):
        assert said in text
    assert "apex" not in text
    assert max(map(len, text.splitlines())) <= 88


def test_rows_and_json(certify: Command, write_claim: Callable[..., Path]) -> None:
    """The closed knight's tours of Schwenk, Math. Mag. 64 (1991) 325-332, for heights 2 to 4."""
    claim = write_claim(KNIGHT)
    proved = certify("prove", claim, "--json")
    assert proved.code == 0, proved.err
    assert [row["instance"] for row in proved.rows] == [
        {"m": 2, "n": "2.."},
        {"m": 3, "n": "3.."},
        {"m": 4, "n": "4.."},
    ]
    assert [row["exists_for"] for row in proved.rows] == ["no n", "n even and n >= 10", "no n"]
    assert {row["answer"] for row in proved.rows} == {"settled"}
    assert {row["verdict"] for row in proved.rows} == {"accepted"}
    assert certify("check", claim.parent).code == 0
    before = folder_bytes(claim.parent)
    assert certify("prove", claim).code == 0
    assert folder_bytes(claim.parent) == before
    assert certify("prove", claim, "--redo", "m=3,n=3..").code == 0
    assert folder_bytes(claim.parent) == before


def test_a_wrong_claim_is_contradicted_by_the_smallest_n(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS.replace("n >= 12", "n >= 14"))
    proved = certify("prove", claim)
    assert proved.code == 3
    assert "instance n=1..: " in proved.err
    assert "n = 12" in proved.err
    assert "n = 13" not in proved.err
    assert "(not as claimed)" in proved.out
    checked = certify("check", claim.parent)
    assert checked.code == 3
    assert "n = 12" in checked.out


def test_a_claim_wrong_far_away_is_contradicted_too(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS.replace("n >= 12", "n >= 12 and n != 5000"))
    proved = certify("prove", claim)
    assert proved.code == 3
    assert "n = 5000" in proved.err


def test_one_n_is_explained(certify: Command, write_claim: Callable[..., Path]) -> None:
    claim = write_claim(HOPS)
    assert certify("prove", claim).code == 0
    small = certify("explain", claim.parent, "n=11").out
    assert "For n = 11 the graph (11 vertices" in small
    assert "has no Hamiltonian path" in small
    far = certify("explain", claim.parent, "n=1000003").out
    assert "For n = 1000003 the graph has a Hamiltonian path." in far
    assert "499" in far  # times the stretch of two layers is repeated
    assert len(far) < 3_000
    near = certify("explain", claim.parent, "n=100").out
    path = [int(v) for v in near.rpartition("n = 100:")[2].replace(",", " ").split()]
    assert sorted(path) == list(range(1, 101))
    assert {abs(u - v) for u, v in pairwise(path)} == {3, 5}
    assert interface.explain(claim.parent, "n=100") + "\n" == near
    for name in ("n=0", "n=x", "m=3,n=5", "17"):
        refused = certify("explain", claim.parent, name)
        assert refused.code == 2
        assert "there is no instance" in refused.err


def test_one_n_without_the_object_is_explained(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(KNIGHT.replace('"2..4"', '"3..3"'))
    assert certify("prove", claim).code == 0
    odd = certify("explain", claim.parent, "m=3,n=10001").out
    assert "For m = 3 and n = 10001 the graph has no Hamiltonian cycle." in odd
    assert "none can be continued" in odd
    even = certify("explain", claim.parent, "m=3,n=40").out
    assert "(40, 3)" in even
    row = certify("explain", claim.parent, "m=3,n=3..").out
    assert "The graph for m = 3 has a Hamiltonian cycle, among the n >= 3, exactly for" in row
    assert "n even and n >= 10" in row


def test_what_the_limits_do_not_settle_is_open(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS)
    proved = certify("prove", claim, "--budget", "0.000001", "--json")
    assert proved.code == 4
    assert [row["answer"] for row in proved.rows] == ["open"]
    assert "exists_for" not in proved.rows[0]
    assert certify("check", claim.parent).code == 4
    assert certify("prove", claim).code == 0
    assert certify("check", claim.parent).code == 0


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('"abs(a - b) in {3, 5}"', '"square(a + b)"', ":4: [graph] adjacent: column 1"),
        ('"abs(a - b) in {3, 5}"', '"a + b == 12"', "the family is no strip"),
        ('"1..n"', '"1..2 * n"', ":3: [graph] vertices: the family is no strip"),
        ("n >= 12", "square(n)", ":8: [answers] exists"),
        ('"1.."', '"1.."\nm = "1.."', ":7: [instances] m: only one parameter"),
    ],
)
def test_refusals_write_nothing(
    old: str, new: str, said: str, certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS.replace(old, new, 1))
    result = certify("prove", claim)
    assert result.code == 2, result
    assert said in result.err
    assert result.err.count("\n") == 1
    assert set(folder_bytes(claim.parent)) == {"claim.toml"}


def test_the_demonstration_is_as_it_says(certify: Command, tmp_path: Path) -> None:
    claim = Path(__file__).parents[2] / "proofs" / "endless-hops" / "claim.toml"
    proved = certify("prove", claim, "--out", tmp_path, "--json")
    assert proved.code == 0, proved.err
    assert proved.rows[0]["exists_for"] == "n in {10, 11, 12, 13} or n >= 17"
    assert certify("check", tmp_path).code == 0
