"""The finished state of a folder, while it is made and put in place.

All files that are new are made in a folder of their own, the manifest last. From then on only
renames are left, and it makes no difference which run makes them: they are the same for
the run that was through and, if that was killed, for the next one. The manifest is renamed
last of all. So a checker sees the old state or the new one, or, when the machine
stops between two renames, digests that do not fit, until the next run.
"""

from __future__ import annotations

import json
import shutil
from collections.abc import Mapping
from pathlib import Path

from certify.errors import InputError
from certify.evidence.disk import (
    digest_of_file,
    digest_or_none,
    remove,
    sync_folder,
    write_atomically,
    written,
)
from certify.evidence.lines import MANIFEST, PACKED, pack_lines, read_manifest

CLAUSES = "clauses"


class Ready:
    """What is ready to be put into `folder`; it gathers in `unfinished / "ready"`.

    Bulky files are found where they are, in `unfinished / "clauses"`. All methods raise OSError.
    """

    def __init__(self, folder: Path, unfinished: Path) -> None:
        self._folder = folder
        self._unfinished = unfinished
        self._made = unfinished / "ready"

    def clear(self) -> None:
        """Forget what was made."""
        remove(self._made)
        self._made.mkdir()

    def _needs(self, name: str, digest: str) -> bool:
        """Return whether a file has to be put in place; if so there is a folder for it."""
        if digest_or_none(self._folder / name) == digest:
            return False
        (self._made / name).parent.mkdir(parents=True, exist_ok=True)
        return True

    def copy(self, source: Path, name: str, digest: str) -> None:
        """Copy a file that was given, with its digest. Errors: InputError when it has changed."""
        if self._needs(name, digest):
            with source.open("rb") as file, written(self._made / name) as target:
                shutil.copyfileobj(file, target)
            if digest_of_file(self._made / name) != digest:
                raise InputError(f"{source}: has changed while it was copied\n  next: run it again")

    def move(self, source: Path, name: str, digest: str, *, may_replace: bool) -> None:
        """Take over a file that a run has written. Errors: InputError if it may not replace one."""
        if self._needs(name, digest):
            if not may_replace and (self._folder / name).exists():
                raise InputError(
                    f"{self._folder / name}: holds other graphs than were given with --graphs\n"
                    "  next: remove it, or give another folder with --out; what was found is kept"
                )
            source.replace(self._made / name)

    def make_evidence(self, journal: Path, name: str) -> str:
        """Make the evidence from a journal, which stays as it is; return the digest."""
        path = self._made / name
        with journal.open("rb") as lines, written(path) as target:
            if name == PACKED:
                pack_lines(lines, target)
            else:
                shutil.copyfileobj(lines, target)
        digest = digest_of_file(path)
        if not self._needs(name, digest):
            path.unlink()
        return digest

    def commit(self, claim: str, digests: Mapping[str, str]) -> None:
        """Write the manifest: from here on this is the state of the folder."""
        manifest = {"claim": claim, "format": 1, "sha256": digests}
        text = json.dumps(manifest, indent=1, sort_keys=True) + "\n"
        write_atomically(self._made / MANIFEST, text.encode())

    def put_in_place(self) -> None:
        """Make the renames that lead to the state that is ready, if there is one."""
        if not (self._made / MANIFEST).is_file():
            return
        for name in sorted(filter(_is_inside, read_manifest(self._made).get("sha256", {}))):
            roots = [self._made, self._unfinished]
            for root in roots if name.startswith(f"{CLAUSES}/") else roots[:1]:
                if (root / name).is_file():
                    (self._folder / name).parent.mkdir(parents=True, exist_ok=True)
                    (root / name).replace(self._folder / name)
        sync_folder(self._folder)
        (self._made / MANIFEST).replace(self._folder / MANIFEST)
        sync_folder(self._folder)


def _is_inside(name: str) -> bool:
    """Return whether a name stays in the folder; that of a folder of strangers may not."""
    strange = "\\" in name or ":" in name
    return not strange and all(part not in ("", ".", "..") for part in name.split("/"))
