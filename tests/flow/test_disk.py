"""Disks that are full or forbidden, files that cannot be read or are enormous, strange paths."""

from __future__ import annotations

import contextlib
import io
import os
import shutil
import signal
import tempfile
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from certify.checker import check_folder
from certify.claim.claim import read_claim
from certify.errors import DiskError, GraphFileError, InputError
from certify.evidence.store import Store
from certify.flow import prove
from certify.graph.files import open_list
from tests.checker.folders import CLAIM, LIST, LIST_CLAIM, make_folder, read_files
from tests.flow.conftest import HOPS, Command
from tests.flow.faults import DONE, Action, in_child

resource = pytest.importorskip("resource", reason="there are no limits of files: NOT TESTED")
ENORMOUS = 5 << 30
"""Bytes of a file that takes no room; read byte by byte it would take minutes."""
NOBODY = 65534


def run(claim: Path, out: Path, graphs: bytes | None = None, redo: bool = False) -> None:
    source = None if graphs is None else io.BytesIO(graphs)
    for _ in prove(claim, out=out, graphs=source, redo=["all"] * redo).outcomes:
        pass


def accepted(folder: Path) -> bool:
    found = check_folder(folder)
    for _ in found.verdicts():
        pass
    return found.accepted


def with_disk_of(size: int, action: Action) -> tuple[int, str]:
    """Run something in a child in which no file gets larger; return its code and its error."""
    with tempfile.TemporaryFile("w+") as said:

        def limited() -> None:
            signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
            resource.setrlimit(resource.RLIMIT_FSIZE, (size, size))
            try:
                action()
            except DiskError as error:
                resource.setrlimit(resource.RLIMIT_FSIZE, (size, size))
                os.write(said.fileno(), str(error).encode()[:size])
                raise SystemExit(error.exit_code) from None

        code = in_child(limited)
        said.seek(0)
        return code, said.read()


