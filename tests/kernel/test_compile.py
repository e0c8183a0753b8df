"""Theorems are said to be proved when Coq has proved them, and in no other case."""

from __future__ import annotations

import re
import shutil
import subprocess
from collections.abc import Generator
from pathlib import Path

import pytest
from click.testing import CliRunner

from certify.commands import commands
from certify.errors import CertifyError, ContradictionError, InputError
from certify.report.theorem import coq as coq_module
from certify.report.theorem.coq import (
    CLOSED,
    compile_kernel,
    find_coq,
    kernel_files,
    kernel_place,
    prove_theorems,
    write_folder,
)
from certify.report.theorem.sheet import Sheet, write_sheet
from tests.kernel.test_sheet import CANAL, compile_sheet

# Coq is believed in one case only


def test_every_theorem_is_among_those_that_assume_nothing(compiled: Path) -> None:
    """Whichever of the theorems rests on an axiom, it is found."""
    sheet = write_sheet(CANAL)
    assert sheet.theorems == re.findall(r"let _ := (\w+) in", sheet.text)
    assert sheet.theorems == re.findall(r"^Theorem (\w+)", sheet.text, re.M)
    whole = sheet.text
    for name in (sheet.theorems[0], sheet.theorems[-1]):
        start = whole.index(f"Theorem {name} ")
        proof = whole.index("Proof.", start)
        end = whole.index("Qed.", proof) + len("Qed.")
        sheet.text = f"{whole[:proof]}Admitted.{whole[end:]}"
        with pytest.raises(ContradictionError, match=rf"assumes something: Axioms:\s{name}"):
            compile_sheet(sheet, compiled)


def test_a_cast_is_checked_when_the_proof_ends(compiled: Path) -> None:
    """`vm_cast_no_check` checks nothing itself; Qed does, and what it closes is no axiom."""
    sheet = write_sheet(CANAL, "n=16")
    sheet.text = sheet.text.replace("(eq_refl true)", "(eq_refl false)")
    with pytest.raises(ContradictionError, match=r"Coq refuses it: .*has type"):
        compile_sheet(sheet, compiled)


