"""Figures: what they show, that nothing in them overlaps, and that they are always the same."""

from __future__ import annotations

import json
import xml.etree.ElementTree as ElementTree
from collections import Counter
from itertools import combinations
from math import dist, hypot
from pathlib import Path
from typing import Any

import networkx
import pytest

from certify.claim.claim import read_claim
from certify.claim.parts import Rule
from certify.graph.build import build_graph
from certify.graph.graph import Graph
from certify.graph.question import build_cycle_question, build_path_question
from certify.report.drawing import draw_reason
from certify.report.figure import Figure
from certify.report.layout import find_layout
from certify.report.svg import UNIT, draw_svg
from certify.report.tikz import draw_tikz
from tests.report import examples, folders

SVG = "{http://www.w3.org/2000/svg}"


def separator(*vertices: int) -> dict[str, Any]:
    return {"form": "separator", "set": list(vertices)}


def weights(n: int) -> dict[str, Any]:
    """Return weights that name no classical obstruction, and three sets."""
    return {
        "vertex": [[v, (-2, 1, 3)[v % 3]] for v in range(0, n, 2)],
        "cut": [[[0, 1, 2], 1], [[1, 3, 5], 2]],
        "parity": [],
    }


def random_graph(n: int, m: int, seed: int, names: str = "", *, ring: bool = True) -> Graph:
    """Return a random graph; with a ring every vertex has two edges at least."""
    graph = networkx.gnm_random_graph(n, m - n * ring, seed=seed)
    if ring:
        graph = networkx.compose(graph, networkx.cycle_graph(n))
    labels = tuple(f"{names}{v}" if names else v for v in range(n))
    return Graph(labels, tuple(sorted(tuple(sorted(e)) for e in graph.edges)))


def draw(graph: Graph, kind: str, body: dict[str, Any], rule: Rule | None = None) -> Figure:
    key = {"n": graph.n}
    figure = draw_reason(graph, build_cycle_question(graph), kind, body, rule, key)
    assert figure is not None
    return figure


def board_rule(tmp_path: Path, text: str = folders.BOARDS) -> Rule:
    path = tmp_path / "rule.toml"
    path.write_text(text)
    rule = read_claim(path).graphs
    assert isinstance(rule, Rule)
    return rule


FIGURES = {
    "squares": draw(examples.squares(24), "obstruction", separator(2, 6)),
    "herschel": draw(examples.herschel(), "obstruction", separator(1, 3, 4, 7, 10)),
    "weights": draw(random_graph(20, 30, 3), "counting", weights(20)),
    "forty": draw(random_graph(40, 60, 1), "counting", weights(40)),
    "sparse": draw(random_graph(40, 34, 2, ring=False), "obstruction", separator(5, 8)),
    "dense": draw(random_graph(22, 90, 4), "counting", weights(22)),
    "long names": draw(random_graph(30, 45, 5, "station-"), "counting", weights(30)),
    "star": draw(Graph(tuple(range(12)), tuple((0, v) for v in range(1, 12))), "obstruction",
                 separator(0)),
}  # fmt: skip


@pytest.mark.parametrize("name", FIGURES)
def test_no_text_meets_another_text_or_a_vertex_that_is_not_its_own(name: str) -> None:
    figure = FIGURES[name]
    for one, other in combinations([text.box for text in figure.texts], 2):
        apart = one[2] <= other[0] or other[2] <= one[0] or one[3] <= other[1] or other[3] <= one[1]
        assert apart, (one, other)
    for text in figure.texts:
        left, low, right, high = text.box
        for dot in figure.dots:
            if text.place == dot.place:
                continue
            x, y = dot.place
            gap = hypot(max(left - x, 0, x - right), max(low - y, 0, y - high))
            assert gap >= dot.radius - 1e-9, (text, dot)


