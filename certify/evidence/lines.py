"""The lines of a folder's evidence, plain or compressed, one at a time.

Nothing here is trusted or judged: a file that is cut short gives the lines up to
there. Whoever uses a line has it checked.
"""

from __future__ import annotations

import gzip
import json
import zlib
from collections.abc import Iterator
from pathlib import Path
from typing import Any, BinaryIO

from certify.errors import InputError

MANIFEST = "manifest.json"
PLAIN = "evidence.jsonl"
PACKED = "evidence.jsonl.gz"
MOST_LINE = 1 << 26
MOST_BYTES = 1 << 32
_LEVEL = 6


def read_manifest(folder: Path) -> dict[str, Any]:
    """Return the manifest of a folder, as it stands; empty when there is none to be read."""
    try:
        manifest = json.loads((folder / MANIFEST).read_bytes())
    except (OSError, ValueError, RecursionError):
        return {}
    return manifest if isinstance(manifest, dict) else {}


def claim_name(folder: Path) -> str:
    """Return the name of the claim file whose evidence a folder holds.

    Errors: InputError when there is no readable manifest.
    """
    name = read_manifest(folder).get("claim")
    if name is None:
        raise InputError(f"{folder}: there is no evidence here\n  next: certify prove CLAIM.toml")
    if not isinstance(name, str) or "/" in name:
        raise InputError(f"{folder / MANIFEST}: names no claim file")
    return name


def evidence_name(folder: Path) -> str:
    """Return which of the two files holds the evidence of a folder: as its manifest says.

    Without a manifest the one that is there; the plain one if there is none.
    """
    listed = read_manifest(folder).get("sha256")
    names = listed if isinstance(listed, dict) else {}
    if PACKED in names or PLAIN in names:
        return PACKED if PACKED in names else PLAIN
    return PACKED if (folder / PACKED).exists() and not (folder / PLAIN).exists() else PLAIN


def read_evidence(folder: Path) -> Iterator[bytes]:
    """Yield the lines of a folder's evidence, each with its end, while they can be read.

    Cost: linear, with one line in memory. Errors: OSError.
    """
    name = evidence_name(folder)
    with (folder / name).open("rb") as file:
        if name == PLAIN:
            yield from read_lines(file)
            return
        try:
            with gzip.GzipFile(fileobj=file) as unpacked:
                yield from read_lines(unpacked)
        except (EOFError, gzip.BadGzipFile, zlib.error):
            return


def read_lines(file: Any) -> Iterator[bytes]:
    """Yield the lines of a file that have an end and are no longer than a line may be.

    The file is read up to the most bytes that evidence may have, and no further.
    """
    left, whole = MOST_BYTES, True
    while left > 0 and (line := file.readline(MOST_LINE)):
        left -= len(line)
        ends = line.endswith(b"\n")
        if whole and ends:
            yield line
        whole = ends


def pack_lines(source: BinaryIO, target: BinaryIO) -> None:
    """Compress evidence: one gzip member without a name and a time, so the same bytes each time.

    (With one version of zlib, that is.) Cost: linear, in pieces.
    """
    with gzip.GzipFile("", "wb", _LEVEL, target, mtime=0) as packed:
        while piece := source.read(1 << 20):
            packed.write(piece)
