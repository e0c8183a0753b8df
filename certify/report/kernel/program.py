"""The kernel's program: built once from the OCaml text that Coq extracted, and kept.

It is kept in the user's folder for caches, under a digest of what it was made of. Whoever
can write there can have anything accepted; but then so can whoever writes in the folder
of this package.
"""

from __future__ import annotations

import hashlib
import os
import shutil
import subprocess
import tempfile
from pathlib import Path

from certify.errors import InputError

KERNEL = Path(__file__).parents[2] / "kernel"
SOURCES = ("kernel.ml", "driver.ml")
COMPILER = "ocamlopt"
SECONDS = 600
_FLAGS = ("-w", "-a", "-o", "kernel")


def find_compiler() -> str:
    """Return where OCaml's compiler is, or raise InputError if it is not on the PATH."""
    found = shutil.which(COMPILER)
    if found is None:
        raise InputError(
            f"{COMPILER} is not on the PATH: nothing was given to the kernel\n"
            "  next: install OCaml (Debian: apt-get install ocaml-nox), or leave out --referee"
        )
    return found


def cache_folder() -> Path:
    """Return the folder for this program's caches (XDG Base Directory Specification)."""
    named = os.environ.get("XDG_CACHE_HOME", "")
    base = Path(named) if Path(named).is_absolute() else Path.home() / ".cache"
    return base / "certify"


def build_program(compiler: str, cache: Path) -> Path:
    """Return the program, compiled if it is not there yet.

    Two builds at once do not meet: each has a folder of its own, and the program is
    moved to its place whole.
    Errors: InputError when it cannot be compiled, or the folder cannot be written.
    """
    try:
        program = cache / f"kernel-{_digest(compiler)}"
        if not program.is_file():
            cache.mkdir(parents=True, exist_ok=True, mode=0o700)
            with tempfile.TemporaryDirectory(dir=cache) as scratch:
                _compile(compiler, Path(scratch))
                (Path(scratch) / "kernel").replace(program)
    except OSError as error:
        raise InputError(
            f"{cache}: the kernel cannot be built there: {error.strerror or error}\n"
            "  next: name another folder in XDG_CACHE_HOME"
        ) from None
    return program


def _digest(compiler: str) -> str:
    version = subprocess.run([compiler, "-version"], capture_output=True, check=False).stdout
    made_of = [version, *((KERNEL / name).read_bytes() for name in SOURCES)]
    sizes = " ".join(str(len(part)) for part in made_of)
    return hashlib.sha256(sizes.encode() + b"\n" + b"".join(made_of)).hexdigest()[:32]


def _compile(compiler: str, scratch: Path) -> None:
    for name in SOURCES:
        shutil.copyfile(KERNEL / name, scratch / name)
    try:
        done = subprocess.run(
            [compiler, *_FLAGS, *SOURCES],
            cwd=scratch,
            capture_output=True,
            text=True,
            errors="replace",
            timeout=SECONDS,
            check=False,
        )
    except subprocess.TimeoutExpired:
        raise InputError(f"{COMPILER} was stopped after {SECONDS} seconds") from None
    if done.returncode:
        said = " ".join((done.stderr or done.stdout).split())
        raise InputError(
            f"{COMPILER} does not compile the kernel: {said[:500]}\n  next: use OCaml 4.08 or later"
        )
