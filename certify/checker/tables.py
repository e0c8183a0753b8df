"""Reading TOML, and which keys its tables may have."""

from __future__ import annotations

import keyword
import re
import tomllib
from collections.abc import Iterable
from typing import Any

from .predicates import FUNCTIONS, PREDICATES
from .strict import BadClaim

MOST_BYTES = 1 << 20
MOST_NAMES = 20
_TAKEN = {"a", "b", "where", "true", "false", "abs", *PREDICATES, *FUNCTIONS}
# Python's TOML reader needs time that grows with the square of a dotted key.
_PART = r"""(?:[\w-]++|"(?:[^"\\\n]|\\.)*+"|'[^'\n]*+')[ \t]*+\.[ \t]*+"""
_LONG_KEY = re.compile(rf"(?<![\w\\-])(?:{_PART}){{20}}", re.ASCII)


def read_toml(data: bytes) -> dict[str, Any]:
    """Return the values of a TOML document of at most 1 MiB."""
    try:
        if len(data) > MOST_BYTES:
            raise BadClaim("the claim is larger than 1 MiB")
        text = data.decode("utf-8")
        if _LONG_KEY.search(text):
            raise BadClaim("the claim has a dotted key of more than 20 parts")
        return tomllib.loads(text)
    except (ValueError, RecursionError) as error:
        raise BadClaim(f"the claim is not TOML: {error}") from None


def need_only(table: dict[str, Any], keys: set[str], what: str) -> None:
    """Refuse a table with other keys."""
    unknown = sorted(set(table) - keys)
    if unknown:
        raise BadClaim(f"unknown keys in {what}: {', '.join(map(repr, unknown[:5]))}")


def get_table(top: dict[str, Any], name: str) -> dict[str, Any]:
    """Return a table, empty if it is not there."""
    table = top.get(name, {})
    if not isinstance(table, dict):
        raise BadClaim(f"[{name}] is not a table")
    return table


def get_text(table: dict[str, Any], name: str, default: str | None = None) -> str:
    """Return a string of a table; without a default it has to be there."""
    value = table.get(name, default)
    if not isinstance(value, str):
        raise BadClaim(f"{name} is not a string")
    return value


def get_list(table: dict[str, Any], name: str) -> list[Any]:
    """Return a list of a table, empty if it is not there."""
    value = table.get(name, [])
    if not isinstance(value, list):
        raise BadClaim(f"{name} is not a list")
    return value


def need_names(names: Iterable[str], what: str) -> list[str]:
    """Return the names if they can be those of parameters or coordinates."""
    found = list(names)
    if len(found) > MOST_NAMES:
        raise BadClaim(f"more than {MOST_NAMES} {what}")
    for name in found:
        fits = re.fullmatch(r"[A-Za-z][A-Za-z0-9_]*", name)
        if not fits or name in _TAKEN or keyword.iskeyword(name):
            raise BadClaim(f"{name!r} cannot be the name of one of the {what}")
    return found
