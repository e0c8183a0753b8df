"""The text of a rule and its syntax tree, read without ever running any of it.

A *rule* is an expression of a claim (FORMAT.md, section 3.1). Python's own
parser turns it into a tree; everything beyond that is for `language`, which
lets through what it knows and nothing else. Here are the guards that come
first: plain ASCII (so that no other letter is folded into an allowed name),
the limits of size, and the parser's warnings and failures turned into
`ClaimError`.
"""

from __future__ import annotations

import ast
import re
import warnings
from dataclasses import dataclass

from certify.claim.hints import clipped
from certify.errors import ClaimError

MAX_CHARACTERS = 2000
MAX_NODES = 500
MAX_LEVELS = 40

_NOT_IN_A_RULE = re.compile(r"[^\t\n -~]|[#\\\"'`]")
_LONE_EQUALS = re.compile(r"(?<![=<>!:+*/%-])=(?!=)")
_NOT_OURS = (("&&", "and"), ("||", "or"), ("!", "not"), ("<>", "!="))


@dataclass(frozen=True)
class Source:
    """The text of a rule and where it stands: file, line and key."""

    text: str
    where: str

    def fault(self, spot: ast.AST | int, problem: str) -> ClaimError:
        """Return the error for a problem at a node, or at an offset into the text."""
        if isinstance(spot, int):
            offset, piece = spot, self.text[spot : spot + 1]
        else:
            offset, end = self._span(spot)
            piece = self.text[offset:end]
        above = self.text.count("\n", 0, offset)
        column = offset - (self.text.rfind("\n", 0, offset) + 1) + 1
        row = f"line {above + 1}, " if "\n" in self.text.strip() else ""
        near = f" at {clipped(piece)}" if piece.strip() else ""
        return ClaimError(f"{self.where}: {row}column {column}{near}: {problem}")

    def _span(self, node: ast.AST) -> tuple[int, int]:
        """Return the offsets at which a node begins and ends (the text is ASCII)."""
        lead = len(self.text) - len(self.text.lstrip())
        starts = [lead, *(m.end() for m in re.finditer("\n", self.text) if m.end() > lead)]
        line, column = getattr(node, "lineno", 1), getattr(node, "col_offset", 0)
        end_line, end_column = getattr(node, "end_lineno", 1), getattr(node, "end_col_offset", 0)
        return starts[line - 1] + column, starts[end_line - 1] + end_column


def read_tree(source: Source) -> ast.expr:
    """Return the syntax tree of a rule, within the limits of size.

    Errors: ClaimError, for anything that is not one Python expression in ASCII.
    Cost: linear in the text, which has at most 2,000 characters.
    """
    text = source.text
    if len(text) > MAX_CHARACTERS:
        raise ClaimError(
            f"{source.where}: this rule has {len(text):,} characters; "
            f"at most {MAX_CHARACTERS:,} are allowed"
        )
    if not text.strip():
        raise ClaimError(f"{source.where}: the rule is empty; write an expression")
    strange = _NOT_IN_A_RULE.search(text)
    if strange:
        raise source.fault(strange.start(), _strange(strange.group()))
    tree = _parse(source)
    _check_size(source, tree)
    return tree


def _parse(source: Source) -> ast.expr:
    """Hand the text to Python's parser; no warning and no error of it leaks."""
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error")
            return ast.parse(source.text.strip(), mode="eval").body
    except SyntaxError as error:
        raise source.fault(*_explain(source, error)) from None
    except (RecursionError, MemoryError):
        raise ClaimError(
            f"{source.where}: nested too deeply; at most {MAX_LEVELS} levels are allowed"
        ) from None
    except (ValueError, OverflowError, Warning):
        raise ClaimError(f"{source.where}: this is not an expression") from None


def _explain(source: Source, error: SyntaxError) -> tuple[int, str]:
    """Return offset and wording for what the parser refuses."""
    for foreign, ours in _NOT_OURS:
        at = source.text.find(foreign)
        if at >= 0 and (foreign != "!" or source.text[at + 1 : at + 2] != "="):
            return at, f'there is no "{foreign}"; write "{ours}"'
    lone = _LONE_EQUALS.search(source.text)
    if lone:
        return lone.start(), 'one "=" does not compare; write "=="'
    lead = len(source.text) - len(source.text.lstrip())
    lines = source.text.strip().split("\n")
    row = min(max((error.lineno or 1) - 1, 0), len(lines) - 1)
    offset = lead + sum(len(line) + 1 for line in lines[:row]) + max((error.offset or 1) - 1, 0)
    reason = (error.msg or "invalid syntax").split(". ")[0]
    return min(offset, len(source.text)), f"this is not an expression ({reason})"


def _check_size(source: Source, tree: ast.expr) -> None:
    """Refuse a tree with too many nodes or levels, without recursion."""
    nodes = 0
    waiting: list[tuple[ast.AST, int]] = [(tree, 1)]
    while waiting:
        node, level = waiting.pop()
        nodes += 1
        if nodes > MAX_NODES or level > MAX_LEVELS:
            raise ClaimError(
                f"{source.where}: this rule is too large; at most {MAX_NODES} parts "
                f"in at most {MAX_LEVELS} levels are allowed"
            )
        waiting += [
            (child, level + 1)
            for child in ast.iter_child_nodes(node)
            if isinstance(child, ast.expr)
        ]


def _strange(character: str) -> str:
    if character == "#":
        return "a rule holds no comments; write them outside the quotes, in the file"
    if character in "\"'`":
        return "a rule holds no text in quotes; it speaks of integers"
    name = "this character" if character.isprintable() else f"the character U+{ord(character):04X}"
    return f"{name} has no place in a rule; letters, digits and signs are plain ASCII"
