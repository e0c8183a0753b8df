"""The kernel as a referee, as a user meets it: the command line, the cache, the limits."""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import pytest

from certify.errors import InputError
from certify.report.kernel.ask import Kernel, ask_kernel
from certify.report.kernel.program import build_program, find_compiler
from tests.checker.folders import read_files, write_files
from tests.kernel.asking import write_example
from tests.kernel.conftest import ROOT

EXAMPLE = "cycle impossible 5 [ 0 2 0 3 0 4 1 2 1 3 1 4 ] [ ] [ ] [ ] "
"""K(2, 3), which has no Hamiltonian cycle."""


def check(*arguments: str | Path, **variables: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-c", "from certify.commands import main; main()", "check", *arguments],
        capture_output=True,
        text=True,
        env={**os.environ, **variables},
        check=False,
    )


def test_a_folder_is_given_to_the_kernel(program: Path, tmp_path: Path) -> None:
    cache = {"XDG_CACHE_HOME": str(tmp_path / "cache")}
    folder = ROOT / "proofs" / "cubic-twelve"
    done = check(folder, "--referee", "kernel", **cache)
    assert done.returncode == 0, done.stderr
    assert "85 of 85 instances accepted by the kernel (of graphs built in Python" in done.stdout
    (made,) = (tmp_path / "cache" / "certify").iterdir()
    before = made.stat()
    done = check(folder, "--referee", "kernel", "--json", **cache)
    rows = [json.loads(line) for line in done.stdout.splitlines()]
    told = [row["verdict"] for row in rows if row.get("referee") == "kernel"]
    assert told == ["accepted"] * 85
    assert made.stat() == before


def test_endless_evidence_is_not_taken_and_not_counted(program: Path, tmp_path: Path) -> None:
    cache = {"XDG_CACHE_HOME": str(tmp_path)}
    done = check(ROOT / "proofs" / "flower-rings", "--referee", "kernel", **cache)
    assert done.returncode == 4
    assert "not taken: instance n=3..: the kernel does not take this" in done.stdout
    assert "0 of 1 instances accepted by the kernel" in done.stdout


def test_rejected_evidence_ends_with_3(program: Path, tmp_path: Path) -> None:
    files = read_files(write_example(tmp_path / "good", "counting"))
    line = files["evidence.jsonl"].replace(b"[1,-1]", b"[1,-2]")
    folder = write_files(tmp_path / "bad", files | {"evidence.jsonl": line})
    done = check(folder, "--referee", "kernel", XDG_CACHE_HOME=str(tmp_path / "cache"))
    assert done.returncode == 3
    assert f"{folder}: rejected: instance only: the kernel: rejected" in done.stdout


def test_without_a_compiler_nothing_is_said_to_be_accepted(tmp_path: Path) -> None:
    folder = write_example(tmp_path / "good", "counting")
    done = check(folder, "--referee", "kernel", PATH=str(tmp_path))
    assert done.returncode == 2
    assert "ocamlopt is not on the PATH: nothing was given to the kernel\n  next:" in done.stderr


def test_a_compiler_that_fails_is_an_error(tmp_path: Path) -> None:
    compiler = tmp_path / "ocamlopt"
    compiler.write_text("#!/bin/sh\necho it is broken >&2\nexit 2\n")
    compiler.chmod(0o755)
    with pytest.raises(InputError, match="does not compile the kernel: it is broken"):
        build_program(str(compiler), tmp_path / "cache")
    assert not list((tmp_path / "cache").iterdir())


def test_a_cache_that_cannot_be_written_is_an_error(program: Path, tmp_path: Path) -> None:
    (tmp_path / "file").write_text("")
    with pytest.raises(InputError, match="XDG_CACHE_HOME"):
        build_program(find_compiler(), tmp_path / "file" / "cache")


def test_two_builds_at_once_leave_one_program(program: Path, tmp_path: Path) -> None:
    with ThreadPoolExecutor(2) as pool:
        one, other = pool.map(lambda _: build_program(find_compiler(), tmp_path), range(2))
    assert one == other
    assert list(tmp_path.iterdir()) == [one]
    with Kernel(one) as kernel:
        assert kernel.ask([EXAMPLE, "obstruction separator [ 1 2 ]\n"]) == "accepted"


