"""What stands between the marks of a name: a vertex, an edge, a set, or a command."""

from __future__ import annotations

import re
from dataclasses import dataclass

_DASH = re.compile(r"(?<=[^\s,;{}()\"-])-|(?<=\))-")


@dataclass(frozen=True)
class Name:
    """sort: "vertex", "edge", "set" or "code". parts: the vertices, or the text of a command."""

    sort: str
    parts: tuple[str, ...]


def read_name(text: str) -> Name:
    """Return what a name is made of, as words.py writes it.

    A word that needs no quotes holds no dash, so a dash after a letter, a digit or a
    parenthesis is that of an edge.
    """
    if len(text) > 1 and text[0] == text[-1] == "`":
        return Name("code", (text[1:-1],))
    if text.startswith('"'):
        return Name("vertex", (text,))
    if text.startswith("{") and text.endswith("}"):
        return Name("set", tuple(_split(text[1:-1])))
    dash = _DASH.search(text)
    if dash is not None:
        return Name("edge", (_spaced(text[: dash.start()]), _spaced(text[dash.end() :])))
    return Name("vertex", (text,))


def _split(text: str) -> list[str]:
    """Split at the commas outside of parentheses and quotes."""
    parts, quoted, depth, start = [], False, 0, 0
    for i, letter in enumerate(text):
        if letter == '"' and (i == 0 or text[i - 1] != "\\"):
            quoted = not quoted
        elif not quoted:
            depth += (letter == "(") - (letter == ")")
            if letter == "," and depth == 0:
                parts.append(text[start:i])
                start = i + 1
    return [part.strip() for part in [*parts, text[start:]]]


def _spaced(name: str) -> str:
    """Return a tuple with blanks after its commas, as everywhere else."""
    return re.sub(r",(?=-?\d)", ", ", name)
