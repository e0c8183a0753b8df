"""What is said: paragraphs and rows, free of any way of setting them.

Names of vertices and edges stand between two *marks*, so that a renderer can
keep them on one line, or set them as mathematics.
"""

from __future__ import annotations

from dataclasses import dataclass

BEGIN, END = "\ue000", "\ue001"
"""The marks, private-use characters that no printed label contains."""


@dataclass(frozen=True)
class Paragraph:
    """Running text. depth: how deep inside a proof by cases, 0 outside."""

    text: str
    depth: int = 0


@dataclass(frozen=True)
class Rows:
    """A small table of two columns: what a row is about, and its content."""

    rows: tuple[tuple[str, str], ...]
    depth: int = 0


Block = Paragraph | Rows


def mark(name: str) -> str:
    """Return a name between marks."""
    return f"{BEGIN}{name}{END}"
