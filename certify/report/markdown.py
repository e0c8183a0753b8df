"""How it is set: Markdown, with formulas between dollars, as the usual viewers show it."""

from __future__ import annotations

import base64
import re
from collections.abc import Iterable

from certify.report.blocks import Block, Paragraph, Rows
from certify.report.document import Document, Grid, Heading, Part, Picture, Proof, Sheet, Statement
from certify.report.inline import split_marks
from certify.report.names import read_name
from certify.report.svg import draw_svg

_SPECIAL = re.compile(r"([\\`*_{}\[\]<>#|$~])")
_CASE = re.compile(r"Case ([\d.]*\d): ")
_INDENT = 2


def set_markdown(blocks: Iterable[Block]) -> str:
    """Return the blocks as Markdown, an empty line between them. Cost: linear in the text."""
    return "\n\n".join(_Setter({}).block(block) for block in blocks) + "\n"


def set_markdown_document(document: Document) -> str:
    """Return a document as Markdown, with its figures inside.

    Cost: linear in the document.
    """
    statements = [part for part in document.parts if isinstance(part, Statement)]
    pictures = [part.picture for part in document.parts if isinstance(part, Proof)]
    numbers = {part.name: f"{part.sort} {place}" for place, part in enumerate(statements, 1)}
    shown = [picture for picture in pictures if picture is not None]
    numbers |= {picture.name: f"Figure {place}" for place, picture in enumerate(shown, 1)}
    setter = _Setter(numbers)
    return "\n\n".join(setter.part(part) for part in document.parts) + "\n"


class _Setter:
    """numbers: what each statement is called."""

    def __init__(self, numbers: dict[str, str]) -> None:
        self.numbers = numbers

    def part(self, part: Part) -> str:
        match part:
            case Heading(text=text, level=level):
                return f"{'#' * level} {self.text(text)}"
            case Statement(name=name, text=text, note=note):
                head = f" ({self.text(note)})" if note else ""
                return f"**{self.numbers[name]}{head}.** {self.text(text)}"
            case Proof(blocks=blocks, picture=picture):
                told = [self.block(block) for block in blocks]
                told[0] = f"*Proof.* {told[0]}" if isinstance(blocks[0], Paragraph) else told[0]
                told[-1] += " ∎"
                if picture is not None:
                    told += [_image(picture), self._caption(picture)]
                return "\n\n".join(told)
            case Sheet(caption=caption, heads=heads, rows=rows):
                return f"{self._table(heads, rows)}\n\n{self.text(caption)}"
            case Grid(caption=caption, corner=corner, across=across, down=down):
                rows = tuple((name, *cells) for name, cells in down)
                return f"{self._table((corner, *across), rows)}\n\n{self.text(caption)}"
        return self.block(part)

    def _caption(self, picture: Picture) -> str:
        return f"**{self.numbers[picture.name]}.** {self.text(picture.caption)}"

    def _table(self, heads: tuple[str, ...], rows: Iterable[tuple[str, ...]]) -> str:
        lines = [heads, tuple("---" for _ in heads), *rows]
        return "\n".join(
            "| " + " | ".join(self.text(cell) if i != 1 else cell for cell in line) + " |"
            for i, line in enumerate(lines)
        )

    def block(self, block: Block) -> str:
        depth = block.depth
        margin = " " * (_INDENT * max(depth - 1, 0))
        if isinstance(block, Rows):
            margin = " " * (_INDENT * depth)
            return "\n".join(
                f"{margin}- {self._head(head)}{self.text(content)}" for head, content in block.rows
            )
        case = _CASE.match(block.text)
        if case:
            return f"{margin}- *Case {case[1]}.* {self.text(block.text[case.end() :])}"
        return (" " * (_INDENT * depth)) + self.text(block.text)

    def _head(self, head: str) -> str:
        return f"{self.text(head)}: " if head else ""

    def text(self, text: str) -> str:
        """Return a text with its marks as Markdown."""
        return "".join(self._piece(kind, content) for kind, content in split_marks(text))

    def _piece(self, kind: str, content: str) -> str:
        match kind:
            case "formula":
                return f"${content}$"
            case "reference":
                return self.numbers[content].split()[-1]
            case "emphasis":
                return f"*{_escape(content)}*"
            case "prose":
                return _escape(content)
            case "name":
                name = read_name(content)
                if name.sort == "code":
                    return f"`{name.parts[0]}`"
                if name.sort == "edge":
                    return "\u2013".join(map(_escape, name.parts))
                return _escape(content)
        return _escape(content)


def _image(picture: Picture) -> str:
    """Return the figure as an image inside the text, so that there is one file alone."""
    drawn = draw_svg(picture.figure, "figure").encode()
    data = base64.b64encode(drawn).decode("ascii")
    return f"![{_escape(picture.figure.title)}](data:image/svg+xml;base64,{data})"


def _escape(text: str) -> str:
    return _SPECIAL.sub(r"\\\1", text.replace("\xa0", " "))
