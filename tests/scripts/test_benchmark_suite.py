"""The benchmark's suite says what is true, for the reason it names, and is the same every time."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable
from random import Random

import networkx as nx
import pytest
from benchmark import classic, seeded, suite
from benchmark.instance import CORE, HARD, Instance, Planted, build_question

from certify.graph.graph import Edge
from certify.graph.question import Question
from tests.brute import cycle_edges, hamiltonian_cycles, has_cycle

SUITE = suite.build_suite()
PLANTED = [i for i in SUITE if i.planted]
# SHA-256 of the generated edges when the suite was written.
PINNED = "18ceb8bfa81a23bfa5e9616a18b754ef303ba228b411ee8f39479f950062de50"
# Exhaustion takes under a second up to here.
SMALL = [i for i in SUITE if i.build().n <= 24]


def of(family: str) -> list[Instance]:
    return [i for i in SUITE if i.family == family]


def graph_of(question: Question) -> nx.Graph:
    graph = nx.Graph(question.edges)
    graph.add_nodes_from(range(question.n))
    return graph


def planted_of(instance: Instance) -> Planted:
    assert instance.planted is not None
    return instance.planted()


def leaving(question: Question, inside: tuple[int, ...]) -> list[Edge]:
    return [(u, v) for u, v in question.edges if (u in inside) != (v in inside)]


def contract_outside(planted: Planted) -> nx.Graph:
    """Return the block of the reason with everything else contracted to one vertex."""
    inside = set(planted.reason)
    pairs = [
        (u if u in inside else -1, v if v in inside else -1) for u, v in planted.question.edges
    ]
    return nx.Graph((u, v) for u, v in pairs if u != v)


# ---- the suite as a whole


def test_names_are_different_and_every_answer_has_a_source() -> None:
    assert len({i.name for i in SUITE}) == len(SUITE)
    for instance in SUITE:
        assert (instance.answer is None) == (instance.source == suite.UNKNOWN), instance.name
        assert instance.tags <= {CORE, HARD}
        question = instance.build()
        assert question.n >= 3
        assert not question.absent


def test_both_tags_and_all_families_are_there() -> None:
    assert len(of("number-rules")) > 30
    assert sum(CORE in i.tags for i in SUITE) > 50
    assert sum(HARD in i.tags for i in SUITE) > 50
    assert max(i.build().n for i in of("flower-snarks")) == 804
    assert max(i.build().n for i in of("knight-boards")) == 400


@pytest.mark.parametrize("instance", [i for i in SMALL if i.answer], ids=lambda i: i.name)
def test_known_answers_of_small_members_hold_by_exhaustion(instance: Instance) -> None:
    assert has_cycle(instance.build()) == (instance.answer == "exists")


def test_the_small_members_reach_into_most_families() -> None:
    families = {i.family for i in SMALL if i.answer}
    assert {"number-rules", "knight-boards", "generalised-petersen", "named"} <= families
    assert len(SMALL) > 50


def test_instances_are_the_same_every_time() -> None:
    again = {i.name: i for i in suite.build_suite()}
    for instance in SUITE:
        assert instance.build() == again[instance.name].build()


def test_generated_edges_do_not_depend_on_the_python_version() -> None:
    # A later Python or a later networkx that draws otherwise is noticed.
    text = json.dumps([planted_of(i).question.edges for i in PLANTED], separators=(",", ":"))
    assert hashlib.sha256(text.encode()).hexdigest() == PINNED


# ---- the published statements the answers are taken from


def test_closed_tours_follow_schwenk_on_small_boards() -> None:
    # A. J. Schwenk, Math. Mag. 64 (1991) 325-332.
    for rows, columns in ((3, 3), (3, 4), (3, 6), (3, 8), (4, 4), (4, 5), (3, 10)):
        found = has_cycle(classic.knight_cycle(rows, columns))
        assert found == suite.has_closed_tour(rows, columns), (rows, columns)


def test_generalised_petersen_follow_alspach() -> None:
    # B. Alspach, J. Combin. Theory B 34 (1983) 293-312; k = n/2 is the degenerate case.
    for n in range(3, 13):
        for k in range(1, n // 2 + 1):
            found = has_cycle(classic.generalised_petersen(n, k))
            assert found == suite.has_petersen_cycle(n, k), (n, k)


def test_library_families_agree_with_ours() -> None:
    # networkx builds the Petersen, Moebius-Kantor and Desargues graphs on its own.
    for (n, k), name in (
        ((5, 2), "petersen_graph"),
        ((8, 3), "moebius_kantor_graph"),
        ((10, 3), "desargues_graph"),
    ):
        ours = graph_of(classic.generalised_petersen(n, k))
        assert nx.is_isomorphic(ours, getattr(nx, name)())


@pytest.mark.parametrize("petals", [5, 7])
def test_flower_snarks_are_snarks(petals: int) -> None:
    # R. Isaacs, Amer. Math. Monthly 82 (1975) 221-239: cubic, bridgeless, girth 5 or 6.
    graph = graph_of(classic.flower_snark(petals))
    assert {degree for _, degree in graph.degree} == {3}
    assert not nx.has_bridges(graph)
    assert nx.girth(graph) == min(petals, 6)
    assert not has_cycle(classic.flower_snark(petals))


def test_an_even_number_of_petals_has_a_cycle() -> None:
    # L. Clark, R. Entringer, Period. Math. Hungar. 14 (1983) 57-68.
    assert has_cycle(classic.flower_snark(6))
    assert has_cycle(classic.flower_snark(8))


@pytest.mark.parametrize("text", ["FCptO", "FCqn_", "FCqno", "FCqnw"])
def test_seven_vertices_are_tough_enough_and_have_no_cycle(text: str) -> None:
    question = classic.graph6_cycle(text)
    graph = graph_of(question)
    for bits in range(1, 2**7 - 1):
        gone = [v for v in range(7) if bits >> v & 1]
        rest = graph.subgraph(set(graph) - set(gone))
        assert nx.number_connected_components(rest) <= len(gone)
    assert not has_cycle(question)


@pytest.mark.parametrize(
    ("holds", "first"),
    [
        (classic.is_square, [0, 1, 4, 9, 16, 25]),
        (classic.is_triangular, [0, 1, 3, 6, 10, 15, 21, 28]),
        (classic.is_fibonacci, [0, 1, 2, 3, 5, 8, 13, 21]),
        (classic.is_pentagonal, [0, 1, 5, 12, 22]),
        (classic.is_prime, [2, 3, 5, 7, 11, 13, 17, 19, 23, 29]),
    ],
)
def test_number_properties_start_as_published(
    holds: Callable[[int], bool], first: list[int]
) -> None:
    # OEIS A000290, A000217, A000045, A000326, A000040.
    assert [i for i in range(30) if holds(i)] == first


# ---- the planted reasons


@pytest.mark.parametrize("instance", of("hidden-separator"), ids=lambda i: i.name)
def test_separator_leaves_too_many_pieces(instance: Instance) -> None:
    planted = planted_of(instance)
    question = planted.question
    graph = graph_of(question)
    if question.apex is not None:
        graph.remove_node(question.apex)
    degrees = sorted(degree for _, degree in graph.degree)
    assert degrees[-1] - degrees[0] <= 1
    assert nx.is_biconnected(graph)
    graph.remove_nodes_from(planted.reason)
    spare = 0 if question.apex is None else 1
    assert nx.number_connected_components(graph) > len(planted.reason) + spare


def test_as_many_pieces_as_separator_vertices_prove_nothing() -> None:
    # One piece fewer and a cycle exists: it is the pieces that make it impossible.
    assert has_cycle(seeded.hidden_separator(3, 3, 5, 4, seed=1).question)
    assert not has_cycle(seeded.hidden_separator(2, 3, 4, 3, seed=1).question)


@pytest.mark.parametrize("instance", of("uneven-classes"), ids=lambda i: i.name)
def test_larger_class_has_too_few_inner_edges(instance: Instance) -> None:
    planted = planted_of(instance)
    question = planted.question
    larger = set(planted.reason)
    inside = [e for e in question.edges if larger.issuperset(e)]
    other_inside = [e for e in question.edges if larger.isdisjoint(e)]
    assert nx.is_biconnected(graph_of(question))
    assert 0 < len(inside) == len(other_inside)
    assert len(larger) - (question.n - len(larger)) > len(inside)


GUESTS: dict[str, Callable[[], nx.Graph]] = {
    "petersen": lambda: nx.petersen_graph(),
    "gp11": lambda: nx.Graph(classic.petersen_edges(11, 2)),
    "gp17": lambda: nx.Graph(classic.petersen_edges(17, 2)),
    "snark5": lambda: nx.Graph(classic.flower_snark_edges(5)),
    "snark7": lambda: nx.Graph(classic.flower_snark_edges(7)),
    "tutte": lambda: nx.tutte_graph(),
}


@pytest.mark.parametrize(
    "instance",
    [i for i in (*of("block-behind-cut"), *of("rings-of-blocks")) if "fragments" not in i.name],
    ids=lambda i: i.name,
)
def test_block_is_a_graph_without_cycle_behind_three_edges(instance: Instance) -> None:
    planted = planted_of(instance)
    cut = leaving(planted.question, planted.reason)
    assert len({v for edge in cut for v in edge}) == 6
    guest = next(build() for name, build in GUESTS.items() if name in instance.name)
    assert nx.is_isomorphic(contract_outside(planted), guest)


def test_small_guests_have_no_cycle() -> None:
    for name in ("petersen", "gp11", "snark5"):
        guest = nx.convert_node_labels_to_integers(GUESTS[name]())
        assert not has_cycle(build_question(len(guest), guest.edges))


def test_fragment_is_always_left_by_its_first_exit() -> None:
    # W. T. Tutte, J. London Math. Soc. 21 (1946) 98-101.
    block = seeded.tutte_fragment()
    outside = block.n
    closed = build_question(outside + 1, [*block.edges, *((v, outside) for v in block.exits)])
    cycles = [cycle_edges(cycle) for cycle in hamiltonian_cycles(closed)]
    used = [sum((v, outside) in cycle for cycle in cycles) for v in block.exits]
    assert cycles
    assert used[0] == len(cycles)
    assert 0 < used[1] < len(cycles)


def test_three_fragments_around_a_vertex_are_as_tutte_published() -> None:
    # Tutte 1946: 46 vertices, 69 edges, 3-connected and planar.
    k4 = [(0, 1), (0, 2), (0, 3), (1, 2), (1, 3), (2, 3)]
    blocks = dict.fromkeys((1, 2, 3), seeded.tutte_fragment())
    graph = nx.Graph(seeded.inflate(4, k4, blocks, first=dict.fromkeys((1, 2, 3), 0)).edges)
    assert (len(graph), graph.number_of_edges()) == (46, 69)
    assert nx.node_connectivity(graph) == 3
    assert nx.check_planarity(graph)[0]


@pytest.mark.parametrize(
    "instance", [i for i in SUITE if "fragments" in i.name], ids=lambda i: i.name
)
def test_fragments_stand_around_one_vertex(instance: Instance) -> None:
    planted = planted_of(instance)
    whole = graph_of(planted.question)
    graph = whole.subgraph(planted.reason)
    split = {v: list(nx.connected_components(graph.subgraph(set(graph) - {v}))) for v in graph}
    middle = next(v for v, parts in split.items() if sorted(map(len, parts)) == [15, 15, 15])
    block = seeded.tutte_fragment()
    wanted = nx.Graph([*block.edges, *((v, "outside") for v in block.exits)])
    nx.set_node_attributes(wanted, {block.exits[0]: 1, "outside": 2}, "mark")
    for part in split[middle]:
        edges = [(u if u in part else "outside", v) for u, v in whole.edges(part) if v in part]
        cut = [(u, v) for u in part for v in whole[u] if v not in part]
        assert len(cut) == 3
        found = nx.Graph([*edges, *((u, "outside") for u, _ in cut)])
        door = next(u for u, v in cut if v == middle)
        nx.set_node_attributes(found, {door: 1, "outside": 2}, "mark")
        assert nx.is_isomorphic(found, wanted, node_match=lambda a, b: a == b)


@pytest.mark.parametrize(
    "instance",
    [i for f in ("block-behind-cut", "rings-of-blocks", "random-cubic") for i in of(f)],
    ids=lambda i: i.name,
)
def test_cubic_where_claimed(instance: Instance) -> None:
    graph = graph_of(instance.build())
    assert {degree for _, degree in graph.degree} == {3}
    assert nx.is_connected(graph)


@pytest.mark.parametrize("instance", of("inflated"), ids=lambda i: i.name)
def test_inflated_graphs_are_regular(instance: Instance) -> None:
    degree = 4 if "doubled" in instance.name else 3
    assert {d for _, d in graph_of(instance.build()).degree} == {degree}


def test_smallest_doubled_one_is_the_graph_of_meredith() -> None:
    # G. H. J. Meredith, J. Combin. Theory B 14 (1973) 55-60, as igraph has it.
    ours = graph_of(seeded.inflated_doubled(5, 1).question)
    assert nx.is_isomorphic(ours, nx.Graph(classic.famous_graph("Meredith").edges))


@pytest.mark.parametrize(
    ("n", "edges"),
    [
        (4, [(0, 1), (0, 2), (0, 3), (1, 2), (1, 3), (2, 3)]),
        (6, classic.petersen_edges(3, 1)),
    ],
)
def test_inflating_a_graph_with_a_cycle_keeps_it(n: int, edges: list[Edge]) -> None:
    assert has_cycle(seeded.inflated_cubic(n, edges, 1).question)


def test_inflating_some_vertices_of_petersen_keeps_the_answer() -> None:
    edges = classic.petersen_edges(5, 2)
    whole = seeded.inflate(10, edges, dict.fromkeys((0, 6, 8), seeded.complete_block(3)))
    assert [len(group) for group in whole.groups] == [5, 1, 1, 1, 1, 1, 5, 1, 5, 1]
    assert not has_cycle(build_question(whole.n, whole.edges))


def test_degrees_that_no_simple_graph_has_are_an_error() -> None:
    with pytest.raises(seeded.GenerationError):
        seeded.random_graph({0: 3, 1: 3}, Random(1))
