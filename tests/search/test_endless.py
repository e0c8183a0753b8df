"""Endless claims: against the finite search, against published theorems, and by the pieces."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.claim import read_claim
from certify.evidence.endless import Endless, find_recipe, read_answers
from certify.evidence.sweep import Sweep
from certify.graph.question import Question
from certify.graph.strip import Strip, read_strip
from certify.search.budget import Budget
from certify.search.endless import find_endless, sweep_class
from certify.search.ladder import Limits
from certify.search.lengthen import lengthen
from certify.search.strand import Allowance, Strand
from certify.search.sweep import find_sweep
from certify.search.witness import is_cycle

AMPLE = 600.0
PATH, CYCLE = "hamiltonian-path", "hamiltonian-cycle"
NUMBERS = 'vertices = "1..n"'
BOARD = 'vertices = {{ x = "1..n", y = "1..{}" }}'
TWO_ROUNDS = 'vertices = { y = "0..1", x = "0..n - 1" }'


def petersen(k: int) -> str:
    return (
        "(a.x - b.x) % n in {1, n - 1} if a.y == b.y == 0 else "
        f"(a.x - b.x) % n in {{{k}, n - {k}}} if a.y == b.y else a.x == b.x"
    )


def leaper(r: int, s: int) -> str:
    return f"{{abs(a.x - b.x), abs(a.y - b.y)}} == {{{r}, {s}}}"


@cache
def strip_of(graph: str, adjacent: str, structure: str, low: int = 1) -> Strip:
    with TemporaryDirectory() as folder:
        path = Path(folder) / "claim.toml"
        path.write_text(
            f'structure = "{structure}"\n[graph]\n{graph}\nadjacent = "{adjacent}"\n'
            f'[instances]\nn = "{low}.."\n'
        )
        claim = read_claim(path)
        return read_strip(claim, claim.rows[0])


@cache
def settled(graph: str, adjacent: str, structure: str, low: int = 1) -> tuple[Strip, Endless]:
    strip = strip_of(graph, adjacent, structure, low)
    evidence = find_endless(strip, Limits(AMPLE))
    assert evidence is not None
    return strip, evidence


def exists_by_finite_search(question: Question) -> bool:
    found = find_sweep(question, budget=Budget.of(AMPLE))
    assert found is not None
    return not isinstance(found, Sweep)


HOPS = [(2, 5), (3, 5), (4, 7), (5, 8), (3, 8), (6, 10)]


@pytest.mark.parametrize("structure", [PATH, CYCLE])
@pytest.mark.parametrize("hops", HOPS)
def test_hops_agree_with_the_finite_search(hops: tuple[int, int], structure: str) -> None:
    strip, evidence = settled(NUMBERS, f"abs(a - b) in {{{hops[0]}, {hops[1]}}}", structure)
    answers = read_answers(evidence.body())
    finite = range(3, strip.first, 3 if strip.zone > 8 else 1)
    for n in [*finite, *range(strip.first, strip.first + 4)]:
        found = exists_by_finite_search(strip.question(n, strip.graph(n)))
        assert (n in answers) == found, n


THEOREMS: list[tuple[str, str, str, int, Callable[[int], bool]]] = [
    # Schwenk, Math. Mag. 64 (1991) 325-332: which boards have a closed knight's tour.
    (BOARD.format(1), leaper(1, 2), CYCLE, 1, lambda n: False),
    (BOARD.format(2), leaper(1, 2), CYCLE, 2, lambda n: False),
    (BOARD.format(3), leaper(1, 2), CYCLE, 3, lambda n: n % 2 == 0 and n >= 10),
    (BOARD.format(4), leaper(1, 2), CYCLE, 4, lambda n: False),
    # Open tours: Cull and De Curtins, Fib. Quart. 16 (1978) 276-285, for both sides >= 5;
    # 3 x n and 4 x n as in Conrad, Hindrichs, Morsy, Wegener, Discr. Appl. Math. 50 (1994).
    (BOARD.format(2), leaper(1, 2), PATH, 2, lambda n: False),
    (BOARD.format(3), leaper(1, 2), PATH, 3, lambda n: n == 4 or n >= 7),
    (BOARD.format(4), leaper(1, 2), PATH, 4, lambda n: n >= 5),
    # A leaper that moves (r, s) with r + s even never changes the colour; boards lower than
    # r + s are not connected (Knuth, Leaper graphs, Math. Gazette 78 (1994) 274-297).
    (BOARD.format(3), leaper(1, 3), PATH, 4, lambda n: False),
    (BOARD.format(4), leaper(2, 3), PATH, 4, lambda n: False),
    # Alspach, J. Combin. Theory B 34 (1983) 293-312: GP(n, k), n > 2k, has no cycle exactly
    # for n = 5 mod 6 and k = 2 (or isomorphic to that, which k = 3 is for n = 7 only).
    (TWO_ROUNDS, petersen(1), CYCLE, 3, lambda n: True),
    (TWO_ROUNDS, petersen(2), CYCLE, 5, lambda n: n % 6 != 5),
    (TWO_ROUNDS, petersen(2), PATH, 5, lambda n: True),
    (TWO_ROUNDS, petersen(3), CYCLE, 7, lambda n: True),
    # Circulant graphs, connected and of degree 3 or more, are Hamiltonian, as all Cayley
    # graphs of abelian groups are (Chen and Quimpo, LNM 884 (1981) 23-34).
    ('vertices = "0..n - 1"', "(a - b) % n in {2, n - 2, 3, n - 3}", CYCLE, 5, lambda n: True),
    ('vertices = "0..n - 1"', "(a - b) % n in {1, 4, n - 1, n - 4}", CYCLE, 5, lambda n: True),
    (
        'vertices = "0..n - 1"',
        "(a - b) % n in {2, n - 2, 4, n - 4}",
        CYCLE,
        9,
        lambda n: n % 2 == 1,
    ),
    # Common practice: paths, cycles and grids (a grid of even size has a cycle).
    (NUMBERS, "abs(a - b) == 1", PATH, 1, lambda n: True),
    (NUMBERS, "abs(a - b) == 1", CYCLE, 1, lambda n: False),
    (NUMBERS, "abs(a - b) in {1, n - 1}", CYCLE, 3, lambda n: True),
    (BOARD.format(3), "abs(a.x - b.x) + abs(a.y - b.y) == 1", CYCLE, 2, lambda n: n % 2 == 0),
    (BOARD.format(2), "abs(a.x - b.x) + abs(a.y - b.y) == 1", CYCLE, 2, lambda n: True),
    # Hops of 2 and 3: a row of all numbers is easy; hops of 2 and 4 keep the parity.
    (NUMBERS, "abs(a - b) in {2, 4}", PATH, 2, lambda n: False),
]


@pytest.mark.parametrize(("graph", "rule", "structure", "low", "holds"), THEOREMS)
def test_published_theorems_for_every_n(
    graph: str, rule: str, structure: str, low: int, holds: Callable[[int], bool]
) -> None:
    strip, evidence = settled(graph, rule, structure, low)
    answers = read_answers(evidence.body())
    last = strip.first + 200
    assert [n for n in range(low, last) if n in answers] == [
        n for n in range(low, last) if holds(n)
    ]


def test_a_periodic_pattern_of_holes_agrees_with_the_finite_search() -> None:
    graph = BOARD.format(3) + '\nwhere = "not (x % 3 == 0 and y == 2)"'
    strip, evidence = settled(graph, "abs(a.x - b.x) + abs(a.y - b.y) == 1", PATH)
    answers = read_answers(evidence.body())
    assert (evidence.modulus, len(evidence.classes)) == (3, 3)
    assert answers.period == 3
    for n in range(1, strip.first + 6):
        question = strip.question(n, strip.graph(n))
        assert (n in answers) == exists_by_finite_search(question)


@pytest.mark.parametrize(("graph", "rule", "structure", "low", "holds"), THEOREMS)
def test_recipes_can_be_pumped(
    graph: str, rule: str, structure: str, low: int, holds: Callable[[int], bool]
) -> None:
    strip, evidence = settled(graph, rule, structure, low)
    body = evidence.body()
    large = range(strip.first + 36, strip.first + 48)
    reached = []
    for n in large:
        recipe = find_recipe(body, n)
        if recipe is None:
            continue
        reached.append(n)
        times = (n - recipe.n) // recipe.step
        labels = lengthen(strip, recipe, strip.graph(recipe.n), times)
        graph_n = strip.graph(n)
        number = {label: v for v, label in enumerate(graph_n.labels)}
        cycle = [number[label] for label in labels]
        if structure == PATH:
            cycle.append(graph_n.n)
        assert is_cycle(strip.question(n, graph_n), cycle)
    assert reached == [n for n in large if holds(n)]


@settings(max_examples=25)
@given(
    st.sets(st.integers(1, 4), min_size=1, max_size=2),
    st.integers(1, 3),
    st.sets(st.integers(0, 2), min_size=1),
    st.integers(1, 4),
    st.sampled_from([PATH, CYCLE]),
)
def test_random_differences_with_residues_agree_with_the_finite_search(
    hops: set[int], modulus: int, residues: set[int], other: int, structure: str
) -> None:
    """Where a + b has one of the residues the differences are allowed, elsewhere another one."""
    rule = (
        f"abs(a - b) in {{{', '.join(map(str, sorted(hops)))}}} "
        f"if (a + b) % {modulus} in {{{', '.join(map(str, sorted(residues)))}}} "
        f"else abs(a - b) == {other}"
    )
    strip = strip_of(NUMBERS, rule, structure)
    for place in range(strip.modulus):
        part = sweep_class(strip, strip.first + place, Allowance(Budget.of(AMPLE)))
        assert part is not None
        for i in (0, 1, 2):
            n = strip.first + place + i * strip.modulus
            question = strip.question(n, strip.graph(n))
            assert part.exists(i) == exists_by_finite_search(question)


def test_the_sets_are_the_same_in_every_longer_graph() -> None:
    """T(i), made in the graph of n(0), has the size of the states of a plain sweep for n(i)."""
    strip = strip_of(NUMBERS, "abs(a - b) in {2, 3}", PATH)
    part = sweep_class(strip, strip.first, Allowance(Budget.of(AMPLE)))
    assert part is not None
    for i, size in enumerate(part.result.states):
        strand = Strand(strip, strip.first + i * strip.modulus, Allowance(Budget.of(AMPLE)))
        start = strand.start()
        assert start is not None
        assert start.size == size


def test_same_input_same_evidence() -> None:
    strip, evidence = settled(NUMBERS, "abs(a - b) in {3, 5}", PATH)
    assert find_endless(strip, Limits(AMPLE)) == evidence


def test_a_limit_that_is_reached_leaves_the_row_open() -> None:
    strip = strip_of(NUMBERS, "abs(a - b) in {4, 7}", PATH)
    assert find_endless(strip, Limits(AMPLE, memory=1 << 12)) is None
    assert find_endless(strip, Limits(1e-9)) is None


def test_too_many_states_leave_the_row_open(monkeypatch: pytest.MonkeyPatch) -> None:
    strip = strip_of(NUMBERS, "abs(a - b) in {4, 7}", PATH)
    monkeypatch.setattr("certify.search.strand.MOST_STATES", 1_000)
    assert find_endless(strip, Limits(AMPLE)) is None
