"""A small folder of evidence, and ways to write one again after a file has changed."""

from __future__ import annotations

import gzip
import hashlib
import json
from pathlib import Path
from typing import Any

from certify.checker import check_folder
from certify.claim.claim import read_claim
from certify.evidence.record import write_record
from certify.evidence.store import Store
from certify.graph.build import build_question, instances
from certify.search.budget import Budget
from certify.search.clauses import find_clauses
from certify.search.obstruction import find_obstruction
from certify.search.witness import find_witness, write_witness

CLAIM = """\
structure = "hamiltonian-cycle"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {2, 3}"
[instances]
n = "5..9"
[answers]
exists = "n == 5"
"""
LIST_CLAIM = """\
structure = "hamiltonian-cycle"
required = [["0", "1"]]
[graph]
list = "graphs.g6"
[answers]
exists = 3
"""
LIST = b"C~\nBw\nDhc\nD??\n"

Files = dict[str, bytes]


def make_folder(folder: Path, claim_text: str = CLAIM, **lists: bytes) -> Path:
    """Prove a claim by witnesses, obstructions and clauses, and store it."""
    folder.mkdir(parents=True, exist_ok=True)
    path = folder / "claim.toml"
    path.write_text(claim_text)
    for name, data in lists.items():
        (folder / name.replace("_", ".")).write_bytes(data)
    claim = read_claim(path)
    ample = Budget.of(3600.0)
    with Store(folder, claim, path) as store:
        for instance in instances(claim, folder):
            question = build_question(claim, instance.key, instance.graph)
            cycle = find_witness(question, budget=ample)
            evidence: Any = write_witness(question, cycle) if cycle is not None else None
            if evidence is None:
                # Proofs for odd numbers of vertices, so that there is something of each.
                evidence = find_obstruction(question, budget=ample)
                if question.n % 2 or evidence is None:
                    evidence = find_clauses(question, budget=ample) or evidence
            store.add(write_record(instance.key, instance.graph, evidence))
        store.finish()
    return folder


def read_files(folder: Path) -> Files:
    """Return the files of a folder by their names."""
    return {
        path.relative_to(folder).as_posix(): path.read_bytes()
        for path in sorted(folder.rglob("*"))
        if path.is_file() and not path.is_symlink()
    }


def write_files(folder: Path, files: Files, *, sign: bool = True) -> Path:
    """Write files into an empty folder; sign: with a manifest that fits them."""
    files = dict(files)
    if sign and "manifest.json" in files:
        files["manifest.json"] = fitting_manifest(files)
    for name, data in files.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(data)
    return folder


def fitting_manifest(files: Files) -> bytes:
    """Return the manifest with the digests that the files have; as it is when it is none."""
    names = sorted(set(files) - {"manifest.json"})
    try:
        manifest = json.loads(files["manifest.json"])
        manifest.keys()
    except (ValueError, AttributeError):
        return files["manifest.json"]
    manifest["sha256"] = {name: hashlib.sha256(files[name]).hexdigest() for name in names}
    return json.dumps(manifest).encode()


def evidence_in(files: Files) -> bytes:
    """Return the text of the evidence, which a list of graphs has in a compressed file."""
    if "evidence.jsonl.gz" in files:
        return gzip.decompress(files["evidence.jsonl.gz"])
    return files["evidence.jsonl"]


def with_evidence(files: Files, text: bytes) -> Files:
    """Return the files with another text as evidence, compressed if it was."""
    if "evidence.jsonl.gz" in files:
        return files | {"evidence.jsonl.gz": gzip.compress(text, mtime=0)}
    return files | {"evidence.jsonl": text}


def lines_of(files: Files) -> list[dict[str, Any]]:
    return [json.loads(line) for line in evidence_in(files).splitlines()]


def with_lines(files: Files, records: list[Any]) -> Files:
    """Return the files with these records, in canonical form."""
    text = [json.dumps(item, sort_keys=True, separators=(",", ":")) for item in records]
    return with_evidence(files, "".join(line + "\n" for line in text).encode())


def repack(data: bytes, old: bytes, new: bytes) -> bytes:
    """Return a gzip file with a piece of its text replaced."""
    text = gzip.decompress(data)
    assert old in text
    return gzip.compress(text.replace(old, new, 1), mtime=0)


def check(folder: Path) -> tuple[bool, str]:
    """Return whether a folder is accepted, and everything that is said against it."""
    found = check_folder(folder)
    verdicts = list(found.verdicts())
    said = [verdict.reason for verdict in verdicts if not verdict.accepted] + found.complaints
    return found.accepted, "\n".join(said)
