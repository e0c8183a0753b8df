"""What a record must look like before anything of it is written down for the kernel.

The kernel judges what evidence shows. How it has to be written, FORMAT.md says; a body
that is not written so is refused here, and never put right.
"""

from __future__ import annotations

import json
from collections.abc import Sequence
from typing import Any

MOST_DIGITS = 100


class RefusedError(Exception):
    """The evidence is not written as FORMAT.md says; the text says where."""


class NotTakenError(Exception):
    """The kernel does not take this evidence, whether it is right or not; the text says why."""


def read_record(line: bytes) -> object:
    """Return the value of a line of evidence, which must be the canonical form of itself."""
    try:
        record = json.loads(line)
        canonical = json.dumps(record, sort_keys=True, separators=(",", ":")) + "\n"
        if canonical.encode("ascii") != line:
            raise RefusedError("the line is not in canonical form")
    except (ValueError, RecursionError) as error:
        raise RefusedError(f"the line is not JSON: {error}") from None
    return record


def parts(value: object, *keys: str) -> list[Any]:
    """Return the values of an object with exactly these keys, in the order of the call."""
    if not isinstance(value, dict) or set(value) != set(keys):
        raise RefusedError(f"not an object with the keys {', '.join(keys)}")
    return [value[key] for key in keys]


def entries(value: object, size: int | None = None) -> Sequence[Any]:
    """Return a list, of this length if one is given."""
    if not isinstance(value, list) or (size is not None and len(value) != size):
        raise RefusedError(f"not a list{'' if size is None else f' of {size}'}")
    return value


def integer(value: object) -> int:
    """Return an integer, of at most 100 digits."""
    if type(value) is not int or abs(value) >= 10**MOST_DIGITS:
        raise RefusedError(f"not an integer of at most {MOST_DIGITS} digits")
    return value


def below(value: object, bound: int) -> int:
    """Return an integer from 0 to bound - 1."""
    if not 0 <= integer(value) < bound:
        raise RefusedError(f"{value} is not from 0 to {bound - 1}")
    return integer(value)


def text(value: object) -> str:
    """Return a text."""
    if not isinstance(value, str):
        raise RefusedError("not a text")
    return value
