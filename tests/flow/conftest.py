"""Small claims for the tests of the flow, and the command line as a function."""

from __future__ import annotations

import json
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import pytest

from certify.commands import main

HOPS = """\
title = "Hops"
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {3, 5}"
[instances]
n = "1..14"
[answers]
exists = "n == 1 or 7 <= n <= 10 or n >= 12"
"""


@dataclass
class Result:
    """What a command did: its exit code, standard output and standard error."""

    code: int
    out: str
    err: str

    @property
    def rows(self) -> list[dict[str, Any]]:
        return [json.loads(line) for line in self.out.splitlines()]


Command = Callable[..., Result]


@pytest.fixture
def certify(capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch) -> Command:
    """Run the command line in this process."""

    def run(*arguments: object) -> Result:
        monkeypatch.setattr("sys.argv", ["certify", *map(str, arguments)])
        capsys.readouterr()
        try:
            main()
            code = 0
        except SystemExit as stop:
            code = int(stop.code or 0)
        said = capsys.readouterr()
        return Result(code, said.out, said.err)

    return run


@pytest.fixture
def write_claim(tmp_path: Path) -> Callable[..., Path]:
    """Write a claim file into a folder of its own."""

    def write(text: str, name: str = "claim.toml") -> Path:
        path = tmp_path / "claim" / name
        path.parent.mkdir(exist_ok=True)
        path.write_text(text)
        return path

    return write


def folder_bytes(folder: Path) -> dict[str, bytes]:
    """Return every file of a folder by its relative name."""
    return {
        str(path.relative_to(folder)): path.read_bytes()
        for path in sorted(folder.rglob("*"))
        if path.is_file()
    }
