"""The checker: a folder of evidence in, a verdict out.

It imports the standard library alone and shares no code with the search. What it
accepts is defined in FORMAT.md beside this file; why each acceptance is sound is
said in the comment above the code that accepts. Its front door:

    check_folder(folder)         every instance of a claim, from files
    check_line(...)              one record, from bytes that are not stored yet
    python -m certify.checker    the same from the command line
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import lru_cache
from pathlib import Path

from .claims import Claim, Key
from .folder import FolderCheck
from .lists import read_list
from .records import Verdict, check_record
from .strict import Rejected

__all__ = ["FolderCheck", "Key", "Rejected", "Verdict", "check_folder", "check_line"]


def check_folder(folder: Path | str) -> FolderCheck:
    """Return the check of a folder; iterate over its `verdicts()` to make it."""
    return FolderCheck(Path(folder))


@lru_cache(maxsize=8)
def _read_claim(data: bytes) -> Claim:
    return Claim(data)


def check_line(
    claim: bytes, key: Key, line: bytes, files: Mapping[str, bytes], graph: bytes = b""
) -> Verdict:
    """Return the verdict on one record, before anything is stored.

    claim: the bytes of the claim file. line: the bytes of the record. files: the
    bytes of the files that the record names. graph: for a list, the bytes of this
    one graph in the list's format. That the instance is one of the claim's, and that
    all of them are there, is for `check_folder` to see.
    """

    def read_file(name: str) -> bytes:
        if name not in files:
            raise Rejected(f"{name} is missing")
        return files[name]

    try:
        known = _read_claim(claim)
        if not isinstance(key, int):
            built = known.draw(known.row(key))
        else:
            (built,) = read_list(graph, known.list_format)
        return check_record(known, key, built, line, read_file)
    except (Rejected, KeyError, ValueError) as error:
        return Verdict(key, "open", "none", False, False, str(error))
