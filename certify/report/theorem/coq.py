"""What a sceptic gets, and what we do ourselves: the kernel and the theorems, compiled by Coq.

The folder that is written needs nothing of this program: `sh compile` in it compiles all
of it, from nothing. We do not compile there, for of what Coq finds compiled it looks at no
proof again, and that folder may come from anybody. The kernel is compiled once, in the user's
folder for caches, under a digest of its text and of Coq; the theorems are compiled each time.
Whoever can write in that cache can have anything proved; but then so can whoever writes in the
folder of this package.
"""

from __future__ import annotations

import hashlib
import re
import shutil
import subprocess
import tempfile
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from certify.errors import ContradictionError, InputError, OpenError
from certify.evidence.disk import telling, write_atomically
from certify.report.theorem.sheet import Sheet

KERNEL = Path(__file__).parents[2] / "kernel"
COMPILER = "coqc"
CLOSED = "Closed under the global context"
SECONDS = 3600

_SCRIPT = f"""\
#!/bin/sh
# Compile the kernel, then all files of theorems, or those named: sh compile [FILE.v ...]
# Needs Coq 8.16 (coqc). Whatever was compiled before is compiled again.
# After each file Coq says what its theorems assume: "{CLOSED}" is nothing.
# A second checker of what Coq has made, for doubts about the first, in this folder:
#   coqchk -silent -o -bytecode-compiler yes -Q . "" -Q kernel Certify NAME...   (without .v)
set -eu
cd "$(dirname "$0")"
for name in $(cat kernel/order.txt); do
  echo "kernel/$name.v"
  coqc -q -Q kernel Certify "kernel/$name.v"
done
[ $# -gt 0 ] || set -- *.v
for file; do
  echo "$file"
  said=$(coqc -q -Q kernel Certify "$file")
  echo "  $said"
  [ "$said" = "{CLOSED}" ] || exit 3
done
"""


@dataclass(frozen=True)
class Proved:
    """A file of theorems that Coq has compiled, all of them without assumptions."""

    path: Path
    theorems: tuple[str, ...]


def find_coq() -> str | None:
    """Return where Coq's compiler is, None if it is not on the PATH."""
    found = shutil.which(COMPILER)
    return found and str(Path(found).absolute())


def kernel_files() -> tuple[str, ...]:
    """Return the names of the kernel's files, without ending, each after those it needs."""
    return tuple((KERNEL / "order.txt").read_text(encoding="ascii").split())


def write_folder(out: Path, sheets: Sequence[Sheet]) -> list[Path]:
    """Write the kernel, the script and the theorems; return the files of theorems.

    Files that are there already and have the same text are left as they are.
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


def kernel_place(cache: Path, coq: str) -> Path:
    """Return the folder of a cache that the kernel's text, compiled by this Coq, belongs to.

    Errors: InputError when Coq cannot be run.
    """
    try:
        version = subprocess.run([coq, "--version"], capture_output=True, check=False).stdout
    except OSError as error:
        raise InputError(f"{coq}: cannot be run: {error.strerror or error}") from None
    digest = hashlib.sha256(version)
    for name in kernel_files():
        digest.update(f"\n{name} ".encode() + (KERNEL / f"{name}.v").read_bytes())
    return cache / f"coq-{digest.hexdigest()[:32]}"


def compile_kernel(place: Path, coq: str) -> Iterator[str]:
    """Compile the kernel to a place, if it is not there, yielding each file's name before it is.

    It is moved there whole: what an end halfway leaves behind is nothing, and of two that
    compile it at once the second finds it done.
    Errors: InputError when Coq refuses a file, which is to say it is another version, and
    when the place cannot be written.
    """
    if place.is_dir():
        return
    try:
        place.parent.mkdir(parents=True, exist_ok=True, mode=0o700)
        with tempfile.TemporaryDirectory(dir=place.parent) as scratch:
            made = Path(scratch) / "kernel"
            made.mkdir()
            for name in kernel_files():
                yield name
                shutil.copyfile(KERNEL / f"{name}.v", made / f"{name}.v")
                done = _run(coq, made, made, f"{name}.v")
                if done.returncode:
                    raise InputError(
                        f"{KERNEL / name}.v: Coq does not compile the kernel: {_complaint(done)}\n"
                        "  next: use Coq 8.16; see `coqc --version`"
                    )
            _move(made, place)
    except OSError as error:
        raise InputError(
            f"{place.parent}: the kernel cannot be compiled there: {error.strerror or error}\n"
            "  next: name another folder in XDG_CACHE_HOME"
        ) from None


def _move(made: Path, place: Path) -> None:
    try:
        made.replace(place)
    except OSError:
        if not place.is_dir():
            raise


def prove_theorems(path: Path, coq: str, sheet: Sheet, kernel: Path) -> Proved:
    """Have Coq compile a sheet of theorems, and look at what they assume.

    path: the file that holds it, as messages name it. kernel: where the kernel is compiled.
    Coq is given the sheet's text in a folder that holds nothing else.
    Errors: ContradictionError when Coq refuses it, or a theorem assumes anything; OpenError when
    it refuses one that it has to search for; InputError when Coq did not come to an end.
    """
    with tempfile.TemporaryDirectory() as scratch:
        name = f"{sheet.name}.v"
        (Path(scratch) / name).write_text(sheet.text, encoding="utf-8")
        done = _run(coq, Path(scratch), kernel.absolute(), name)
    if done.returncode < 0:
        raise InputError(f"{path}: Coq was ended by signal {-done.returncode}; nothing is proved")
    if done.returncode and sheet.searched:
        raise OpenError(
            f"{path}: Coq does not prove it: {_complaint(done)}\n"
            "  the search for a part of this proof may have failed; certify check still holds"
        )
    if done.returncode:
        raise ContradictionError(f"{path}: Coq refuses it: {_complaint(done)}")
    if done.stdout != f"{CLOSED}\n":
        raise ContradictionError(f"{path}: a theorem assumes something: {done.stdout.strip()}")
    return Proved(path, tuple(sheet.theorems))


def _run(coq: str, folder: Path, kernel: Path, name: str) -> subprocess.CompletedProcess[str]:
    """Compile a file in its folder."""
    try:
        return subprocess.run(
            [coq, "-q", "-Q", str(kernel), "Certify", name],
            cwd=folder,
            capture_output=True,
            text=True,
            encoding="utf-8",
            errors="replace",
            check=False,
            timeout=SECONDS,
        )
    except subprocess.TimeoutExpired:
        raise InputError(f"{name}: Coq was stopped after {SECONDS} seconds") from None


def _complaint(done: subprocess.CompletedProcess[str]) -> str:
    """Return what Coq says, on one line."""
    text = re.sub(r"\s+", " ", done.stderr or done.stdout).strip()
    return text[:500] or f"it ended with code {done.returncode}"
