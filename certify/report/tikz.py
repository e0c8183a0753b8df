"""A figure as a TikZ picture; of the packages of TikZ only the core is used."""

from __future__ import annotations

from certify.report.figure import Dot, Figure, Line, Outline, Text
from certify.report.layout import Point
from certify.report.tex import escape_tex

_LINES = {
    "plain": "line width=0.5pt",
    "thick": "line width=1.6pt",
    "dashed": "line width=0.4pt,dash pattern=on 1.6pt off 1.6pt",
}
_TEXTS = {
    "name": r"\scriptsize",
    "inverse": r"\scriptsize\bfseries",
    "weight": r"\scriptsize\bfseries",
    "tick": r"\scriptsize",
    "cut": r"\footnotesize\itshape",
}
_BORDER = {"piece": "black!55", "cut": "black!75"}
_INNER = {"piece": "black!12", "cut": "white"}


def draw_tikz(figure: Figure) -> str:
    """Return the figure as a tikzpicture environment. Cost: linear in the figure."""
    lines = [r"\begin{tikzpicture}[x=1cm,y=1cm,line cap=round,line join=round]"]
    lines += [part for outline in figure.outlines for part in _outline(outline)]
    lines += [_line(line) for line in figure.lines]
    lines += [_dot(dot) for dot in figure.dots]
    lines += [_text(text) for text in figure.texts]
    left, low, right, high = figure.box
    lines.append(rf"\useasboundingbox {_at((left, low))} rectangle {_at((right, high))};")
    return "\n".join([*lines, r"\end{tikzpicture}"])


def _at(point: Point) -> str:
    return f"({point[0]:.2f},{point[1]:.2f})"


def _outline(outline: Outline) -> list[str]:
    """Draw thick strokes in the colour of the border, then slightly thinner ones inside."""
    said = []
    for colour, radius in (
        (_BORDER[outline.style], outline.radius),
        (_INNER[outline.style], outline.radius - 0.025),
    ):
        parts = [rf"{_at(p)} circle[radius={radius:.3f}]" for p in outline.points]
        said.append(rf"\fill[{colour}] {' '.join(parts)};")
        if outline.segments:
            runs = " ".join(f"{_at(p)} -- {_at(q)}" for p, q in outline.segments)
            said.append(rf"\draw[{colour},line width={2 * radius:.3f}cm] {runs};")
    return said


def _line(line: Line) -> str:
    if line.control is None:
        path = f"{_at(line.start)} -- {_at(line.stop)}"
    else:
        # A quadratic curve as a cubic one.
        one, two = (
            (
                round(end[0] + 2 / 3 * (line.control[0] - end[0]), 3),
                round(end[1] + 2 / 3 * (line.control[1] - end[1]), 3),
            )
            for end in (line.start, line.stop)
        )
        path = f"{_at(line.start)} .. controls {_at(one)} and {_at(two)} .. {_at(line.stop)}"
    return rf"\draw[{_LINES[line.style]}] {path};"


def _dot(dot: Dot) -> str:
    r = dot.radius
    if dot.shape == "square":
        x, y = dot.place
        low, high = (x - r * 0.9, y - r * 0.9), (x + r * 0.9, y + r * 0.9)
        return rf"\filldraw[line width=0.5pt] {_at(low)} rectangle {_at(high)};"
    circle = rf"\filldraw[fill=white,line width=0.5pt] {_at(dot.place)} circle[radius={r:.3f}];"
    if dot.shape == "double":
        inner = rf"\draw[line width=0.5pt] {_at(dot.place)} circle[radius={r - 0.04:.3f}];"
        return f"{circle}\n{inner}"
    return circle


def _text(text: Text) -> str:
    colour = ",text=white" if text.style == "inverse" else ""
    if text.beside:
        colour = ",fill=white"
    shown = escape_tex(text.text)
    if text.text[:1] in ("+", "\u2212"):
        shown = f"${text.text}$".replace("\u2212", "-")
    return (
        rf"\node[inner sep=0pt,font={_TEXTS[text.style]}{colour}] at {_at(text.place)} {{{shown}}};"
    )