@pytest.mark.parametrize(
    "text",
    [
        "",
        "circle impossible 5 [ ] [ ] [ ] [ ] absent\n",
        "cycle perhaps 5 [ ] [ ] [ ] [ ] absent\n",
        EXAMPLE + "obstruction leaf 0\n",
        EXAMPLE + "obstruction leaf -1\n",
        EXAMPLE + "obstruction leaf g\n",
        EXAMPLE + "obstruction branch 1\n",
        EXAMPLE + "sweep [ 1 2\n",
        EXAMPLE + "sweep 1 2 ]\n",
        EXAMPLE + "counting [ 1 - ] [ ] [ ]\n",
        EXAMPLE + "cases [ like -1 0 ] [ ]\n",
        "cycle impossible -5 [ ] [ ] [ ] [ ] absent\n",
        EXAMPLE + "witness\n",
    ],
)
def test_what_is_no_instance_gets_no_verdict(text: str, program: Path) -> None:
    done = subprocess.run([program], input=text, capture_output=True, text=True, check=False)
    assert done.stdout == ""
    assert (done.returncode == 0) == (text == "")


def test_the_program_goes_on_after_it_has_broken_off(kernel: Kernel) -> None:
    assert kernel.ask([EXAMPLE, "sweep [ x ]\n"]).startswith("it gave no verdict")
    assert kernel.ask(["cycle impossible 1 [ ] [ 0 ] ] [ ]\n" * 10_000]).startswith("it gave no")
    assert kernel.ask([EXAMPLE, "sweep [ 3 2 5 1 4 ]\n"]) == "accepted"
    assert kernel.ask([EXAMPLE, "sweep [ 3 2 5 1 ]\n"]) == "rejected"


def test_a_program_that_ends_gives_no_verdict(tmp_path: Path) -> None:
    broken = tmp_path / "broken"
    broken.write_text("#!/bin/sh\nread line\nexit 0\n")
    broken.chmod(0o755)
    folder = write_example(tmp_path / "good", "counting")
    (opinion,) = ask_kernel(folder, broken)
    assert (opinion.accepted, opinion.verdict) == (False, "not taken")


@pytest.mark.parametrize("said", ["accepted ", "Accepted", "accepted\r", "acceptedaccepted", "yes"])
def test_only_one_word_is_an_acceptance(said: str, tmp_path: Path) -> None:
    talker = tmp_path / "talker"
    talker.write_text(f"#!/bin/sh\ncat > /dev/null &\nprintf '{said}\\n'\n")
    talker.chmod(0o755)
    (opinion,) = ask_kernel(write_example(tmp_path / "good", "counting"), talker)
    assert not opinion.accepted


def limited(program: Path, text: str, kibibytes: int) -> str:
    """Return what the program says with so small a stack."""
    command = f'ulimit -s {kibibytes} && exec "$0"'
    done = subprocess.run(
        ["/bin/sh", "-c", command, program], input=text, capture_output=True, text=True, check=False
    )
    return done.stdout


def test_long_proofs_need_no_large_stack(program: Path) -> None:
    facts = " ".join(f"degree {v}" for v in range(2, 6))
    steps = "[ a c ] [ 1 ]\n" * 300_000
    proof = f"{EXAMPLE} clauses [ {facts} ] [ {steps} [ ] [ 7 5 4 9 ] ]\n"
    assert limited(program, proof, 8192) == "accepted\n"
    assert limited(program, proof.replace("[ 7 5 4 9 ]", "[ 7 5 4 8 ]"), 8192) == "rejected\n"


def test_a_stack_too_small_is_no_acceptance(program: Path) -> None:
    """A complete graph: its 79,800 edges are a list along which the checks recurse."""
    n = 400
    edges = " ".join(f"{u:x} {v:x}" for u in range(n) for v in range(u + 1, n))
    order = " ".join(f"{v:x}" for v in range(1, n + 1))
    text = f"cycle exists {n:x} [ {edges} ] [ ] [ ] [ ] witness [ {order} ]\n"
    assert limited(program, text, 8192) == "accepted\n"
    assert limited(program, text, 512) in ("overflow\n", "")


def test_the_program_is_what_coq_extracts(compiled: Path) -> None:
    extracted = (compiled / "kernel.ml").read_bytes()
    assert extracted == (ROOT / "certify" / "kernel" / "kernel.ml").read_bytes()


def test_the_compiler_is_the_one_that_the_message_names() -> None:
    if shutil.which("ocamlopt") is None:
        with pytest.raises(InputError, match="ocaml-nox"):
            find_compiler()
    else:
        assert find_compiler() == shutil.which("ocamlopt")
