"""Small pieces of wording that the messages about a claim share."""

from __future__ import annotations

import difflib
import json
import reprlib
from collections.abc import Iterable

_SHORT = reprlib.Repr()
_SHORT.maxstring = _SHORT.maxother = 60
_SHORT.maxlong = 40
_SHORT.maxlist = 4
_SHORT.maxdict = 3
_SHORT.maxlevel = 3


def did_you_mean(word: str, known: Iterable[str]) -> str:
    """Return `; did you mean "..."?` for the nearest known word, or nothing."""
    near = difflib.get_close_matches(word[:80], sorted(known), n=1, cutoff=0.6)
    return f'; did you mean "{near[0]}"?' if near else ""


def shown(value: object) -> str:
    """Return a value of the claim as a message shows it: cut short, on one line."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str):
        return json.dumps(value if len(value) <= 60 else f"{value[:57]}...", ensure_ascii=False)
    try:
        return _SHORT.repr(value)
    except ValueError:  # an integer of more digits than Python likes to write
        return "a very large number"


def clipped(text: str) -> str:
    """Return a piece of a rule in quotes, on one line, at most 40 characters long."""
    line = " ".join(text.split())
    return f'"{line}"' if len(line) <= 40 else f'"{line[:37]}..."'
