"""Evidence in a gzip file: what is accepted, and every way to break it that we thought of.

`tests/page/test_packed_twins.py` gives the same folders to the second checker.
"""

from __future__ import annotations

import gzip
import random
import re
import struct
import zlib
from collections.abc import Callable
from pathlib import Path

import pytest

from certify.checker import check_folder
from certify.checker.files import Files as CheckerFiles
from tests.checker.folders import (
    CLAIM,
    LIST,
    LIST_CLAIM,
    Files,
    check,
    evidence_in,
    make_folder,
    read_files,
    write_files,
)

PACKED = "evidence.jsonl.gz"
PLAIN = "evidence.jsonl"
Change = Callable[[Files], Files]


def make_files(top: Path) -> Files:
    """Return an honest folder of a list of graphs, which has packed evidence."""
    files = read_files(make_folder(top / "list", LIST_CLAIM, graphs_g6=LIST))
    assert PACKED in files
    assert PLAIN not in files
    return files


def packed(change: Callable[[bytes], bytes]) -> Change:
    """Change the bytes of the gzip file."""
    return lambda files: files | {PACKED: change(files[PACKED])}


def text(change: Callable[[bytes], bytes]) -> Change:
    """Change the text inside, and compress it again."""
    return lambda files: files | {PACKED: gzip.compress(change(evidence_in(files)), mtime=0)}


def member(
    data: bytes, *, level: int = 6, strategy: int = zlib.Z_DEFAULT_STRATEGY, flags: int = 0,
    head: bytes = b"", crc: int = 0, size: int = 0,
) -> bytes:  # fmt: skip
    """Compress by hand, with another block structure, head or (wrong by as much) trailer."""
    packer = zlib.compressobj(level, zlib.DEFLATED, -15, 9, strategy)
    body = packer.compress(data) + packer.flush()
    start = b"\x1f\x8b\x08" + bytes([flags]) + b"\0\0\0\0\0\xff" + head
    sums = struct.pack("<II", zlib.crc32(data) ^ crc, (len(data) + size) % 2**32)
    return start + body + sums


def many_flushes(data: bytes) -> bytes:
    packer = zlib.compressobj(6, wbits=31)
    pieces = [packer.compress(bytes([x])) + packer.flush(zlib.Z_SYNC_FLUSH) for x in data]
    return b"".join(pieces) + packer.flush()


def swap_lines(data: bytes) -> bytes:
    first, second, *rest = data.splitlines(keepends=True)
    return b"".join([second, first, *rest])


def plain(files: Files) -> Files:
    """Return the folder with the same text in a plain file."""
    rest = {name: data for name, data in files.items() if name != PACKED}
    return rest | {PLAIN: evidence_in(files)}


