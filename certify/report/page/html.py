"""How it is set: HTML. Every text that comes from a file is escaped here."""

from __future__ import annotations

import json
from collections.abc import Iterable
from html import escape

from certify.report.blocks import Block, Paragraph
from certify.report.inline import split_marks
from certify.report.names import read_name

_DEEPEST = 6
_MOST_UNBROKEN = 32
"""Longer names may be broken between lines, so that a narrow page need not scroll."""


def set_html(blocks: Iterable[Block]) -> str:
    """Return the blocks as HTML. Cost: linear in the text."""
    return "\n".join(_set_block(block) for block in blocks)


def set_text(text: str) -> str:
    """Return a text with its marks as HTML, without an element around it."""
    return "".join(_set_piece(kind, content) for kind, content in split_marks(text))


def set_data(name: str, value: object) -> str:
    """Return a value as a script element of data, which no value can break out of.

    JSON needs none of the escaped characters outside of strings, and `<` is what
    would end the element or begin a comment in it.
    """
    text = json.dumps(value, sort_keys=True, separators=(",", ":"))
    for letter in "<>&":
        text = text.replace(letter, f"\\u{ord(letter):04x}")
    return f'<script type="application/json" id="{escape(name)}">{text}</script>'


def _set_block(block: Block) -> str:
    if isinstance(block, Paragraph):
        return f"<p{_classes('', block)}>{set_text(block.text)}</p>"
    if not any(head for head, _ in block.rows):
        return "\n".join(f'<p class="sequence">{set_text(text)}</p>' for _, text in block.rows)
    rows = "\n".join(
        f"<div><dt>{set_text(head)}</dt><dd>{set_text(text)}</dd></div>"
        for head, text in block.rows
    )
    return f"<dl{_classes('rows', block)}>{rows}</dl>"


def _classes(name: str, block: Block) -> str:
    """Return the attribute for a name, "" if none, and how deep a block is in a proof by cases."""
    depth = [f"deep-{min(block.depth, _DEEPEST)}"] if block.depth else []
    names = [*([name] if name else []), *depth]
    return f' class="{" ".join(names)}"' if names else ""


def _set_piece(kind: str, content: str) -> str:
    text = escape(content)
    match kind:
        case "emphasis":
            return f"<em>{text}</em>"
        case "formula":
            return f"<code>{text}</code>"
        case "name":
            name = read_name(content)
            if name.sort == "code":
                return f"<code>{escape(name.parts[0])}</code>"
            if name.sort == "edge":
                text = "\u2013".join(map(escape, name.parts))
            return f'<span class="whole">{text}</span>' if len(text) <= _MOST_UNBROKEN else text
    return text
