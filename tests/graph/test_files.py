"""Files of graphs: every format read, against other writers, and every malformed file refused."""

from __future__ import annotations

import itertools
import os
from pathlib import Path

import igraph
import networkx as nx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.parts import FORMATS
from certify.errors import GraphFileError
from certify.graph.files import format_of, read_graphs
from certify.graph.graph import Graph
from tests.graph.files import graphs, normal, read, refusal, written

GRAPHML = """\
<?xml version="1.0" encoding="UTF-8"?>
<graphml xmlns="http://graphml.graphdrawing.org/xmlns">
<key id="d0" for="node" attr.name="colour"><default>red</default></key>
<graph id="G" edgedefault="undirected">
<node id="v"><data key="d0">blue <b><graph/></b></data></node>
<edge source="v" target="u"/>
<node id="u"><desc>the second</desc></node>
<edge source="u" target="v" directed="false"/>
</graph>
</graphml>
"""


def test_the_largest_graphs(tmp_path: Path) -> None:
    # ~AqO is 10,000 vertices: 10000 = 2 * 64^2 + 28 * 64 + 16, each part plus 63.
    [found] = read(tmp_path, ":~A[O\n", "a.s6")
    assert (found.n, found.m) == (10_000, 0)
    assert "10,000" in refusal(tmp_path, ":~A[P", "a.s6")
    assert "10,000" in refusal(tmp_path, "p edge 10001 0\n", "a.col")
    assert read(tmp_path, "p edge 10000 0\n", "a.col")[0].n == 10_000
    words = "\n".join(map(str, range(10_001)))
    assert "a.txt:10001: " in refusal(tmp_path, words, "a.txt")
    nodes = "".join(f'<node id="{i}"/>' for i in range(10_001))
    text = f'<graphml><graph edgedefault="undirected">{nodes}</graph></graphml>'
    assert "10,000" in refusal(tmp_path, text, "a.graphml")


# DIMACS


@settings(deadline=None)
@given(graphs(20), st.sampled_from(["edge", "col"]), st.booleans())
def test_dimacs(
    tmp_path_factory: pytest.TempPathFactory, graph: nx.Graph, word: str, turned: bool
) -> None:
    edges = [(v, u) if turned else (u, v) for u, v in graph.edges()]
    lines = ["c a comment", f"p {word} {len(graph)} {len(edges)}", "c"]
    lines += [f"e {u + 1} {v + 1}" for u, v in edges]
    [found] = read(tmp_path_factory.getbasetemp(), "\n".join(lines) + "\n", "x.col")
    assert found.labels == tuple(range(1, len(graph) + 1))
    assert list(found.edges) == normal(graph)


def test_graphml_of_igraph(tmp_path: Path) -> None:
    famous = igraph.Graph.Famous("Petersen")
    famous.write_graphml(str(tmp_path / "p.graphml"))
    [found] = read_graphs(tmp_path / "p.graphml")
    assert found.labels == tuple(f"n{i}" for i in range(10))
    assert list(found.edges) == sorted(famous.get_edgelist())


def test_repeated_edges_count_once(tmp_path: Path) -> None:
    assert read(tmp_path, "p edge 2 3\ne 1 2\ne 2 1\ne 1 2\n", "a.dimacs")[0].m == 1
    assert read(tmp_path, "a b\nb a\r\na\n", "a.edges")[0].edges == ((0, 1),)
    assert read(tmp_path, GRAPHML, "a.graphml")[0].edges == ((0, 1),)
    assert read(tmp_path, ":B_\n", "a.s6") == [Graph((0, 1, 2), ((0, 1),))]


@pytest.mark.parametrize(
    ("content", "words"),
    [
        ("", ["a.col: ", "missing"]),
        ("c only a comment\n", ["missing"]),
        ("p edge 3 2\ne 1 2\n", ["a.col:2: ", "after 1", "promises 2"]),
        ("p edge 3 1\ne 1 2\ne 1 3\n", ["a.col:3: ", "after 2", "promises 1"]),
        ("p edge 3 1\ne 1 4\n", ["a.col:2: ", "no vertex 4 in 1..3"]),
        ("p edge 3 1\ne 0 1\n", ["a.col:2: ", "no vertex 0"]),
        ("p edge 3 1\ne 2 2\n", ["a.col:2: ", "loop"]),
        ("p edge 3 1\ne 1\n", ["a.col:2: ", "not a line"]),
        ("p edge 3 1\ne 1 2 3\n", ["a.col:2: ", "not a line"]),
        ("p edge 3 1\ne 1 -2\n", ["a.col:2: ", "not a number"]),
        ("p edge 3 1\ne 1 +2\n", ["not a number"]),
        ("p edge 3 1\ne 1 2.0\n", ["not a number"]),
        ("p edge 3 1\ne 1 1_0\n", ["not a number"]),
        ("p edge 3 1\ne 1 \u0662\n", ["not a number"]),
        ("p edge 3 1\ne 1 " + "1" * 5000 + "\n", ["not a number"]),
        ("e 1 2\np edge 3 1\n", ["a.col:1: ", "before the line p"]),
        ("p edge 3 0\np edge 3 0\n", ["a.col:2: ", "second line p"]),
        ("p edge 3\n", ["a.col:1: ", "not a line"]),
        ("p graph 3 1\n", ["a.col:1: ", "not a line"]),
        ("p edge 3 1\n\ne 1 2\n", ["a.col:2: ", "not a line"]),
        ("p edge 3 1\na 1 2\n", ["a.col:2: ", "not a line"]),
        ("p edge 3 1\nn 1 2\n", ["not a line"]),
        ("comment\np edge 0 0\n", ["a.col:1: ", "not a line"]),
        ("p edge 99999999999 0\n", ["10,000"]),
        ("p edge 2 1\re 1 2\r", ["U+000D"]),
        (b"c \xff\n", ["a.col:1: ", "UTF-8"]),
        (b"\xef\xbb\xbfp edge 0 0\n", ["a.col:1: ", "byte order mark"]),
    ],
)
def test_dimacs_that_is_refused(tmp_path: Path, content: str | bytes, words: list[str]) -> None:
    message = refusal(tmp_path, content, "a.col")
    for word in words:
        assert word in message, message


