"""Instances made by a rule: numbers, boards, families of graphs, named graphs."""

from __future__ import annotations

from collections.abc import Callable
from itertools import combinations, product
from math import isqrt

import igraph
import networkx as nx

from benchmark.instance import build_question
from certify.graph.graph import Edge, Graph
from certify.graph.question import (
    Ends,
    Question,
    build_cycle_question,
    build_path_question,
)

Joined = Callable[[int, int], bool]


def is_square(number: int) -> bool:
    """Return whether the number is k^2."""
    return isqrt(number) ** 2 == number


def is_triangular(number: int) -> bool:
    """Return whether the number is k(k+1)/2."""
    return is_square(8 * number + 1)


def is_fibonacci(number: int) -> bool:
    """Return whether the number is in 0, 1, 1, 2, 3, 5, ... (Gessel: 5k^2 +- 4 is a square)."""
    return is_square(5 * number**2 + 4) or is_square(abs(5 * number**2 - 4))


def is_pentagonal(number: int) -> bool:
    """Return whether the number is k(3k-1)/2 with k >= 0."""
    root = isqrt(24 * number + 1)
    return root**2 == 24 * number + 1 and (root % 6 == 5 or number == 0)


def is_prime(number: int) -> bool:
    """Return whether the number is prime, by trial division."""
    return number > 1 and all(number % d for d in range(2, isqrt(number) + 1))


def number_graph(n: int, joined: Joined) -> Graph:
    """Build the graph on the numbers 1..n in which a < b are joined by the rule."""
    pairs = combinations(range(1, n + 1), 2)
    edges = tuple((a - 1, b - 1) for a, b in pairs if joined(a, b))
    return Graph(labels=tuple(range(1, n + 1)), edges=edges)


def sum_path(n: int, holds: Callable[[int], bool]) -> Question:
    """Ask for an order of 1..n in which neighbours have a sum with the property."""
    return build_path_question(number_graph(n, lambda a, b: holds(a + b)))


def sum_cycle(n: int, holds: Callable[[int], bool]) -> Question:
    """Ask for a circle of 1..n in which neighbours have a sum with the property."""
    return build_cycle_question(number_graph(n, lambda a, b: holds(a + b)))


def difference_cycle(n: int, holds: Callable[[int], bool]) -> Question:
    """Ask for a circle of 1..n in which neighbours have a difference with the property."""
    return build_cycle_question(number_graph(n, lambda a, b: holds(b - a)))


def hop_path(n: int, hops: tuple[int, ...]) -> Question:
    """Ask for a way through 1..n by hops of the given lengths."""
    return build_path_question(number_graph(n, lambda a, b: b - a in hops))


def hop_cycle(n: int, hops: tuple[int, ...]) -> Question:
    """Ask for a round trip through 1..n by hops of the given lengths."""
    return build_cycle_question(number_graph(n, lambda a, b: b - a in hops))


def board(rows: int, columns: int, moves: frozenset[tuple[int, int]]) -> Graph:
    """Build the graph of a board on which a piece moves by the given steps (sizes of dx, dy)."""
    cells = list(product(range(1, rows + 1), range(1, columns + 1)))
    edges: list[Edge] = [
        (i, j)
        for (i, (x, y)), (j, (u, v)) in combinations(enumerate(cells), 2)
        if (abs(x - u), abs(y - v)) in moves
    ]
    return Graph(labels=tuple(cells), edges=tuple(edges))


KNIGHT = frozenset({(1, 2), (2, 1)})
ROOK_STEP = frozenset({(0, 1), (1, 0)})


def knight_cycle(rows: int, columns: int) -> Question:
    """Ask for a closed knight tour."""
    return build_cycle_question(board(rows, columns, KNIGHT))


def knight_path(rows: int, columns: int, *starts: tuple[int, int]) -> Question:
    """Ask for an open knight tour, possibly with one or two prescribed end cells."""
    graph = board(rows, columns, KNIGHT)
    ends = tuple(graph.labels.index(cell) for cell in starts)
    return build_path_question(graph, ends=Ends(vertices=ends))


def grid_cycle(rows: int, columns: int) -> Question:
    """Ask for a Hamiltonian cycle of the rectangular grid."""
    return build_cycle_question(board(rows, columns, ROOK_STEP))


def petersen_edges(n: int, k: int) -> list[Edge]:
    """Build the generalised Petersen graph GP(n, k): outer cycle, spokes, inner k-steps.

    Vertices 0..n-1 outside, n..2n-1 inside; the last n edges may repeat for k = n/2.
    """
    outer = [(i, (i + 1) % n) for i in range(n)]
    spokes = [(i, n + i) for i in range(n)]
    inner = [(n + i, n + (i + k) % n) for i in range(n)]
    return [*outer, *spokes, *inner]


def generalised_petersen(n: int, k: int) -> Question:
    """Ask for a Hamiltonian cycle of GP(n, k)."""
    return build_question(2 * n, petersen_edges(n, k))


def flower_snark_edges(petals: int) -> list[Edge]:
    """Build the flower snark J (Isaacs, Amer. Math. Monthly 82 (1975) 221-239).

    Petal i is a star with centre 4i and leaves 4i+1, 4i+2, 4i+3; the first
    leaves form one cycle, the second and third leaves one cycle of twice the
    length. Even numbers of petals are allowed here, though they give no snark.
    """
    stars = [(4 * i, 4 * i + leaf) for i in range(petals) for leaf in (1, 2, 3)]
    short = [4 * i + 1 for i in range(petals)]
    long = [4 * i + leaf for leaf in (2, 3) for i in range(petals)]
    rings = [
        pair for ring in (short, long) for pair in zip(ring, [*ring[1:], ring[0]], strict=True)
    ]
    return [*stars, *rings]


def flower_snark(petals: int) -> Question:
    """Ask for a Hamiltonian cycle of the flower snark."""
    return build_question(4 * petals, flower_snark_edges(petals))


def famous_graph(name: str) -> Graph:
    """Take a graph by name from igraph, which documents its list under Graph.Famous."""
    graph = igraph.Graph.Famous(name)
    edges = sorted((min(e.tuple), max(e.tuple)) for e in graph.es)
    return Graph(labels=tuple(range(graph.vcount())), edges=tuple(edges))


def library_graph(name: str) -> Graph:
    """Take a graph by the name of its function in networkx."""
    graph = nx.convert_node_labels_to_integers(getattr(nx, name)())
    edges = sorted((min(u, v), max(u, v)) for u, v in graph.edges)
    return Graph(labels=tuple(range(len(graph))), edges=tuple(edges))


def graph6_cycle(text: str) -> Question:
    """Ask for a Hamiltonian cycle of a graph written in graph6."""
    graph = nx.from_graph6_bytes(text.encode("ascii"))
    return build_question(len(graph), graph.edges)


def famous_cycle(name: str) -> Question:
    """Ask for a Hamiltonian cycle of a graph of igraph's list."""
    return build_cycle_question(famous_graph(name))


def famous_path(name: str) -> Question:
    """Ask for a Hamiltonian path of a graph of igraph's list."""
    return build_path_question(famous_graph(name))


def library_cycle(name: str) -> Question:
    """Ask for a Hamiltonian cycle of a graph of networkx."""
    return build_cycle_question(library_graph(name))


def library_path(name: str) -> Question:
    """Ask for a Hamiltonian path of a graph of networkx."""
    return build_path_question(library_graph(name))
