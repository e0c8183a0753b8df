"""Finding every claim and every folder of evidence below a folder.

Looked into are all folders but those whose names begin with a point, `node_modules`,
`__pycache__`, and virtual environments (which hold a `pyvenv.cfg`, and `bin` or
`Scripts`, and neither evidence nor a claim.toml). Symbolic links to folders are not
followed. One that leads to a folder that was not looked into, with a claim in it or
anywhere below, is a trouble: following it might lead out of what is guarded, and passing
over it would leave a claim unguarded.
"""

from __future__ import annotations

import os
import shlex
import stat
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

from certify.claim.toml import MAX_BYTES, read_document
from certify.errors import ClaimError

MANIFEST = "manifest.json"
EVIDENCE = ("evidence.jsonl", "evidence.jsonl.gz")
CLAIM = "claim.toml"
ALLOWANCES = "guard.toml"
UNFINISHED = ".unfinished"

_SKIPPED = ("node_modules", "__pycache__")
_MOST_MANIFEST = 1 << 26
_MANIFEST_MARKS = (b'"claim"', b'"sha256"')
_CLAIM_MARKS = (b"hamiltonian", b"adjacent")


@dataclass(frozen=True)
class Trouble:
    """Something that is wrong, and where. line: counted from 1, 0 when there is none."""

    path: Path
    text: str
    line: int = 0


@dataclass
class Found:
    """What lies below a folder, each part sorted."""

    claims: list[Path] = field(default_factory=list)
    folders: list[Path] = field(default_factory=list)
    troubles: list[Trouble] = field(default_factory=list)


def find(root: Path) -> Found:
    """Find the claim files and the evidence folders in a folder and below it.

    What cannot be read, and so may be a claim, is a trouble.
    Cost: linear in the number of files; every TOML file is read.
    """
    found, seen = Found(), set[str]()
    links = _walk(root, found, seen)
    while links:
        link, behind = links.pop(), Found()
        links += _walk(link, behind, seen)
        found.troubles += _tell_link(link, behind)
    for part in (found.claims, found.folders):
        part.sort()
    found.troubles.sort(key=lambda trouble: trouble.path)
    return found


def _walk(root: Path, found: Found, seen: set[str]) -> list[Path]:
    """Find what is in a folder and below it, and return the links to folders.

    seen: the real paths of folders that were looked into, which are passed over; those of
    this walk are added.
    """
    waiting, links = [root], []
    while waiting:
        folder = waiting.pop()
        real = os.path.realpath(folder)
        if real in seen:
            continue
        try:
            with os.scandir(folder) as entries:
                inside = sorted(entries, key=lambda entry: entry.name)
        except OSError as error:
            found.troubles.append(Trouble(folder, f"the folder cannot be read: {error.strerror}"))
            continue
        # Only what was named itself is looked into whatever it is.
        if seen and _is_environment(folder, {entry.name for entry in inside}):
            continue
        seen.add(real)
        if holds_evidence(folder):
            found.folders.append(folder)
        for entry in inside:
            path = folder / entry.name
            if entry.name.startswith(".") or entry.name in _SKIPPED:
                continue
            if entry.is_dir(follow_symlinks=False):
                waiting.append(path)
            elif entry.is_dir():
                links.append(path)
            elif may_be_claim(path):
                _sort_in(path, found)
    return links


def _is_environment(folder: Path, names: set[str]) -> bool:
    """Return whether a folder is a virtual environment, full of what others wrote."""
    return (
        "pyvenv.cfg" in names
        and bool(names & {"bin", "Scripts"})
        and CLAIM not in names
        and not holds_evidence(folder)
    )


def _sort_in(path: Path, found: Found) -> None:
    try:
        if is_claim(path):
            found.claims.append(path)
    except OSError as error:
        found.troubles.append(
            Trouble(path, f"the file cannot be read, and may be a claim: {error.strerror}")
        )


def _tell_link(link: Path, behind: Found) -> Iterator[Trouble]:
    """Tell a link to a folder with a claim or evidence, or with what cannot be read."""
    if behind.claims or behind.folders:
        yield Trouble(
            link,
            "this symbolic link leads to a claim, and links to folders are not followed\n"
            f"next: put the folder itself here, or run: certify guard {shlex.quote(str(link))}",
        )
    # Out there, a folder below that cannot be read is no concern of ours.
    for trouble in behind.troubles:
        if trouble.path == link or not trouble.path.is_dir():
            yield Trouble(link, f"behind this symbolic link, {trouble.path}: {trouble.text}")


def is_met(path: Path) -> bool:
    """Return whether a file that a run of tests meets is a claim, or a manifest of ours.

    What cannot be read is none: the guard says so, and other tests are not disturbed.
    """
    try:
        if path.name == MANIFEST:
            return holds_evidence(path.parent)
        return may_be_claim(path) and is_claim(path)
    except OSError:
        return False


def may_be_claim(path: Path) -> bool:
    """Return whether a file has the name of a TOML file that is not hidden.

    Also guard.toml: a claim in a file of that name must not go unseen.
    """
    name = path.name.lower()
    return name.endswith(".toml") and not name.startswith(".")


def is_claim(path: Path) -> bool:
    """Return whether a TOML file is a claim, or was meant as one.

    It is when it has the keys `structure` and `graph`, a `structure` that begins
    "hamiltonian", a table [graph] with `adjacent`, or the name claim.toml. A file that is
    no TOML, or too large for a claim, is taken for one if the words "hamiltonian" or
    "adjacent" are in it: then the guard says what is wrong with it.
    Errors: OSError when the file cannot be read.
    """
    head = _read_head(path)
    if path.name.lower() == CLAIM:
        return True
    try:
        top = read_document(path).data
    except ClaimError:
        # Without the zeros of UTF-16, in which some editors save.
        text = head.replace(b"\0", b"").lower()
        return any(mark in text for mark in _CLAIM_MARKS)
    structure, graph = top.get("structure"), top.get("graph")
    return (
        ("structure" in top and "graph" in top)
        or (isinstance(structure, str) and structure.startswith("hamiltonian"))
        or (isinstance(graph, dict) and "adjacent" in graph)
    )


def _read_head(path: Path) -> bytes:
    """Return the first MiB of a regular file. Errors: OSError."""
    if not stat.S_ISREG(path.stat().st_mode):
        raise OSError(0, "it is not a regular file")
    with path.open("rb") as file:
        return file.read(MAX_BYTES + 1)


def holds_evidence(folder: Path) -> bool:
    """Return whether a folder holds evidence: a file of evidence, or a manifest.

    Others name a file `manifest.json` too; it is one of ours, whole or damaged, if the
    words "claim" and "sha256" stand in it in quotes, or if it cannot be read.
    """
    if any(os.path.lexists(folder / name) for name in EVIDENCE):
        return True
    manifest = folder / MANIFEST
    try:
        if not stat.S_ISREG(manifest.stat().st_mode):
            return False
        with manifest.open("rb") as file:
            text = file.read(_MOST_MANIFEST).replace(b"\0", b"")
    except (FileNotFoundError, NotADirectoryError):
        return manifest.is_symlink()
    except OSError:
        return True
    return all(mark in text for mark in _MANIFEST_MARKS)