HEAD_SUM = struct.pack("<H", zlib.crc32(b"\x1f\x8b\x08\x02\0\0\0\0\0\xff") & 0xFFFF)
AS_LIST = b'"evidence.jsonl.gz"\nformat = "graph6"'
GOOD: dict[str, Change] = {
    "as it is": lambda files: files,
    "a plain file": plain,
    "not compressed": text(lambda d: d),
    "level 0": lambda f: f | {PACKED: member(evidence_in(f), level=0)},
    "level 1": lambda f: f | {PACKED: member(evidence_in(f), level=1)},
    "level 9": lambda f: f | {PACKED: member(evidence_in(f), level=9)},
    "fixed codes": lambda f: f | {PACKED: member(evidence_in(f), strategy=zlib.Z_FIXED)},
    "literals": lambda f: f | {PACKED: member(evidence_in(f), strategy=zlib.Z_HUFFMAN_ONLY)},
    "runs": lambda f: f | {PACKED: member(evidence_in(f), strategy=zlib.Z_RLE)},
    "many empty blocks": lambda f: f | {PACKED: many_flushes(evidence_in(f))},
    "with a name": lambda f: f | {PACKED: member(evidence_in(f), flags=8, head=b"x\0")},
    "with an extra field": lambda f: f | {PACKED: member(evidence_in(f), flags=4, head=b"\2\0ab")},
    "with a sum of the head": lambda f: (
        f | {PACKED: member(evidence_in(f), flags=2, head=HEAD_SUM)}
    ),
}
BAD: dict[str, tuple[Change, str]] = {
    "no bytes": (packed(lambda d: b""), "cut short"),
    "a head alone": (packed(lambda d: d[:10]), "cut short"),
    "no trailer": (packed(lambda d: d[:-8]), "cut short"),
    "half a trailer": (packed(lambda d: d[:-4]), "cut short"),
    "without the last byte": (packed(lambda d: d[:-1]), "cut short"),
    "without the first byte": (packed(lambda d: d[1:]), "not a gzip file"),
    "two members": (packed(lambda d: d + d), "goes on"),
    "an empty second member": (packed(lambda d: d + gzip.compress(b"")), "goes on"),
    "two halves in two members": (
        lambda f: f
        | {
            PACKED: b"".join(
                gzip.compress(line) for line in evidence_in(f).splitlines(keepends=True)
            )
        },
        "goes on|no record",
    ),
    "a trailing byte": (packed(lambda d: d + b"x"), "goes on"),
    "trailing zeros": (packed(lambda d: d + bytes(512)), "goes on"),
    "a trailing line end": (packed(lambda d: d + b"\n"), "goes on"),
    "another check sum": (lambda f: f | {PACKED: member(evidence_in(f), crc=1)}, "broken"),
    "another length": (lambda f: f | {PACKED: member(evidence_in(f), size=1)}, "broken"),
    "unknown flags": (lambda f: f | {PACKED: member(evidence_in(f), flags=0x20)}, "broken"),
    "a broken sum of the head": (
        lambda f: f | {PACKED: member(evidence_in(f), flags=2, head=b"\0\0")}, "broken"
    ),
    "no gzip": (lambda f: f | {PACKED: evidence_in(f)}, "not a gzip file"),
    "zlib": (lambda f: f | {PACKED: zlib.compress(evidence_in(f))}, "not a gzip file"),
    "raw": (lambda f: f | {PACKED: zlib.compress(evidence_in(f), wbits=-15)}, "not a gzip file"),
    "packed twice": (packed(lambda d: gzip.compress(d)), "not ASCII|cut short|line too many"),
    "no text": (text(lambda d: b""), "no record"),
    "crlf": (text(lambda d: d.replace(b"\n", b"\r\n")), "canonical"),
    "no line end": (text(lambda d: d[:-1]), "cut short"),
    "an empty line": (text(lambda d: d + b"\n"), "gz:5: a line too many"),
    "a line too many": (text(lambda d: d + d.splitlines(keepends=True)[0]), "gz:5: a line too"),
    "a line less": (text(lambda d: b"".join(d.splitlines(keepends=True)[:-1])), "no record"),
    "swapped lines": (text(swap_lines), "another instance"),
    "a byte order mark": (text(lambda d: b"\xef\xbb\xbf" + d), "not ASCII"),
    "a false witness": (text(lambda d: d.replace(b'"order":[0,1', b'"order":[0,0')), "twice"),
    "a bomb": (text(lambda d: b"\n" * (1 << 24)), "too many"),
    "a long line": (text(lambda d: b" " * (1 << 26) + b"\n" + d), "cut short|JSON"),
    "both files": (lambda f: f | {PLAIN: evidence_in(f)}, "lists both"),
    "neither file": (
        lambda f: {name: data for name, data in f.items() if name != PACKED},
        "does not list evidence.jsonl or evidence.jsonl.gz",
    ),
    "packed under the plain name": (
        lambda f: {n: d for n, d in f.items() if n != PACKED} | {PLAIN: f[PACKED]}, "not ASCII"
    ),
    "the claim has its name": (
        lambda f: {n: d for n, d in f.items() if n != "claim.toml"}
        | {"manifest.json": f["manifest.json"].replace(b'"claim.toml"', b'"evidence.jsonl.gz"')},
        "no claim file",
    ),
    "the list is the evidence": (
        lambda f: f
        | {"claim.toml": f["claim.toml"].replace(b'"graphs.g6"', AS_LIST)},
        "cannot be evidence.jsonl.gz",
    ),
    "the list swapped": (
        lambda f: f | {"graphs.g6": b"".join(f["graphs.g6"].splitlines(keepends=True)[::-1])},
        "the graph has",
    ),
    "the list longer": (lambda f: f | {"graphs.g6": f["graphs.g6"] + b"C~\n"}, "no record"),
    "the list without an end": (lambda f: f | {"graphs.g6": f["graphs.g6"] + b":"}, "no end"),
    "an empty line in the list": (lambda f: f | {"graphs.g6": f["graphs.g6"] + b"\n"}, "graph6"),
    "no list": (lambda f: f | {"graphs.g6": b""}, "no instances"),
    "a list of a header": (lambda f: f | {"graphs.g6": b">>graph6<<"}, "no instances"),
}  # fmt: skip