def test_the_second_checker_accepts_a_file_of_theorems(compiled: Path, tmp_path: Path) -> None:
    """As `compile` says; here without the kernel, of which scripts/kernel has it look at all."""
    if shutil.which("coqchk") is None:
        pytest.skip("coqchk is not on the PATH: the theorems were NOT CHECKED AGAIN")
    sheet = write_sheet(CANAL)
    (path,) = write_folder(tmp_path, [sheet])
    shutil.rmtree(tmp_path / "kernel")
    (tmp_path / "kernel").symlink_to(compiled, target_is_directory=True)
    load = ["-Q", "kernel", "Certify", "canal_locks.v"]
    subprocess.run(["coqc", "-q", *load], cwd=tmp_path, check=True, capture_output=True)
    said = re.search("coqchk (.*) NAME", (tmp_path / "compile").read_text())
    assert said is not None
    options = said[1].replace('""', "").split(" ")
    command = ["coqchk", *options, "-norec", path.stem]
    done = subprocess.run(command, cwd=tmp_path, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    # What was not looked at counts as assumed; nothing of the file itself is.
    assert "CONTEXT SUMMARY" in done.stderr
    assert path.stem not in done.stderr.partition("CONTEXT SUMMARY")[2]


def fake(folder: Path, script: str) -> str:
    """Return the path of a compiler that is none."""
    folder.mkdir(exist_ok=True)
    path = folder / "coqc"
    path.write_text(f'#!/bin/sh\n[ "$1" = --version ] && echo "Coq 1" && exit\n{script}\n')
    path.chmod(0o755)
    return str(path)


SHEET = Sheet("it", "Check I.\n", ["one"], {}, False)


@pytest.mark.parametrize(
    ("script", "error", "complaint"),
    [
        (f'echo "{CLOSED}"; echo "{CLOSED}"', ContradictionError, "assumes something"),
        (f'echo "Warning"; echo "{CLOSED}"', ContradictionError, "assumes something"),
        (f'printf "{CLOSED}"', ContradictionError, "assumes something"),
        ("true", ContradictionError, "assumes something"),
        ("echo Axioms: easy", ContradictionError, "assumes something: Axioms: easy"),
        (f'echo "{CLOSED}"; exit 1', ContradictionError, "Coq refuses it"),
        ("echo Error: no >&2; exit 1", ContradictionError, "Coq refuses it: Error: no"),
        (f'echo "{CLOSED}"; kill -9 $$', InputError, "ended by signal 9; nothing is proved"),
    ],
)
def test_nothing_else_than_closed_is_proved(
    script: str, error: type[Exception], complaint: str, tmp_path: Path
) -> None:
    with pytest.raises(error, match=complaint):
        prove_theorems(Path("it.v"), fake(tmp_path / "bin", script), SHEET, tmp_path)


def test_warnings_do_no_harm(tmp_path: Path) -> None:
    coq = fake(tmp_path / "bin", f'echo "Warning: old" >&2; echo "{CLOSED}"')
    assert prove_theorems(Path("it.v"), coq, SHEET, tmp_path).theorems == ("one",)


def test_coq_that_does_not_end_is_stopped(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(coq_module, "SECONDS", 0.2)
    with pytest.raises(InputError, match="Coq was stopped after"):
        prove_theorems(Path("it.v"), fake(tmp_path / "bin", "exec sleep 60"), SHEET, tmp_path)


# Nothing that lies about is taken for compiled


def test_a_kernel_in_the_folder_is_not_used(compiled: Path, tmp_path: Path) -> None:
    """Coq does not look at compiled proofs again: another kernel proves whatever it likes."""
    sheet = write_sheet(CANAL, "n=16")
    out = tmp_path / "a folder"
    write_folder(out, [sheet])
    statement = out / "kernel" / "Statement.v"
    fine = statement.read_text()
    statement.write_text(fine.replace("3 <= length h", "9 <= length h"))
    coq = find_coq()
    assert coq is not None
    command = [coq, "-q", "-Q", "kernel", "Certify", "kernel/Statement.v"]
    subprocess.run(command, cwd=out, check=True)
    (path,) = write_folder(out, [sheet])
    assert statement.read_text() == fine
    assert path.read_text() == sheet.text
    before = {file.name for file in out.iterdir()}
    assert prove_theorems(path, coq, sheet, compiled).theorems == ("impossible_n_16",)
    assert {file.name for file in out.iterdir()} == before
    assert before == {"canal_locks_n_16.v", "compile", "kernel"}


MAKES = 'for file; do :; done; echo "$file" >> "${file%.v}.vo"'


def test_the_kernel_is_compiled_whole_and_once(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    coq = fake(tmp_path / "bin", MAKES)
    place = kernel_place(tmp_path / "cache", coq)
    halfway = compile_kernel(place, coq)
    assert [next(halfway) for _ in range(3)] == list(kernel_files()[:3])
    assert isinstance(halfway, Generator)
    halfway.close()
    assert not list(place.parent.iterdir())
    one, two = compile_kernel(place, coq), compile_kernel(place, coq)
    assert [pair[0] for pair in zip(one, two, strict=True)] == list(kernel_files())
    assert list(place.parent.iterdir()) == [place]
    assert {path.stem for path in place.glob("*.vo")} == set(kernel_files())
    assert list(compile_kernel(place, coq)) == []
    # Another Coq, another kernel: another place.
    other = Path(coq).read_text().replace("Coq 1", "Coq 2")
    (tmp_path / "bin" / "coqc").write_text(other)
    assert kernel_place(tmp_path / "cache", coq) != place
    (tmp_path / "bin" / "coqc").write_text(other.replace("Coq 2", "Coq 1"))
    assert kernel_place(tmp_path / "cache", coq) == place
    shutil.copytree(coq_module.KERNEL, tmp_path / "kernel")
    with (tmp_path / "kernel" / "Statement.v").open("a") as file:
        file.write("\n")
    monkeypatch.setattr(coq_module, "KERNEL", tmp_path / "kernel")
    assert kernel_place(tmp_path / "cache", coq) != place


def test_a_kernel_that_does_not_compile_is_not_kept(tmp_path: Path) -> None:
    coq = fake(tmp_path / "bin", f"{MAKES}\ncase $file in Graph6.v) echo bad >&2; exit 1;; esac")
    place = kernel_place(tmp_path / "cache", coq)
    with pytest.raises(InputError, match=r"Graph6\.v: Coq does not compile the kernel: bad\n"):
        list(compile_kernel(place, coq))
    assert not list(place.parent.iterdir())
    (tmp_path / "file").write_text("")
    with pytest.raises(InputError, match="XDG_CACHE_HOME"):
        list(compile_kernel(tmp_path / "file" / "cache" / "place", coq))
    with pytest.raises(InputError, match="cannot be run"):
        kernel_place(tmp_path, str(tmp_path / "missing"))


def test_the_script_compiles_everything_again(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    out = tmp_path / "a folder"
    write_folder(out, [SHEET, Sheet("two", "Check I.\n", ["two"], {}, False)])
    script = f'{MAKES}; case $file in kernel/*) ;; two.v) echo "$SAYS";; *) echo "{CLOSED}";; esac'
    coq = Path(fake(tmp_path / "bin", script))
    monkeypatch.setenv("PATH", f"{coq.parent}:/usr/bin:/bin")

    def run(says: str, *files: str) -> int:
        monkeypatch.setenv("SAYS", says)
        command = ["sh", str(out / "compile"), *files]
        return subprocess.run(command, capture_output=True, check=False).returncode

    assert run(CLOSED) == 0
    assert run(CLOSED) == 0
    for name in kernel_files():
        assert (out / "kernel" / f"{name}.vo").read_text().count("\n") == 2
    assert run("Axioms: easy") == 3
    assert run("Axioms: easy", "it.v") == 0
    assert run("Axioms: easy", "two.v") == 3


# The command


def call(out: Path, *arguments: str) -> tuple[int, str]:
    done = CliRunner().invoke(commands, ["theorem", *arguments, "--out", str(out)])
    if isinstance(done.exception, CertifyError):
        return done.exception.exit_code, f"{done.output}{done.exception}"
    assert done.exception is None or isinstance(done.exception, SystemExit), done.exception
    return done.exit_code, done.output


def test_the_command_says_what_is_proved(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path / "cache"))
    monkeypatch.setenv("PATH", str(tmp_path))
    out = tmp_path / "theorem"
    code, said = call(out, str(CANAL))
    assert (code, "12 theorems written" in said) == (2, True)
    assert "coqc is not on the PATH: the theorems are written and not proved" in said
    assert call(out, str(CANAL), "--write-only") == (
        0,
        f"{out}/canal_locks.v: 12 theorems written\n",
    )
    script = f'{MAKES}; case $PWD in *kernel) ;; *) echo "$SAYS";; esac'
    bin_ = Path(fake(tmp_path / "bin", script)).parent
    monkeypatch.setenv("PATH", f"{bin_}:/usr/bin:/bin")
    monkeypatch.setenv("SAYS", CLOSED)
    code, said = call(out, str(CANAL))
    assert said.count("compiling the kernel") == len(kernel_files())
    assert (code, said.splitlines()[-1]) == (
        0,
        f"{out}/canal_locks.v: 12 theorems proved, nothing assumed",
    )
    code, said = call(out, str(CANAL), "n = 16")
    assert (code, said.count("\n")) == (0, 2)
    assert "1 theorem proved, nothing assumed" in said
    monkeypatch.setenv("SAYS", "Axioms: easy")
    code, said = call(out, str(CANAL))
    assert (code, "proved" in said, "assumes something" in said) == (3, False, True)
    assert call(out, str(CANAL), "n=99")[0] == 2


def test_evidence_that_is_rejected_gets_no_theorem(tmp_path: Path) -> None:
    folder = tmp_path / "claim"
    shutil.copytree(CANAL, folder)
    lines = (folder / "evidence.jsonl").read_text()
    (folder / "evidence.jsonl").write_text(lines.replace('"impossible"', '"exists"', 1))
    code, said = call(tmp_path / "theorem", str(folder), "--write-only")
    assert (code, "nothing is written" in said) == (3, True)
    assert not (tmp_path / "theorem").exists()
