"""The command line, as a user meets it."""

from __future__ import annotations

import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import networkx
import pytest

from certify import checker
from tests.flow.conftest import HOPS, Command, folder_bytes

SURVEY = HOPS.split("[answers]")[0]


def test_prove_check_and_explain_agree(
    certify: Command, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    claim = write_claim(HOPS)
    proved = certify("prove", claim, "--out", tmp_path / "out", "--json")
    assert proved.code == 0, proved.err
    checked = certify("check", tmp_path / "out", "--json")
    assert checked.code == 0, checked.err
    assert [row["answer"] for row in proved.rows] == [row["answer"] for row in checked.rows]
    assert [row["instance"] for row in proved.rows] == [{"n": n} for n in range(1, 15)]
    assert {row["verdict"] for row in checked.rows} == {"accepted"}
    text = certify("explain", tmp_path / "out", "n=11").out
    assert "has no Hamiltonian path" in text
    assert "apex" not in text
    assert "has a Hamiltonian path" in certify("explain", tmp_path / "out", "n=7").out


def test_evidence_lies_beside_the_claim_unless_told_otherwise(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS, "hops.toml")
    assert certify("prove", claim).code == 0
    names = set(folder_bytes(claim.parent))
    assert names == {"hops.toml", "evidence.jsonl", "manifest.json"}
    assert certify("check", claim.parent).code == 0


def test_a_contradicted_claim_says_so_and_keeps_the_evidence(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS.replace("n >= 12", "n >= 11"))
    proved = certify("prove", claim)
    assert proved.code == 3
    assert "n=11: the claim says exists, and the evidence shows impossible" in proved.err
    checked = certify("check", claim.parent)
    assert checked.code == 3
    assert "instance n=11" in checked.out


def test_wrong_counts_contradict_the_claim(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(SURVEY + "[answers]\nexists = 5\n")
    assert certify("prove", claim).code == 3
    assert certify("check", claim.parent).code == 3


def test_what_the_budget_does_not_settle_is_open(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(SURVEY)
    proved = certify("prove", claim, "--kinds", "witness", "--json")
    assert proved.code == 4
    assert [row["answer"] for row in proved.rows if row["instance"]["n"] == 11] == ["open"]
    checked = certify("check", claim.parent, "--json")
    assert checked.code == 4
    assert checked.rows[10]["verdict"] == "rejected"
    assert "left open" in checked.rows[10]["reason"]
    # The next run takes up what is open, and keeps the rest.
    assert certify("prove", claim).code == 0
    assert certify("check", claim.parent).code == 0


def test_redo_takes_instances_that_exist(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(SURVEY)
    assert certify("prove", claim).code == 0
    before = folder_bytes(claim.parent)
    assert certify("prove", claim, "--redo", "n=11").code == 0
    assert folder_bytes(claim.parent) == before
    wrong = certify("prove", claim, "--redo", "n=99")
    assert wrong.code == 2
    assert "n=99" in wrong.err
    assert folder_bytes(claim.parent) == before


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('"abs(a - b) in {3, 5}"', '"abs(a - b) in {3, 5"', ":5:"),
        ('"abs(a - b) in {3, 5}"', '"a < b"', "symmetric"),
        ('"abs(a - b) in {3, 5}"', '"a ** 9 ** 9 ** 9 == b"', ":5:"),
        ('"abs(a - b) in {3, 5}"', "\"__import__('os').getcwd() == b\"", ":5:"),
        ('"1..14"', '"14..1"', ":6:"),
        ('"1..14"', '"1..10 ** 12"', ":7:"),
        ('"1..n"', '"1..n * 10 ** 9"', ":4:"),
        ("adjacent", "adjacence", "adjacen"),
        ("title", "titel", "title"),
        ('"Hops"', '"Hops', ":1:"),
        ('"1..n"', '"1.."', "endless"),
    ],
)
def test_bad_claims_are_refused_and_nothing_is_written(
    old: str,
    new: str,
    said: str,
    certify: Command,
    write_claim: Callable[..., Path],
    tmp_path: Path,
) -> None:
    claim = write_claim(HOPS.replace(old, new, 1))
    result = certify("prove", claim, "--out", tmp_path / "out")
    assert result.code == 2, result
    assert said in result.err
    assert "Traceback" not in result.err
    assert not (tmp_path / "out").exists()
    assert set(folder_bytes(claim.parent)) == {"claim.toml"}


def test_decide_answers_for_each_graph_of_a_file(certify: Command, tmp_path: Path) -> None:
    """Petersen's graph has a Hamiltonian path and no cycle (Petersen 1898; from memory)."""
    file = tmp_path / "two.g6"
    graphs = [networkx.petersen_graph(), networkx.cycle_graph(5)]
    file.write_bytes(b"".join(networkx.to_graph6_bytes(g, header=False) for g in graphs))
    cycle = certify("decide", file, "--structure", "hamiltonian-cycle", "--json")
    assert cycle.code == 0
    assert [(r["instance"], r["answer"]) for r in cycle.rows] == [(1, "impossible"), (2, "exists")]
    path = certify("decide", file, "--structure", "hamiltonian-path", "--json")
    assert [row["answer"] for row in path.rows] == ["exists", "exists"]
    file.write_bytes(file.read_bytes()[:-3] + b"\n")
    cut = certify("decide", file, "--structure", "hamiltonian-cycle")
    assert cut.code == 2
    assert "two.g6:2" in cut.err


def test_other_formats_are_decided_too(certify: Command, tmp_path: Path) -> None:
    (tmp_path / "a.edges").write_text("x y\ny z\nz x\n")
    networkx.write_graphml(networkx.path_graph(4), tmp_path / "b.graphml")
    (tmp_path / "c.col").write_text("p edge 3 2\ne 1 2\ne 2 3\n")
    answers = []
    for name in ("a.edges", "b.graphml", "c.col"):
        result = certify("decide", tmp_path / name, "--structure", "hamiltonian-cycle", "--json")
        assert result.code == 0, result.err
        answers += [row["answer"] for row in result.rows]
    assert answers == ["exists", "impossible", "impossible"]


def test_usage_errors_have_code_2(certify: Command, tmp_path: Path) -> None:
    assert certify("check", tmp_path / "nowhere").code == 2
    assert certify("prove", tmp_path / "nowhere.toml").code == 2
    assert certify("explain", tmp_path, "n=1").code == 2
    assert certify("prove").code == 2
    (tmp_path / "claim.toml").write_text(HOPS)
    assert certify("prove", tmp_path / "claim.toml", "--kinds", "magic").code == 2


def test_the_referee_is_missed_clearly(
    certify: Command,
    write_claim: Callable[..., Path],
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    claim = write_claim(HOPS)
    assert certify("prove", claim).code == 0
    monkeypatch.setenv("PATH", "/nonexistent")
    result = certify("check", claim.parent, "--referee", "drat-trim")
    assert result.code == 2
    assert "drat-trim is not on the PATH" in result.err


def test_the_command_is_installed_and_the_checker_stands_alone(
    certify: Command, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    """The checker's folder alone, copied elsewhere, gives the same verdicts."""
    claim = write_claim(HOPS)
    assert certify("prove", claim).code == 0
    source = Path(checker.__file__).parent
    target = tmp_path / "alone" / "checker"
    target.mkdir(parents=True)
    for path in source.glob("*.py"):
        (target / path.name).write_bytes(path.read_bytes())
    command = [
        sys.executable,
        "-I",
        "-c",
        f"import sys; sys.path.insert(0, {str(target.parent)!r})",
    ]
    command[-1] += "; from checker.__main__ import main; sys.exit(main(sys.argv[1:]))"
    run = subprocess.run(
        [*command, str(claim.parent)], capture_output=True, text=True, check=False, timeout=60
    )
    assert run.returncode == 0, run.stderr
    assert "accepted: 14 of 14" in run.stdout
