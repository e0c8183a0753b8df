"""How it is set: plain text, wrapped at 88 columns."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable

from certify.report.blocks import BEGIN, END, Block, Paragraph

WIDTH = 88
_INDENT, _DEEPEST = 2, 8
_NAME = re.compile(f"{BEGIN}([^{END}]*){END}")


def set_plain(blocks: Iterable[Block]) -> str:
    """Return the blocks as plain text: an empty line between blocks, a line end at the end.

    Cost: linear in the text.
    """
    return "\n\n".join(_set_block(block) for block in blocks) + "\n"


def _set_block(block: Block) -> str:
    margin = " " * (_INDENT * min(block.depth, _DEEPEST))
    if isinstance(block, Paragraph):
        return _wrap(block.text, margin, margin)
    column = max(len(_unmark(head)) for head, _ in block.rows)
    hanging = margin + " " * (column + 4)
    return "\n".join(
        _wrap(content, f"{margin}  {_unmark(head):<{column}}  ", hanging)
        for head, content in block.rows
    )


def _wrap(text: str, first: str, further: str) -> str:
    lines = textwrap.wrap(
        _unmark(text),
        WIDTH,
        initial_indent=first,
        subsequent_indent=further,
        break_long_words=False,
        break_on_hyphens=False,
    )
    return "\n".join(lines).replace("\xa0", " ")


def _unmark(text: str) -> str:
    """Return the text without marks; blanks inside a name do not break a line."""
    return _NAME.sub(lambda found: found[1].replace(" ", "\xa0"), text)
