"""Helpers of the tests of files of graphs."""

from __future__ import annotations

import os
from collections.abc import Iterable
from pathlib import Path

import networkx as nx
import pytest
from hypothesis import strategies as st

from certify.errors import GraphFileError
from certify.graph.files import read_graphs
from certify.graph.graph import Graph


def written(folder: Path, content: str | bytes, name: str) -> Path:
    path = folder / name
    path.write_bytes(content if isinstance(content, bytes) else content.encode())
    return path


def read(folder: Path, content: str | bytes, name: str) -> list[Graph]:
    return list(read_graphs(written(folder, content, name)))


def refusal(folder: Path, content: str | bytes, name: str) -> str:
    """Return the message with which a file is refused, without the folder."""
    path = written(folder, content, name)
    with pytest.raises(GraphFileError) as caught:
        list(read_graphs(path))
    message = str(caught.value)
    assert message.startswith(f"{path}:")
    assert "\n" not in message
    return message.removeprefix(f"{folder}{os.sep}")


def normal(graph: nx.Graph, order: Iterable[object] | None = None) -> list[tuple[int, int]]:
    """Return the edges of a networkx graph by the places of its nodes, sorted."""
    place = {node: i for i, node in enumerate(order or graph)}
    return sorted({tuple(sorted((place[u], place[v]))) for u, v in graph.edges()})  # type: ignore[misc]


@st.composite
def graphs(draw: st.DrawFn, most: int = 70) -> nx.Graph:
    """Draw a random graph; sizes around the powers of two are where sparse6 is delicate."""
    n = draw(st.integers(0, most) | st.sampled_from([1, 2, 3, 4, 7, 8, 9, 15, 16, 17, 32, 64]))
    density = draw(st.sampled_from([0.0, 0.02, 0.1, 0.5, 1.0]))
    return nx.gnp_random_graph(n, density, seed=draw(st.integers(0, 10**6)))
