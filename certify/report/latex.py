r"""How it is set: LaTeX.

Names of vertices and numbers become mathematics, proofs the proof environment of amsthm,
tables longtables. `set_latex` sets blocks, `set_latex_document` a whole document
that compiles on its own and can be read by \input into a paper.
"""

from __future__ import annotations

import json
import re
from collections.abc import Iterable, Sequence

from certify.report.blocks import Block, Paragraph, Rows
from certify.report.document import Document, Grid, Heading, Part, Picture, Proof, Sheet, Statement
from certify.report.inline import split_marks
from certify.report.names import Name, read_name
from certify.report.preamble import CLOSING, OPENING
from certify.report.tex import escape_tex
from certify.report.tikz import draw_tikz

_DEEPEST = 7
_CASE = re.compile(r"Case ([\d.]*\d): ")
_SUM = r"\(?-?\d+\)?(?:[ \xa0][·+=][ \xa0]\(?-?\d+\)?)+"
_NEGATIVE = r"(?<![\w)\]-])-\d+"
_TOUGHNESS = "(?<![\\w'\u2019-])s(?: \\+ 1)?(?![\\w'\u2019-])"
_SET_NAME = r"\b[A-Z]\d{0,2}\b(?! (?:path|cycle|vertex|Hamiltonian)\b)(?!')"
_MATHS = re.compile("|".join((_SUM, _NEGATIVE, _TOUGHNESS, _SET_NAME)))
_BLOCK = 16
_END_OF_ROWS = "\n\\end{evidencerows}"


def set_latex(blocks: Iterable[Block], prefix: str = "") -> str:
    """Return the blocks as LaTeX, an empty line between them. Cost: linear in the text."""
    return "\n\n".join(_Setter(prefix).block(block) for block in blocks) + "\n"


def set_latex_document(document: Document) -> str:
    """Return a document as LaTeX. Cost: linear in the document."""
    setter = _Setter(document.prefix)
    body = "\n\n".join(setter.part(part) for part in document.parts)
    opening = OPENING.replace("TITLE", escape_tex(document.title))
    return f"{opening}\n{body}\n\n{CLOSING}"


def set_latex_text(text: str, prefix: str = "") -> str:
    """Return a text with its marks as LaTeX."""
    return _Setter(prefix).text(text)


