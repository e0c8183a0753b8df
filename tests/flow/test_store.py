"""A killed run is resumed; the same input gives the same bytes."""

from __future__ import annotations

import random
import signal
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest

from certify.claim.claim import read_claim
from certify.errors import InputError
from certify.evidence.store import Store
from tests.flow.conftest import HOPS, Command, folder_bytes

RUN = [sys.executable, "-c", "from certify.commands import main; main()", "prove"]

# Clause proofs at the end of the table give the run something to lose.
WITH_CLAUSES = """\
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "pentagonal(a + b)"
[instances]
n = "2..44"
where = "n < 36 or n > 41"
"""


def test_same_input_same_bytes(
    certify: Command, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    claim = write_claim(HOPS)
    for name in ("one", "two"):
        assert certify("prove", claim, "--out", tmp_path / name).code == 0
    assert folder_bytes(tmp_path / "one") == folder_bytes(tmp_path / "two")


def test_a_killed_run_ends_up_with_the_same_bytes(
    certify: Command, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    claim = write_claim(WITH_CLAUSES)
    kinds = ("--kinds", "witness,obstruction,clauses")
    assert certify("prove", claim, "--out", tmp_path / "whole", *kinds).code == 0
    size = (tmp_path / "whole" / "evidence.jsonl").stat().st_size
    rng = random.Random(20)
    killed = 0
    for part in sorted(rng.uniform(0.05, 0.95) for _ in range(4)):
        run = subprocess.Popen(
            [*RUN, claim, "--out", tmp_path / "killed", *kinds], stdout=subprocess.DEVNULL
        )
        # Not at a time, but when so much of the journal is written: machines differ.
        journal = tmp_path / "killed" / ".unfinished" / "evidence.jsonl"
        while run.poll() is None:
            if journal.exists() and journal.stat().st_size >= part * size:
                time.sleep(rng.uniform(0, 0.02))
                run.send_signal(signal.SIGKILL)
                break
            time.sleep(0.002)
        killed += run.wait() == -signal.SIGKILL
    assert killed > 0
    assert certify("prove", claim, "--out", tmp_path / "killed", *kinds).code == 0
    assert folder_bytes(tmp_path / "killed") == folder_bytes(tmp_path / "whole")
    assert certify("check", tmp_path / "killed").code == 0


def test_a_journal_that_was_cut_inside_a_line_is_taken_up(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS)
    assert certify("prove", claim).code == 0
    good = folder_bytes(claim.parent)
    for cut in (0, 1, 200, 700):
        unfinished = claim.parent / ".unfinished"
        with Store(claim.parent, read_claim(claim), claim):
            (unfinished / "evidence.jsonl").write_bytes(good["evidence.jsonl"][:cut])
        for name in ("evidence.jsonl", "manifest.json"):
            (claim.parent / name).unlink()
        assert certify("prove", claim).code == 0
        assert folder_bytes(claim.parent) == good


def test_stored_evidence_is_not_believed(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    """A record that was tampered with is searched again, not carried over."""
    claim = write_claim(HOPS)
    assert certify("prove", claim).code == 0
    good = folder_bytes(claim.parent)
    evidence = claim.parent / "evidence.jsonl"
    evidence.write_bytes(good["evidence.jsonl"].replace(b'"order":[', b'"order":[1,'))
    assert certify("check", claim.parent).code == 3
    assert certify("prove", claim).code == 0
    assert folder_bytes(claim.parent) == good


def test_two_runs_do_not_write_into_one_folder(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS)
    with Store(claim.parent, read_claim(claim), claim):
        refused = certify("prove", claim)
    assert refused.code == 2
    assert "another run" in refused.err


def test_a_folder_of_another_claim_is_left_alone(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    first = write_claim(HOPS, "first.toml")
    assert certify("prove", first).code == 0
    second = write_claim(HOPS, "second.toml")
    before = folder_bytes(first.parent)
    refused = certify("prove", second)
    assert refused.code == 2
    assert "first.toml" in refused.err
    assert folder_bytes(first.parent) == before


@pytest.mark.parametrize("name", ["clauses", "claim.toml"])
def test_nothing_is_written_or_removed_behind_a_link(
    name: str, certify: Command, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    claim = write_claim(WITH_CLAUSES)
    kept, out = tmp_path / "kept", tmp_path / "out"
    kept.mkdir()
    out.mkdir()
    (kept / "precious").write_text("x")
    (out / name).symlink_to(kept)
    refused = certify("prove", claim, "--out", out)
    assert refused.code == 2
    assert f"{out / name}: is a symbolic link" in refused.err
    assert folder_bytes(kept) == {"precious": b"x"}
    assert [path.name for path in out.iterdir()] == [name]


def test_a_link_in_the_place_of_evidence_is_replaced(
    certify: Command, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    """Also when what it leads to is just what would be written: no checker follows it."""
    claim = write_claim(HOPS)
    out, kept = tmp_path / "out", tmp_path / "kept"
    assert certify("prove", claim, "--out", out).code == 0
    (out / "evidence.jsonl").rename(kept)
    (out / "evidence.jsonl").symlink_to(kept)
    assert certify("check", out).code == 3
    assert certify("prove", claim, "--out", out).code == 0
    assert certify("check", out).code == 0
    assert kept.exists()


def test_a_claim_that_changes_before_the_folder_is_taken_is_said(
    write_claim: Callable[..., Path],
) -> None:
    """Else the manifest would name the later claim, and the evidence be for the earlier one."""
    path = write_claim(HOPS)
    claim = read_claim(path)
    path.write_bytes(path.read_bytes() + b"# a thought\n")
    with pytest.raises(InputError, match="has changed just now"), Store(path.parent, claim, path):
        raise AssertionError
    assert not (path.parent / "manifest.json").exists()


def test_a_folder_that_cannot_be_written_is_said(
    write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    claim = write_claim(HOPS)
    (tmp_path / "file").write_text("in the way")
    with (
        pytest.raises(InputError, match="cannot write"),
        Store(tmp_path / "file" / "out", read_claim(claim), claim),
    ):
        pass
