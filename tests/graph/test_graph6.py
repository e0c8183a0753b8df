"""graph6 and sparse6: against networkx, the worked examples, and every malformed line."""

from __future__ import annotations

from pathlib import Path

import networkx as nx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.errors import GraphFileError
from certify.graph.files import read_graphs, read_sources
from certify.graph.graph6 import read_line
from tests.graph.files import graphs, normal, read, refusal, written


@settings(deadline=None)
@given(st.lists(st.tuples(graphs(), st.booleans()), min_size=1, max_size=4), st.booleans())
def test_lines_of_networkx(
    tmp_path_factory: pytest.TempPathFactory, drawn: list[tuple[nx.Graph, bool]], header: bool
) -> None:
    lines = [
        (nx.to_sparse6_bytes if sparse else nx.to_graph6_bytes)(graph, header=False)
        for graph, sparse in drawn
    ]
    start = (b">>sparse6<<" if drawn[0][1] else b">>graph6<<") if header else b""
    found = read(tmp_path_factory.getbasetemp(), start + b"".join(lines), "list.g6")
    assert [graph.labels for graph in found] == [tuple(range(len(g))) for g, _ in drawn]
    assert [list(graph.edges) for graph in found] == [normal(g) for g, _ in drawn]


def test_large_graphs_of_networkx(tmp_path: Path) -> None:
    for n in (62, 63, 64, 127, 128, 129, 1000):
        graph = nx.gnm_random_graph(n, 3 * n, seed=n)
        for write, name in ((nx.write_graph6, "x.g6"), (nx.write_sparse6, "x.s6")):
            write(graph, tmp_path / name)
            [found] = read_graphs(tmp_path / name)
            assert list(found.edges) == normal(graph)


def test_examples_of_the_format(tmp_path: Path) -> None:
    # The worked examples of formats.txt (B. D. McKay, nauty), from memory.
    [five] = read(tmp_path, "DQc\n", "a.g6")
    assert (five.n, five.edges) == (5, ((0, 2), (0, 4), (1, 3), (3, 4)))
    [seven] = read(tmp_path, ":Fa@x^\n", "b.s6")
    assert (seven.n, seven.edges) == (7, ((0, 1), (0, 2), (1, 2), (5, 6)))
    # The Petersen graph as House of Graphs gives it (from memory).
    [petersen] = read(tmp_path, "IheA@GUAo\r\n", "c.g6")
    assert nx.is_isomorphic(nx.Graph(petersen.edges), nx.petersen_graph())
    assert [g.n for g in read(tmp_path, "?\n@\n:?\n:@\nA_\n", "d.g6")] == [0, 1, 0, 1, 2]


def test_a_header_stands_before_the_first_graph(tmp_path: Path) -> None:
    assert [g.n for g in read(tmp_path, ">>graph6<<A_\nA?\n", "a.g6")] == [2, 2]


def test_reading_is_lazy(tmp_path: Path) -> None:
    found = read_graphs(written(tmp_path, "A_\nB\n", "a.g6"))
    assert next(found).m == 1
    with pytest.raises(GraphFileError, match=r"a\.g6:2: "):
        next(found)


def test_sources_hold_one_graph_each(tmp_path: Path) -> None:
    path = written(tmp_path, ">>graph6<<A_\nBw\r\n:Fa@x^\n", "a.g6")
    pairs = list(read_sources(path))
    assert [source for _, source in pairs] == [b"A_\n", b"Bw\n", b":Fa@x^\n"]
    for graph, source in pairs:
        assert read(tmp_path, source, "one.s6") == [graph]
    path = written(tmp_path, "a b\n", "a.txt")
    assert [source for _, source in read_sources(path)] == [b"a b\n"]


@settings(deadline=None)
@given(graphs(12), st.integers(1, 3))
def test_a_line_cut_short_is_refused_or_a_smaller_graph(graph: nx.Graph, cut: int) -> None:
    """graph6 shows every cut; of sparse6 a cut after an edge leaves a line that is whole."""
    line = nx.to_graph6_bytes(graph, header=False).strip()
    if len(line) > cut:
        with pytest.raises(GraphFileError):
            read_line(line[:-cut], "w")
    with pytest.raises(GraphFileError):
        read_line(line + b"?", "w")
    sparse = nx.to_sparse6_bytes(graph, header=False).strip()
    with pytest.raises(GraphFileError):
        read_line(sparse + b"~", "w")
    try:
        edges = read_line(sparse[:-cut], "w").edges
    except GraphFileError:
        return
    assert set(edges) <= set(normal(graph))


@pytest.mark.parametrize(
    ("content", "words"),
    [
        ("", ["a.g6: ", "no graph"]),
        (">>graph6<<", ["a.g6:1: an empty line"]),
        (">>graph6<<\nA_\n", ["a.g6:1: an empty line"]),
        ("A_\n:Fa@x^", ["a.g6:2: ", "no end"]),
        (">>grahp6<<A_\n", ["a.g6:1: column 1", "not part of graph6"]),
        ("A_\n>>graph6<<A_\n", ["a.g6:2: column 1"]),
        ("A_\n\nA_\n", ["a.g6:2: an empty line"]),
        ("A_\n\n", ["a.g6:2: an empty line"]),
        ("\r\n", ["a.g6:1: an empty line"]),
        ("A_ \n", ["a.g6:1: column 3"]),
        ("A_x\n", ["a.g6:1: ", "goes on"]),
        ("A\n", ["a.g6:1: ", "cut short"]),
        ("DQ", ["cut short", "2 characters"]),
        ("DQcc", ["goes on"]),
        ("DQd", ["a.g6:1: ", "bits beyond"]),
        ("A`", ["bits beyond"]),
        ("é", ["column 1"]),
        (b"A\x7f", ["column 2"]),
        (b"A\x80", ["column 2"]),
        (b"A>", ["column 2"]),
        ("&A_", ["directed"]),
        (";A_", ["incremental"]),
        ("~", ["cut short before"]),
        ("~?", ["cut short before"]),
        ("~??", ["cut short before"]),
        ("~~", ["cut short before"]),
        ("~~?????", ["cut short before"]),
        ("~??A_", ["not written as graph6"]),
        ("~~?????A_", ["not written as graph6"]),
        ("~AqP", ["10,000"]),  # 10,001 vertices
        ("~~~~~~~~", ["10,000"]),
        (":", ["cut short before"]),
        (":Fa@x", ["a.g6:1: ", "cut short"]),
        (":Fa@x^^", ["cut short, or goes on"]),
        (":Fa@x]", ["cut short, or goes on"]),
        (":An~", ["goes on"]),
        (":@~", ["goes on"]),
        (":?~", ["goes on"]),
        (":A?", ["a loop"]),  # 0-0
        (":Fa@x_", ["a.g6:1: ", "loop"]),
        (b"A_\n" + b"~" * (2**24 + 5), ["a.g6:2: ", "too long"]),
    ],
)
def test_lines_that_are_refused(tmp_path: Path, content: str | bytes, words: list[str]) -> None:
    message = refusal(tmp_path, content, "a.g6")
    for word in words:
        assert word in message, message
