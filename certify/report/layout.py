"""Where the vertices of a drawn graph go.

Boards stand on their grid, families with one cyclic coordinate (a rule that speaks of
`(a.i - b.i) % n`) on concentric circles, all other graphs where springs of the length
of the distances put them (Kamada and Kawai, Information Processing Letters 31
(1989) 7-15), from several starts; the drawing with the fewest crossings is taken.
Lengths are in centimetres, y points up. The same graph gives the same layout: the starts
are fixed, and coordinates are rounded.
"""

from __future__ import annotations

import ast
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations
from math import ceil, cos, dist, hypot, pi, sin, sqrt

import igraph
import networkx

from certify.claim.claim import Key
from certify.claim.language import INTEGER, Expression
from certify.claim.names import Scope
from certify.claim.parts import Rule
from certify.errors import ClaimError
from certify.graph.graph import Edge, Graph
from certify.report.formula import find_moduli

Point = tuple[float, float]

SPACING = 1.0
"""Between neighbouring cells, circles, and vertices on a circle."""

NEAREST = 0.72
"""No two vertices are nearer to each other than this."""

_ROWS_DOWN = ({"row", "column"}, {"row", "col"}, {"r", "c"}, {"i", "j"})
_STARTS = 4
_STEPS = 200


@dataclass(frozen=True)
class Layout:
    """Where the vertices are. ticks: texts beside a grid, which name its rows and columns.

    on_grid: whether the place of a vertex tells its name.
    """

    points: tuple[Point, ...]
    ticks: tuple[tuple[Point, str], ...] = ()
    on_grid: bool = False

    @property
    def size(self) -> Point:
        """Return width and height, between the outermost vertices."""
        if not self.points:
            return 0.0, 0.0
        xs, ys = zip(*self.points, strict=True)
        return max(xs) - min(xs), max(ys) - min(ys)


def find_layout(graph: Graph, rule: Rule | None, key: Key) -> Layout:
    """Return a layout of a graph.

    rule: of the claim, None for a graph of a list. key: the instance.
    Cost: O(n^2 + m^2) for each start; meant for graphs that are drawn.
    """
    if rule is not None and isinstance(key, dict) and graph.n:
        cyclic = find_cyclic(graph, rule, key)
        if cyclic is not None and len(rule.coordinates) <= 2:
            return _on_circles(graph, cyclic)
        if len(rule.coordinates) == 2:
            return _on_grid(graph, rule.coordinates)
    return Layout(tuple(_free(graph)))


def find_cyclic(graph: Graph, rule: Rule, key: dict[str, int]) -> int | None:
    """Return which coordinate the rule treats as cyclic, None if it treats none so.

    One is when the rule takes a remainder of an expression in this coordinate of both
    vertices, and the modulus is the number of its values.
    """
    parameters = Scope(tuple(key))
    for left, right in find_moduli(rule.adjacent):
        named = {n.attr for n in ast.walk(left) if isinstance(n, ast.Attribute)}
        whole = {n.id for n in ast.walk(left) if isinstance(n, ast.Name)}
        if not {"a", "b"} <= whole or len(named) > 1:
            continue
        index = rule.coordinates.index(named.pop()) if named else 0
        values = {_coordinates(label)[index] for label in graph.labels}
        try:
            modulus = Expression(rule.adjacent.source, parameters, INTEGER, right).evaluate(
                tuple(key.values())
            )
        except (ClaimError, ValueError):
            continue
        if modulus == len(values) > 2:
            return index
    return None


def _coordinates(label: object) -> tuple[int, ...]:
    if isinstance(label, tuple):
        return label
    return (label,) if isinstance(label, int) else ()


