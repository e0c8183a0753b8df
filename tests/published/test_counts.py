"""How many graphs have a Hamiltonian cycle or path, over complete lists of graphs."""

from __future__ import annotations

from pathlib import Path

import networkx
import pytest

from certify.flow import decide_file
from certify.interface import decide
from tests.published.conftest import BUDGET, LIMITS, ProveClaim, answers
from tests.published.geng import graph6_lines, graph6_list

GRAPHS = {
    # n: with a cycle, without; with a path, without.
    # OEIS A003216, A246446; A057864, A283420. One convention differs: A003216 has 1 for n = 1
    # and says that it could be 0, A246446 has 0; here a cycle has three vertices at least.
    # The path of one vertex is a path, as in A057864.
    1: (0, 1, 1, 0),
    2: (0, 2, 1, 1),
    3: (1, 3, 2, 2),
    4: (3, 8, 5, 6),
    5: (8, 26, 18, 16),
    6: (48, 108, 91, 65),
    7: (383, 661, 734, 310),
    8: (6196, 6150, 10030, 2316),
}

CUBIC = {
    # Vertices: connected cubic graphs with a cycle, without; without a path.
    # OEIS A001186, A164919. Without a path: exhaustive, by a second method; no source.
    4: (1, 0, 0),
    6: (2, 0, 0),
    8: (5, 0, 0),
    10: (17, 2, 0),
    12: (80, 5, 0),
    14: (474, 35, 0),
    16: (3841, 219, 1),
}


def counted(structure: str, exists: int, impossible: int) -> str:
    """Return the claim that so many graphs of a list have the structure, and so many not."""
    return f"""\
structure = "hamiltonian-{structure}"
[graph]
list = "graphs.g6"
[answers]
exists = {exists}
impossible = {impossible}
"""


def atlas(n: int) -> list[networkx.Graph]:
    """Return the graphs on n vertices, 1 <= n <= 7, of the atlas of Read and Wilson."""
    return [graph for graph in networkx.graph_atlas_g() if len(graph) == n]


def graph6(graphs: list[networkx.Graph]) -> bytes:
    return b"".join(networkx.to_graph6_bytes(graph, header=False) for graph in graphs)


@pytest.mark.parametrize("n", range(1, 8))
def test_graphs_of_the_atlas(n: int, prove_claim: ProveClaim, tmp_path: Path) -> None:
    cycle, no_cycle, path, no_path = GRAPHS[n]
    lists = {"graphs.g6": graph6(atlas(n))}
    prove_claim(counted("cycle", cycle, no_cycle), lists)
    prove_claim(counted("path", path, no_path), lists)
    # The same without a claim.
    file = tmp_path / "atlas.g6"
    file.write_bytes(lists["graphs.g6"])
    found = answers(decide_file(file, "hamiltonian-cycle", limits=LIMITS))
    assert (found.count("exists"), found.count("impossible")) == (cycle, no_cycle)


def test_graphs_on_eight_vertices(prove_claim: ProveClaim) -> None:
    cycle, no_cycle, path, no_path = GRAPHS[8]
    lists = {"graphs.g6": graph6_list(8)}
    prove_claim(counted("cycle", cycle, no_cycle), lists)
    prove_claim(counted("path", path, no_path), lists)


@pytest.mark.parametrize("n", CUBIC)
def test_connected_cubic_graphs(n: int, prove_claim: ProveClaim) -> None:
    cycle, no_cycle, no_path = CUBIC[n]
    lists = {"graphs.g6": graph6_list(n, "-c", "-d3", "-D3")}
    prove_claim(counted("cycle", cycle, no_cycle), lists)
    prove_claim(counted("path", cycle + no_cycle - no_path, no_path), lists)


def is_hypohamiltonian(graph: networkx.Graph) -> bool:
    """Return whether there is no Hamiltonian cycle, but one of all vertices but v, for each v."""
    if _has_cycle(graph):
        return False
    return all(
        _has_cycle(graph.subgraph([u for u in sorted(graph) if u != v])) for v in sorted(graph)
    )


def _has_cycle(graph: networkx.Graph) -> bool:
    decision = decide(graph, "hamiltonian-cycle", budget=BUDGET)
    assert decision.answer != "open"
    return decision.answer == "exists"


@pytest.mark.parametrize("n", range(1, 8))
def test_no_hypohamiltonian_graph_is_that_small(n: int) -> None:
    """OEIS A141150: none on 9 vertices or fewer."""
    assert not [graph for graph in atlas(n) if is_hypohamiltonian(graph)]


def test_the_smallest_hypohamiltonian_graph() -> None:
    """OEIS A141150: one graph on 10 vertices, the Petersen graph; here among the cubic ones."""
    cubic = map(networkx.from_graph6_bytes, map(bytes.strip, graph6_lines(10, "-c", "-d3", "-D3")))
    (found,) = filter(is_hypohamiltonian, cubic)
    assert networkx.is_isomorphic(found, networkx.petersen_graph())


def test_tough_graphs_without_a_cycle(prove_claim: ProveClaim) -> None:
    """The smallest graphs without a cycle that no set of vertices refutes have 7 vertices.

    MathWorld, "Graph Toughness"; the graphs themselves by exhaustion, no source. Of a tough
    graph, k removed vertices leave k pieces at most.
    """
    lists = {"graphs.g6": b"FCptO\nFCqn_\nFCqno\nFCqnw\n"}
    for outcome in prove_claim(counted("cycle", 0, 4), lists).values():
        assert outcome.record.evidence.get("form") not in ("leaf", "separator", "independent")


@pytest.mark.parametrize("n", [4, 5, 8])
def test_self_complementary_graphs_have_a_path(n: int, prove_claim: ProveClaim) -> None:
    """Clapham, Discrete Mathematics 8 (1974) 251-255.

    There are 1, 2 and 10 of them on 4, 5 and 8 vertices: OEIS A000171 (from memory).
    """
    if n > 7:
        half = n * (n - 1) // 4
        lines = graph6_lines(n, f"{half}:{half}")
        graphs = [networkx.from_graph6_bytes(line.strip()) for line in lines]
    else:
        graphs = atlas(n)
    chosen = [graph for graph in graphs if _is_self_complementary(graph)]
    assert len(chosen) == {4: 1, 5: 2, 8: 10}[n]
    prove_claim(counted("path", len(chosen), 0), {"graphs.g6": graph6(chosen)})


def _is_self_complementary(graph: networkx.Graph) -> bool:
    degrees = sorted(d for _, d in graph.degree)
    other = sorted(len(graph) - 1 - d for d in degrees)
    return degrees == other and networkx.is_isomorphic(graph, networkx.complement(graph))