@pytest.mark.parametrize("name", FIGURES)
def test_vertices_are_apart_and_no_edge_runs_into_one(name: str) -> None:
    figure = FIGURES[name]
    for one, other in combinations(figure.dots, 2):
        assert dist(one.place, other.place) > one.radius + other.radius
    if name in ("dense", "forty", "long names"):
        return  # so many edges that some vertex is in the way whatever the drawing
    for line in figure.lines:
        others = [d for d in figure.dots if d.place not in (line.start, line.stop)]
        for k in range(1, 20):
            t = k / 20
            middle = line.control or tuple(
                (a + b) / 2 for a, b in zip(line.start, line.stop, strict=True)
            )
            at = tuple(
                (1 - t) ** 2 * a + 2 * t * (1 - t) * c + t * t * b
                for a, c, b in zip(line.start, middle, line.stop, strict=True)
            )
            assert all(dist(at, dot.place) > dot.radius for dot in others), line


def test_a_separator_shows_what_is_removed_and_the_pieces() -> None:
    graph = examples.herschel()
    figure = FIGURES["herschel"]
    removed = {1, 3, 4, 7, 10}
    squares = {v for v, dot in enumerate(figure.dots) if dot.shape == "square"}
    assert squares == removed
    dashed = sum(line.style == "dashed" for line in figure.lines)
    assert dashed == sum(not removed.isdisjoint(e) for e in graph.edges) == graph.m
    assert figure.caption.startswith(
        "Without the five vertices drawn as black squares, six pieces are left."
    )
    assert "b, d, e, h and k" in figure.description


def test_thick_edges_and_double_circles_show_three_ends() -> None:
    graph = examples.squares(18)
    body = {"form": "crowded", "vertex": 18, "neighbours": [15, 16, 17]}
    figure = draw_reason(graph, build_path_question(graph), "obstruction", body, None, {"n": 18})
    assert figure is not None
    assert [v for v, dot in enumerate(figure.dots) if dot.shape == "double"] == [15, 16, 17]
    thick = {frozenset((line.start, line.stop)) for line in figure.lines if line.style == "thick"}
    places = [dot.place for dot in figure.dots]
    wanted = [(15, 8), (16, 7), (17, 6)]  # 16-9, 17-8, 18-7 by name
    assert thick == {frozenset((places[u], places[v])) for u, v in wanted}


def test_weights_are_written_where_the_shapes_do_not_say_them() -> None:
    graph = random_graph(20, 30, 3)
    plain = {"vertex": [[v, 1 - 2 * (v % 2)] for v in range(0, 20, 3)], "cut": [], "parity": []}
    figure = draw(graph, "counting", plain)
    assert [text.style for text in figure.texts if text.style == "weight"] == []
    assert "Squares have weight -1, double circles have weight 1" in figure.caption
    squares = [v for v, dot in enumerate(figure.dots) if dot.shape == "square"]
    assert squares == [3, 9, 15]
    shown = [text.text for text in FIGURES["weights"].texts if text.style == "weight"]
    assert Counter(shown) == {"\u22122": 4, "+1": 3, "+3": 3}


def test_boards_stand_on_their_grid_and_have_letters_for_pieces(tmp_path: Path) -> None:
    graph = examples.knights(3, 6)
    rule = board_rule(tmp_path)
    figure = draw(graph, "obstruction", separator(2, 14), rule)
    steps = {(label[0] - 1, label[1] - 1) for label in graph.labels if isinstance(label, tuple)}
    xs = sorted({dot.place[0] for dot in figure.dots})
    ys = sorted({dot.place[1] for dot in figure.dots}, reverse=True)
    assert (len(xs), len(ys)) == (6, 3)
    assert {(ys.index(d.place[1]), xs.index(d.place[0])) for d in figure.dots} == steps
    inside = Counter(text.text for text in figure.texts if text.style == "name")
    assert inside == {"a": 14}
    ticks = [text.text for text in figure.texts if text.style == "tick"]
    assert {"row", "column"} <= set(ticks)