def _on_grid(graph: Graph, names: tuple[str, ...]) -> Layout:
    """Put rows below each other if the names say so; otherwise x goes right and y up."""
    labels = [_coordinates(label) for label in graph.labels]
    firsts, seconds = ([*range(min(c), max(c) + 1)] for c in zip(*labels, strict=True))
    rows_down = {name.lower() for name in names} in _ROWS_DOWN
    lying = not rows_down and len(seconds) > len(firsts)
    first_down = rows_down or lying
    across, up = (names[0], firsts), (names[1], seconds)
    if first_down:
        across, up = (names[1], seconds), (names[0], firsts[::-1] if rows_down else firsts)
    low, left = -0.75 * SPACING, -0.75 * SPACING
    ticks = [((i * SPACING, low), str(value)) for i, value in enumerate(across[1])]
    ticks += [((left, i * SPACING), str(value)) for i, value in enumerate(up[1])]
    middle = (len(across[1]) - 1) / 2 * SPACING, (len(up[1]) - 1) / 2 * SPACING
    ticks += [
        ((middle[0], low - 0.45), across[0]),
        ((left - 0.35 - 0.09 * len(up[0]), middle[1]), up[0]),
    ]
    places = [(t, s) if first_down else (s, t) for s, t in labels]
    points = tuple(
        _rounded((across[1].index(x) * SPACING, up[1].index(y) * SPACING)) for x, y in places
    )
    return Layout(points, tuple((_rounded(p), text) for p, text in ticks), on_grid=True)


def _on_circles(graph: Graph, cyclic: int) -> Layout:
    """Put the cyclic coordinate around, from the top and clockwise; the other one inwards."""
    labels = [_coordinates(label) for label in graph.labels]
    around = sorted({label[cyclic] for label in labels})
    others = sorted({label[:cyclic] + label[cyclic + 1 :] for label in labels})
    innermost = max(len(around) * NEAREST / (2 * pi), NEAREST)
    points = []
    for label in labels:
        ring = others.index(label[:cyclic] + label[cyclic + 1 :])
        radius = innermost + (len(others) - 1 - ring) * SPACING
        angle = pi / 2 - 2 * pi * around.index(label[cyclic]) / len(around)
        points.append(_rounded((radius * cos(angle), radius * sin(angle))))
    return Layout(tuple(points))


def _free(graph: Graph) -> list[Point]:
    """Lay out each connected part, and set the parts side by side, the largest first."""
    source = networkx.Graph()
    source.add_nodes_from(range(graph.n))
    source.add_edges_from(graph.edges)
    parts = sorted((sorted(part) for part in networkx.connected_components(source)), key=_by_size)
    points: dict[int, Point] = {}
    boxes = [_lay_out_part(part, graph.edges) for part in parts]
    widest = max((max(x for x, _ in box) for box in boxes), default=0.0)
    area = sum((max(x for x, _ in b) + SPACING) * (max(y for _, y in b) + SPACING) for b in boxes)
    limit = max(widest, sqrt(area * 1.8))
    x = y = height = 0.0
    for part, box in zip(parts, boxes, strict=True):
        width = max(x for x, _ in box)
        if x > 0 and x + width > limit:
            x, y, height = 0.0, y - height - SPACING, 0.0
        top = max(p[1] for p in box)
        for v, (px, py) in zip(part, box, strict=True):
            points[v] = _rounded((x + px, y - (top - py)))
        x += width + SPACING
        height = max(height, top)
    return [points[v] for v in range(graph.n)]


def _by_size(part: list[int]) -> tuple[int, int]:
    return -len(part), part[0]


def _lay_out_part(part: list[int], edges: Sequence[Edge]) -> list[Point]:
    """Return points with least x and y 0 for one connected part."""
    if len(part) == 1:
        return [(0.0, 0.0)]
    number = {v: i for i, v in enumerate(part)}
    inner = [(number[u], number[v]) for u, v in edges if u in number]
    graph = igraph.Graph(n=len(part), edges=inner)
    best: tuple[int, list[Point]] | None = None
    for start in _list_starts(len(part), inner):
        found = graph.layout_kamada_kawai(seed=start, maxiter=60 * len(part), epsilon=0)
        points = [(float(x), float(y)) for x, y in found.coords]
        crossings = count_crossings(points, inner)
        if best is None or crossings < best[0]:
            best = crossings, points
    points = best[1] if best is not None else []
    return _upright(_spread(points, inner))


def _list_starts(n: int, edges: Sequence[Edge]) -> list[list[Point]]:
    """Return the starts: a circle in different orders, and a plane drawing if there is one."""
    starts = []
    for k in range(_STARTS):
        stride, around = 2 * k + 1, n + (k > 0)
        order = sorted(range(n), key=[(v * stride % around, v) for v in range(n)].__getitem__)
        place = {v: i for i, v in enumerate(order)}
        starts.append([(cos(2 * pi * place[v] / n), sin(2 * pi * place[v] / n)) for v in range(n)])
    graph = networkx.Graph()
    graph.add_nodes_from(range(n))
    graph.add_edges_from(edges)
    plane, embedding = networkx.check_planarity(graph)
    if plane and n > 3:
        drawn = networkx.combinatorial_embedding_to_pos(embedding)
        starts.insert(0, [(float(drawn[v][0]) / n, float(drawn[v][1]) / n) for v in range(n)])
    return starts


