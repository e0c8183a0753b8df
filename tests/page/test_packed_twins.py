"""Evidence in a gzip file: both checkers say the same of every honest and every broken one."""

from __future__ import annotations

import gzip
import random
from pathlib import Path

import pytest

from certify.checker.packed import unpack
from certify.checker.strict import Rejected
from tests.checker.folders import evidence_in, write_files
from tests.checker.test_packed import BAD, GOOD, PACKED, make_files
from tests.page.node import NODE, judge

pytestmark = pytest.mark.skipif(not NODE, reason="there is no `node` on the PATH: NOT TESTED")


def test_all_of_them(tmp_path: Path) -> None:
    files = make_files(tmp_path)
    good = [
        write_files(tmp_path / "good" / str(i), change(dict(files)))
        for i, change in enumerate(GOOD.values())
    ]
    bad = [
        write_files(tmp_path / "bad" / str(i), change(dict(files)))
        for i, (change, _) in enumerate(BAD.values())
    ]
    assert judge([*good, *bad]) == [True] * len(good) + [False] * len(bad)


def test_drawn_changes_of_the_file(tmp_path: Path) -> None:
    """A flipped bit, a piece dropped, doubled or put in, anywhere in the gzip file."""
    files, rng = make_files(tmp_path), random.Random(1)
    whole, text = files[PACKED], evidence_in(files)
    folders, same = [], []
    for i in range(400):
        at, size = rng.randrange(len(whole)), rng.randrange(1, 9)
        flipped = bytes([whole[at] ^ 1 << rng.randrange(8)])
        data = rng.choice(
            [
                whole[:at] + flipped + whole[at + 1 :],
                whole[:at] + whole[at + size :],
                whole[: at + size] + whole[at:],
                whole[:at] + rng.randbytes(size) + whole[at:],
                whole[:at] + rng.randbytes(size) + whole[at + size :],
            ]
        )
        folders.append(write_files(tmp_path / str(i), files | {PACKED: data}))
        try:
            same.append(unpack(data, PACKED) == text)
        except Rejected:
            same.append(False)
    assert judge(folders) == same
    assert same.count(False) > 300


def test_a_text_of_many_pieces(tmp_path: Path) -> None:
    """Longer than what the second checker unpacks at once, with distances across the pieces."""
    claim = b'structure = "hamiltonian-cycle"\n[graph]\nlist = "g.g6"\n[answers]\nexists = true\n'
    count = 6_000
    lines = [
        b'{"answer":"exists","edges":3,"evidence":{"order":[0,1,2]},"instance":%d,'
        b'"kind":"witness","length":3,"vertices":3}\n' % (i + 1)
        for i in range(count)
    ]
    assert sum(map(len, lines)) > 2 * (2**18 + 2**15)
    files = {
        "claim.toml": claim,
        "g.g6": b"Bw\n" * count,
        "manifest.json": b'{"claim":"claim.toml","format":1,"sha256":{}}',
    }
    cases = {
        "good": b"".join(lines),
        "last": b"".join(lines)[:-1],
        "swapped": b"".join([*lines[:3000], lines[3001], lines[3000], *lines[3002:]]),
    }
    folders = [
        write_files(tmp_path / name, files | {PACKED: gzip.compress(text)})
        for name, text in cases.items()
    ]
    assert judge(folders) == [True, False, False]
