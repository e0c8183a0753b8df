"""Which files lie in an evidence folder, and which of them its manifest does not list."""

from __future__ import annotations

import hashlib
import json
import os
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from certify.guard.find import ALLOWANCES, MANIFEST, holds_evidence, is_claim, may_be_claim

_FOR_READERS = "README"


@dataclass(frozen=True)
class Manifest:
    """What the guard reads of a manifest; whether it holds is for the checker to say.

    claim: the name of the claim file, None when there is none to be read.
    digests: by file name.
    """

    claim: str | None
    digests: dict[str, object]


def read_manifest(folder: Path) -> Manifest:
    """Return the manifest of a folder as far as it can be read."""
    try:
        found = json.loads((folder / MANIFEST).read_bytes())
        claim, digests = found["claim"], found["sha256"]
    except (OSError, ValueError, KeyError, TypeError, RecursionError):
        return Manifest(None, {})
    if not isinstance(claim, str) or not isinstance(digests, dict):
        return Manifest(None, {})
    return Manifest(claim if "/" not in claim and claim.isprintable() else None, digests)


def list_files(folder: Path, listed: dict[str, object]) -> Iterator[str]:
    """Yield the names of all files that belong to an evidence folder, relative, with "/".

    Hidden files and folders are left out, and folders below that hold evidence of their
    own. A symbolic link counts as a file, whatever it leads to.
    listed: the names in the manifest; a folder with a listed file is always looked into.
    Errors: OSError.
    """
    homes = {name[:at] for name in listed for at, letter in enumerate(name) if letter == "/"}
    waiting = [""]
    while waiting:
        prefix = waiting.pop()
        with os.scandir(folder / prefix) as entries:
            inside = sorted(entries, key=lambda entry: entry.name)
        for entry in inside:
            name = prefix + entry.name
            if entry.name.startswith("."):
                continue
            if not entry.is_dir(follow_symlinks=False):
                yield name
            elif name in homes or not holds_evidence(folder / name):
                waiting.append(name + "/")


def find_unlisted(folder: Path, listed: dict[str, object]) -> list[str]:
    """Return the files of a folder that its manifest does not list, sorted.

    A README for its readers and `guard.toml` may always lie beside the evidence, and another
    claim is looked at by itself.
    Errors: OSError.
    """
    return sorted(
        name
        for name in list_files(folder, listed)
        if name not in listed
        and name not in (MANIFEST, ALLOWANCES)
        and not _is_readme(name)
        and not _is_other_claim(folder / name)
    )


def _is_other_claim(path: Path) -> bool:
    return may_be_claim(path) and is_claim(path)


def _is_readme(name: str) -> bool:
    return name == _FOR_READERS or name.startswith(_FOR_READERS + ".")


def digest_of(path: Path) -> str | None:
    """Return the SHA-256 of a regular file in hexadecimal; None if it is none.

    A symbolic link is none. Errors: OSError when it cannot be read.
    """
    if path.is_symlink() or not path.is_file():
        return None
    with path.open("rb") as file:
        return hashlib.file_digest(file, "sha256").hexdigest()
