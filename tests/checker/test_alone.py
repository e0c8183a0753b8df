"""The checker runs without the rest of the package, and needs the standard library alone."""

from __future__ import annotations

import ast
import json
import shutil
import subprocess
import sys
import zipapp
from pathlib import Path

import pytest

import certify.checker
from tests.checker.folders import Files, make_folder, read_files, write_files

SOURCE = Path(certify.checker.__file__).parent
LONG = 120
"""Seconds after which a check that should take a moment counts as one without end."""


@pytest.fixture(scope="module")
def good(tmp_path_factory: pytest.TempPathFactory) -> Files:
    return read_files(make_folder(tmp_path_factory.mktemp("good")))


@pytest.fixture(scope="module")
def alone(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with the checker alone, under the name `checker`, and packed into one file."""
    home = tmp_path_factory.mktemp("alone")
    shutil.copytree(SOURCE, home / "app" / "checker", ignore=shutil.ignore_patterns("__pycache__"))
    zipapp.create_archive(home / "app", home / "checker.pyz", main="checker.__main__:run")
    return home


def run(*arguments: object, where: Path) -> subprocess.CompletedProcess[str]:
    """Run an isolated interpreter: no environment, no packages but the standard library."""
    command = [sys.executable, *map(str, arguments)]
    environment = {"PYTHONPATH": "", "PYTHONIOENCODING": "ascii", "PYTHONDONTWRITEBYTECODE": "1"}
    return subprocess.run(
        command, cwd=where, env=environment, capture_output=True, text=True, timeout=LONG
    )


WAYS = {
    "module": ["-S", "-m", "checker"],
    "optimised": ["-S", "-OO", "-m", "checker"],
    "warnings are errors": ["-S", "-W", "error", "-m", "checker"],
    "one file": ["-S", "../checker.pyz"],
}


@pytest.mark.parametrize("way", WAYS.values(), ids=WAYS.keys())
def test_it_runs_alone(way: list[str], alone: Path, good: Files, tmp_path: Path) -> None:
    home = alone / "app"
    fine = run(*way, write_files(tmp_path / "fine", good), where=home)
    assert (fine.returncode, fine.stderr) == (0, "")
    assert fine.stdout == (
        f"{tmp_path / 'fine'}: accepted: 5 of 5 instances accepted (1 exist, 4 impossible)\n"
    )
    broken = good | {"evidence.jsonl": good["evidence.jsonl"].replace(b"[0,2", b"[2,0")}
    wrong = run(*way, write_files(tmp_path / "wrong", broken), where=home)
    assert (wrong.returncode, wrong.stderr) == (3, "")
    assert "evidence.jsonl:1: rejected: instance n=5: vertices" in wrong.stdout
    unsigned = run(*way, "--json", write_files(tmp_path / "x", broken, sign=False), where=home)
    assert unsigned.returncode == 3
    assert "has changed" in unsigned.stderr
    assert run(*way, where=home).returncode == 2


def test_it_runs_as_a_part_of_the_package(good: Files, tmp_path: Path) -> None:
    """With nothing installed but the standard library, `certify.checker` can be imported."""
    folder = write_files(tmp_path, good)
    done = run("-S", "-m", "certify.checker", "--json", folder, where=SOURCE.parents[1])
    assert (done.returncode, done.stderr) == (0, "")
    lines = [json.loads(line) for line in done.stdout.splitlines()]
    assert [line["verdict"] for line in lines] == ["accepted"] * 5


def test_a_folder_of_folders(good: Files, alone: Path, tmp_path: Path) -> None:
    """Each one below is checked; one that has lost a file is rejected, not passed over."""
    command, home = ["-I", str(alone / "checker.pyz"), "."], tmp_path / "all"
    for name in ("b", "a", ".unfinished"):
        write_files(home / name, good)
    (home / "appendix").mkdir()
    (home / ".unfinished" / "manifest.json").unlink()
    fine = run(*command, where=home)
    assert (fine.returncode, fine.stderr) == (0, "")
    assert [line.split(":")[:2] for line in fine.stdout.splitlines()] == [
        ["a", " accepted"],
        ["b", " accepted"],
    ]
    for lost in ("manifest.json", "evidence.jsonl"):
        write_files(home / "c", good)
        (home / "c" / lost).unlink()
        wrong = run(*command, where=home)
        assert wrong.returncode == 3
        assert f"c: rejected: {lost} is missing" in wrong.stdout
    shutil.rmtree(home / "c")
    (home / "evidence.jsonl").write_bytes(good["evidence.jsonl"])
    assert run(*command, where=home).returncode == 3
    empty = run(*command, where=home / "appendix")
    assert empty.returncode == 3
    assert "manifest.json is missing" in empty.stdout


def test_text_that_the_terminal_cannot_show(good: Files, alone: Path, tmp_path: Path) -> None:
    odd = tmp_path / "ünï"
    manifest = good["manifest.json"].replace(b"claim.toml", b"\\ud800\\u001b[")
    files = good | {"manifest.json": manifest}
    done = run("-m", "checker", write_files(odd, files, sign=False), where=alone / "app")
    assert (done.returncode, done.stderr) == (3, "")
    assert done.stdout.isascii()
    assert "\x1b" not in done.stdout


def test_output_that_nobody_reads(good: Files, alone: Path, tmp_path: Path) -> None:
    """A closed pipe is no traceback, and no acceptance."""
    write_files(tmp_path, good)
    command = [sys.executable, "-m", "checker", "--json", str(tmp_path)]
    with subprocess.Popen(
        command, cwd=alone / "app", stdout=subprocess.PIPE, stderr=subprocess.PIPE
    ) as process:
        assert process.stdout is not None
        assert process.stderr is not None
        process.stdout.close()
        said = process.stderr.read()
        assert process.wait(LONG) == 3
    assert said == b""


def test_it_imports_the_standard_library_alone_and_asserts_nothing() -> None:
    for path in sorted(SOURCE.glob("*.py")):
        tree = ast.parse(path.read_text())
        for node in ast.walk(tree):
            assert not isinstance(node, ast.Assert), path
            names: list[str] = []
            if isinstance(node, ast.Import):
                names = [alias.name for alias in node.names]
            elif isinstance(node, ast.ImportFrom) and node.level == 0:
                names = [node.module or ""]
            for name in names:
                assert name.split(".")[0] in sys.stdlib_module_names, (path, name)
            if isinstance(node, ast.ImportFrom) and node.level:
                assert node.level == 1, path
        assert len(path.read_text().splitlines()) <= 250, path
