"""A figure as an SVG image, for a page; with a title and a description for those who listen."""

from __future__ import annotations

from xml.sax.saxutils import escape

from certify.report.figure import Dot, Figure, Line, Outline, Text
from certify.report.layout import Point

UNIT = 40
"""Pixels for a centimetre."""

_LINES = {
    "plain": 'stroke-width="1"',
    "thick": 'stroke-width="3.2"',
    "dashed": 'stroke-width="0.9" stroke-dasharray="3 3"',
}
_BORDER = {"piece": "#777", "cut": "#444"}
_INNER = {"piece": "#e2e2e2", "cut": "#fff"}
_TEXTS = {
    "name": 'font-size="11"',
    "inverse": 'font-size="11" font-weight="bold" fill="#fff"',
    "weight": 'font-size="11" font-weight="bold"',
    "tick": 'font-size="11"',
    "cut": 'font-size="13" font-style="italic"',
}


def draw_svg(figure: Figure, name: str) -> str:
    """Return the figure as an svg element.

    name: makes its ids unique on a page. Cost: linear in the figure.
    """
    return _Canvas(figure, name).draw()


class _Canvas:
    def __init__(self, figure: Figure, name: str) -> None:
        self.figure, self.name = figure, name
        self.left, low, right, self.high = figure.box
        self.width, self.height = (right - self.left) * UNIT, (self.high - low) * UNIT

    def draw(self) -> str:
        figure, name = self.figure, self.name
        size = f"{self.width:.1f} {self.height:.1f}"
        lines = [
            f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {size}" '
            f'width="{self.width:.1f}" height="{self.height:.1f}" role="img" '
            f'aria-labelledby="{name}-title {name}-desc">',
            f'<title id="{name}-title">{escape(figure.title)}</title>',
            f'<desc id="{name}-desc">{escape(figure.description)}</desc>',
            f'<rect width="{self.width:.1f}" height="{self.height:.1f}" fill="#fff"/>',
            '<g stroke-linecap="round" stroke="#000" fill="none">',
            *(part for outline in figure.outlines for part in self._outline(outline)),
            *(self._line(line) for line in figure.lines),
            *(self._dot(dot) for dot in figure.dots),
            "</g>",
            '<g font-family="sans-serif" text-anchor="middle" fill="#000">',
            *(self._text(text) for text in figure.texts),
            "</g>",
            "</svg>",
        ]
        return "\n".join(lines) + "\n"

    def _xy(self, point: Point) -> tuple[str, str]:
        x, y = (point[0] - self.left) * UNIT, (self.high - point[1]) * UNIT
        return f"{x:.1f}", f"{y:.1f}"

    def _outline(self, outline: Outline) -> list[str]:
        said = []
        for colour, radius in (
            (_BORDER[outline.style], outline.radius),
            (_INNER[outline.style], outline.radius - 0.03),
        ):
            for point in outline.points:
                x, y = self._xy(point)
                said.append(
                    f'<circle cx="{x}" cy="{y}" r="{radius * UNIT:.1f}" fill="{colour}" '
                    'stroke="none"/>'
                )
            for p, q in outline.segments:
                path = f"M{' '.join(self._xy(p))}L{' '.join(self._xy(q))}"
                said.append(
                    f'<path d="{path}" stroke="{colour}" stroke-width="{2 * radius * UNIT:.1f}"/>'
                )
        return said

    def _line(self, line: Line) -> str:
        start, stop = " ".join(self._xy(line.start)), " ".join(self._xy(line.stop))
        if line.control is None:
            path = f"M{start}L{stop}"
        else:
            path = f"M{start}Q{' '.join(self._xy(line.control))} {stop}"
        return f'<path d="{path}" {_LINES[line.style]}/>'

    def _dot(self, dot: Dot) -> str:
        x, y = self._xy(dot.place)
        r = dot.radius * UNIT
        if dot.shape == "square":
            half = 0.9 * r
            left, top = float(x) - half, float(y) - half
            return (
                f'<rect x="{left:.1f}" y="{top:.1f}" width="{2 * half:.1f}" '
                f'height="{2 * half:.1f}" fill="#000"/>'
            )
        circle = f'<circle cx="{x}" cy="{y}" r="{r:.1f}" fill="#fff"/>'
        if dot.shape == "double":
            circle += f'<circle cx="{x}" cy="{y}" r="{r - 1.6:.1f}"/>'
        return circle

    def _text(self, text: Text) -> str:
        x, y = self._xy(text.place)
        beside = ' paint-order="stroke" stroke="#fff" stroke-width="3"' if text.beside else ""
        return (
            f'<text x="{x}" y="{y}" dy="0.35em" {_TEXTS[text.style]}{beside}>'
            f"{escape(text.text)}</text>"
        )