def test_edges_go_around_the_cells_between_their_ends(tmp_path: Path) -> None:
    text = folders.BOARDS.replace(
        "{abs(a.row - b.row), abs(a.column - b.column)} == {1, 2}", "a.row == b.row"
    )
    cells = [(1, column) for column in range(1, 6)]
    graph = Graph(tuple(cells), tuple(combinations(range(5), 2)))
    figure = draw(graph, "obstruction", separator(0), board_rule(tmp_path, text))
    bent = sum(line.control is not None for line in figure.lines)
    assert bent == graph.m - 4


def test_a_cyclic_coordinate_goes_around(tmp_path: Path) -> None:
    path = tmp_path / "rings.toml"
    path.write_text(folders.RINGS)
    claim = read_claim(path)
    graph = build_graph(claim, {"n": 11})
    assert isinstance(claim.graphs, Rule)
    points = find_layout(graph, claim.graphs, {"n": 11}).points
    radii = {0: set(), 1: set()}  # type: dict[int, set[float]]
    for label, point in zip(graph.labels, points, strict=True):
        assert isinstance(label, tuple)
        radii[label[0]].add(round(hypot(*point), 1))
    assert len(radii[0]) == len(radii[1]) == 1
    assert max(radii[0]) > max(radii[1])


def test_computations_and_large_or_empty_graphs_are_not_drawn() -> None:
    graph = examples.petersen()
    question = build_cycle_question(graph)
    assert draw_reason(graph, question, "sweep", {}, None, 1) is None
    large = random_graph(41, 60, 1)
    body = separator(1)
    assert draw_reason(large, build_cycle_question(large), "obstruction", body, None, 1) is None
    empty = Graph(tuple(range(9)), ())
    assert draw_reason(empty, build_cycle_question(empty), "obstruction", body, None, 1) is None


@pytest.mark.parametrize("name", FIGURES)
def test_an_svg_is_told_to_those_who_do_not_see_it_and_cuts_nothing_off(name: str) -> None:
    figure = FIGURES[name]
    root = ElementTree.fromstring(draw_svg(figure, "x"))
    assert root.get("role") == "img"
    ids = {element.get("id") for element in root.iter()}
    assert set((root.get("aria-labelledby") or "").split()) <= ids
    title, description = root.find(f"{SVG}title"), root.find(f"{SVG}desc")
    assert title is not None
    assert title.text == figure.title
    assert description is not None
    assert description.text == figure.description
    _, _, width, height = map(float, (root.get("viewBox") or "").split())
    texts = list(root.iter(f"{SVG}text"))
    assert [text.text for text in texts] == [text.text for text in figure.texts]
    for shown, text in zip(texts, figure.texts, strict=True):
        half = (text.box[2] - text.box[0]) / 2 * UNIT
        x, y = float(shown.get("x", "-1")), float(shown.get("y", "-1"))
        assert half - 1 <= x <= width - half + 1
        assert 0 <= y <= height


@pytest.mark.parametrize("name", FIGURES)
def test_tikz_draws_every_edge_and_vertex_once(name: str) -> None:
    figure = FIGURES[name]
    lines = draw_tikz(figure).splitlines()
    squares = sum(dot.shape == "square" for dot in figure.dots)
    edges = [
        line for line in lines if line.startswith(r"\draw[line width") and "circle" not in line
    ]
    assert len(edges) == len(figure.lines)
    assert sum(line.startswith(r"\filldraw") for line in lines) == len(figure.dots)
    assert sum("rectangle" in line for line in lines) == squares + 1
    assert all(line.isascii() for line in lines)


def test_the_same_graph_gives_the_same_bytes() -> None:
    graph, body = random_graph(25, 40, 7), weights(25)
    one, other = (
        draw(graph, "counting", body),
        draw(graph, "counting", json.loads(json.dumps(body))),
    )
    assert one == other
    assert draw_svg(one, "x") == draw_svg(other, "x")
    assert draw_tikz(one) == draw_tikz(other)
