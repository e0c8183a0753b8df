"""The public suite: every instance, its known answer and where that is known from.

Families in order; within a family sizes go up in steps. CORE instances are small
or of medium size. HARD ones defeat at least one of the usual methods, or are
large. An answer of None has no published source: there the methods only have to
agree with each other.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import partial

from benchmark import classic, seeded
from benchmark.instance import CORE, HARD, Instance, Planted
from benchmark.outcome import Answer
from certify.graph.question import Question

SQUARES = "OEIS A090461, A078107, A071984; all n: R. Gerbicz 2018, cited in A090461"
TRIANGULAR = "OEIS A116980 (listed for n <= 35)"
FIBONACCI = "OEIS A079734; Fox, Kinnersley, McDonald, Orlow, Puleo, Fib. Quart. 52 (2014) 46-49"
PRIMES = "OEIS A228626; Chen, Fu, Guo, arXiv:2003.00729"
CLOSED = "A. J. Schwenk, Math. Mag. 64 (1991) 325-332"
OPEN = "P. Cull, J. De Curtins, Fib. Quart. 16 (1978) 276-285; 3 and 4 rows: from memory"
COLOURS = "common practice: the two colours of the cells"
GRIDS = "A. Itai, C. Papadimitriou, J. Szwarcfiter, SIAM J. Comput. 11 (1982) 676-686"
ALSPACH = "B. Alspach, J. Combin. Theory B 34 (1983) 293-312"
SNARKS = "R. Isaacs, Amer. Math. Monthly 82 (1975) 221-239; even: Clark, Entringer 1983"
TOUGH = "V. Chvatal, Discrete Math. 5 (1973) 215-228"
COUNTED = "double counting of the edge ends in the larger class"
STAR = "three-edge cuts contract (common practice), and the source of the block's graph"
MEREDITH = "G. H. J. Meredith, J. Combin. Theory B 14 (1973) 55-60, and Alspach 1983"
LIBRARY = "documentation of igraph's Graph.Famous, and common practice for a graph so named"
SWEPT = "an exact count of our own, no published source"
LEAVES = "common practice: vertices of degree 1, or colour classes of unequal size"
SMALLEST = "MathWorld, Graph Toughness: the smallest have 7 vertices; which: an exact search"
UNKNOWN = "no published value"


def tags_of(*, core: bool, hard: bool) -> frozenset[str]:
    """Return the tags of an instance."""
    return frozenset(tag for tag, holds in ((CORE, core), (HARD, hard)) if holds)


def say(holds: bool) -> Answer:
    """Return the answer for a truth value."""
    return "exists" if holds else "impossible"


def number_rules() -> Iterator[Instance]:
    """Yield orders and circles of 1..n with a rule for neighbours."""

    def row(
        name: str, build: Callable[[], Question], answer: Answer | None, source: str, n: int
    ) -> Instance:
        tags = tags_of(core=n <= 45, hard=n >= 60)
        return Instance(f"{name} n={n}", "number-rules", build, answer, source, tags)

    for n in (15, 16, 18, 22, 24, 25, 30, 40, 60, 100, 200):
        exists = n in (15, 16, 17, 23) or n >= 25
        build = partial(classic.sum_path, n, classic.is_square)
        yield row("square-sum path", build, say(exists), SQUARES, n)
    for n in (30, 31, 32, 45, 60, 100):
        build = partial(classic.sum_cycle, n, classic.is_square)
        yield row("square-sum cycle", build, say(n >= 32), SQUARES, n)
    for n in (7, 8, 9, 20, 35, 80):
        build = partial(classic.sum_path, n, classic.is_triangular)
        known = say(n >= 9) if n <= 35 else None
        yield row("triangular-sum path", build, known, TRIANGULAR if known else UNKNOWN, n)
    for n in (10, 14, 22, 34, 60, 100, 200):
        build = partial(classic.sum_path, n, classic.is_fibonacci)
        yield row("fibonacci-sum path", build, say(n == 34), FIBONACCI, n)
    for n in (15, 25, 60, 120):
        build = partial(classic.sum_path, n, classic.is_pentagonal)
        yield row("pentagonal-sum path", build, None, UNKNOWN, n)
    for n in (4, 12, 40, 80):
        build = partial(classic.difference_cycle, n, classic.is_prime)
        yield row("prime-difference cycle", build, say(n >= 5), PRIMES, n)
    for hops in ((4, 7), (5, 8), (3, 10)):
        for n in (9, 14, 16, 20, 40, 100):
            build = partial(classic.hop_path, n, hops)
            yield row("hop path {},{}".format(*hops), build, None, UNKNOWN, n)
    for hops in ((3, 5), (7, 9)):
        for n in (31, 61, 151):
            # Odd hops change the parity, and a cycle of odd length cannot alternate.
            build = partial(classic.hop_cycle, n, hops)
            yield row("hop cycle {},{}".format(*hops), build, "impossible", COLOURS, n)


def has_closed_tour(rows: int, columns: int) -> bool:
    """Return whether a board, rows <= columns, has a closed knight tour (Schwenk 1991)."""
    return not (
        rows * columns % 2 == 1 or rows in (1, 2, 4) or (rows == 3 and columns in (4, 6, 8))
    )


def has_open_tour(rows: int, columns: int) -> bool:
    """Return whether a board, 3 <= rows <= columns, has an open knight tour."""
    if rows == 3:
        return columns == 4 or columns >= 7
    return columns >= 5


def boards() -> Iterator[Instance]:
    """Yield knight boards and grids."""
    closed = [
        *((3, n) for n in (4, 6, 7, 8, 10, 12, 30)),
        *((4, n) for n in (4, 5, 6, 7, 8, 10, 12, 16, 20, 30, 50, 75, 100)),
        *((5, 5), (5, 6), (5, 7), (6, 6), (7, 7), (6, 8), (7, 9), (8, 8)),
    ]
    for rows, columns in closed:
        tags = tags_of(core=rows * columns <= 48, hard=rows * columns >= 49)
        known = say(has_closed_tour(rows, columns))
        build = partial(classic.knight_cycle, rows, columns)
        name = f"closed knight {rows}x{columns}"
        yield Instance(name, "knight-boards", build, known, CLOSED, tags)
    opened = [
        *((3, n) for n in (4, 5, 6, 7, 8, 10, 30)),
        *((4, n) for n in (4, 5, 6, 7, 20)),
        *((5, 5), (6, 6), (8, 8)),
    ]
    for rows, columns in opened:
        tags = tags_of(core=rows * columns <= 36, hard=rows * columns >= 64)
        known = say(has_open_tour(rows, columns))
        build = partial(classic.knight_path, rows, columns)
        yield Instance(f"open knight {rows}x{columns}", "knight-boards", build, known, OPEN, tags)
    for size in (5, 7, 9):
        # On an odd board both ends of an open tour have the colour of the corners.
        build = partial(classic.knight_path, size, size, (1, 2))
        tags = tags_of(core=size == 5, hard=size > 5)
        name = f"open knight {size}x{size} from 1.2"
        yield Instance(name, "knight-boards", build, "impossible", COLOURS, tags)
    for rows, columns in ((5, 5), (6, 7), (7, 7), (9, 9), (8, 15), (15, 15)):
        tags = tags_of(core=rows * columns <= 49, hard=rows * columns >= 81)
        known = say(rows * columns % 2 == 0)
        build = partial(classic.grid_cycle, rows, columns)
        yield Instance(f"grid {rows}x{columns}", "grids", build, known, GRIDS, tags)


def has_petersen_cycle(n: int, k: int) -> bool:
    """Return whether GP(n, k), 1 <= k <= n/2, has a Hamiltonian cycle (Alspach 1983)."""
    if 2 * k == n:
        return not (n % 4 == 0 and n >= 8)
    return not (n % 6 == 5 and k in (2, (n - 1) // 2))


def cubic_families() -> Iterator[Instance]:
    """Yield generalised Petersen graphs and flower snarks."""
    seconds = (5, 7, 11, 17, 23, 35, 47, 71, 101, 149, 197)
    others = ((8, 4), (12, 6), (24, 12), (11, 5), (23, 11), (41, 20), (13, 5), (20, 3), (60, 7))
    for n, k in (*((n, 2) for n in seconds), *others):
        known = say(has_petersen_cycle(n, k))
        tags = tags_of(core=n <= 35, hard=n >= 41)
        build = partial(classic.generalised_petersen, n, k)
        yield Instance(f"GP({n},{k})", "generalised-petersen", build, known, ALSPACH, tags)
    for petals in (5, 6, 7, 9, 11, 12, 15, 21, 31, 51, 75, 101, 151, 201):
        tags = tags_of(core=petals <= 12, hard=petals >= 11 and petals % 2 == 1)
        build = partial(classic.flower_snark, petals)
        known = say(petals % 2 == 0)
        yield Instance(f"flower snark {petals}", "flower-snarks", build, known, SNARKS, tags)


# Their documentation in igraph says that they have no Hamiltonian cycle (or path).
DOCUMENTED = ("Petersen", "Coxeter", "Tutte", "Herschel", "Meredith", "Thomassen")


def named() -> Iterator[Instance]:
    """Yield graphs that have a name, all small."""
    core = tags_of(core=True, hard=False)
    famous: dict[str, Answer] = {
        **dict.fromkeys(("Petersen", "Coxeter", "Tutte", "Herschel"), "impossible"),
        **dict.fromkeys(("Meredith", "Thomassen", "Walther", "Zachary"), "impossible"),
        **dict.fromkeys(("Krackhardt_Kite", "Noperfectmatching"), "impossible"),
        **dict.fromkeys(("Dodecahedral", "Folkman", "Levi", "McGee", "Robertson"), "exists"),
    }
    for name, known in famous.items():
        build = partial(classic.famous_cycle, name)
        source = LIBRARY if name in DOCUMENTED else SWEPT
        yield Instance(f"{name} cycle", "named", build, known, source, core)
    paths: dict[str, Answer] = {
        **dict.fromkeys(("Petersen", "Coxeter", "Tutte", "Herschel", "Meredith"), "exists"),
        **dict.fromkeys(("Thomassen", "Walther", "Zachary", "Noperfectmatching"), "impossible"),
    }
    for name, known in paths.items():
        build = partial(classic.famous_path, name)
        source = LIBRARY if name == "Thomassen" else SWEPT
        yield Instance(f"{name} path", "named", build, known, source, core)
    for name in ("sedgewick_maze_graph", "florentine_families_graph", "davis_southern_women_graph"):
        build = partial(classic.library_cycle, name)
        yield Instance(f"{name} cycle", "named", build, "impossible", LEAVES, core)
    for name in ("desargues_graph", "pappus_graph", "hoffman_singleton_graph"):
        build = partial(classic.library_cycle, name)
        yield Instance(f"{name} cycle", "named", build, "exists", SWEPT, core)
    for text in ("FCptO", "FCqn_", "FCqno", "FCqnw"):
        # The four smallest graphs that are 1-tough and have no Hamiltonian cycle.
        build = partial(classic.graph6_cycle, text)
        yield Instance(f"1-tough {text}", "named", build, "impossible", SMALLEST, core)


def plant(
    name: str,
    family: str,
    planted: Callable[[], Planted],
    answer: Answer | None,
    source: str,
    size: int,
    *,
    core_up_to: int = 60,
) -> Instance:
    """Make an instance of a generated question; size: about its number of vertices."""

    def build() -> Question:
        return planted().question

    tags = tags_of(core=size <= core_up_to, hard=size > core_up_to)
    return Instance(name, family, build, answer, source, tags, planted)


def separators() -> Iterator[Instance]:
    """Yield random graphs with a hidden separator, and graphs with uneven classes."""
    cycles = (
        *((4, 5, 6, 3), (4, 5, 10, 4), (5, 6, 12, 5), (6, 7, 12, 3), (8, 9, 12, 4)),
        *((10, 11, 12, 5), (12, 13, 14, 3), (16, 17, 14, 4), (20, 21, 15, 3), (20, 21, 15, 5)),
        *((25, 26, 13, 3), (25, 26, 13, 4), (25, 26, 13, 5)),
    )
    family = "hidden-separator"
    for seed, (k, pieces, size, degree) in enumerate(cycles, start=1):
        name = f"separator of {k}, {pieces} pieces of {size}, degree {degree}, seed {seed}"
        planted = partial(seeded.hidden_separator, k, pieces, size, degree, seed)
        yield plant(name, family, planted, "impossible", TOUGH, k + pieces * size)
    for seed, (k, pieces, size, degree) in enumerate(
        ((4, 6, 7, 3), (8, 10, 12, 4), (16, 18, 14, 5)), start=51
    ):
        name = f"separator of {k}, {pieces} pieces of {size}, degree {degree}, path, seed {seed}"
        planted = partial(seeded.hidden_separator, k, pieces, size, degree, seed, path=True)
        yield plant(name, family, planted, "impossible", TOUGH, k + pieces * size)
    uneven = (
        *((12, 1, 3), (15, 2, 4), (26, 3, 3), (45, 4, 4), (60, 6, 3), (80, 5, 5), (100, 8, 3)),
        *((120, 10, 4), (138, 12, 3), (139, 10, 5)),
    )
    for seed, (smaller, inner, degree) in enumerate(uneven, start=101):
        n = 2 * smaller + inner + 1
        name = f"classes {smaller} and {n - smaller}, {inner} inner, degree {degree}, seed {seed}"
        planted = partial(seeded.uneven_classes, smaller, inner, degree, seed)
        yield plant(name, "uneven-classes", planted, "impossible", COUNTED, n)


def blocks() -> Iterator[Instance]:
    """Yield graphs with blocks behind cuts, rings of blocks, inflated graphs."""
    behind = (
        *(("petersen", 20), ("petersen", 50), ("petersen", 120), ("petersen", 250)),
        *(("petersen", 390), ("gp11", 40), ("gp11", 200), ("gp17", 300), ("snark5", 80)),
        *(("snark7", 350), ("tutte", 60), ("tutte", 350)),
    )
    family = "block-behind-cut"
    for seed, (block, host) in enumerate(behind, start=201):
        planted = partial(seeded.block_behind_cut, host, block, seed)
        name = f"{block} behind a cut, host {host}, seed {seed}"
        yield plant(name, family, planted, "impossible", STAR, host)
    for seed, host in enumerate((20, 60, 150, 350), start=251):
        planted = partial(seeded.fragments_around_vertex, host, seed)
        name = f"fragments around a vertex, host {host}, seed {seed}"
        yield plant(name, family, planted, "impossible", STAR, host + 42)
    rings = ((3, "petersen", 1), (6, "petersen", 1), (20, "petersen", 2), (40, "petersen", 1))
    for seed, (length, block, every) in enumerate((*rings, (14, "gp11", 1)), start=301):
        planted = partial(seeded.ring_of_blocks, length, block, seed, every=every)
        name = f"ring of {length}, {block} at every {every}, seed {seed}"
        vertices = length + (length // every) * (9 if block == "petersen" else 21)
        yield plant(name, "rings-of-blocks", planted, "impossible", STAR, vertices)
    hosts = (
        *((f"GP({n},2)", 2 * n, partial(classic.petersen_edges, n, 2)) for n in (5, 11, 35)),
        *((f"snark {n}", 4 * n, partial(classic.flower_snark_edges, n)) for n in (5, 9, 19)),
    )
    for seed, (title, n, edges) in enumerate(hosts, start=401):
        planted = partial(seeded.inflated_cubic, n, edges(), seed)
        name = f"{title} inflated, seed {seed}"
        source = ALSPACH if title.startswith("GP") else SNARKS
        yield plant(name, "inflated", planted, "impossible", source, 5 * n)
    for seed, n in enumerate((5, 11, 17, 23, 29), start=451):
        planted = partial(seeded.inflated_doubled, n, seed)
        name = f"GP({n},2) doubled and inflated, seed {seed}"
        yield plant(name, "inflated", planted, "impossible", MEREDITH, 14 * n)
    for seed, n in enumerate((30, 100, 300), start=501):
        planted = partial(seeded.random_cubic, n, seed)
        name = f"random cubic {n}, seed {seed}"
        yield plant(name, "random-cubic", planted, None, UNKNOWN, n)


def build_suite() -> tuple[Instance, ...]:
    """Return all instances in their fixed order; names are all different."""
    return (
        *number_rules(),
        *boards(),
        *cubic_families(),
        *named(),
        *separators(),
        *blocks(),
    )
