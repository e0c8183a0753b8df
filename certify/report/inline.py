"""Marks inside a text beyond those of names (blocks.py).

A *formula* is LaTeX mathematics between two marks; a *reference* is the name of a
statement of the same document; *prose* are words of the claim's authors. Marks are
private-use characters that no label contains.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from certify.report.blocks import BEGIN, END

_FORMULA = ("\ue002", "\ue003")
_REFERENCE = ("\ue004", "\ue005")
_EMPHASIS = ("\ue006", "\ue007")
_PROSE = ("\ue008", "\ue009")
_PAIRS = {
    "name": (BEGIN, END),
    "formula": _FORMULA,
    "reference": _REFERENCE,
    "emphasis": _EMPHASIS,
    "prose": _PROSE,
}
_ANY = re.compile(
    "|".join(f"{one}(?P<{kind}>[^{two}]*){two}" for kind, (one, two) in _PAIRS.items())
)


def formula(latex: str) -> str:
    """Return LaTeX mathematics between marks."""
    return latex.join(_FORMULA)


def mark_dollars(text: str) -> str:
    """Return a text of our own with its formulas, written between dollars, marked."""
    return "".join(formula(part) if i % 2 else part for i, part in enumerate(text.split("$")))


def refer(statement: str) -> str:
    """Return a reference to a statement, by its name."""
    return statement.join(_REFERENCE)


def emphasize(text: str) -> str:
    """Return a term that is being defined, between marks."""
    return text.join(_EMPHASIS)


def quote_prose(text: str) -> str:
    """Return a text of the claim's authors, in which no letter is taken for a symbol."""
    return text.join(_PROSE)


def split_marks(text: str) -> Iterator[tuple[str, str]]:
    """Yield the parts of a text: a key of `_PAIRS` or "text", and the content.

    Cost: linear in the text.
    """
    place = 0
    for found in _ANY.finditer(text):
        if found.start() > place:
            yield "text", text[place : found.start()]
        kind = found.lastgroup or "text"
        yield kind, found[kind]
        place = found.end()
    if place < len(text):
        yield "text", text[place:]
