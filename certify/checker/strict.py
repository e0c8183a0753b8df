"""What every part of the checker says no with, and reads JSON with.

The checker rejects by raising: `Rejected` when evidence does not hold,
`BadClaim` when the claim itself is not one. There is no third way out, and
acceptance is never the default.
"""

from __future__ import annotations

import json
from typing import Any, NoReturn

MOST_DIGITS = 100
MOST_SHOWN = 400


class Rejected(Exception):
    """The evidence is not accepted; the text, on one printable line, says why."""

    def __init__(self, reason: str) -> None:
        super().__init__(printable(reason))


class BadClaim(Rejected):
    """The claim, or the list of graphs it names, cannot be read as one."""


def printable(text: str) -> str:
    """Return a text as one line can show it: other characters escaped, and cut short."""
    if len(text) > MOST_SHOWN:
        text = text[:MOST_SHOWN] + "..."
    return "".join([c if c.isprintable() else ascii(c)[1:-1] for c in text])


def _refuse_number(text: str) -> NoReturn:
    raise Rejected(f"{text[:40]} is not an exact integer")


def _read_integer(text: str) -> int:
    if len(text) - text.startswith("-") > MOST_DIGITS:
        raise Rejected(f"an integer has more than {MOST_DIGITS} digits")
    return int(text)


def _read_object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) != len(pairs):
        raise Rejected("a key is doubled")
    return found


def read_json(text: str) -> Any:
    """Read JSON in which every number is an exact integer and no key is doubled."""
    try:
        return json.loads(
            text,
            parse_int=_read_integer,
            parse_float=_refuse_number,
            parse_constant=_refuse_number,
            object_pairs_hook=_read_object,
        )
    except RecursionError:
        raise Rejected("nested too deeply") from None
    except ValueError as error:
        raise Rejected(f"not JSON: {error}") from None


def read_canonical(line: bytes) -> dict[str, Any]:
    """Read one line of evidence, which must be the canonical form of itself.

    So keys cannot be doubled, numbers cannot be written in two ways, and two
    readers cannot see two different records in one line.
    """
    if not line.endswith(b"\n"):
        raise Rejected("the line is cut short")
    try:
        text = line[:-1].decode("ascii")
    except UnicodeDecodeError:
        raise Rejected("the line is not ASCII") from None
    record = read_json(text)
    try:
        canonical = json.dumps(record, sort_keys=True, separators=(",", ":"))
    except RecursionError:
        raise Rejected("nested too deeply") from None
    if canonical != text:
        raise Rejected("the line is not in canonical form")
    return need_object(record, "record")


def need_object(value: object, what: str) -> dict[str, Any]:
    """Return the value if it is an object."""
    if not isinstance(value, dict):
        raise Rejected(f"{what} is not an object")
    return value


def need_keys(value: object, keys: set[str], what: str) -> dict[str, Any]:
    """Return the value if it is an object with exactly these keys."""
    found = need_object(value, what)
    if set(found) != keys:
        wrong = sorted(set(found) ^ keys)
        raise Rejected(f"{what} has missing or unknown keys: {', '.join(map(repr, wrong))}")
    return found


def need_list(value: object, what: str) -> list[Any]:
    """Return the value if it is a list."""
    if not isinstance(value, list):
        raise Rejected(f"{what} is not a list")
    return value


def need_integer(value: object, what: str, least: int | None = None) -> int:
    """Return the value if it is an integer (and no truth value), at least `least`."""
    if type(value) is not int:
        raise Rejected(f"{what} is not an integer")
    if least is not None and value < least:
        raise Rejected(f"{what} is {value}, less than {least}")
    return value


def need_text(value: object, what: str) -> str:
    """Return the value if it is a string."""
    if not isinstance(value, str):
        raise Rejected(f"{what} is not a string")
    return value


def need_vertex(value: object, n: int, what: str) -> int:
    """Return the value if it is a vertex number, 0 to n-1."""
    vertex = need_integer(value, what)
    if not 0 <= vertex < n:
        raise Rejected(f"{what}: vertex {vertex} is not in the graph")
    return vertex


def need_vertices(value: object, n: int, what: str) -> list[int]:
    """Return the value if it is a list of different vertex numbers."""
    vertices = [need_vertex(item, n, what) for item in need_list(value, what)]
    if len(set(vertices)) != len(vertices):
        raise Rejected(f"{what} names a vertex twice")
    return vertices


def need_vertex_set(value: object, n: int, what: str) -> list[int]:
    """Return the value if it is a sorted list of different vertex numbers."""
    vertices = need_vertices(value, n, what)
    if vertices != sorted(vertices):
        raise Rejected(f"{what} is not sorted")
    return vertices


def need_permutation(value: object, n: int, what: str) -> list[int]:
    """Return the value if it lists every vertex number exactly once."""
    vertices = need_vertices(value, n, what)
    if len(vertices) != n:
        raise Rejected(f"{what} has {len(vertices)} vertices and not {n}")
    return vertices
