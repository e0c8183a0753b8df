"""A folder in which Coq proves the theorems: the kernel, the theorems, and how to compile them.

The folder needs nothing of this program: `sh compile` in it does all that is done here.
"""

from __future__ import annotations

import re
import shutil
import subprocess
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from certify.errors import ContradictionError, InputError
from certify.evidence.disk import telling, write_atomically
from certify.report.theorem.sheet import Sheet

KERNEL = Path(__file__).parents[2] / "kernel"
COMPILER = "coqc"
CLOSED = "Closed under the global context"
SECONDS = 3600

_SCRIPT = """\
#!/bin/sh
# Compile the kernel, then every file of theorems. Needs Coq 8.16 (coqc).
# After each file Coq says what its theorems assume: "Closed under the global context" is nothing.
set -eu
cd "$(dirname "$0")"
for name in $(cat kernel/order.txt); do
  [ "kernel/$name.vo" -nt "kernel/$name.v" ] || coqc -q -Q kernel Certify "kernel/$name.v"
done
for file in *.v; do
  echo "$file"
  coqc -q -Q kernel Certify "$file"
done
"""


@dataclass(frozen=True)
class Proved:
    """A file of theorems that Coq has compiled, all of them without assumptions."""

    path: Path
    theorems: tuple[str, ...]


def find_coq() -> str | None:
    """Return where Coq's compiler is, None if it is not on the PATH."""
    return shutil.which(COMPILER)


def kernel_files() -> tuple[str, ...]:
    """Return the names of the kernel's files, without ending, each after those it needs."""
    return tuple((KERNEL / "order.txt").read_text(encoding="ascii").split())


def write_folder(out: Path, sheets: Sequence[Sheet]) -> list[Path]:
    """Write the kernel, the script and the theorems; return the files of theorems.

    Files that are there already and have the same text are left as they are, so that
    what Coq made of the kernel before stays good.
    Errors: DiskError when the folder cannot be written.
    """
    paths = [out / f"{sheet.name}.v" for sheet in sheets]
    with telling(out, "write here", next_step="give another folder with --out"):
        (out / "kernel").mkdir(parents=True, exist_ok=True)
        for name in (*(f"{name}.v" for name in kernel_files()), "order.txt"):
            _write(out / "kernel" / name, (KERNEL / name).read_bytes())
        _write(out / "compile", _SCRIPT.encode())
        for path, sheet in zip(paths, sheets, strict=True):
            _write(path, sheet.text.encode())
    return paths


def _write(path: Path, data: bytes) -> None:
    if not path.is_file() or path.read_bytes() != data:
        write_atomically(path, data)


def compile_kernel(out: Path, coq: str) -> Iterator[str]:
    """Compile what is not compiled yet, yielding the name of each file before it is.

    Errors: InputError when Coq refuses a file: it is another version.
    """
    fresh = True
    for name in kernel_files():
        source, object_ = out / "kernel" / f"{name}.v", out / "kernel" / f"{name}.vo"
        made = object_.is_file() and object_.stat().st_mtime_ns >= source.stat().st_mtime_ns
        if fresh and made:
            continue
        fresh = False
        yield name
        done = _run(coq, out, source)
        if done.returncode:
            raise InputError(
                f"{source}: Coq does not compile the kernel: {_complaint(done)}\n"
                "  next: use Coq 8.16; see `coqc --version`"
            )


def prove_theorems(out: Path, coq: str, sheet: Sheet) -> Proved:
    """Have Coq compile a file of theorems, and look at what they assume.

    Errors: ContradictionError when Coq refuses the file, or a theorem assumes anything.
    """
    path = out / f"{sheet.name}.v"
    done = _run(coq, out, path)
    if done.returncode:
        raise ContradictionError(f"{path}: Coq refuses it: {_complaint(done)}")
    if done.stdout != f"{CLOSED}\n":
        raise ContradictionError(f"{path}: a theorem assumes something: {done.stdout.strip()}")
    return Proved(path, tuple(sheet.theorems))


def _run(coq: str, out: Path, path: Path) -> subprocess.CompletedProcess[str]:
    command = [coq, "-q", "-Q", "kernel", "Certify", str(path.relative_to(out))]
    try:
        return subprocess.run(
            command, cwd=out, capture_output=True, text=True, check=False, timeout=SECONDS
        )
    except subprocess.TimeoutExpired:
        raise InputError(f"{path}: Coq was stopped after {SECONDS} seconds") from None
    except OSError as error:
        raise InputError(f"{coq}: cannot be run: {error.strerror}") from None


def _complaint(done: subprocess.CompletedProcess[str]) -> str:
    """Return what Coq says, on one line."""
    text = re.sub(r"\s+", " ", done.stderr or done.stdout).strip()
    return text[:500] or f"it ended with code {done.returncode}"
