"""Generated instances that have a reason planted in them, from a stated seed.

Each generator returns the question with its vertices renumbered at random, so
that no method finds the reason by position, and the vertices of the reason, so
that a test can verify it. Randomness comes from `random.Random(seed)` alone.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from random import Random

import networkx as nx

from benchmark.classic import flower_snark_edges, petersen_edges
from benchmark.instance import Planted, build_question
from certify.graph.graph import Edge, Graph, edge_between
from certify.graph.question import build_path_question

TRIES = 1_000


class GenerationError(Exception):
    """No graph of the wished shape was drawn within the tries."""


def pair_stubs(left: Sequence[int], right: Sequence[int], rng: Random) -> list[Edge]:
    """Join left[i] to a random partner of `right`, without loops and repeats.

    The configuration model (Bollobas, European J. Combin. 1 (1980) 311-316);
    loops and repeats are mended by exchanging partners, so the draw is not
    exactly uniform, which no claim here needs.
    """
    partners = list(right)
    rng.shuffle(partners)
    for _ in range(TRIES):
        edges: set[Edge] = set()
        bad: list[int] = []
        for i, (u, v) in enumerate(zip(left, partners, strict=True)):
            if u == v or edge_between(u, v) in edges:
                bad.append(i)
            else:
                edges.add(edge_between(u, v))
        if not bad:
            return sorted(edges)
        for i in bad:
            j = rng.randrange(len(partners))
            partners[i], partners[j] = partners[j], partners[i]
    raise GenerationError("the degrees allow no simple graph, or hardly any")


def random_graph(degrees: Mapping[int, int], rng: Random) -> list[Edge]:
    """Draw a connected simple graph with the given degrees; their sum is even."""
    for _ in range(TRIES):
        stubs = [v for v, degree in degrees.items() for _ in range(degree)]
        rng.shuffle(stubs)
        half = len(stubs) // 2
        edges = pair_stubs(stubs[:half], stubs[half:], rng)
        graph = nx.Graph(edges)
        if len(graph) == len(degrees) and nx.is_connected(graph):
            return edges
    raise GenerationError("no connected graph drawn")


def renumber(
    n: int, edges: Iterable[Edge], reason: Iterable[int], rng: Random
) -> tuple[list[Edge], tuple[int, ...]]:
    """Renumber the vertices 0..n-1 at random, in the edges and in the reason."""
    new = list(range(n))
    rng.shuffle(new)
    return [(new[u], new[v]) for u, v in edges], tuple(sorted(new[v] for v in reason))


def plant(n: int, edges: Iterable[Edge], reason: Iterable[int], rng: Random) -> Planted:
    """Renumber at random and ask for a Hamiltonian cycle."""
    moved, where = renumber(n, edges, reason, rng)
    return Planted(build_question(n, moved), where)


def hidden_separator(
    k: int, pieces: int, size: int, degree: int, seed: int, *, path: bool = False
) -> Planted:
    """Hide k vertices whose removal leaves `pieces` pieces of `size` vertices.

    All vertices have the same degree (in a piece one may have one more, for
    parity), the whole is 2-connected, and the pieces are random graphs, so
    nothing local gives the separator away. No Hamiltonian cycle exists for
    pieces > k, no Hamiltonian path for pieces > k + 1 (Chvatal, Discrete Math. 5
    (1973) 215-228). The reason is the separator.
    """
    rng = Random(seed)
    n = k + pieces * size
    for _ in range(TRIES):
        stubs = [v for v in range(k) for _ in range(degree)]
        shares = [len(stubs) // pieces + (i < len(stubs) % pieces) for i in range(pieces)]
        edges: list[Edge] = []
        doors: list[int] = []
        for i, share in enumerate(shares):
            inside = range(k + i * size, k + (i + 1) * size)
            at_doors = rng.sample(inside, share)
            wanted = dict.fromkeys(inside, degree)
            for v in at_doors:
                wanted[v] -= 1
            if sum(wanted.values()) % 2:
                wanted[rng.choice([v for v in inside if v not in at_doors])] += 1
            edges += random_graph(wanted, rng)
            doors += at_doors
        edges += pair_stubs(stubs, doors, rng)
        if not nx.is_biconnected(nx.Graph(edges)):
            continue
        if not path:
            return plant(n, edges, range(k), rng)
        moved, reason = renumber(n, edges, range(k), rng)
        graph = Graph(tuple(range(n)), tuple(sorted(edge_between(u, v) for u, v in moved)))
        return Planted(build_path_question(graph), reason)
    raise GenerationError("no 2-connected graph drawn")


def uneven_classes(smaller: int, inner: int, degree: int, seed: int) -> Planted:
    """Draw a graph that is bipartite but for `inner` edges inside either class.

    The larger class has smaller + inner + 1 vertices, all of the given degree.
    A Hamiltonian cycle has 2(smaller + inner + 1) edge ends in it, of which at
    most 2 * inner lie on edges inside the class and at most 2 * smaller come from
    the other class: one pair too few. The reason is the larger class.
    """
    rng = Random(seed)
    larger = smaller + inner + 1
    n = smaller + larger
    for _ in range(TRIES):
        low_ends = rng.sample(range(smaller), 2 * inner)
        high_ends = rng.sample(range(smaller, n), 2 * inner)
        stubs = [v for v in range(smaller, n) for _ in range(degree - (v in high_ends))]
        edges = [
            *zip(low_ends[:inner], low_ends[inner:], strict=True),
            *zip(high_ends[:inner], high_ends[inner:], strict=True),
            *pair_stubs(stubs, [i % smaller for i in range(len(stubs))], rng),
        ]
        if nx.is_biconnected(nx.Graph(edges)):
            return plant(n, edges, range(smaller, n), rng)
    raise GenerationError("no 2-connected graph drawn")


@dataclass(frozen=True)
class Block:
    """A graph that takes the place of a vertex.

    exits: the vertices of the block that take the edges of the vertex, in order.
    """

    n: int
    edges: tuple[Edge, ...]
    exits: tuple[int, ...]


@dataclass
class Inflated:
    """A graph in which vertices of a host were replaced by blocks.

    groups: for each host vertex the vertices that stand for it.
    """

    n: int = 0
    edges: list[Edge] = field(default_factory=list)
    groups: list[range] = field(default_factory=list)


def open_block(n: int, edges: Iterable[Edge], vertex: int) -> Block:
    """Delete a vertex; its neighbours become the exits."""
    graph = nx.Graph(edges)
    number = {v: i for i, v in enumerate(v for v in range(n) if v != vertex)}
    exits = tuple(number[v] for v in sorted(graph[vertex]))
    graph.remove_node(vertex)
    kept = sorted(edge_between(number[u], number[v]) for u, v in graph.edges)
    return Block(n - 1, tuple(kept), exits)


def complete_block(size: int) -> Block:
    """Return K(size, size - 1) with the larger class as exits."""
    others = range(size, 2 * size - 1)
    edges = tuple((u, v) for u in range(size) for v in others)
    return Block(2 * size - 1, edges, tuple(range(size)))


def tutte_fragment() -> Block:
    """Return Tutte's fragment: 15 vertices that are always left by the first exit.

    Every Hamiltonian cycle of a cubic graph that holds the fragment behind three
    edges uses the edge at the first exit (Tutte, J. London Math. Soc. 21 (1946)
    98-101). Tutte's graph is three of them around one vertex.
    """
    whole = nx.tutte_graph()
    inside = [1, 4, 5, 6, *range(23, 34)]
    number = {v: i for i, v in enumerate(inside)}
    kept = sorted(edge_between(number[u], number[v]) for u, v in whole.subgraph(inside).edges)
    # Vertex 1 is joined to the middle of Tutte's graph; 6 and 23 to the other fragments.
    return Block(len(inside), tuple(kept), (number[1], number[6], number[23]))


def inflate(
    n: int,
    edges: Sequence[Edge],
    blocks: Mapping[int, Block],
    first: Mapping[int, int] | None = None,
) -> Inflated:
    """Replace host vertices by blocks, the edges of a vertex going to its exits.

    edges: of the host on 0..n-1; an edge may occur twice.
    first: for a replaced vertex the neighbour whose edge takes the first exit;
    otherwise the edges take the exits in their order.
    """
    result = Inflated()
    exits: list[list[int]] = []
    for v in range(n):
        block = blocks.get(v)
        base, size = result.n, block.n if block else 1
        result.n += size
        result.groups.append(range(base, base + size))
        if block:
            result.edges += [(base + a, base + b) for a, b in block.edges]
        at_v = [i for i, edge in enumerate(edges) if v in edge]
        if first and v in first:
            at_v.sort(key=lambda i: first[v] not in edges[i])
        places = dict(zip(at_v, block.exits, strict=True)) if block else {}
        exits.append([base + places.get(i, 0) for i in range(len(edges))])
    result.edges += [(exits[u][i], exits[v][i]) for i, (u, v) in enumerate(edges)]
    return result


def cubic_block(name: str) -> Block:
    """Return a cubic graph without a Hamiltonian cycle, opened at vertex 0.

    Names: petersen, gp11, gp17 (GP(n, 2) with n = 5 mod 6; Alspach, J. Combin.
    Theory B 34 (1983) 293-312), snark5 and snark7 (flower snarks), tutte.
    """
    if name == "tutte":
        graph = nx.tutte_graph()
        return open_block(len(graph), graph.edges, 0)
    if name.startswith("snark"):
        petals = int(name.removeprefix("snark"))
        return open_block(4 * petals, flower_snark_edges(petals), 0)
    n = 5 if name == "petersen" else int(name.removeprefix("gp"))
    return open_block(2 * n, petersen_edges(n, 2), 0)


def block_behind_cut(host: int, name: str, seed: int) -> Planted:
    """Replace a vertex of a random cubic graph by a cubic block that has no cycle.

    A Hamiltonian cycle crosses the three edges around the block exactly twice,
    so contracting the rest to one vertex turns it into a Hamiltonian cycle of the
    graph from which the block was cut, which has none. The reason is the block.
    """
    rng = Random(seed)
    edges = random_graph(dict.fromkeys(range(host), 3), rng)
    whole = inflate(host, edges, {0: cubic_block(name)})
    return plant(whole.n, whole.edges, whole.groups[0], rng)


def fragments_around_vertex(host: int, seed: int) -> Planted:
    """Replace the three neighbours of a vertex of a random cubic graph by Tutte's fragment.

    Each fragment forces its edge to the vertex, which can have only two. No
    single block is at fault. The reason is the vertex and its three fragments.
    """
    rng = Random(seed)
    edges = random_graph(dict.fromkeys(range(host), 3), rng)
    near = sorted(u + v for u, v in edges if 0 in (u, v))
    blocks = dict.fromkeys(near, tutte_fragment())
    whole = inflate(host, edges, blocks, first=dict.fromkeys(near, 0))
    reason = [*whole.groups[0], *(v for u in near for v in whole.groups[u])]
    return plant(whole.n, whole.edges, reason, rng)


def ring_of_blocks(length: int, name: str, seed: int, *, every: int = 1) -> Planted:
    """Replace vertices of one rim of a prism by blocks that have no cycle.

    The prism over a cycle of `length` keeps one rim; of the other rim every
    `every`-th vertex is replaced. Each block alone is a reason (as in
    `block_behind_cut`); the reason named is the first block.
    """
    rng = Random(seed)
    block = cubic_block(name)
    whole = inflate(
        2 * length, petersen_edges(length, 1), dict.fromkeys(range(0, length, every), block)
    )
    return plant(whole.n, whole.edges, whole.groups[0], rng)


def inflated_cubic(n: int, edges: Sequence[Edge], seed: int) -> Planted:
    """Replace every vertex of a cubic graph by K(3, 2).

    A Hamiltonian cycle crosses the three edges around each K(3, 2) exactly twice,
    so contracting them turns it into one of the host, and back. The reason is empty.
    """
    rng = Random(seed)
    whole = inflate(n, edges, dict.fromkeys(range(n), complete_block(3)))
    return plant(whole.n, whole.edges, (), rng)


def inflated_doubled(n: int, seed: int) -> Planted:
    """Replace every vertex of GP(n, 2) with doubled spokes by K(4, 3).

    Four-regular; n = 5 is Meredith's graph (J. Combin. Theory B 14 (1973) 55-60).
    A Hamiltonian cycle crosses the four edges around a K(4, 3)
    twice: with four crossings two paths would cover it, both with their ends in
    the larger class, which would then have two vertices more than the smaller.
    So it contracts to a Hamiltonian cycle of GP(n, 2). The reason is empty.
    """
    rng = Random(seed)
    spokes = [(i, n + i) for i in range(n)]
    whole = inflate(
        2 * n, [*petersen_edges(n, 2), *spokes], dict.fromkeys(range(2 * n), complete_block(4))
    )
    return plant(whole.n, whole.edges, (), rng)


def random_cubic(n: int, seed: int) -> Planted:
    """Draw a connected cubic graph; most have a Hamiltonian cycle, nothing is planted."""
    rng = Random(seed)
    return plant(n, random_graph(dict.fromkeys(range(n), 3), rng), (), rng)