def _spread(points: list[Point], edges: Sequence[Edge]) -> list[Point]:
    """Scale a drawing to the usual distances, and push apart what is too near.

    Vertices give way to each other, and to edges that would run into them.
    """
    lengths = sorted(dist(points[u], points[v]) for u, v in edges)
    usual = lengths[len(lengths) // 2] if lengths else 1.0
    scale = 1.15 * SPACING / usual if usual > 0 else 1.0
    places = [[x * scale, y * scale] for x, y in points]
    n = len(places)
    for _ in range(_STEPS):
        moved = False
        for u, v in combinations(range(n), 2):
            dx, dy = places[v][0] - places[u][0], places[v][1] - places[u][1]
            gap = hypot(dx, dy)
            if gap < NEAREST:
                moved = True
                if gap < 1e-6:
                    dx, dy, gap = cos(u + 2.0 * v), sin(u + 2.0 * v), 1.0
                    by = NEAREST / 2
                else:
                    by = (NEAREST - gap) / 2 + 0.01
                _move(places[u], -dx / gap * by, -dy / gap * by)
                _move(places[v], dx / gap * by, dy / gap * by)
        moved |= _clear_edges(places, edges)
        if not moved:
            break
    return [(x, y) for x, y in places]


def _clear_edges(places: list[list[float]], edges: Sequence[Edge]) -> bool:
    moved = False
    need = NEAREST * 0.55
    for u, v in edges:
        (ux, uy), (vx, vy) = places[u], places[v]
        length = hypot(vx - ux, vy - uy) or 1.0
        nx, ny = -(vy - uy) / length, (vx - ux) / length
        for w in range(len(places)):
            if w in (u, v):
                continue
            wx, wy = places[w]
            along = ((wx - ux) * (vx - ux) + (wy - uy) * (vy - uy)) / length
            side = (wx - ux) * nx + (wy - uy) * ny
            if 0.1 < along < length - 0.1 and abs(side) < need:
                by = (need - abs(side)) / 2 * (1 if side >= 0 else -1)
                _move(places[w], nx * by, ny * by)
                moved = True
    return moved


def _move(place: list[float], dx: float, dy: float) -> None:
    place[0] += dx
    place[1] += dy


def count_crossings(points: Sequence[Point], edges: Sequence[Edge]) -> int:
    """Return how many pairs of edges without a common vertex cross. Cost: O(m^2)."""
    return sum(
        not set(e) & set(f) and cross(points[e[0]], points[e[1]], points[f[0]], points[f[1]])
        for e, f in combinations(edges, 2)
    )


def cross(p: Point, q: Point, r: Point, s: Point) -> bool:
    """Return whether the open segments pq and rs cross."""
    return _turn(p, q, r) * _turn(p, q, s) < 0 and _turn(r, s, p) * _turn(r, s, q) < 0


def _turn(p: Point, q: Point, r: Point) -> float:
    return (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0])


def _upright(points: list[Point]) -> list[Point]:
    """Turn a drawing so that it is wider than high, and move it to the corner.

    Of the turns by a whole multiple of 5 degrees the one of the least height.
    """
    best: list[Point] = points
    least = float("inf")
    for k in range(36):
        c, s = cos(pi * k / 36), sin(pi * k / 36)
        turned = [(x * c - y * s, x * s + y * c) for x, y in points]
        ys = [y for _, y in turned]
        height = round(max(ys) - min(ys), 3)
        if height < least:
            least, best = height, turned
    left, low = min(x for x, _ in best), min(y for _, y in best)
    return [(x - left, y - low) for x, y in best]


def _rounded(point: Point) -> Point:
    x, y = (round(value, 2) + 0.0 for value in point)
    return x, y


def fits(size: Point, width: float, height: float) -> float:
    """Return the scale, at most 1, at which a drawing fits into a box."""
    scales = [limit / have for have, limit in zip(size, (width, height), strict=True) if have > 0]
    return ceil(min([1.0, *scales]) * 100 - 1e-9) / 100