# GraphML


@settings(deadline=None)
@given(graphs(20))
def test_graphml_of_networkx(tmp_path_factory: pytest.TempPathFactory, graph: nx.Graph) -> None:
    path = tmp_path_factory.getbasetemp() / "n.graphml"
    named = nx.relabel_nodes(graph, {v: f"vertex {v} & <{v}>" for v in graph})
    nx.set_edge_attributes(named, 1.5, "weight")
    nx.write_graphml_xml(named, path)
    [found] = read_graphs(path)
    assert found.labels == tuple(named)
    assert list(found.edges) == normal(named)


def test_graphml(tmp_path: Path) -> None:
    [found] = read(tmp_path, GRAPHML, "a.graphml")
    assert found == Graph(("v", "u"), ((0, 1),))
    [bare] = read(tmp_path, '<graphml><graph edgedefault="undirected"/></graphml>', "b.graphml")
    assert bare == Graph((), ())


BOMB = """<!DOCTYPE b [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;&a;&a;">]>
<graphml><graph edgedefault="undirected"><node id="&b;"/></graph></graphml>"""


@pytest.mark.parametrize(
    ("content", "words"),
    [
        ("", ["a.graphml:1: ", "not XML"]),
        (GRAPHML[:-20], ["not XML"]),
        (GRAPHML + "<x/>", ["a.graphml:11: ", "not XML"]),
        (GRAPHML.replace("undirected", "directed"), ["a.graphml:4: ", "directed"]),
        (GRAPHML.replace('"false"', '"true"'), ["a.graphml:8: ", "directed edge"]),
        (GRAPHML.replace('"false"', '"1"'), ["a.graphml:8: ", "directed edge"]),
        (GRAPHML.replace('edgedefault="undirected"', ""), ["a.graphml:4: ", "edgedefault"]),
        (GRAPHML.replace('target="u"', 'target="w"'), ["a.graphml:6: ", "'w'", "no node"]),
        (GRAPHML.replace('target="u"', 'target="v"'), ["a.graphml:6: ", "loop"]),
        (GRAPHML.replace('target="u"', ""), ["a.graphml:6: ", "without a target"]),
        (GRAPHML.replace('source="u"', ""), ["a.graphml:8: ", "without a source"]),
        (GRAPHML.replace('<node id="u">', "<node>"), ["a.graphml:7: ", "without an id"]),
        (GRAPHML.replace('<node id="u">', '<node id="v">'), ["a.graphml:7: ", "second node"]),
        (GRAPHML.replace("<desc>", "<graph/><desc>"), ["a.graphml:7: ", "graph inside node"]),
        (GRAPHML.replace("<desc>", "<port/><desc>"), ["a.graphml:7: ", "port"]),
        (GRAPHML.replace("</graph>\n<", "<hyperedge/></graph><"), ["hyperedge"]),
        (GRAPHML.replace("</graph>\n<", '</graph><graph edgedefault="undirected"/><'), ["second"]),
        (GRAPHML.replace("</graph>\n<", "more</graph><"), ["a.graphml:9: ", "text"]),
        (GRAPHML.replace("</graph>\n<", "<nodes/></graph><"), ["a.graphml:9: ", "no place"]),
        (GRAPHML.replace("xmlns=", "xmlns:g="), []),
        (GRAPHML.replace("graphdrawing.org", "example.org"), ["no place"]),
        (GRAPHML.replace("UTF-8", "ISO-8859-1"), ["a.graphml:1: ", "encoding"]),
        (GRAPHML.replace("blue", "&blue;"), ["not XML"]),
        (GRAPHML.replace("<graphml", "<!DOCTYPE graphml>\n<graphml"), ["a.graphml:2: ", "type"]),
        (GRAPHML.replace("<graphml", '<!DOCTYPE g SYSTEM "file:///etc/passwd"><graphml'), ["type"]),
        (BOMB, ["a.graphml:1: ", "document type"]),
        ("<graphml/>", ["no graph element"]),
        ("<html/>", ["no place at the top"]),
        ("<a>" * 100_000, ["no place"]),
        (GRAPHML.encode("utf-16"), ["UTF-8"]),
        (GRAPHML.replace("blue", "bl\x00ue"), ["not XML"]),
    ],
)
def test_graphml_that_is_refused(tmp_path: Path, content: str | bytes, words: list[str]) -> None:
    if words:
        message = refusal(tmp_path, content, "a.graphml")
        for word in words:
            assert word in message, message
    else:  # the same file without a namespace
        assert read(tmp_path, content, "a.graphml") == read(tmp_path, GRAPHML, "b.graphml")


