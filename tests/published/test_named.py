"""Graphs that have a name: whether they have a Hamiltonian cycle and path.

What is known of the famous ones has its source beside it. All rows were counted by a
second method (all cycles and paths, exactly), which shares nothing with this program.
"""

from __future__ import annotations

import itertools
from collections.abc import Callable

import igraph
import networkx
import pytest

from certify.interface import decide
from tests.published.conftest import BUDGET, ProveClaim, is_readable

Make = Callable[[], networkx.Graph]


def famous(name: str) -> networkx.Graph:
    """Return a graph of igraph's collection."""
    graph = igraph.Graph.Famous(name)
    made = networkx.Graph()
    made.add_nodes_from(range(graph.vcount()))
    made.add_edges_from(graph.get_edgelist())
    return made


def goldner_harary() -> networkx.Graph:
    """Return a double pyramid over a triangle with a further pyramid on each of its faces."""
    graph = networkx.Graph(itertools.combinations("abc", 2))
    for tip in "pq":
        for side in itertools.combinations("abc", 2):
            face = (tip, *side)
            graph.add_edges_from(itertools.combinations(face, 2))
            graph.add_edges_from(("".join(face), v) for v in face)
    return graph


BOTH = [
    "Chvatal",
    "Cubical",
    "Diamond",
    "Dodecahedral",
    "Folkman",
    "Franklin",
    "Frucht",
    "Grotzsch",
    "Heawood",
    "House",
    "HouseX",
    "Icosahedral",
    "Levi",
    "McGee",
    "Octahedral",
    "Robertson",
    "Smallestcyclicgroup",
    "Tetrahedral",
    "Uniquely3colorable",
]

PATH_ONLY = [
    "Bull",  # two pendant vertices
    "Coxeter",  # Tutte, Canadian Mathematical Bulletin 3 (1960) 1-5 (from memory)
    "Herschel",  # bipartite, 5 + 6 vertices
    "Krackhardt_Kite",  # one pendant vertex
    "Meredith",  # Meredith, Journal of Combinatorial Theory B 14 (1973) 55-60
    "Petersen",  # Petersen 1898 (from memory)
    "Tutte",  # Tutte, Journal of the London Mathematical Society 21 (1946) 98-101 (from memory)
]

NEITHER = [
    "Noperfectmatching",  # 16 vertices: a path would give a perfect matching
    "Nonline",  # not connected
    "Thomassen",  # hypotraceable: Thomassen, Discrete Mathematics 9 (1974) 91-96
    "Walther",
    "Zachary",
]

MADE: dict[str, tuple[Make, bool, bool]] = {
    # Whether there is a cycle, and a path.
    "bull": (networkx.bull_graph, False, True),
    "Desargues": (networkx.desargues_graph, True, True),
    "Moebius-Kantor": (networkx.moebius_kantor_graph, True, True),
    "Pappus": (networkx.pappus_graph, True, True),
    "truncated cube": (networkx.truncated_cube_graph, True, True),
    "truncated tetrahedron": (networkx.truncated_tetrahedron_graph, True, True),
    "Tutte of networkx": (networkx.tutte_graph, False, True),
    "Sedgewick's maze": (networkx.sedgewick_maze_graph, False, True),
    "karate club": (networkx.karate_club_graph, False, False),
    # 14 + 18 vertices, bipartite.
    "southern women": (networkx.davis_southern_women_graph, False, False),
    # Four pendant vertices, and seventeen.
    "Florentine families": (networkx.florentine_families_graph, False, False),
    "Les Miserables": (networkx.les_miserables_graph, False, False),
    "Hoffman-Singleton": (networkx.hoffman_singleton_graph, True, True),
    # OEIS A007030: the one maximal planar graph on 11 vertices without a cycle.
    "Goldner-Harary": (goldner_harary, False, True),
}

READABLE = ("Herschel", "Petersen", "Tutte", "Thomassen", "Coxeter")
"""Graphs whose reason fits on a page."""


def rows() -> list[tuple[str, Make, bool, bool]]:
    """Return every graph: name, how to make it, whether it has a cycle, whether a path."""
    return [
        *((name, _made(name), True, True) for name in BOTH),
        *((name, _made(name), False, True) for name in PATH_ONLY),
        *((name, _made(name), False, False) for name in NEITHER),
        *((name, make, cycle, path) for name, (make, cycle, path) in MADE.items()),
    ]


def _made(name: str) -> Make:
    return lambda: famous(name)


@pytest.mark.parametrize(
    ("make", "cycle", "path"), [pytest.param(*row[1:], id=row[0]) for row in rows()]
)
def test_named_graph(make: Make, cycle: bool, path: bool) -> None:
    graph = make()
    for structure, exists in (("hamiltonian-cycle", cycle), ("hamiltonian-path", path)):
        decision = decide(graph, structure, budget=BUDGET)
        assert decision.answer == ("exists" if exists else "impossible"), structure
        assert (decision.witness is not None) == exists
        if decision.witness is not None:
            walk = list(decision.witness)
            assert sorted(map(str, walk)) == sorted(map(str, graph))
            closing = walk[:1] if structure == "hamiltonian-cycle" else []
            assert all(graph.has_edge(*step) for step in itertools.pairwise(walk + closing))


@pytest.mark.parametrize("name", READABLE)
def test_reason_can_be_read(name: str) -> None:
    decision = decide(famous(name), "hamiltonian-cycle", budget=BUDGET)
    assert is_readable(decision.kind, decision.evidence), decision.kind


def test_thomassen_graph_with_every_vertex_in_turn_removed(prove_claim: ProveClaim) -> None:
    """Hypotraceable: Thomassen, as above. The smallest such graph known has 34 vertices."""
    graph = famous("Thomassen")
    smaller = [graph.subgraph([u for u in range(34) if u != v]) for v in range(34)]
    lists = {
        "smaller.g6": b"".join(networkx.to_graph6_bytes(part, header=False) for part in smaller)
    }
    text = 'structure = "hamiltonian-path"\n[graph]\nlist = "smaller.g6"\n[answers]\nexists = 34\n'
    assert len(prove_claim(text, lists)) == 34