class _Setter:
    def __init__(self, prefix: str) -> None:
        self.prefix = prefix

    def part(self, part: Part) -> str:
        match part:
            case Heading(text=text, level=level):
                return rf"\{'sub' * (level - 1)}section{{{self.text(text)}}}"
            case Statement(sort=sort, name=name, text=text, note=note):
                kind = f"evidence{sort.lower()}"
                head = f"[{self.text(note)}]" if note else ""
                return (
                    rf"\begin{{{kind}}}{head}\label{{{self.prefix}{name}}}"
                    f"\\evidencestay\n{self.text(text)}\n\\end{{{kind}}}"
                )
            case Proof():
                return self._proof(part)
            case Sheet():
                return self._sheet(part)
            case Grid():
                return self._grid(part)
        return self.block(part)

    def block(self, block: Block) -> str:
        if isinstance(block, Paragraph):
            case = _CASE.match(block.text)
            text = block.text[case.end() :] if case else block.text
            label = f"Case~{case[1]}." if case else ""
            if not block.depth:
                return self.text(text)
            depth = min(block.depth, _DEEPEST)
            return rf"\evidencecase{{{depth}}}{{{label}}}{{{self.text(text)}}}"
        return self._rows(block)

    def _rows(self, rows: Rows) -> str:
        heads = [self.text(head) for head, _ in rows.rows]
        widest = max(heads, key=len)
        depth = min(rows.depth, _DEEPEST)
        lines = [rf"\begin{{evidencerows}}{{{depth}}}{{{widest}}}"]
        lines += [
            rf"\item[{{{head}}}] {self.text(content)}"
            for head, (_, content) in zip(heads, rows.rows, strict=True)
        ]
        return "\n".join(lines) + _END_OF_ROWS

    def _proof(self, proof: Proof) -> str:
        text = "\n\n".join(map(self.block, proof.blocks))
        if text.endswith(_END_OF_ROWS):
            text = f"{text.removesuffix(_END_OF_ROWS)} \\qedhere{_END_OF_ROWS}"
        said = f"\\begin{{proof}}\n{text}\n\\end{{proof}}"
        return said if proof.picture is None else f"{said}\n\n{self._picture(proof.picture)}"

    def _picture(self, picture: Picture) -> str:
        label = rf"\label{{{self.prefix}{picture.name}}}"
        return (
            rf"\begin{{evidencefigure}}{{{self.text(picture.caption)}{label}}}"
            f"\n{draw_tikz(picture.figure)}\n\\end{{evidencefigure}}"
        )

    def _sheet(self, sheet: Sheet) -> str:
        head = " & ".join(map(self.text, sheet.heads)) + r" \\"
        width = len(sheet.heads)
        lines = [
            rf"\begin{{longtable}}{{{'l' * width}}}",
            rf"\caption{{{self.text(sheet.caption)}}}\\",
            rf"\hline {head} \hline \endfirsthead",
            rf"\hline {head} \hline \endhead",
            rf"\hline \multicolumn{{{width}}}{{r}}{{\textit{{continued on the next page}}}}\\"
            r" \endfoot",
            r"\hline \endlastfoot",
        ]
        lines += [" & ".join(map(self.text, row)) + r" \\" for row in sheet.rows]
        return "\n".join([*lines, r"\end{longtable}"])

    def _grid(self, grid: Grid) -> str:
        columns = f"r|{'c' * len(grid.across)}"
        head = " & ".join([self.text(grid.corner), *map(self.text, grid.across)])
        lines = [
            r"\begin{evidencegrid}",
            rf"\begin{{tabular}}{{@{{}}{columns}@{{}}}}",
            rf"{head} \\ \hline",
        ]
        lines += [" & ".join(map(self.text, (name, *cells))) + r" \\" for name, cells in grid.down]
        return "\n".join(
            [
                *lines,
                r"\end{tabular}",
                rf"\evidencetablecaption{{{self.text(grid.caption)}}}",
                r"\end{evidencegrid}",
            ]
        )

    def text(self, text: str) -> str:
        """Return a text with its marks as LaTeX."""
        return "".join(self._piece(kind, content) for kind, content in split_marks(text))

    def _piece(self, kind: str, content: str) -> str:
        match kind:
            case "name":
                return self._name(read_name(content))
            case "formula":
                return f"${content}$"
            case "reference":
                return rf"\ref{{{self.prefix}{content}}}"
            case "emphasis":
                return rf"\emph{{{escape_tex(content)}}}"
            case "prose":
                return escape_tex(_typeset(content))
        return set_plain_text(content)

    def _name(self, name: Name) -> str:
        match name.sort:
            case "code":
                return _code(name.parts[0])
            case "edge":
                u, v = map(_atom, name.parts)
                return rf"\mbox{{{u}--{v}}}"
            case "set":
                parts = [_atom(part) for part in name.parts]
                return rf"$\{{${', '.join(parts)}$\}}$"
        return _atom(name.parts[0])


def _typeset(prose: str) -> str:
    for typed, shown in (("<=", "\u2264"), (">=", "\u2265"), ("...", "\u2026")):
        prose = prose.replace(typed, shown)
    return prose


def _atom(name: str) -> str:
    """Return the name of one vertex."""
    if name.startswith('"'):
        return rf"\textup{{``{escape_tex(json.loads(name))}''}}"
    if re.fullmatch(r"-?\d+|\(-?\d+(, ?-?\d+)*,?\)", name):
        return f"${name}$"
    if len(name) == 1 and name.isascii() and name.isalpha():
        return f"${name}$"
    return rf"\textup{{{escape_tex(name)}}}"


def _code(text: str) -> str:
    """Return a command, file name or digest; long ones may break after some letters."""
    pieces: Sequence[str] = re.findall(r"[^/.,=]+[/.,=]*|[/.,=]+", text)
    if re.fullmatch("[0-9a-f]{64}", text):
        pieces = [text[i : i + _BLOCK] for i in range(0, len(text), _BLOCK)]
    broken = r"\allowbreak ".join(map(escape_tex, pieces))
    return rf"\texttt{{{broken}}}"


def set_plain_text(text: str) -> str:
    """Return a text without marks; sums, negative numbers and names of sets as mathematics."""
    said, place = "", 0
    for found in _MATHS.finditer(text):
        said += escape_tex(text[place : found.start()])
        shown = found[0].replace("\xa0", " ").replace("·", r"\cdot ")
        said += f"${re.sub(' +', ' ', shown)}$"
        place = found.end()
    return said + escape_tex(text[place:])
