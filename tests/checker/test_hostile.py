"""Claims and evidence made to keep a checker busy, or to fill its memory.

Small files with large demands. The checks run in a process of their own with little
memory and an end to its time; what counts is that it ends by itself, and how.
"""

from __future__ import annotations

import gzip
import json
import re
import subprocess
import sys
import zlib
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from certify.checker import check_folder
from tests.checker.folders import Files, with_lines, write_files

LONG = 120
MEMORY = 1 << 30
RUN = f"""
import resource, sys
resource.setrlimit(resource.RLIMIT_AS, ({MEMORY}, {MEMORY}))
from certify.checker.__main__ import run
run()
"""
ROOT = Path(__file__).resolve().parents[2]

COMPLETE = 'structure = "hamiltonian-cycle"\n[graph]\nvertices = "1..{n}"\nadjacent = "a != b"\n'
RULE = 'structure = "hamiltonian-path"\n[graph]\nvertices = "1..n"\nadjacent = "a != b"\n'


def folder_of(claim: str | bytes, evidence: Any, kind: str, graph: tuple[int, int]) -> Files:
    """Return the files of a folder with one record, whatever it is worth."""
    record = {
        "instance": {}, "vertices": graph[0], "edges": graph[1], "answer": "impossible",
        "kind": kind, "evidence": evidence, "length": 0,
    }  # fmt: skip
    data = claim.encode() if isinstance(claim, str) else claim
    files = {"claim.toml": data, "manifest.json": b'{"claim":"claim.toml","format":1,"sha256":{}}'}
    return with_lines(files, [record])


