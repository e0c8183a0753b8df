"""Which code a worker runs: the same search and checker, or results would differ."""

from __future__ import annotations

import hashlib
import importlib.metadata
import json
import re
import sys
from functools import cache
from pathlib import Path

from certify.errors import InputError


@cache
def describe_code() -> str:
    """Return this program, Python and the packages that the program needs, as JSON.

    The program by the SHA-256 of its files: its version number does not change with
    every change.
    """
    root = Path(__file__).parents[1]
    digest = hashlib.sha256()
    for path in sorted(root.rglob("*.py")):
        digest.update(f"{path.relative_to(root).as_posix()}\0".encode())
        digest.update(path.read_bytes())
    versions = {
        "certify": f"{importlib.metadata.version('certify')} ({digest.hexdigest()[:12]})",
        "python": "{}.{}".format(*sys.version_info),
    }
    for need in importlib.metadata.requires("certify") or []:
        if "extra ==" not in need:
            name = re.split(r"[^A-Za-z0-9._-]", need, maxsplit=1)[0]
            versions[name] = importlib.metadata.version(name)
    return json.dumps(versions, sort_keys=True)


def check_code(wanted: str | None) -> None:
    """Refuse to work with other code than the one that the results are expected of.

    wanted: None where there is no other code.
    Errors: InputError, naming what differs.
    """
    if wanted is not None and wanted != describe_code():
        raise InputError(compare_code(wanted, describe_code(), "a worker"))


def compare_code(wanted: str, found: str, who: str) -> str:
    """Return the message that says in what two descriptions differ."""
    here, there = json.loads(wanted), json.loads(found)
    differing = [
        f"{name} {there.get(name, 'missing')}, and here {here.get(name, 'missing')}"
        for name in sorted({*here, *there})
        if here.get(name) != there.get(name)
    ]
    return (
        f"{who} runs other code: {'; '.join(differing)}\n"
        "  next: install the same versions there; results would differ otherwise"
    )
