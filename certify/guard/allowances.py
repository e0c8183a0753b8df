"""The file `guard.toml` beside a claim: what the guard is told to let pass.

    open = ["n=31", "n=33"]               # instances that may be left open
    files = ["README.md", "figures/*"]    # files that the manifest does not list

It lies in the folder of the evidence, so that it moves with it, and so that one
look at the folder shows what is not settled. An allowance that nothing needs
any more is a trouble: what was let pass once must not stay allowed unseen.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from fnmatch import fnmatchcase
from pathlib import Path

from certify.claim.hints import did_you_mean, shown
from certify.claim.toml import Document, read_document
from certify.errors import ClaimError
from certify.guard.find import ALLOWANCES, Trouble

_KEYS = ("open", "files")


@dataclass(frozen=True)
class Allowances:
    """What may pass. open: names of instances. files: patterns of relative names."""

    path: Path
    open: tuple[str, ...] = ()
    files: tuple[str, ...] = ()
    open_line: int = 0
    files_line: int = 0

    def allows_file(self, name: str) -> bool:
        """Return whether a file may lie in the folder."""
        return any(fits(name, pattern) for pattern in self.files)

    def find_needless(self, left_open: Iterable[str], files: Iterable[str]) -> list[Trouble]:
        """Return the allowances that nothing needs.

        left_open: the instances that are open. files: those that the manifest does not list.
        """
        found, names = set(left_open), list(files)
        troubles = [
            Trouble(
                self.path,
                f"{shown(name)} is allowed to be open, and is not: it is settled, or no instance\n"
                "next: take it off the list, so that it stays settled",
                self.open_line,
            )
            for name in self.open
            if name not in found
        ]
        return troubles + [
            Trouble(
                self.path,
                f"no file needs the pattern {shown(pattern)}\nnext: take it off the list",
                self.files_line,
            )
            for pattern in self.files
            if not any(fits(name, pattern) for name in names)
        ]


def fits(name: str, pattern: str) -> bool:
    """Return whether a relative name fits a pattern, part by part.

    `*`, `?` and `[...]` stand for characters within a part, and `**` as the last part
    for everything below.
    """
    parts, wanted = name.split("/"), pattern.split("/")
    if wanted[-1] == "**" and len(parts) >= len(wanted):
        parts, wanted = parts[: len(wanted) - 1], wanted[:-1]
    return len(parts) == len(wanted) and all(map(fnmatchcase, parts, wanted))


def read_allowances(folder: Path) -> Allowances:
    """Read `guard.toml` in a folder; nothing is allowed when there is none.

    Errors: ClaimError with file, line and key, for anything that is not as above.
    """
    path = folder / ALLOWANCES
    if not path.exists() and not path.is_symlink():
        return Allowances(path)
    document = read_document(path)
    for key in document.data:
        if key not in _KEYS:
            hint = did_you_mean(key, _KEYS) or f"; known are {', '.join(_KEYS)}"
            raise ClaimError(f"{document.where(key)}: there is no such key here{hint}")
    return Allowances(
        path,
        tuple(name.replace(" ", "") for name in _texts(document, "open")),
        tuple(_texts(document, "files")),
        document.lines.get(("open",), 1),
        document.lines.get(("files",), 1),
    )


def _texts(document: Document, key: str) -> list[str]:
    """Return a list of different, non-empty texts."""
    value = document.data.get(key, [])
    if not isinstance(value, list):
        raise ClaimError(f"{document.where(key)}: a list is needed, and this is {shown(value)}")
    for item in value:
        if not isinstance(item, str) or not item.strip():
            raise ClaimError(
                f"{document.where(key)}: each entry is a text in quotes, and one is {shown(item)}"
            )
        if value.count(item) > 1:
            raise ClaimError(f"{document.where(key)}: {shown(item)} stands there twice")
    return value
