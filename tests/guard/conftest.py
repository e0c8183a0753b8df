"""Folders of evidence to guard, made once, and the command line as a function."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from certify.flow import prove
from certify.search.ladder import Limits
from tests.checker.folders import read_files, write_files
from tests.flow.conftest import Command as Command
from tests.flow.conftest import certify as certify

Files = dict[str, bytes]

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
"""Hops of 3 or 5 on 1..n; the answers are checked here, by exhaustion elsewhere."""

LIST = """\
structure = "hamiltonian-cycle"
[graph]
list = "some.g6"
[answers]
exists = 2
"""
GRAPHS = b"Bw\nC~\nDQc\n"
"""A triangle, the complete graph on four vertices, and a path on five vertices."""

Prove = Callable[..., Files]


@pytest.fixture(scope="session")
def prove_files(tmp_path_factory: pytest.TempPathFactory) -> Prove:
    """Return a function: the text of a claim (and further files) to a folder with evidence."""

    def run(text: str, kinds: frozenset[str] = Limits.kinds, **others: bytes) -> Files:
        folder = tmp_path_factory.mktemp("proved")
        (folder / "claim.toml").write_text(text)
        for name, data in others.items():
            (folder / name.replace("_", ".")).write_bytes(data)
        for _ in prove(folder / "claim.toml", limits=Limits(kinds=kinds)).outcomes:
            pass
        return read_files(folder)

    return run


@pytest.fixture(scope="session")
def hops(prove_files: Prove) -> Files:
    return prove_files(HOPS)


@pytest.fixture(scope="session")
def listed(prove_files: Prove) -> Files:
    return prove_files(LIST, some_g6=GRAPHS)


@pytest.fixture(scope="session")
def half_open(prove_files: Prove) -> Files:
    """The same claim with witnesses alone: the impossible instances are open."""
    return prove_files(HOPS, frozenset({"witness"}))


@pytest.fixture
def root(tmp_path: Path) -> Path:
    folder = tmp_path / "root"
    folder.mkdir()
    return folder


def put(folder: Path, files: Files, *, sign: bool = False, **others: str) -> Path:
    """Write files into a folder; others: texts by name, with "_" for the point."""
    texts = {name.replace("_", "."): text.encode() for name, text in others.items()}
    folder.mkdir(parents=True, exist_ok=True)
    return write_files(folder, files | texts, sign=sign)
