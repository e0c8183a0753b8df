"""Two runs on one folder at once: one of them goes on, and the other is refused."""

from __future__ import annotations

import os
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest

from certify.claim.claim import read_claim
from certify.errors import InputError
from certify.evidence.store import Store
from certify.flow import prove
from tests.checker.folders import read_files
from tests.flow.conftest import HOPS, Command

HOLD = """
import sys
from pathlib import Path
from certify.claim.claim import read_claim
from certify.evidence.store import Store
claim = Path(sys.argv[1])
with Store(claim.parent, read_claim(claim), claim):
    print("held", flush=True)
    sys.stdin.read()
"""
# Take the folder and finish it, again and again, and tell of any time when another had it too.
CONTEND = """
import os, sys, time
from pathlib import Path
from certify.claim.claim import read_claim
from certify.errors import InputError
from certify.evidence.store import Store
os.fsync = lambda handle: None
claim, mark, stop = map(Path, sys.argv[1:])
read, taken, refused = read_claim(claim), 0, 0
while not stop.exists():
    try:
        with Store(claim.parent, read, claim) as store:
            os.close(os.open(mark, os.O_CREAT | os.O_EXCL))
            taken += 1
            for key in read.instance_keys():
                store.find_stored(key)
            os.unlink(mark)
            store.finish()
    except InputError as error:
        assert "another run" in str(error) or "other runs" in str(error), error
        refused += 1
print(taken, refused)
"""


def test_the_second_run_is_refused_and_the_first_one_goes_on(
    certify: Command, write_claim: Callable[..., Path]
) -> None:
    claim = write_claim(HOPS)
    assert certify("prove", claim).code == 0
    before = read_files(claim.parent)
    holder = subprocess.Popen(
        [sys.executable, "-c", HOLD, claim], stdin=subprocess.PIPE, stdout=subprocess.PIPE
    )
    assert holder.stdout is not None
    assert holder.stdout.readline() == b"held\n"
    refused = certify("prove", claim)
    assert refused.code == 2
    assert f"{claim.parent}: another run is writing here; wait for it to end" in refused.err
    # Reading what is finished is always possible.
    assert certify("check", claim.parent).code == 0
    assert certify("explain", claim.parent, "n=2").code == 0
    holder.communicate()
    assert holder.returncode == 0
    assert certify("prove", claim).code == 0
    assert read_files(claim.parent) == before


def test_many_runs_take_the_folder_one_after_another(tmp_path: Path) -> None:
    claim, mark, stop = tmp_path / "f" / "claim.toml", tmp_path / "mark", tmp_path / "stop"
    claim.parent.mkdir()
    claim.write_text(HOPS)
    command = [sys.executable, "-c", CONTEND, claim, mark, stop]
    runs = [subprocess.Popen(command, stdout=subprocess.PIPE, text=True) for _ in range(3)]
    time.sleep(4)
    stop.touch()
    said = [run.communicate()[0].split() for run in runs]
    assert [run.returncode for run in runs] == [0, 0, 0]
    taken, refused = (sum(int(words[place]) for words in said) for place in (0, 1))
    assert taken > 3
    assert refused > 0
    assert not (claim.parent / ".unfinished").exists()


def test_the_lock_of_a_killed_run_holds_nobody_up(tmp_path: Path) -> None:
    claim = tmp_path / "claim.toml"
    claim.write_text(HOPS)
    holder = subprocess.Popen(
        [sys.executable, "-c", HOLD, claim], stdin=subprocess.PIPE, stdout=subprocess.PIPE
    )
    assert holder.stdout is not None
    assert holder.stdout.readline() == b"held\n"
    holder.kill()
    holder.communicate()
    assert (tmp_path / ".unfinished" / "lock").exists()
    assert all(outcome.verdict.accepted for outcome in prove(claim).outcomes)
    assert not (tmp_path / ".unfinished").exists()


def test_an_error_lets_go_of_the_folder(tmp_path: Path) -> None:
    claim = tmp_path / "claim.toml"
    claim.write_text(HOPS)
    read = read_claim(claim)
    (tmp_path / ".unfinished").mkdir()
    (tmp_path / ".unfinished" / "input").mkdir()  # in the way
    for _ in range(2):
        with pytest.raises(InputError, match="cannot write here"), Store(tmp_path, read, claim):
            pass
    os.rmdir(tmp_path / ".unfinished" / "input")
    with Store(tmp_path, read, claim):
        pass