@pytest.fixture(scope="module")
def good(tmp_path_factory: pytest.TempPathFactory) -> Files:
    return make_files(tmp_path_factory.mktemp("packed"))


@pytest.mark.parametrize("change", GOOD.values(), ids=GOOD.keys())
def test_any_gzip_file_of_one_member_is_read(change: Change, good: Files, tmp_path: Path) -> None:
    accepted, said = check(write_files(tmp_path, change(dict(good))))
    assert accepted, said


@pytest.mark.parametrize(("change", "reason"), BAD.values(), ids=BAD.keys())
def test_anything_else_is_rejected(
    change: Change, reason: str, good: Files, tmp_path: Path
) -> None:
    accepted, said = check(write_files(tmp_path, change(dict(good))))
    assert not accepted
    assert re.search(reason, said), said


def test_every_shorter_file_is_rejected(good: Files, tmp_path: Path) -> None:
    whole = good[PACKED]
    folder = write_files(tmp_path / "f", good)
    for size in range(len(whole)):
        write_files(folder, good | {PACKED: whole[:size]})
        assert not check(folder)[0], size
    write_files(folder, good)
    assert check(folder)[0]


def test_every_changed_byte_is_rejected_or_changes_nothing(good: Files, tmp_path: Path) -> None:
    whole, rng = good[PACKED], random.Random(6)
    folder = write_files(tmp_path / "f", good)
    rejected = 0
    for at in range(len(whole)):
        data = whole[:at] + bytes([whole[at] ^ 1 << rng.randrange(8)]) + whole[at + 1 :]
        write_files(folder, good | {PACKED: data})
        accepted = check(folder)[0]
        rejected += not accepted
        # What may differ is in the head: the time, the kind of system, and that it is a text.
        assert not accepted or gzip.decompress(data) == evidence_in(good), at
    assert rejected > len(whole) - 10


def test_a_rule_may_have_packed_evidence_too(tmp_path: Path) -> None:
    files = read_files(make_folder(tmp_path / "rule", CLAIM))
    data = gzip.compress(files.pop(PLAIN))
    assert check(write_files(tmp_path / "f", files | {PACKED: data}))[0]


def test_a_file_that_is_not_listed_is_not_read(good: Files, tmp_path: Path) -> None:
    folder = write_files(tmp_path, good)
    (folder / PLAIN).write_bytes(b"left behind\n")
    assert check(folder)[0]


def test_the_place_is_the_line_inside(good: Files, tmp_path: Path) -> None:
    lines = evidence_in(good).splitlines(keepends=True)
    lines[2] = lines[2].replace(b'"length":', b'"length":1')
    broken = good | {PACKED: gzip.compress(b"".join(lines), mtime=0)}
    folder = write_files(tmp_path, broken)
    found = check_folder(folder)
    bad = [verdict for verdict in found.verdicts() if not verdict.accepted]
    assert [(verdict.line, found.evidence_name) for verdict in bad] == [(3, PACKED)]


@pytest.mark.parametrize("name", [PACKED, "graphs.g6", "claim.toml"])
def test_files_that_change_after_they_were_hashed_are_not_accepted(
    name: str, good: Files, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """What is hashed is what is read: here both versions of the file would be accepted."""
    other = {
        PACKED: gzip.compress(evidence_in(good), 1, mtime=1),
        "graphs.g6": b">>graph6<<" + good["graphs.g6"],
        "claim.toml": good["claim.toml"] + b"# changed\n",
    }[name]
    folder = write_files(tmp_path / "f", good)
    assert check(write_files(tmp_path / "g", good | {name: other}))[0]
    compare = CheckerFiles.compare

    def compare_and_change(files: CheckerFiles, large: str | None) -> None:
        compare(files, large)
        (folder / name).write_bytes(other)

    monkeypatch.setattr(CheckerFiles, "compare", compare_and_change)
    accepted, said = check(folder)
    if name == "claim.toml":  # read before, and once only
        assert accepted
    else:
        assert not accepted
        assert f"{name} has changed" in said
