"""Which keys a claim file may have, and of what type their values are."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from certify.claim.hints import did_you_mean, shown
from certify.claim.toml import Document
from certify.errors import ClaimError

TOP_KEYS = (
    "title",
    "statement",
    "structure",
    "ends",
    "required",
    "forbidden",
    "graph",
    "instances",
    "answers",
)
TABLE_KEYS: Mapping[str, tuple[str, ...]] = {
    "graph": ("vertices", "adjacent", "where", "list", "format"),
    "answers": ("exists", "impossible"),
}
KEPT_FILES = ("evidence.jsonl", "evidence.jsonl.gz", "manifest.json")
KEPT_FOLDERS = ("clauses", ".unfinished")


def check_keys(document: Document) -> None:
    """Refuse a key that the file or one of its tables does not have.

    The parameters under [instances] have names of their own and are not looked
    at here.
    Errors: ClaimError, with the table a key belongs in, or the nearest key.
    """
    _check(document, (), document.data, TOP_KEYS)
    for name, known in TABLE_KEYS.items():
        _check(document, (name,), table(document, name), known)


def table(document: Document, name: str) -> dict[str, Any]:
    """Return a table of the file, empty if it is not there.

    Errors: ClaimError when the name stands for something else.
    """
    value = document.data.get(name, {})
    if not isinstance(value, dict):
        raise ClaimError(
            f"{document.where(name)}: this is a table; write [{name}] on a line of its own, "
            "and its keys below"
        )
    return value


def text(document: Document, value: object, *path: str) -> str:
    """Return a value that has to be a text.

    Errors: ClaimError.
    """
    if not isinstance(value, str):
        raise ClaimError(
            f"{document.where(*path)}: a text in quotes is needed, and this is {shown(value)}"
        )
    return value


def file_name(document: Document, value: object, *path: str) -> str:
    """Return a value that has to be the name of a file that is given with the claim.

    Errors: ClaimError, also for a name that the folder of evidence needs itself.
    """
    name = text(document, value, *path)
    parts = name.split("/")
    strange = any(part in ("", ".", "..") for part in parts) or not name.isprintable()
    if strange or "\\" in name or ":" in name:
        raise ClaimError(
            f"{document.where(*path)}: {shown(name)} is not the name of a file in the folder of "
            'the claim; write it without a leading "/", without ".." and without ":"'
        )
    if name in KEPT_FILES or parts[0] in KEPT_FOLDERS:
        raise ClaimError(
            f"{document.where(*path)}: {shown(name)} is kept for the evidence; rename it"
        )
    return name


def one_of(document: Document, value: object, known: Iterable[str], *path: str) -> str:
    """Return a value that has to be one of a few words.

    Errors: ClaimError.
    """
    words = list(known)
    if not isinstance(value, str) or value not in words:
        near = did_you_mean(value, words) if isinstance(value, str) else ""
        choices = ", ".join(f'"{word}"' for word in words)
        raise ClaimError(f"{document.where(*path)}: {shown(value)} is none of {choices}{near}")
    return value


def belongs(key: str) -> str:
    """Return where a key belongs, as part of a message, or nothing for an unknown key."""
    if key in TOP_KEYS:
        return f'; "{key}" belongs at the top of the file, above the first table'
    homes = [f"[{name}]" for name, known in TABLE_KEYS.items() if key in known]
    homes += ["[instances]"] if key == "where" else []
    return f'; "{key}" belongs in {" or ".join(homes)}' if homes else ""


def _check(
    document: Document, path: tuple[str, ...], found: dict[str, Any], known: tuple[str, ...]
) -> None:
    for key in found:
        if key not in known:
            hint = belongs(key) or did_you_mean(key, known) or f"; known are {', '.join(known)}"
            place = document.where(*path, key)
            raise ClaimError(f"{place}: there is no such key here{hint}")
