"""Both checkers on the same folders and claims, many at a time for one start of Node."""

from __future__ import annotations

import base64
import json
import shutil
import subprocess
import sys
from collections.abc import Iterable
from pathlib import Path
from typing import Any

from certify.checker.claims import Claim
from certify.checker.lists import read_list
from certify.checker.strict import Rejected
from certify.checker.strip import find_strip

HERE = Path(__file__).parent
ROOT = HERE.parents[1]
CHECKER = ROOT / "certify" / "report" / "page" / "checker"
NODE = shutil.which("node") or ""
REFUSED = "refused"

Seen = dict[str, tuple[bool, list[Any]]]
"""By folder: whether it is accepted, and its verdicts without their reasons."""


def run(command: list[str], text: str = "") -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        command, input=text, capture_output=True, text=True, cwd=ROOT, timeout=300
    )


def verdicts(command: list[str], folders: list[Path]) -> Seen:
    """Return what a checker says about folders, by its command line."""
    if not folders:
        return {}
    done = run([*command, "--json", *map(str, folders)])
    assert done.returncode in (0, 3, 4), done.stderr[-3000:]
    found: dict[str, list[Any]] = {str(folder): [] for folder in folders}
    for line in done.stdout.splitlines():
        row = json.loads(line)
        assert sorted(row) == ["answer", "folder", "instance", "kind", "reason", "verdict"]
        found[row["folder"]].append([row[key] for key in ("instance", "answer", "kind", "verdict")])
    refused = {line.split(": rejected: ")[0] for line in done.stderr.splitlines()}
    assert refused <= set(found) or not refused, done.stderr[-3000:]
    seen = {
        name: (name not in refused and all(row[3] == "accepted" for row in rows), rows)
        for name, rows in found.items()
    }
    assert (done.returncode == 0) == all(accepted for accepted, _ in seen.values())
    return seen


def by_python(folders: list[Path]) -> Seen:
    return verdicts([sys.executable, "-m", "certify.checker"], folders)


def by_node(folders: list[Path]) -> Seen:
    return verdicts([NODE, str(CHECKER / "main.js")], folders)


def _encoded(data: bytes) -> str:
    return base64.b64encode(data).decode()


def _plain(value: Any) -> Any:
    """Return a value as it comes back from JSON."""
    return json.loads(json.dumps(value))


def node_reads(tasks: list[dict[str, Any]]) -> list[Any]:
    """Return what the checker in JavaScript sees in claims or lists; REFUSED for an error."""
    done = run([NODE, str(HERE / "reader.mjs")], json.dumps(tasks))
    assert done.returncode == 0, done.stderr[-3000:]
    found: list[Any] = json.loads(done.stdout)
    assert len(found) == len(tasks)
    return found


def claim_task(claim: bytes, files: dict[str, bytes]) -> dict[str, Any]:
    return {
        "claim": _encoded(claim),
        "files": {name: _encoded(data) for name, data in files.items()},
    }


def list_task(data: bytes, form: str) -> dict[str, Any]:
    return {"data": _encoded(data), "format": form}


def _name(vertex: Any) -> str:
    return ",".join(map(str, vertex)) if isinstance(vertex, tuple) else str(vertex)


def _read_strip(claim: Claim, key: Any) -> Any:
    try:
        found = claim.family(key)
        strip = find_strip(found.texts, found.fixed, found.growing, found.lo, found.graph)
    except Rejected:
        return REFUSED
    return [strip.first, strip.modulus, strip.zone]


def python_reads_claim(data: bytes, files: dict[str, bytes]) -> Any:
    """Return what the checker in Python sees in a claim, in the shape of reader.mjs."""

    def read_file(name: str) -> bytes:
        if name not in files:
            raise Rejected(f"{name} is missing")
        return files[name]

    try:
        claim = Claim(data)
        if claim.growing is not None:
            keys = [key for key, _ in claim.instances(read_file)]
            return _plain(["endless", [_read_strip(claim, key) for key in keys]])
        rows = []
        for key, graph in claim.instances(read_file):
            question = claim.question(key, graph)
            values = [key] if isinstance(key, int) else list(key.values())
            asked = None
            if not question.absent:
                edges, required = sorted(question.edges), sorted(question.required)
                asked = [question.n, edges, required]
            names = [_name(name) for name in graph.names]
            row = [values, names, graph.edges, question.absent, not question.path, asked]
            rows.append([*row, claim.claimed(key)])
    except Rejected:
        return REFUSED
    return _plain([rows, claim.counts]) if rows else REFUSED


def python_reads_list(data: bytes, form: str) -> Any:
    """Return the graphs that the checker in Python sees in a list."""
    try:
        graphs = read_list(data, form)
        return _plain([[[_name(v) for v in g.names], g.edges] for g in graphs]) or REFUSED
    except Rejected:
        return REFUSED


def write_files(folder: Path, files: dict[str, bytes]) -> Path:
    for name, data in files.items():
        (folder / name).parent.mkdir(parents=True, exist_ok=True)
        (folder / name).write_bytes(data)
    return folder


def alike(one: tuple[bool, list[Any]], other: tuple[bool, list[Any]]) -> bool:
    """Say whether two verdicts are one.

    When an error of the claim or its list ends the check, it is left open how many
    instances were told before.
    """
    told = min(len(one[1]), len(other[1]))
    same = one[0] == other[0] and one[1][:told] == other[1][:told]
    return same and (len(one[1]) == len(other[1]) or not one[0])


def judge(folders: Iterable[Path]) -> list[bool]:
    """Return which folders are accepted; assert that both checkers say the same of each."""
    listed = list(folders)
    python, node = by_python(listed), by_node(listed)
    wrong = [
        f"{folder}:\n  python {python[str(folder)]}\n  node   {node[str(folder)]}"
        for folder in listed
        if not alike(python[str(folder)], node[str(folder)])
    ]
    assert wrong == []
    return [accepted for accepted, _ in node.values()]
