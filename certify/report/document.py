"""A document for people: its parts, free of any way of setting them.

An appendix is a list of parts; latex.py and markdown.py set them. Texts hold the
marks of blocks.py and inline.py.
"""

from __future__ import annotations

from dataclasses import dataclass

from certify.report.blocks import Block
from certify.report.figure import Figure


@dataclass(frozen=True)
class Heading:
    """The heading of what follows; level 1 is the document itself."""

    text: str
    level: int


@dataclass(frozen=True)
class Statement:
    """A numbered statement, a "Definition", "Theorem" or "Proposition".

    name: for references. note: what stands in parentheses after the number.
    """

    sort: str
    name: str
    text: str
    note: str = ""


@dataclass(frozen=True)
class Proof:
    """The proof of the statement before it, with its figure if it has one."""

    blocks: tuple[Block, ...]
    picture: Picture | None = None


@dataclass(frozen=True)
class Picture:
    """A figure and what stands below it. name: for references."""

    name: str
    figure: Figure
    caption: str


@dataclass(frozen=True)
class Sheet:
    """A table that may go on over pages. heads: one for each column."""

    caption: str
    heads: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]


@dataclass(frozen=True)
class Grid:
    """A small table with a head for every row and column. corner: what both are of."""

    caption: str
    corner: str
    across: tuple[str, ...]
    down: tuple[tuple[str, tuple[str, ...]], ...]


Part = Heading | Statement | Proof | Sheet | Grid | Block


@dataclass(frozen=True)
class Document:
    """The parts, in order. title: plain text. prefix: makes the names of statements unique."""

    title: str
    prefix: str
    parts: tuple[Part, ...]