# Edge lists


@settings(deadline=None)
@given(graphs(20))
def test_edge_list_of_networkx(tmp_path_factory: pytest.TempPathFactory, graph: nx.Graph) -> None:
    path = tmp_path_factory.getbasetemp() / "n.edges"
    nx.write_edgelist(graph, path, data=False)
    with path.open("a") as file:
        file.writelines(f"{v}\n" for v in graph)
    if not len(graph):
        return
    [found] = read_graphs(path)
    order = list(dict.fromkeys([*itertools.chain(*graph.edges()), *graph]))
    assert found.labels == tuple(map(str, order))
    assert list(found.edges) == normal(graph, order)


def test_edge_list(tmp_path: Path) -> None:
    text = "# rooms\nhall kitchen # a door\n\n  attic\nkitchen\tgärten\n1 01"
    [found] = read(tmp_path, text, "a.txt")
    assert found.labels == ("hall", "kitchen", "attic", "gärten", "1", "01")
    assert found.edges == ((0, 1), (1, 3), (4, 5))


@pytest.mark.parametrize(
    ("content", "words"),
    [
        ("", ["a.txt: ", "no vertex"]),
        ("# nothing\n\n", ["no vertex"]),
        ("a b\na b c\n", ["a.txt:2: ", "3 words"]),
        ("a b\n\na a\n", ["a.txt:3: ", "loop"]),
        ("a\0 b\n", ["a.txt:1: ", "U+0000"]),
        ("a\u00a0b\n", ["U+00A0"]),
        ("a\u2028b\n", ["U+2028"]),
        ("a b\x0cc d\n", ["U+000C"]),
        (b"a b\na \xff\n", ["a.txt:2: ", "UTF-8"]),
        ("\ufeffa b\n", ["byte order mark"]),
    ],
)
def test_edge_list_that_is_refused(tmp_path: Path, content: str | bytes, words: list[str]) -> None:
    message = refusal(tmp_path, content, "a.txt")
    for word in words:
        assert word in message, message


# Files and formats


def test_endings() -> None:
    for format, endings in FORMATS.items():
        for ending in endings:
            assert format_of(Path(f"a.b{ending}")) == format


@pytest.mark.parametrize("name", ["a", "a.g7", "a.G6", "g6", "a.g6.gz"])
def test_unknown_endings(tmp_path: Path, name: str) -> None:
    assert "ending" in refusal(tmp_path, "A_\n", name)


def test_the_format_can_be_given(tmp_path: Path) -> None:
    path = written(tmp_path, "A_\n", "list")
    assert [g.m for g in read_graphs(path, "graph6")] == [1]
    assert [g.labels for g in read_graphs(path, "edges")] == [("A_",)]
    with pytest.raises(GraphFileError, match="no format 'g6'"):
        list(read_graphs(path, "g6"))


def test_what_is_no_file(tmp_path: Path) -> None:
    folder = tmp_path / "a.g6"
    folder.mkdir()
    fifo = tmp_path / "b.g6"
    os.mkfifo(fifo)
    for path in (folder, fifo, tmp_path / "none.g6", Path("a\0.g6")):
        with pytest.raises(GraphFileError):
            list(read_graphs(path))


@settings(deadline=None)
@given(st.binary(max_size=60), st.sampled_from([e for ends in FORMATS.values() for e in ends]))
def test_any_bytes_are_read_or_refused(
    tmp_path_factory: pytest.TempPathFactory, content: bytes, ending: str
) -> None:
    path = written(tmp_path_factory.getbasetemp(), content, f"noise{ending}")
    try:
        found = list(read_graphs(path))
    except GraphFileError as error:
        found = []
        message = str(error)
    else:
        message = f"{path}:"
    assert message.startswith(f"{path}:")
    for graph in found:
        assert list(graph.edges) == sorted(set(graph.edges))
        assert all(0 <= u < v < graph.n for u, v in graph.edges)
        assert len(set(graph.labels)) == graph.n
