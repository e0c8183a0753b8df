"""Drawing a reason into a graph: from the layout and the reason to a figure."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from math import dist, hypot
from typing import Any

from certify.claim.claim import Key
from certify.claim.parts import Rule
from certify.graph.graph import Edge, Graph
from certify.graph.question import Question
from certify.report.figure import (
    LETTER_HEIGHT,
    LETTER_WIDTH,
    Dot,
    Figure,
    Line,
    Outline,
    Text,
    near,
    overlap,
)
from certify.report.layout import Layout, Point, cross, find_layout, fits
from certify.report.reason import Reason, find_reason
from certify.report.words import name_label

MOST_VERTICES, MOST_EDGES = 40, 120
WIDTH, HEIGHT = 12.6, 10.5
"""The largest figure; it fits into the usual page."""

RADIUS, GRID_RADIUS = 0.24, 0.25

_SMALLEST = 0.62
_INSIDE = 2
_LETTERS = "abcdefghijklmnopqrstuvwxyz"
_AROUND = ((0, 1), (1, 0), (0, -1), (-1, 0), (0.8, 0.8), (0.8, -0.8), (-0.8, -0.8), (-0.8, 0.8))
_BENDS = (0.12, -0.12, 0.2, -0.2, 0.3, -0.3)


def draw_reason(
    graph: Graph,
    question: Question,
    kind: str,
    body: dict[str, Any],
    rule: Rule | None,
    key: Key,
) -> Figure | None:
    """Return the figure of an impossible instance; None where it would not help.

    None: too many vertices or edges to be read, a kind of reason that shows nothing in the graph,
    or a graph with almost no edges.
    Cost: that of the layout.
    """
    if not (4 <= graph.n <= MOST_VERTICES and 3 <= graph.m <= MOST_EDGES):
        return None
    reason = find_reason(graph, question, kind, body)
    if reason is None:
        return None
    layout = find_layout(graph, rule, key)
    scale = fits(layout.size, WIDTH, HEIGHT)
    while scale >= _SMALLEST:
        figure = _Drawing(graph, reason, _scaled(layout, scale), scale).figure()
        left, low, right, high = figure.box
        if right - left <= WIDTH and high - low <= HEIGHT:
            return figure
        scale = round(scale - 0.03, 2)
    return None


def _scaled(layout: Layout, scale: float) -> Layout:
    def smaller(p: Point) -> Point:
        return round(p[0] * scale, 2), round(p[1] * scale, 2)

    points = tuple(map(smaller, layout.points))
    return replace(
        layout, points=points, ticks=tuple((smaller(p), text) for p, text in layout.ticks)
    )


class _Drawing:
    """A drawing in the making; texts find their places among what is there already."""

    def __init__(self, graph: Graph, reason: Reason, layout: Layout, scale: float) -> None:
        self.graph, self.reason, self.layout = graph, reason, layout
        self.points = layout.points
        self.names = [name_label(label, short=True) for label in graph.labels]
        self.inside = not layout.on_grid and max(map(len, self.names)) <= _INSIDE
        self.radius = round(RADIUS * max(scale, 0.85), 3) if self.inside else 0.16
        self.texts: list[Text] = []

    def figure(self) -> Figure:
        if self.layout.on_grid:
            self.radius = GRID_RADIUS
        lines = tuple(self._line(e) for e in self.graph.edges if e not in self.reason.gone)
        dots = tuple(self._dot(v) for v in range(self.graph.n))
        outlines = [self._outline(group, "piece", 0.09) for group in self.reason.pieces]
        caption = self.reason.caption
        if outlines and self._are_apart(outlines):
            caption += " The pieces are shaded." if len(outlines) > 1 else ""
        elif outlines:
            outlines = []
            caption += self._letter_pieces(dots, lines)
        cuts = self._outline_cuts()
        self.texts += [Text(p, text, "tick") for p, text in self.layout.ticks]
        if not self.layout.on_grid:
            self._name_vertices(dots, lines)
        for v, weight in sorted(self.reason.weights.items()):
            text = f"{weight:+d}".replace("-", "\u2212")
            if self.layout.on_grid and len(text) <= _INSIDE:
                style = "inverse" if dots[v].shape == "square" else "name"
                self.texts.append(Text(self.points[v], text, style))
            else:
                self._place(v, text, "weight", dots, lines)
        if cuts:
            caption += " The sets are outlined." if len(cuts) > 1 else " The set is outlined."
            for name, group in self.reason.cuts:
                self._place(group[0], name, "cut", dots, lines)
        elif self.reason.cuts:
            caption += " Beside a vertex stand the names of the sets it is in."
            for v in range(self.graph.n):
                named = sorted(name for name, group in self.reason.cuts if v in group)
                if named:
                    self._place(v, "".join(named), "cut", dots, lines)
        return Figure(
            tuple(outlines + cuts),
            lines,
            dots,
            tuple(self.texts),
            self.reason.title,
            self._describe(),
            caption,
        )

    def _outline_cuts(self) -> list[Outline]:
        """Return the outlines of the sets; none if one would run over a vertex outside of it."""
        last = len(self.reason.cuts) - 1
        cuts = [
            self._outline(group, "cut", 0.1 + 0.05 * (last - place))
            for place, (_, group) in enumerate(self.reason.cuts)
        ]
        for cut in cuts:
            outside = [p for p in self.points if p not in cut.points]
            near = cut.radius + self.radius
            if any(_distance(r, p, q) < near for r in outside for p, q in cut.segments):
                return []
        return cuts

    def _are_apart(self, outlines: Sequence[Outline]) -> bool:
        """Return whether the shades of different pieces do not touch, nor removed vertices."""
        removed = [self.points[v] for v, shape in self.reason.shapes.items() if shape == "square"]
        for k, one in enumerate(outlines):
            need = one.radius
            for p, q in one.segments:
                if any(_distance(r, p, q) < need + self.radius for r in removed):
                    return False
            for other in outlines[k + 1 :]:
                pairs = [(p, q) for p, q in one.segments]
                if any(cross(p, q, r, s) for p, q in pairs for r, s in other.segments):
                    return False
                for mine, theirs in ((one, other), (other, one)):
                    if any(
                        _distance(r, p, q) < 2 * need
                        for r in theirs.points
                        for p, q in mine.segments or [(mine.points[0], mine.points[0])]
                    ):
                        return False
        return True

    def _letter_pieces(self, dots: Sequence[Dot], lines: Sequence[Line]) -> str:
        """Name the larger pieces by letters, and return how the caption says so."""
        larger = [piece for piece in self.reason.pieces if len(piece) > 1]
        for letter, piece in zip(_LETTERS, larger, strict=False):
            for v in piece:
                if self.layout.on_grid:
                    self.texts.append(Text(self.points[v], letter, "name"))
                else:
                    self._place(v, letter, "cut", dots, lines)
        if not larger:
            return " They are single vertices."
        said = " Vertices of one piece have the same letter"
        if len(larger) < len(self.reason.pieces):
            said += "; a circle without a letter is a piece by itself"
        return f"{said}."

    def _dot(self, v: int) -> Dot:
        shape = self.reason.shapes.get(v, "circle")
        return Dot(self.points[v], shape, self.radius)

    def _line(self, edge: Edge) -> Line:
        u, v = edge
        style = "plain"
        if edge in self.reason.thick:
            style = "thick"
        elif edge in self.reason.dashed:
            style = "dashed"
        return Line(self.points[u], self.points[v], style, self._bend(u, v))

    def _bend(self, u: int, v: int) -> Point | None:
        """Return the control point of a curve that passes no other vertex, None if straight."""
        p, q = self.points[u], self.points[v]
        others = [r for w, r in enumerate(self.points) if w not in (u, v)]
        if _clear(p, None, q, others, self.radius):
            return None
        for part in _BENDS:
            x = (p[0] + q[0]) / 2 - (q[1] - p[1]) * part * 2
            y = (p[1] + q[1]) / 2 + (q[0] - p[0]) * part * 2
            control = round(x, 2), round(y, 2)
            if _clear(p, control, q, others, self.radius):
                return control
        return None

    def _outline(self, group: Sequence[int], style: str, away: float) -> Outline:
        """Outline the vertices along a spanning forest of the edges between them."""
        inside, segments = {group[0]}, []
        members = set(group)
        waiting = set(group[1:])
        near: dict[int, list[int]] = {v: [] for v in group}
        for u, v in self.graph.edges:
            if u in members and v in members and (u, v) not in self.reason.gone:
                near[u].append(v)
                near[v].append(u)
        stack = [group[0]]
        while stack or waiting:
            if not stack:
                v = min(waiting)
                waiting.discard(v)
                inside.add(v)
                stack.append(v)
            v = stack.pop(0)
            for w in sorted(near[v]):
                if w not in inside:
                    inside.add(w)
                    waiting.discard(w)
                    segments.append((self.points[v], self.points[w]))
                    stack.append(w)
        points = tuple(self.points[v] for v in group)
        return Outline(points, tuple(segments), style, round(self.radius + away, 3))

    def _name_vertices(self, dots: Sequence[Dot], lines: Sequence[Line]) -> None:
        for v, name in enumerate(self.names):
            if self.inside:
                style = "inverse" if dots[v].shape == "square" else "name"
                self.texts.append(Text(self.points[v], name, style))
            else:
                self._place(v, name, "name", dots, lines)

    def _place(
        self, v: int, text: str, style: str, dots: Sequence[Dot], lines: Sequence[Line]
    ) -> None:
        """Put a text beside a vertex: over no text and no vertex, and over few lines.

        Farther and farther around the vertex, until there is room.
        """
        x, y = self.points[v]
        wide, high = len(text) * LETTER_WIDTH / 2, LETTER_HEIGHT / 2
        for ring in range(12):
            best: tuple[int, Text] | None = None
            for dx, dy in _AROUND:
                away = self.radius + 0.04 + 0.12 * ring
                place = x + dx * (away + wide), y + dy * (away + high)
                found = Text((round(place[0], 2), round(place[1], 2)), text, style, beside=True)
                if self._is_free(found, dots):
                    crossed = sum(_meets(found, line) for line in lines)
                    if best is None or crossed < best[0]:
                        best = crossed, found
            if best is not None:
                self.texts.append(best[1])
                return
        raise OverflowError("no room for a label")

    def _is_free(self, text: Text, dots: Sequence[Dot]) -> bool:
        return not any(overlap(text.box, other.box) for other in self.texts) and not any(
            near(text.box, dot.place, dot.radius) for dot in dots
        )

    def _describe(self) -> str:
        n, m = self.graph.n, self.graph.m
        return f"A drawing of a graph with {n} vertices and {m} edges. {self.reason.told}"


def _clear(
    p: Point, control: Point | None, q: Point, others: Sequence[Point], radius: float
) -> bool:
    """Return whether a line passes all other vertices, checked at points along it."""
    need = radius + 0.04
    if control is None:
        return all(_distance(r, p, q) > need for r in others)
    for k in range(1, 24):
        t = k / 24
        x, y = (
            (1 - t) ** 2 * a + 2 * t * (1 - t) * c + t**2 * b
            for a, c, b in zip(p, control, q, strict=True)
        )
        if any(dist((x, y), r) < need for r in others):
            return False
    return True


def _distance(r: Point, p: Point, q: Point) -> float:
    """Return the distance of a point from a segment."""
    dx, dy = q[0] - p[0], q[1] - p[1]
    square = dx * dx + dy * dy
    t = ((r[0] - p[0]) * dx + (r[1] - p[1]) * dy) / square if square else 0.0
    t = min(max(t, 0.0), 1.0)
    return hypot(r[0] - p[0] - t * dx, r[1] - p[1] - t * dy)


def _meets(text: Text, line: Line) -> bool:
    """Return whether a straight line runs through a text, checked at points along it."""
    left, low, right, high = text.box
    for k in range(1, 20):
        x = line.start[0] + (line.stop[0] - line.start[0]) * k / 20
        y = line.start[1] + (line.stop[1] - line.start[1]) * k / 20
        if left < x < right and low < y < high:
            return True
    return False
