"""The worked examples of FORMAT.md are accepted, and each has a twin that is not."""

from __future__ import annotations

import gzip
import json
import re
from pathlib import Path
from typing import Any

import pytest

from certify import checker
from certify.checker import Key, check_line

TEXT = (Path(checker.__file__).parent / "FORMAT.md").read_text()
SECTION = TEXT[TEXT.index("## 9. Worked examples") :]


def examples() -> list[tuple[bytes, bytes, dict[str, bytes]]]:
    """Return claim, record and files of every example, in order."""
    found: list[tuple[bytes, bytes, dict[str, bytes]]] = []
    claim, files = b"", dict[str, bytes]()
    for language, block in re.findall(r"```(\w+)\n(.*?)```", SECTION, re.DOTALL):
        if language == "toml":
            claim = block.encode()
        elif language == "json":
            files = {}
            found.append((claim, block.encode(), files))
        else:
            files[f"clauses/only.{language}.gz"] = gzip.compress(block.encode())
    return found


def check(claim: bytes, line: bytes, files: dict[str, bytes]) -> bool:
    key: Key = json.loads(line)["instance"]
    return check_line(claim, key, line, files).accepted


def test_every_kind_has_an_example() -> None:
    kinds = {json.loads(line)["kind"] for _, line, _ in examples()}
    assert kinds == {"witness", "obstruction", "counting", "cases", "sweep", "clauses"}


@pytest.mark.parametrize("example", examples(), ids=lambda e: json.loads(e[1])["kind"])
def test_an_example_is_accepted_and_its_twins_are_not(
    example: tuple[bytes, bytes, dict[str, bytes]],
) -> None:
    claim, line, files = example
    assert check(claim, line, files)
    record: dict[str, Any] = json.loads(line)
    for name in record:
        twin = {key: value for key, value in record.items() if key != name}
        assert not check_line(claim, record["instance"], write(twin), files).accepted
    for name, value in (("vertices", 6), ("edges", 5), ("length", 99), ("answer", "open")):
        assert not check(claim, write({**record, name: value}), files)
    for name in record["evidence"]:
        body = {key: value for key, value in record["evidence"].items() if key != name}
        assert not check(claim, write({**record, "evidence": body}), files)
    assert not check(claim.replace(b"hamiltonian-", b"hamiltonian--"), line, files)
    for name in files:
        assert not check(claim, line, {k: v for k, v in files.items() if k != name})
        longer = gzip.compress(gzip.decompress(files[name]) + b"0\n")
        assert not check(claim, line, {**files, name: longer})


def write(record: dict[str, Any]) -> bytes:
    return json.dumps(record, sort_keys=True, separators=(",", ":")).encode() + b"\n"
