"""The archive for a deposit: the same bytes each time, and checked with Python alone."""

from __future__ import annotations

import json
import stat
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest
from click.testing import CliRunner

from certify.commands import commands
from certify.errors import ContradictionError, InputError, OpenError
from certify.report.pack import build_checker, write_pack, zip_files
from tests.checker.folders import make_folder, read_files, write_files
from tests.page.pages import CLAIM, corrupt

LONG = 120


@pytest.fixture(scope="module")
def folders(tmp_path_factory: pytest.TempPathFactory) -> list[Path]:
    home = tmp_path_factory.mktemp("folders")
    one = make_folder(home / "one", CLAIM % ("The first `one`", "A statement"))
    two = make_folder(home / "two", CLAIM % ("", ""))
    return [one, two]


@pytest.fixture(scope="module")
def archive(folders: list[Path], tmp_path_factory: pytest.TempPathFactory) -> Path:
    path = tmp_path_factory.mktemp("archive") / "evidence.zip"
    write_pack(folders, path)
    return path


def unpack(archive: Path, target: Path) -> Path:
    with zipfile.ZipFile(archive) as file:
        file.extractall(target)
    return target


def run_alone(where: Path) -> subprocess.CompletedProcess[str]:
    """Do what README.md says, with the standard library alone."""
    command = [sys.executable, "-I", "-S", "checker.pyz", "."]
    return subprocess.run(command, cwd=where, capture_output=True, text=True, timeout=LONG)


def test_the_same_folders_give_the_same_bytes(
    folders: list[Path], archive: Path, tmp_path: Path
) -> None:
    for folder in folders:
        for path in folder.rglob("*"):
            path.touch()
            path.chmod(0o700 if path.is_dir() else 0o600)
    names = write_pack(folders, tmp_path / "again.zip")
    assert (tmp_path / "again.zip").read_bytes() == archive.read_bytes()
    with zipfile.ZipFile(archive) as file:
        entries = file.infolist()
    assert [entry.filename for entry in entries] == names == sorted(names)
    for entry in entries:
        assert entry.date_time == (1980, 1, 1, 0, 0, 0)
        assert entry.external_attr >> 16 == stat.S_IFREG | 0o644
        assert entry.compress_type == zipfile.ZIP_DEFLATED
        assert entry.create_system == 3


def test_what_is_in_it(folders: list[Path], archive: Path, tmp_path: Path) -> None:
    home = unpack(archive, tmp_path)
    for folder in folders:
        assert read_files(home / folder.name) == read_files(folder)
        for path in (f"page/{folder.name}.html", f"appendix/{folder.name}.tex"):
            assert (home / path).stat().st_size > 1000
    readme = (home / "README.md").read_text(encoding="utf-8")
    assert "    python -I checker.pyz .\n" in readme
    assert "* `one/`: The first 'one' (to read: `page/one.html`, `appendix/one.tex`" in readme
    listed = dict(line.split("  ")[::-1] for line in readme.split("```")[1].split("\n") if line)
    assert sorted([*listed, "README.md"]) == sorted(read_files(home))
    assert "evidence" in (home / "FORMAT.md").read_text(encoding="utf-8")
    assert 'href="one.html"' in (home / "page" / "index.html").read_text(encoding="utf-8")


def test_it_is_checked_with_python_alone(archive: Path, tmp_path: Path) -> None:
    home = unpack(archive, tmp_path)
    done = run_alone(home)
    assert (done.returncode, done.stderr) == (0, "")
    sums = "accepted: 5 of 5 instances accepted (1 exist, 4 impossible)"
    assert done.stdout == f"one: {sums}\ntwo: {sums}\n"


def test_a_tampered_file_is_rejected(archive: Path, tmp_path: Path) -> None:
    home = unpack(archive, tmp_path / "signed")
    write_files(home / "two", corrupt(read_files(home / "two")))
    done = run_alone(home)
    assert (done.returncode, done.stderr) == (3, "")
    assert "evidence.jsonl:1: rejected: instance n=5" in done.stdout
    assert "one: accepted" in done.stdout
    home = unpack(archive, tmp_path / "unsigned")
    (home / "one" / "claim.toml").write_bytes(b"#" + (home / "one" / "claim.toml").read_bytes())
    done = run_alone(home)
    assert done.returncode == 3
    assert "claim.toml has changed since the manifest was written" in done.stdout
    (home / "one" / "manifest.json").unlink()
    assert run_alone(home).returncode == 3


def test_one_folder_alone(folders: list[Path], tmp_path: Path) -> None:
    done = CliRunner().invoke(commands, ["pack", str(folders[0]), "-o", str(tmp_path / "a.zip")])
    assert done.exit_code == 0, done.output
    home = unpack(tmp_path / "a.zip", tmp_path / "a")
    assert not (home / "page" / "index.html").exists()
    assert run_alone(home).returncode == 0
    assert "All claims" not in (home / "page" / "one.html").read_text(encoding="utf-8")


def test_what_is_not_accepted_is_not_packed(folders: list[Path], tmp_path: Path) -> None:
    files = read_files(folders[0])
    broken = write_files(tmp_path / "broken", corrupt(files))
    with pytest.raises(ContradictionError, match="rejected, so nothing is written") as wrong:
        write_pack([folders[1], broken], tmp_path / "no.zip")
    assert wrong.value.exit_code == 3
    record = json.loads(files["evidence.jsonl"].splitlines()[0])
    record |= {"answer": "open", "kind": "none", "evidence": {}, "length": 0}
    line = json.dumps(record, sort_keys=True, separators=(",", ":")).encode()
    lines = b"\n".join([line, *files["evidence.jsonl"].split(b"\n")[1:]])
    left = write_files(tmp_path / "left", files | {"evidence.jsonl": lines})
    with pytest.raises(OpenError, match="left open, so nothing is written") as open_:
        write_pack([left], tmp_path / "no.zip")
    assert open_.value.exit_code == 4
    taken = write_files(tmp_path / "Page", files)
    with pytest.raises(InputError, match="is taken already"):
        write_pack([taken], tmp_path / "no.zip")
    assert not (tmp_path / "no.zip").exists()
    with pytest.raises(InputError, match="cannot write here"):
        write_pack([folders[0]], tmp_path / "nowhere" / "no.zip")


def test_the_order_of_files_does_not_matter() -> None:
    files = {"b/x": b"1" * 1000, "a": b"2"}
    assert zip_files(files) == zip_files(dict(reversed(files.items())))
    assert build_checker() == build_checker()


def test_the_commands_say_what_they_wrote(folders: list[Path], tmp_path: Path) -> None:
    target = tmp_path / "site"
    done = CliRunner().invoke(commands, ["page", *map(str, folders), "--out", str(target)])
    assert done.exit_code == 0, done.output
    assert done.output.splitlines() == [
        f"page: {target / name}" for name in ("index.html", "one.html", "two.html")
    ]
