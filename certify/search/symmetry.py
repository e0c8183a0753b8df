"""Symmetries of a question: automorphisms that keep the required edges.

A *symmetry* of a question is a permutation p of its vertices, written as the
tuple p(0), ..., p(n-1), that maps edges to edges and required edges to required
edges. It maps every Hamiltonian cycle through the required edges to another
one. Generators come from the BLISS algorithm (Junttila and Kaski, ALENEX 2007)
as built into igraph, and canonical forms of coloured graphs too; each
permutation is checked here, edge by edge, before anyone sees it.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import igraph

from certify.errors import CertifyError
from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question

Permutation = tuple[int, ...]

MOST_ELEMENTS = 2000
"""How many elements of the group are listed at most; the groups of most graphs of interest fit."""

_MOST_NUMBERS = 1_000_000
"""How many integers the listed elements hold at most."""


@dataclass(frozen=True)
class Symmetries:
    """The group of a question's symmetries.

    generators: they generate the whole group; none for the trivial group.
    order: the number of elements.
    elements: elements in a fixed order, the identity first; all of them when
    `is_complete`, otherwise the first ones that products of generators reach.
    """

    generators: tuple[Permutation, ...]
    order: int
    elements: tuple[Permutation, ...]

    @property
    def is_complete(self) -> bool:
        """Return whether `elements` is the whole group."""
        return len(self.elements) == self.order


def find_symmetries(question: Question, *, most: int = MOST_ELEMENTS) -> Symmetries:
    """Find the group of the question's symmetries.

    most: how many elements are listed at most (fewer for very large graphs).
    Errors: CertifyError when a permutation from the library is no symmetry,
    which would be a fault of the library.
    Cost: BLISS is exponential at worst and quick on all but graphs built against
    it; listing costs O(n) an element and generator.
    """
    form = _coloured_form(question, {})
    if question.n == 0:
        return Symmetries((), 1, ((),))
    sh = "fl"  # BLISS: first largest cell; any fixed choice would do.
    found = form.graph.automorphism_group(sh=sh, color=form.colours)
    order = int(form.graph.count_automorphisms(sh=sh, color=form.colours))
    generators = sorted({tuple(p[: question.n]) for p in found})
    for p in generators:
        if not is_symmetry(question, p):
            raise CertifyError(f"not a symmetry of the question: {list(p)}")
    bound = max(1, min(most, _MOST_NUMBERS // question.n))
    return Symmetries(tuple(generators), order, _list_elements(question.n, generators, bound))


def is_symmetry(question: Question, p: Sequence[int]) -> bool:
    """Return whether p is a permutation that maps edges to edges and required to required.

    One direction is enough: p is injective on the finitely many edges.
    Cost: O(n + m).
    """
    return (
        sorted(p) == list(range(question.n))
        and all(question.has_edge(p[u], p[v]) for u, v in question.edges)
        and all(edge_between(p[u], p[v]) in question.required for u, v in question.required)
    )


def compose(outer: Permutation, inner: Permutation) -> Permutation:
    """Return the permutation that does `inner` first, then `outer`."""
    return tuple(outer[v] for v in inner)


def inverse(p: Permutation) -> Permutation:
    """Return the permutation that undoes p."""
    back = [0] * len(p)
    for v, image in enumerate(p):
        back[image] = v
    return tuple(back)


def image_of(p: Permutation, edges: Iterable[Edge]) -> frozenset[Edge]:
    """Return the images of edges under p."""
    return frozenset(edge_between(p[u], p[v]) for u, v in edges)


def find_mapping(
    question: Question,
    source: tuple[frozenset[Edge], frozenset[Edge]],
    target: tuple[frozenset[Edge], frozenset[Edge]],
) -> Permutation | None:
    """Find a symmetry that maps the source's edge sets exactly onto the target's.

    source, target: pairs of disjoint sets of edges of the question (used and
    removed, say), the first set goes onto the first and the second onto the second.
    Two coloured graphs are isomorphic if and only if their canonical forms are
    equal; vertices at the same place of the two orders correspond then.
    None says that there is no such symmetry.
    Cost: two canonical forms by BLISS.
    """
    if [len(part) for part in source] != [len(part) for part in target]:
        return None
    first, shape = _canonical_form(question, source)
    second, other = _canonical_form(question, target)
    if shape != other:
        return None
    image = dict(zip(first, second, strict=True))
    p = tuple(image[v] for v in range(question.n))
    maps_all = all(image_of(p, a) == b for a, b in zip(source, target, strict=True))
    return p if maps_all and is_symmetry(question, p) else None


def _canonical_form(
    question: Question, parts: tuple[frozenset[Edge], frozenset[Edge]]
) -> tuple[list[int], tuple[list[Edge], list[int]]]:
    """Return the vertices in canonical order, and the edges and colours in that numbering."""
    form = _coloured_form(
        question, {edge: mark for mark, part in enumerate(parts, start=1) for edge in part}
    )
    graph = form.graph
    # The library's releases differ in which way its permutations point; attributes
    # travel with their vertices either way.
    graph.vs["number"] = list(range(len(form.colours)))
    permuted = graph.permute_vertices(graph.canonical_permutation(sh="fl", color=form.colours))
    order: list[int] = permuted.vs["number"]
    edges = sorted(edge_between(u, v) for u, v in permuted.get_edgelist())
    return order, (edges, [form.colours[v] for v in order])


@dataclass(frozen=True)
class _ColouredForm:
    """The question as a graph with vertex colours; extra vertices stand for marked edges."""

    graph: igraph.Graph
    colours: list[int]


def _coloured_form(question: Question, marks: dict[Edge, int]) -> _ColouredForm:
    """Subdivide marked and required edges by vertices whose colour tells the mark.

    An unmarked edge stays as it is. Colour 0 is a vertex of the question; a
    subdividing vertex has 1 + mark + 3 * (required).
    """
    edges: list[Edge] = []
    colours = [0] * question.n
    for edge in question.edges:
        mark = marks.get(edge, 0) + 3 * (edge in question.required)
        if mark == 0:
            edges.append(edge)
            continue
        middle = len(colours)
        colours.append(1 + mark)
        edges.extend((end, middle) for end in edge)
    return _ColouredForm(igraph.Graph(n=len(colours), edges=edges), colours)


def _list_elements(n: int, generators: list[Permutation], most: int) -> tuple[Permutation, ...]:
    """List products of generators, shortest products first, up to `most` elements."""
    elements: list[Permutation] = [tuple(range(n))]
    seen = set(elements)
    for element in elements:  # grows while it is read
        for generator in generators:
            if len(elements) >= most:
                return tuple(elements)
            product = compose(generator, element)
            if product not in seen:
                seen.add(product)
                elements.append(product)
    return tuple(elements)
