"""Remembered verdicts: for the same bytes, and for nothing else."""

from __future__ import annotations

import os
import threading
from pathlib import Path

import pytest

from certify.guard import cache as module
from certify.guard.cache import Cache, digest_tools, key_of, pack, unpack
from tests.guard.conftest import Command, Files, put


@pytest.fixture
def cache(tmp_path: Path) -> Path:
    return tmp_path / "state" / "verdicts"


def remembered(certify: Command, root: Path, cache: Path) -> list[bool]:
    return [row["remembered"] for row in certify("guard", root, "--cache", cache, "--json").rows]


def test_only_what_changed_is_checked_again(
    certify: Command, root: Path, cache: Path, hops: Files, listed: Files
) -> None:
    put(root / "a", hops)
    put(root / "b", listed)
    assert remembered(certify, root, cache) == [False, False]
    assert remembered(certify, root, cache) == [True, True]
    put(root / "b", {"README.md": b"words"})
    assert remembered(certify, root, cache) == [True, False]
    done = certify("guard", root, "--cache", cache)
    assert "14 of 14 instances accepted, by the cache" in done.out
    assert done.code == 0
    # Without --cache nothing is remembered.
    assert [row["remembered"] for row in certify("guard", root, "--json").rows] == [False] * 2


def test_times_of_files_do_not_count(
    certify: Command, root: Path, cache: Path, hops: Files
) -> None:
    put(root / "a", hops)
    remembered(certify, root, cache)
    evidence = root / "a" / "evidence.jsonl"
    before = evidence.stat()
    data = bytearray(evidence.read_bytes())
    data[-3] ^= 1
    evidence.write_bytes(bytes(data))
    os.utime(evidence, ns=(before.st_atime_ns, before.st_mtime_ns))
    done = certify("guard", root, "--cache", cache)
    assert done.code == 3
    put(root / "a", hops)
    os.utime(evidence, ns=(1, 1))
    assert remembered(certify, root, cache) == [True]


def test_what_is_not_accepted_is_not_remembered(
    certify: Command, root: Path, cache: Path, half_open: Files, hops: Files
) -> None:
    put(root / "open", half_open, guard_toml='open = ["n=2","n=3","n=4","n=5","n=6","n=11"]')
    put(root / "stray", hops | {"stray.txt": b""})
    put(root / "link", hops)
    (root / "link" / "more").symlink_to(root)
    for _ in range(2):
        assert remembered(certify, root, cache) == [False, False, False]


def test_a_regular_file_that_became_a_link_is_checked_again(
    certify: Command, root: Path, tmp_path: Path, cache: Path, hops: Files
) -> None:
    put(root / "a", hops)
    put(tmp_path / "same", hops)
    assert remembered(certify, root, cache) == [False]
    (root / "a" / "claim.toml").unlink()
    (root / "a" / "claim.toml").symlink_to(tmp_path / "same" / "claim.toml")
    assert certify("guard", root, "--cache", cache).code == 3


def test_another_checker_or_python_is_another_key(
    root: Path, hops: Files, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    folder = put(root / "a", hops)
    key = key_of(folder, digest_tools())
    assert key == key_of(folder, digest_tools())
    monkeypatch.setattr("sys.version", "3.99")
    assert key_of(folder, digest_tools()) != key
    monkeypatch.undo()
    package = tmp_path / "certify"
    put(package, {"checker/records.py": b"def check(): ...\n", "__init__.py": b""})
    monkeypatch.setattr(module.certify, "__file__", str(package / "__init__.py"))
    other = digest_tools()
    put(package, {"checker/records.py": b"def check(): pass\n"})
    assert digest_tools() != other


def test_the_sources_that_count_are_there() -> None:
    root = Path(module.certify.__file__).parent
    for pattern in module._SOURCES:
        assert list(root.glob(pattern)), pattern


@pytest.mark.parametrize("damage", [b"", b"x", b"certify guard: accepted folders, format 2\n"])
def test_a_foreign_file_is_neither_believed_nor_overwritten(
    damage: bytes, certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(root / "a", hops)
    path = tmp_path / "notes"
    path.write_bytes(damage)
    done = certify("guard", root, "--cache", path)
    assert done.code == 0
    assert "the cache is not used" in done.err
    assert (path.read_bytes() == damage) == bool(damage)  # an empty file is nobody's


def test_a_damaged_cache_is_not_believed(
    certify: Command, root: Path, cache: Path, hops: Files
) -> None:
    put(root / "a", hops)
    put(root / "b", hops | {"README": b"x"})
    remembered(certify, root, cache)
    whole = cache.read_bytes()
    for data in (whole[:-1], whole[:60], whole + b" ", whole.replace(b"n=1", b"n=2", 1)):
        cache.write_bytes(data)
        done = certify("guard", root, "--cache", cache)
        assert "damaged" in done.err
        assert "by the cache" not in done.out
        assert cache.read_bytes() != data  # and it is mended
    assert remembered(certify, root, cache) == [True, True]


@pytest.mark.parametrize("entries", ["[]", '{"k": []}', '{"k": [1]}', '{"k": {}}', '{"k":', "1"])
def test_only_whole_entries_are_read(entries: str) -> None:
    import hashlib

    body = entries.encode()
    head = pack({}).split(b"\n")[0] + b"\n"
    assert unpack(head + hashlib.sha256(body).hexdigest().encode() + b"\n" + body) is None
    assert unpack(pack({"k": ["n=1"]})) == {"k": ["n=1"]}


def test_an_entry_without_instances_accepts_nothing(tmp_path: Path) -> None:
    cache = Cache(tmp_path / "c")
    cache.add("k", [])
    cache.save()
    assert Cache(tmp_path / "c").get("k") is None
    assert Cache(tmp_path / "c").get(None) is None


def test_runs_at_once_lose_nothing(tmp_path: Path) -> None:
    def run(number: int) -> None:
        cache = Cache(tmp_path / "c")
        cache.add(f"key {number}", ["n=1"])
        cache.save()
        assert cache.notes == []

    threads = [threading.Thread(target=run, args=(number,)) for number in range(12)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    last = Cache(tmp_path / "c")
    assert all(last.get(f"key {number}") for number in range(12))


def test_it_does_not_grow_without_end(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(module, "_MOST_ENTRIES", 3)
    for number in range(5):
        cache = Cache(tmp_path / "c")
        cache.get("key 0")
        cache.add(f"key {number}", ["n=1"])
        cache.save()
    last = Cache(tmp_path / "c")
    # What was used last is kept.
    assert [bool(last.get(f"key {number}")) for number in range(5)] == [
        True, False, False, True, True,
    ]  # fmt: skip


def test_a_place_that_cannot_be_written_is_told(
    certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(root / "a", hops)
    (tmp_path / "file").write_text("")
    done = certify("guard", root, "--cache", tmp_path / "file" / "cache")
    assert done.code == 0
    assert "note" in done.err
