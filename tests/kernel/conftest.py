"""The kernel's program, built once for all tests, running; and its theorems, compiled once."""

from __future__ import annotations

import shutil
import subprocess
from collections.abc import Iterator
from pathlib import Path

import pytest

import certify
from certify.report.kernel.ask import Kernel
from certify.report.kernel.program import build_program, find_compiler

ROOT = Path(certify.__file__).parents[1]


@pytest.fixture(scope="session")
def program(tmp_path_factory: pytest.TempPathFactory) -> Path:
    if shutil.which("ocamlopt") is None:
        pytest.skip("ocamlopt is not on the PATH: the kernel's program was NOT TESTED")
    return build_program(find_compiler(), tmp_path_factory.mktemp("cache"))


@pytest.fixture(scope="session")
def kernel(program: Path) -> Iterator[Kernel]:
    with Kernel(program) as running:
        yield running


@pytest.fixture(scope="session")
def compiled() -> Path:
    """The folder of the compiled kernel; that it compiles at all is a test of its own."""
    if shutil.which("coqc") is None:
        pytest.skip("coqc is not on the PATH: the kernel was NOT COMPILED and NOT TESTED")
    folder = ROOT / "build" / "kernel"
    done = subprocess.run(
        [ROOT / "scripts" / "kernel", folder], capture_output=True, text=True, check=False
    )
    if done.returncode:
        pytest.fail(done.stdout + done.stderr)
    return folder