def complete(n: int) -> tuple[str, tuple[int, int]]:
    return COMPLETE.format(n=n), (n, n * (n - 1) // 2)


def on_complete(n: int, kind: str, evidence: Any) -> Files:
    claim, graph = complete(n)
    return folder_of(claim, evidence, kind, graph)


def claim_only(text: str | bytes) -> Files:
    return folder_of(text, {"form": "leaf", "vertex": 0}, "obstruction", (0, 0))


def with_clauses(cnf: bytes, lrat: bytes) -> Files:
    names = {form: f"clauses/only.{form}.gz" for form in ("cnf", "lrat", "drat")}
    files = on_complete(120, "clauses", {"clauses": 1, "steps": 1, **names})
    texts = {"cnf": cnf, "lrat": lrat, "drat": b"0\n"}
    return files | {names[form]: gzip.compress(text, 1) for form, text in texts.items()}


def sweep(n: int, states: int) -> Files:
    body = {"order": list(range(n)), "states": [states] * n, "digest": ""}
    return on_complete(n, "sweep", body)


def with_list(name: str, data: bytes) -> Files:
    claim = f'structure = "hamiltonian-cycle"\n[graph]\nlist = "{name}"\n'
    return claim_only(claim) | {name: data}


def with_evidence(data: bytes) -> Files:
    return claim_only(COMPLETE.format(n=4)) | {"evidence.jsonl": data}


def with_packed(piece: bytes, times: int) -> Files:
    """Return a folder whose packed evidence is a piece many times over."""
    files = claim_only(COMPLETE.format(n=4))
    del files["evidence.jsonl"]
    packer = zlib.compressobj(9, wbits=31)
    data = b"".join([packer.compress(piece) for _ in range(times)]) + packer.flush()
    return files | {"evidence.jsonl.gz": data}


HOSTILE: dict[str, tuple[Callable[[], Files], str]] = {
    "dotted key": (lambda: claim_only("a" + ".a" * 400_000 + " = 1\n"), "dotted key"),
    "dotted header": (lambda: claim_only("[a" + ".a" * 9_000 + "]\n" + "b=1\nc=1\n"), "dotted key"),
    "quoted dotted key": (lambda: claim_only("'a'" + " . \"a\"" * 100_000 + " = 1"), "dotted key"),
    "quotes without end": (lambda: claim_only('"' + '\\"' * 500_000), "not TOML"),
    "one long word": (lambda: claim_only("a" * (1 << 20)), "not TOML"),
    "too long": (lambda: claim_only("#" * (1 << 20) + "\n"), "1 MiB"),
    "deep arrays": (lambda: claim_only("a = " + "[" * 10**6), "not TOML"),
    "deep tables": (lambda: claim_only("ends = [" + "{a=" * 10**5), "not TOML"),
    "deep value": (
        lambda: claim_only("ends = [" + "{a.a.a.a.a.a=" * 200 + "1" + "}" * 200 + "]\n" + RULE),
        "not TOML|needed|not part|unknown",
    ),
    "hexadecimal": (
        lambda: claim_only(
            "ends = [0x" + "f" * 10**6 + "]\n" + COMPLETE.format(n=4).replace("cycle", "path")
        ),
        "2.53",
    ),
    "many parameters": (
        lambda: claim_only(RULE + "[instances]\n" + "".join(f"n{i}=1\n" for i in range(80_000))),
        "more than 20 parameters",
    ),
    "many coordinates": (
        lambda: claim_only(
            RULE.replace('"1..n"', "{" + ",".join(f"x{i}=1" for i in range(80_000)) + "}")
        ),
        "more than 20 coordinates",
    ),
    "wide parameters": (
        lambda: claim_only(RULE + "[instances]\n" + "".join(f'n{i}="1..99"\n' for i in range(9))),
        "unknown name|more than 1000000 rows",
    ),
    "a long range": (lambda: claim_only(RULE + '[instances]\nn = "1..10**12"\n'), "1000000 rows"),
    "vertices": (lambda: claim_only(COMPLETE.format(n=10**12)), "more than 100000 vertices"),
    "long literal": (lambda: claim_only(COMPLETE.format(n="9" * 1900)), "literal"),
    "power of powers": (lambda: claim_only(COMPLETE.format(n="9**9**9**9")), "beyond 2.53"),
    "nested signs": (lambda: claim_only(COMPLETE.format(n="-" * 1900 + "1")), "levels|expression"),
    "nested brackets": (
        lambda: claim_only(COMPLETE.format(n="(" * 900 + "1" + ")" * 900)), "not an expression"
    ),
    "states": (lambda: sweep(60, 10**9), "too many states"),
    "states declared few": (lambda: sweep(500, 1), "more states than 1"),
    "pairs of a vertex": (
        lambda: on_complete(900, "cases", {"nodes": [["vertex", 0]], "symmetries": []}), "cut short"
    ),
    "large weights": (
        lambda: on_complete(
            9, "counting",
            {"vertex": [[v, (-1) ** v * (10**100 - 1)] for v in range(9)], "cut": [], "parity": []},
        ),
        "no contradiction",
    ),
    "a cut again and again": (
        lambda: with_clauses(b"c fact cut 0\n" * 2**20 + b"p cnf 7140 1\n", b"2 0 1 0\n"),
        "other ones",
    ),
    "empty lines": (lambda: with_clauses(b"\n" * 2**26, b"\n"), "not a fact|variables"),
    "a bomb": (lambda: with_clauses(b"c" * (2**28 + 1), b"\n"), "2.28"),
    "large graph6": (lambda: with_list("a.g6", b"~~~~~~~~\n"), "10000 vertices|cut short"),
    "long graph6": (lambda: with_list("a.g6", b"~" * 2**22 + b"\n"), "vertices"),
    "many empty lines": (lambda: with_list("a.g6", b"\n" * 2**24), "line 1"),
    "dimacs": (lambda: with_list("a.col", b"p edge 999999999999 0\n"), "10000 vertices"),
    "words": (
        lambda: with_list("a.txt", b"".join(b"v%d\n" % i for i in range(2 * 10**5))), "10000"
    ),
    "laughing entities": (
        lambda: with_list(
            "a.graphml",
            b'<!DOCTYPE g [<!ENTITY a0 "ha">'
            + b"".join(b'<!ENTITY a%d "%s">' % (i, b"&a%d;" % (i - 1) * 10) for i in range(1, 40))
            + b"]><graphml><desc>&a39;</desc></graphml>",
        ),
        "document type",
    ),
    "deep elements": (
        lambda: with_list("a.graphml", b"<graphml><desc>" + b"<a>" * 10**6), "not XML"
    ),
    "deep record": (lambda: with_evidence(b"[" * 2**22 + b"\n"), "too deeply"),
    "packed, one long line": (lambda: with_packed(b" " * 2**20, 2**10), "gz:1: .*cut short"),
    "packed, empty lines": (lambda: with_packed(b"\n" * 2**20, 2**10), "gz:2: a line too many"),
    "packed, deep": (lambda: with_packed(b"[" * 2**20, 2**5), "gz:1: .*cut short"),
    "long line": (lambda: with_evidence(b" " * (2**26 + 9)), "cut short"),
}  # fmt: skip


@pytest.mark.parametrize(("make", "reason"), HOSTILE.values(), ids=HOSTILE.keys())
def test_hostile_folders_are_rejected_soon(
    make: Callable[[], Files], reason: str, tmp_path: Path
) -> None:
    folder = write_files(tmp_path, make())
    done = subprocess.run(
        [sys.executable, "-c", RUN, str(folder)],
        cwd=ROOT, capture_output=True, text=True, timeout=LONG, check=False,
    )  # fmt: skip
    assert done.returncode == 3, done.stderr
    assert done.stderr == ""
    assert len(done.stdout) < 10_000
    assert re.search(reason, done.stdout), done.stdout


def test_a_manifest_of_a_large_file_is_rejected_before_it_is_read(tmp_path: Path) -> None:
    """A file with a hole takes no room on the disk, and hours to digest."""
    files = claim_only(COMPLETE.format(n=4))
    write_files(tmp_path, files)
    with (tmp_path / "clauses.bin").open("wb") as file:
        file.truncate(1 << 40)
    manifest = json.loads((tmp_path / "manifest.json").read_bytes())
    manifest["sha256"] = {"clauses.bin": "0" * 64, **manifest["sha256"]}
    (tmp_path / "manifest.json").write_text(json.dumps(manifest))
    found = check_folder(tmp_path)
    assert list(found.verdicts()) == []
    assert "more than 268435456 bytes" in found.complaints[0]
