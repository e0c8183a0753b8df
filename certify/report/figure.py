"""A figure: a graph drawn with the reason why it has no Hamiltonian path or cycle.

One value, from which tikz.py and svg.py draw. What a vertex or an edge is, is
said by shape and line: removed vertices are filled squares, the vertices in question are
double circles; forced edges are thick, edges at removed vertices are dashed; pieces
are shaded or have letters, cuts are outlined. So a grey print, or eyes that tell no colours
apart, lose nothing.
Lengths are in centimetres, y points up.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import dist

from certify.report.layout import Point

LETTER_WIDTH, LETTER_HEIGHT = 0.16, 0.28
"""Of a letter of a label, generously."""


@dataclass(frozen=True)
class Dot:
    """A vertex. shape: "circle", "square" (filled), "double" or "point" (small, filled)."""

    place: Point
    shape: str
    radius: float


@dataclass(frozen=True)
class Line:
    """An edge. style: "plain", "thick" or "dashed". control: of a curve, None if straight."""

    start: Point
    stop: Point
    style: str
    control: Point | None = None


@dataclass(frozen=True)
class Outline:
    """A set of vertices and segments between them that are outlined together.

    style: "piece" (shaded) or "cut" (not shaded). radius: how far the outline is away.
    """

    points: tuple[Point, ...]
    segments: tuple[tuple[Point, Point], ...]
    style: str
    radius: float


@dataclass(frozen=True)
class Text:
    """A text. style: "name", "inverse" (on a filled vertex), "weight", "cut" or "tick".
    beside: it stands beside a vertex, perhaps on lines, which it hides.
    """

    place: Point
    text: str
    style: str
    beside: bool = False

    @property
    def box(self) -> tuple[float, float, float, float]:
        """Return left, low, right, high."""
        width, height = len(self.text) * LETTER_WIDTH, LETTER_HEIGHT
        x, y = self.place
        return x - width / 2, y - height / 2, x + width / 2, y + height / 2


@dataclass(frozen=True)
class Figure:
    """What is drawn, from the lowest layer to the highest, and how it is told.

    title, description: plain texts, for those who do not see it. scale: of the whole,
    1 unless it had to be made smaller; letters keep their size.
    """

    outlines: tuple[Outline, ...]
    lines: tuple[Line, ...]
    dots: tuple[Dot, ...]
    texts: tuple[Text, ...]
    title: str
    description: str
    caption: str

    @property
    def box(self) -> tuple[float, float, float, float]:
        """Return left, low, right, high of all that is drawn, with a small margin."""
        boxes = [text.box for text in self.texts]
        for dot in self.dots:
            (x, y), r = dot.place, dot.radius
            boxes.append((x - r, y - r, x + r, y + r))
        for outline in self.outlines:
            r = outline.radius
            boxes += [(x - r, y - r, x + r, y + r) for x, y in outline.points]
        boxes += [(x, y, x, y) for line in self.lines if line.control for x, y in [line.control]]
        if not boxes:
            return 0.0, 0.0, 0.0, 0.0
        left, low, right, high = zip(*boxes, strict=True)
        return min(left) - 0.05, min(low) - 0.05, max(right) + 0.05, max(high) + 0.05


def overlap(
    one: tuple[float, float, float, float], other: tuple[float, float, float, float]
) -> bool:
    """Return whether two boxes have an inner point in common."""
    return one[0] < other[2] and other[0] < one[2] and one[1] < other[3] and other[1] < one[3]


def near(box: tuple[float, float, float, float], place: Point, radius: float) -> bool:
    """Return whether a box and a disc have an inner point in common."""
    x = min(max(place[0], box[0]), box[2])
    y = min(max(place[1], box[1]), box[3])
    return dist((x, y), place) < radius
