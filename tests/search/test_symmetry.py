"""Symmetries: published group orders, exhaustion on small questions, mappings of edge sets."""

from __future__ import annotations

import itertools
import math

import igraph
import networkx
import pytest
from hypothesis import given
from hypothesis import strategies as st

from certify.graph.graph import edge_between
from certify.graph.question import Question
from certify.search.symmetry import (
    compose,
    find_mapping,
    find_symmetries,
    image_of,
    inverse,
    is_symmetry,
)
from tests.brute import questions
from tests.search.known_graphs import famous, petersen


def from_networkx(graph: networkx.Graph) -> Question:
    pairs = sorted(edge_between(u, v) for u, v in graph.edges)
    return Question(n=graph.number_of_nodes(), edges=tuple(pairs))


def all_symmetries(question: Question) -> set[tuple[int, ...]]:
    """Return the symmetries by trying every permutation."""
    found = set()
    for p in itertools.permutations(range(question.n)):
        moved = {edge_between(p[u], p[v]) for u, v in question.edges}
        kept = {edge_between(p[u], p[v]) for u, v in question.required}
        if moved == set(question.edges) and kept == set(question.required):
            found.add(p)
    return found


# Orders of automorphism groups; from memory (also in MathWorld, under the graphs' names).
ORDERS = {
    "Petersen": 120,
    "Coxeter": 336,
    "Heawood": 336,
    "Tutte": 3,
    "Herschel": 12,
    "Dodecahedral": 120,
}


@pytest.mark.parametrize(("name", "order"), ORDERS.items())
def test_orders_of_named_graphs(name: str, order: int) -> None:
    found = find_symmetries(famous(name))
    assert found.order == order
    assert found.is_complete
    assert len(set(found.elements)) == order


def test_order_of_the_desargues_graph() -> None:
    # 240: from memory (MathWorld, "Desargues Graph"); it is GP(10, 3).
    assert find_symmetries(from_networkx(networkx.desargues_graph())).order == 240
    assert find_symmetries(petersen(10, 3)).order == 240


def test_group_too_large_to_list() -> None:
    # The symmetric group: every permutation is a symmetry of a complete graph.
    complete = Question(n=9, edges=tuple(itertools.combinations(range(9), 2)))
    found = find_symmetries(complete, most=100)
    assert found.order == math.factorial(9)
    assert not found.is_complete
    assert len(set(found.elements)) == 100
    assert all(is_symmetry(complete, p) for p in found.elements)


def test_required_edges_are_kept() -> None:
    square = ((0, 1), (0, 3), (1, 2), (2, 3))
    assert find_symmetries(Question(4, square)).order == 8
    assert find_symmetries(Question(4, square, frozenset({(0, 1)}))).order == 2
    assert find_symmetries(Question(4, square, frozenset({(0, 1), (2, 3)}))).order == 4


def test_nothing_to_permute() -> None:
    assert find_symmetries(Question(0, ())).elements == ((),)
    assert find_symmetries(Question(1, ())).elements == ((0,),)


@given(questions(least=1, most=6))
def test_agrees_with_exhaustion(question: Question) -> None:
    found = find_symmetries(question)
    everything = all_symmetries(question)
    assert found.order == len(everything)
    assert set(found.elements) == everything
    assert set(found.generators) <= everything


@given(questions(least=2, most=6), st.data())
def test_is_symmetry_agrees_with_exhaustion(question: Question, data: st.DataObject) -> None:
    p = tuple(data.draw(st.permutations(range(question.n))))
    assert is_symmetry(question, p) == (p in all_symmetries(question))
    assert not is_symmetry(question, (*p[:-1], p[0]))


@given(questions(least=3, most=6), st.data())
def test_mapping_agrees_with_exhaustion(question: Question, data: st.DataObject) -> None:
    if not question.edges:
        return
    subsets = st.frozensets(st.sampled_from(question.edges), max_size=3)
    source = (data.draw(subsets), data.draw(subsets))
    target = (data.draw(subsets), data.draw(subsets))
    source, target = (source[0], source[1] - source[0]), (target[0], target[1] - target[0])
    exists = any(
        image_of(p, source[0]) == target[0] and image_of(p, source[1]) == target[1]
        for p in all_symmetries(question)
    )
    p = find_mapping(question, source, target)
    assert (p is not None) == exists
    if p is not None:
        assert p in all_symmetries(question)
        assert image_of(p, source[0]) == target[0]
        assert image_of(p, source[1]) == target[1]


@given(questions(least=3, most=7), st.data())
def test_mapping_finds_an_image_under_a_symmetry(question: Question, data: st.DataObject) -> None:
    if not question.edges:
        return
    p = data.draw(st.sampled_from(find_symmetries(question).elements))
    used = data.draw(st.frozensets(st.sampled_from(question.edges), max_size=3))
    none: frozenset[tuple[int, int]] = frozenset()
    assert find_mapping(question, (used, none), (image_of(p, used), none)) is not None


@given(st.permutations(range(6)), st.permutations(range(6)))
def test_inverse_and_composition(first: list[int], second: list[int]) -> None:
    p, q = tuple(first), tuple(second)
    assert compose(inverse(p), p) == tuple(range(6))
    assert inverse(compose(p, q)) == compose(inverse(q), inverse(p))


def test_same_answer_twice() -> None:
    graph = igraph.Graph.Famous("Coxeter")
    question = Question(28, tuple(sorted(edge_between(*e) for e in graph.get_edgelist())))
    assert find_symmetries(question) == find_symmetries(question)