@pytest.mark.skipif(not hasattr(os, "fork"), reason="there is no fork: NOT TESTED")
@pytest.mark.parametrize("kind", ["rule", "list", "pipe", "copy"])
def test_a_full_disk_is_said_and_loses_nothing(
    kind: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("os.fsync", lambda handle: None)
    home = tmp_path / "home"
    home.mkdir()
    claim = home / "claim.toml"
    claim.write_text(CLAIM if kind == "rule" else LIST_CLAIM)
    (home / "graphs.g6").write_bytes(LIST)
    graphs = LIST if kind == "pipe" else None
    whole, old = tmp_path / "whole", tmp_path / "old"
    for folder in (whole, old):
        run(claim, folder, graphs)
    good = read_files(whole)
    full = 0
    for size in [*range(150, 700, 50), *range(700, 2_000, 200)]:
        # With a finished state before, and without one.
        for before in (True, False):
            folder = tmp_path / f"{size}-{before}"
            if before:
                shutil.copytree(old, folder)
            code, said = with_disk_of(size, lambda f=folder, b=before: run(claim, f, graphs, b))
            assert code in (DONE, 2), said
            if code == 2:
                full += 1
                assert "File too large" in said
                assert "make room" in said or size < 200
                assert str(folder) in said
            if before:
                assert accepted(folder)
            run(claim, folder, graphs)
            assert read_files(folder) == good
            shutil.rmtree(folder)
    assert full > 10


def test_what_was_found_on_a_full_disk_is_taken_up(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    claim = tmp_path / "claim.toml"
    claim.write_text(HOPS)
    with monkeypatch.context() as patch:
        room = [900]

        def write(file: io.FileIO, data: memoryview) -> None:
            room[0] -= len(data)
            if room[0] < 0:
                file.write(data[: len(data) // 2])  # as a disk does that is full in between
                raise OSError(28, "No space left on device")
            file.write(data)

        patch.setattr("certify.evidence.store.write_all", write)
        with pytest.raises(DiskError, match=r"No space left on device\n  next: make room"):
            run(claim, tmp_path)
    stored = [outcome.stored for outcome in prove(claim).outcomes]
    assert stored.count(True) >= 3
    assert stored == sorted(stored, reverse=True)
    assert accepted(tmp_path)


@contextlib.contextmanager
def open_to_all() -> Iterator[Path]:
    """Give a folder below which another user may read and write."""
    folder = Path(tempfile.mkdtemp(prefix="certify-"))
    try:
        folder.chmod(0o777)
        yield folder
    finally:
        shutil.rmtree(folder)


def as_nobody(action: Action) -> tuple[int, str]:
    """Run something in a child that is not root; return its exit code and its error."""
    with tempfile.TemporaryFile("w+") as said:

        def lowly() -> None:
            if os.getuid() == 0:
                os.setgroups([])
                os.setgid(NOBODY)
                os.setuid(NOBODY)
            try:
                action()
            except InputError as error:
                os.write(said.fileno(), str(error).encode())
                raise SystemExit(error.exit_code) from None

        code = in_child(lowly)
        said.seek(0)
        return code, said.read()


@pytest.mark.skipif(not hasattr(os, "fork"), reason="there is no fork: NOT TESTED")
@pytest.mark.parametrize("finished", [True, False])
def test_a_folder_that_may_only_be_read(finished: bool) -> None:
    with open_to_all() as top:
        folder = top / "only to be read"
        folder.mkdir()
        claim = folder / "claim.toml"
        claim.write_text(CLAIM)
        if finished:
            run(claim, folder)
        folder.chmod(0o555)
        before = read_files(folder)
        code, said = as_nobody(lambda: run(claim, folder))
        assert code == 2, said
        assert f"{folder}: cannot write here: Permission denied" in said
        assert "--out" in said
        assert read_files(folder) == before
        if finished:
            assert as_nobody(lambda: None if accepted(folder) else kill_self())[0] == DONE
            # And evidence that is kept in such a folder can be put elsewhere.
            assert as_nobody(lambda: run(claim, top / "elsewhere"))[0] == DONE
            assert accepted(top / "elsewhere")


def kill_self() -> None:
    raise SystemExit(7)


@pytest.mark.skipif(not hasattr(os, "fork"), reason="there is no fork: NOT TESTED")
@pytest.mark.parametrize("name", ["claim.toml", "graphs.g6"])
def test_a_file_that_may_not_be_read(name: str) -> None:
    with open_to_all() as folder:
        claim = folder / "claim.toml"
        claim.write_text(LIST_CLAIM)
        (folder / "graphs.g6").write_bytes(LIST)
        (folder / name).chmod(0)
        code, said = as_nobody(lambda: run(claim, folder))
        assert code == 2, said
        assert f"{folder / name}: " in said
        assert "cannot be read: Permission denied" in said
        assert not (folder / ".unfinished").exists()


def enormous(path: Path) -> None:
    with path.open("wb") as file:
        file.truncate(ENORMOUS)


def test_enormous_files_are_refused_unread(certify: Command, tmp_path: Path) -> None:
    claim = tmp_path / "claim.toml"
    claim.write_text(LIST_CLAIM)
    enormous(tmp_path / "graphs.g6")
    refused = certify("prove", claim)
    assert refused.code == 2
    assert "graphs.g6: the file is larger than 4096 MiB" in refused.err
    with (
        pytest.raises(InputError, match=r"graphs\.g6: is not a file, or has more than 4 GiB"),
        Store(tmp_path, read_claim(claim), claim),
    ):
        pass
    with pytest.raises(GraphFileError, match="larger than 4096 MiB"):
        open_list(tmp_path / "graphs.g6", "graph6")
    with pytest.raises(GraphFileError, match="larger than 256 MiB"):
        open_list(tmp_path / "graphs.g6", "edges")
    enormous(claim)
    assert certify("prove", claim).code == 2


@pytest.mark.parametrize("name", ["manifest.json", "claim.toml", "graphs.g6", "evidence.jsonl.gz"])
def test_the_checker_refuses_enormous_files_unread(name: str, tmp_path: Path) -> None:
    folder = make_folder(tmp_path / "f", LIST_CLAIM, graphs_g6=LIST)
    assert accepted(folder)
    enormous(folder / name)
    found = check_folder(folder)
    assert list(found.verdicts()) == []
    assert f"{name} is not a regular file, or has more than" in found.complaints[0]


def test_an_enormous_file_that_a_stored_line_names_is_not_read(tmp_path: Path) -> None:
    folder = make_folder(tmp_path / "f", CLAIM)
    path = folder / "clauses" / "n=7.cnf.gz"
    good = path.read_bytes()
    store = Store(folder, read_claim(folder / "claim.toml"), folder / "claim.toml")
    assert store.read_files(["clauses/n=7.cnf.gz"]) == {"clauses/n=7.cnf.gz": good}
    assert (
        store.read_files(["claim.toml", "clauses/../claim.toml", "/etc/passwd", "clauses/"]) == {}
    )
    enormous(path)
    assert store.read_files(["clauses/n=7.cnf.gz"]) == {}


def test_paths_with_spaces_and_other_letters(certify: Command, tmp_path: Path) -> None:
    home = tmp_path / "ein Ordner, größer als 図 #1 [x]"
    home.mkdir()
    claim = home / "une thèse.toml"
    claim.write_text(LIST_CLAIM.replace("graphs.g6", "liste é 図.g6"), encoding="utf-8")
    (home / "liste é 図.g6").write_bytes(LIST)
    out = tmp_path / "out put" / "зд"
    assert certify("prove", claim, "--out", out).code == 0
    assert sorted(read_files(out)) == [
        "evidence.jsonl.gz", "liste é 図.g6", "manifest.json", "une thèse.toml",
    ]  # fmt: skip
    assert certify("check", out).code == 0
    assert certify("explain", out, "1").code == 0
    assert certify("appendix", out, "--out", tmp_path / "ä b.tex").code == 0
    assert certify("page", out, "--out", tmp_path / "sei te").code == 0
    assert certify("pack", out, "-o", tmp_path / "pa ck é.zip").code == 0


def test_an_archive_is_written_whole_or_not_at_all(
    certify: Command, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    folder = make_folder(tmp_path / "f", LIST_CLAIM, graphs_g6=LIST)
    archive = tmp_path / "a.zip"
    assert certify("pack", folder, "-o", archive).code == 0
    good = archive.read_bytes()

    def full(_: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("os.fsync", full)
    for command in (
        ("pack", folder, "-o", archive),
        ("appendix", folder, "--out", tmp_path / "a.tex"),
        ("page", folder, "--out", tmp_path / "site"),
    ):
        failed = certify(*command)
        assert failed.code == 2
        assert "No space left on device" in failed.err
        assert "make room" in failed.err
    assert archive.read_bytes() == good
    assert sorted(path.name for path in tmp_path.iterdir()) == ["a.zip", "f", "site"]


def test_a_link_to_an_archive_stays_a_link(certify: Command, tmp_path: Path) -> None:
    folder = make_folder(tmp_path / "f", LIST_CLAIM, graphs_g6=LIST)
    (tmp_path / "real.zip").write_bytes(b"")
    (tmp_path / "link.zip").symlink_to("real.zip")
    assert certify("pack", folder, "-o", tmp_path / "link.zip").code == 0
    assert (tmp_path / "link.zip").is_symlink()
    assert (tmp_path / "real.zip").stat().st_size > 0


@pytest.mark.parametrize(
    "name", ["manifest.json", "evidence.jsonl", "evidence.jsonl.gz", "clauses"]
)
def test_a_claim_with_a_name_of_the_evidence_is_refused(
    name: str, write_claim: Callable[..., Path], certify: Command
) -> None:
    claim = write_claim(HOPS, name)
    before = claim.read_bytes()
    refused = certify("prove", claim)
    assert refused.code == 2
    assert "kept for the evidence" in refused.err
    assert claim.read_bytes() == before
