"""Stored lines: found again by their instance, wherever they came from."""

from __future__ import annotations

import gzip
import io
import json
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence import lines as lines_module
from certify.evidence.lines import (
    PACKED,
    PLAIN,
    evidence_name,
    pack_lines,
    read_evidence,
    read_lines,
)
from certify.evidence.spool import Spool


def line_of(key: Any, note: int = 0) -> bytes:
    """Return a line in canonical form, of no worth. note: tells it from others."""
    record = {
        "instance": key, "vertices": 3, "edges": 3, "answer": "exists", "kind": "witness",
        "evidence": {"order": [note, 1, 2]}, "length": 3,
    }  # fmt: skip
    return json.dumps(record, sort_keys=True, separators=(",", ":")).encode() + b"\n"


keys = st.dictionaries(
    st.sampled_from(["n", "m", "kind", "instance"]),
    st.one_of(st.integers(-(10**20), 10**20), st.sampled_from(["4..", "-1.."])),
    max_size=3,
)


@settings(deadline=None)
@given(st.lists(st.tuples(keys, st.integers(0, 3))))
def test_a_row_is_found_and_the_last_line_counts(stored: list[tuple[Any, int]]) -> None:
    spool = Spool(io.BytesIO(), by_position=False)
    spool.gather(line_of(key, note) for key, note in stored)
    last = {json.dumps(key, sort_keys=True): line_of(key, note) for key, note in stored}
    for text, line in last.items():
        assert spool.find(json.loads(text)) == line
    assert spool.find({"q": 1}) is None
    assert spool.find(1) is None
    assert sorted(spool.live_lines()) == sorted(last.values())


@settings(deadline=None)
@given(st.lists(st.tuples(st.integers(1, 40), st.integers(0, 3))))
def test_a_position_is_found_and_the_last_line_counts(stored: list[tuple[int, int]]) -> None:
    spool = Spool(io.BytesIO(), by_position=True)
    spool.gather(line_of(key, note) for key, note in stored)
    last = {key: line_of(key, note) for key, note in stored}
    assert [spool.find(key) for key in range(-1, 50)] == [last.get(key) for key in range(-1, 50)]
    assert list(spool.live_lines()) == [last[key] for key in sorted(last)]
    assert spool.find({"n": 1}) is None


def test_what_is_no_record_does_no_harm() -> None:
    odd = [
        b"\n", b"{}\n", b"[1]\n", b',"instance":,"kind":\n', b',"instance":0,"kind":\n',
        b',"instance":-5,"kind":\n', b',"instance":99999999999,"kind":\n', b'"instance":7\n',
        b',"instance":\xff,"kind":\n', b',"kind":,"instance":3\n',
        b',"instance":10000001,"kind":\n',
    ]  # fmt: skip
    for by_position in (True, False):
        spool = Spool(io.BytesIO(), by_position=by_position)
        spool.gather([*odd, line_of(2), line_of({"n": 2})])
        assert spool.find(2 if by_position else {"n": 2}) is not None
        assert [spool.find(key) for key in (-5, 0, 1, 3, 7)] == [None] * 5


def test_a_file_that_was_cut_is_taken_up() -> None:
    whole = b"".join(line_of(key) for key in (1, 2, 3))
    for cut in range(len(whole) + 1):
        file = io.BytesIO(whole[:cut])
        spool = Spool(file, by_position=True)
        for key in (1, 2, 3):
            found = spool.find(key)
            if key <= whole[:cut].count(b"\n"):
                assert found == line_of(key)
            elif found is not None:  # cut behind its instance: no line that a checker takes
                assert line_of(key).startswith(found[:-1])
        spool.gather([line_of(4), line_of(2, 5)])
        assert spool.find(4) == line_of(4)
        assert spool.find(2) == line_of(2, 5)
        again = Spool(file, by_position=True)
        assert [again.find(key) for key in range(6)] == [spool.find(key) for key in range(6)]


def test_a_spool_of_old_lines_is_stale() -> None:
    spool = Spool(io.BytesIO(), by_position=True)
    spool.gather(line_of(key) for key in range(1, 10))
    assert not spool.is_stale
    spool.gather(line_of(3, note) for note in range(1_100))
    assert spool.is_stale


def test_packing_gives_the_same_bytes_and_no_time_and_no_name(tmp_path: Path) -> None:
    text = b"".join(line_of(key) for key in range(1, 500))
    packed = []
    for name in ("one", "two"):
        with (tmp_path / name).open("wb") as target:
            pack_lines(io.BytesIO(text), target)
        packed.append((tmp_path / name).read_bytes())
    assert packed[0] == packed[1]
    # RFC 1952: no flags, so no name; the time is 0.
    assert packed[0][:8] == b"\x1f\x8b\x08\x00" + bytes(4)
    assert gzip.decompress(packed[0]) == text


def test_the_manifest_says_which_file_is_read(tmp_path: Path) -> None:
    one, other = line_of(1), line_of(2)
    assert evidence_name(tmp_path) == PLAIN
    (tmp_path / PACKED).write_bytes(gzip.compress(one))
    assert evidence_name(tmp_path) == PACKED
    (tmp_path / PLAIN).write_bytes(other)
    for name, line in ((PLAIN, other), (PACKED, one)):
        (tmp_path / "manifest.json").write_text(json.dumps({"sha256": {name: ""}}))
        assert evidence_name(tmp_path) == name
        assert list(read_evidence(tmp_path)) == [line]


@pytest.mark.parametrize(
    "damage", [lambda d: d[:-9], lambda d: d[:40] + b"xx" + d[42:], lambda d: d]
)
def test_of_a_broken_file_the_lines_before_the_damage_are_read(tmp_path: Path, damage: Any) -> None:
    text = [line_of(key) for key in range(1, 4)]
    (tmp_path / PACKED).write_bytes(damage(gzip.compress(b"".join(text))))
    found = list(read_evidence(tmp_path))
    assert found == text[: len(found)]
    (tmp_path / PACKED).write_bytes(b"no gzip file")
    assert list(read_evidence(tmp_path)) == []


def test_reading_ends_at_the_limits(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(lines_module, "MOST_LINE", 8)
    assert list(read_lines(io.BytesIO(b"short\n" + b"x" * 20 + b"\nnext\nlast"))) == [
        b"short\n",
        b"next\n",
    ]
    monkeypatch.setattr(lines_module, "MOST_BYTES", 10)
    assert list(read_lines(io.BytesIO(b"four\n" * 10))) == [b"four\n"] * 2
