"""Counting arguments: sound by exhaustion, and as strong as published facts ask."""

from __future__ import annotations

import itertools
import math
import random

import igraph
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.evidence.counting import Counting
from certify.graph.graph import Edge, Graph
from certify.graph.question import Question, build_cycle_question, build_path_question
from certify.search import counting as counting_module
from certify.search.budget import Budget
from certify.search.counting import CountingProgram, find_counting
from certify.search.exact import OPEN, USED, Tally, holds
from certify.search.facts import Fact, FactMaker, write_counting
from tests.brute import cycle_edges, hamiltonian_cycles, has_cycle, questions

MINUTE = 60.0

SUBDIVIDED_PRISM = [
    *[(0, 1), (0, 2), (1, 2), (3, 4), (3, 5), (4, 5)],
    *[(0, 6), (3, 6), (1, 7), (4, 7), (2, 8), (5, 8)],
]


def evaluate(question: Question, counting: Counting) -> tuple[dict[Edge, int], int, int]:
    """Return scores, need and offer, straight from FORMAT.md, section 6."""
    y = dict(counting.vertex)

    def leaves(e: Edge, side: tuple[int, ...]) -> bool:
        return (e[0] in side) != (e[1] in side)

    score = {
        e: y.get(e[0], 0)
        + y.get(e[1], 0)
        + sum(z for side, z in counting.cut if leaves(e, side))
        + sum((-z if e in odd else z) for side, odd, z in counting.parity if leaves(e, side))
        for e in question.edges
    }
    need = 2 * sum(y.values()) + 2 * sum(z for _, z in counting.cut)
    need += sum(z * (1 - len(odd)) for _, odd, z in counting.parity)
    offer = sum(s if e in question.required else max(0, s) for e, s in score.items())
    return score, need, offer


def is_well_formed(question: Question, counting: Counting) -> bool:
    """Return whether the lists are as FORMAT.md, section 6, wants them."""
    sides = [side for side, *_ in (*counting.cut, *counting.parity)]
    flipped = all(
        len(odd) % 2 == 1
        and list(odd) == sorted(set(odd))
        and all(e in question.edge_set and (e[0] in side) != (e[1] in side) for e in odd)
        for side, odd, _ in counting.parity
    )
    vertices = [v for v, _ in counting.vertex]
    return (
        flipped
        and vertices == sorted(set(vertices))
        and all(y for _, y in counting.vertex)
        and all(entry[-1] > 0 for entry in (*counting.cut, *counting.parity))
        and all(0 < len(s) < question.n and list(s) == sorted(set(s)) for s in sides)
    )


def cycle(n: int, edges: list[Edge]) -> Question:
    return build_cycle_question(Graph(tuple(range(n)), tuple(sorted(edges))))


def path(n: int, edges: list[Edge]) -> Question:
    return build_path_question(Graph(tuple(range(n)), tuple(sorted(edges))))


def famous(name: str) -> tuple[int, list[Edge]]:
    graph = igraph.Graph.Famous(name)
    return graph.vcount(), [(min(e), max(e)) for e in graph.get_edgelist()]


def knight(rows: int, columns: int) -> tuple[int, list[Edge]]:
    cells = list(itertools.product(range(rows), range(columns)))
    return len(cells), [
        (i, j)
        for (i, (a, b)), (j, (c, d)) in itertools.combinations(enumerate(cells), 2)
        if {abs(a - c), abs(b - d)} == {1, 2}
    ]


def square_sums(n: int) -> tuple[int, list[Edge]]:
    pairs = itertools.combinations(range(1, n + 1), 2)
    return n, [(a - 1, b - 1) for a, b in pairs if math.isqrt(a + b) ** 2 == a + b]


def settled(question: Question, *, shortest: bool = False) -> bool:
    counting = find_counting(question, budget=Budget.of(MINUTE), shortest=shortest)
    if counting is None:
        return False
    _, need, offer = evaluate(question, counting)
    assert is_well_formed(question, counting)
    assert need > offer
    return True


# --- soundness, by exhaustion


@settings(deadline=None, max_examples=150, derandomize=True)
@given(question=questions(), shortest=st.booleans())
def test_only_questions_without_a_cycle_are_refuted(question: Question, shortest: bool) -> None:
    if settled(question, shortest=shortest):
        assert not has_cycle(question)


@st.composite
def weighted_facts(draw: st.DrawFn) -> tuple[Question, list[Fact], list[int]]:
    """Draw a question with a Hamiltonian cycle, and weights for random facts."""
    n = draw(st.integers(4, 7))
    order = draw(st.permutations(range(n)))
    planted = sorted(cycle_edges(tuple(order)))
    extra = draw(st.sets(st.sampled_from(list(itertools.combinations(range(n), 2)))))
    edges = tuple(sorted(extra | set(planted)))
    question = Question(n, edges, draw(st.frozensets(st.sampled_from(planted), max_size=3)))
    maker = FactMaker(question)
    facts = maker.degrees()
    weights = [draw(st.integers(-3, 3)) for _ in facts]
    sides = st.sets(st.integers(0, n - 1), min_size=1, max_size=n - 1)
    for _ in range(draw(st.integers(0, 3))):
        facts.append(maker.cut(tuple(sorted(draw(sides)))))
    for _ in range(draw(st.integers(1, 3))):
        side = tuple(sorted(draw(sides)))
        leaving = st.sampled_from(maker.leaving(side))
        odd = draw(st.sets(leaving, min_size=1).filter(lambda chosen: len(chosen) % 2 == 1))
        facts.append(maker.parity(side, odd))
    weights += [draw(st.integers(0, 3)) for _ in facts[n:]]
    return question, facts, weights


@settings(deadline=None, max_examples=150, derandomize=True)
@given(drawn=weighted_facts())
def test_every_cycle_scores_between_need_and_offer(
    drawn: tuple[Question, list[Fact], list[int]],
) -> None:
    question, facts, weights = drawn
    counting = write_counting(facts, weights)
    score, need, offer = evaluate(question, counting)
    scores = [sum(score[e] for e in cycle_edges(h)) for h in hamiltonian_cycles(question)]
    assert scores
    assert need <= min(scores)
    assert max(scores) <= offer
    assert not holds(question, counting)
    tally = Tally(facts, [USED if e in question.required else OPEN for e in question.edges])
    for i, w in enumerate(weights):
        tally.change(i, w)
    assert tally.margin == need - offer
    assert tally.margin_after(0, 1) == tally.margin + 2 - _offered(question, facts, weights)


def _offered(question: Question, facts: list[Fact], weights: list[int]) -> int:
    """Return by how much the offer grows with weight 0."""
    before = evaluate(question, write_counting(facts, weights))[2]
    return evaluate(question, write_counting(facts, [weights[0] + 1, *weights[1:]]))[2] - before


# --- published facts


@pytest.mark.parametrize(
    ("rows", "columns"),
    [(r, c) for r in range(1, 8) for c in range(max(r, 3), 41) if r * c <= 40],
)
def test_knight_boards_without_a_tour(rows: int, columns: int) -> None:
    # Closed: Schwenk, Math. Mag. 64 (1991) 325-332. Open: Cull and De Curtins, Fibonacci
    # Quarterly 16 (1978), and Chia and Ong, Discr. Appl. Math. 150 (2005) 80-98.
    closed = not (
        (rows % 2 and columns % 2) or rows in {1, 2, 4} or (rows == 3 and columns in {4, 6, 8})
    )
    opened = (
        (rows == 3 and (columns == 4 or columns >= 7)) or (rows == 4 and columns >= 5) or rows >= 5
    )
    n, edges = knight(rows, columns)
    assert settled(cycle(n, edges)) == (not closed)
    assert settled(path(n, edges)) == (not opened)


@pytest.mark.parametrize("n", range(2, 31))
def test_square_sum_paths(n: int) -> None:
    # oeis.org/A090461 and A078107: a path exists for 15, 16, 17, 23 and all n >= 25.
    exists = n in {15, 16, 17, 23} or n >= 25
    assert settled(path(*square_sums(n))) == (not exists)


def test_square_sum_cycles() -> None:
    # oeis.org/A071984: a cycle exists for n >= 32 alone. For n = 31 all degrees are at
    # least 2, and the facts are satisfied fractionally (own computation).
    assert [n for n in range(3, 41) if not settled(cycle(*square_sums(n)))] == list(range(31, 41))


@pytest.mark.parametrize("name", ["Herschel", "Walther", "Zachary", "Krackhardt_Kite"])
def test_named_graphs_that_are_settled(name: str) -> None:
    # Herschel: bipartite with 5 and 6 vertices (common knowledge). Walther, Zachary and the
    # kite have vertices of degree 1.
    assert settled(cycle(*famous(name)))


@pytest.mark.parametrize("name", ["Petersen", "Coxeter", "Tutte"])
def test_cubic_graphs_without_a_cycle_stay_open(name: str) -> None:
    # Edmonds (1965): x = 2/3 satisfies every degree, cut and parity fact of a cubic graph
    # without bridges, since 1/3 on every edge is in its perfect matching polytope.
    question = cycle(*famous(name))
    program = CountingProgram(question)
    assert program.refute(budget=Budget.of(MINUTE)) is None
    x = program.fractional()
    assert x is not None
    assert any(1e-6 < value < 1 - 1e-6 for value in x.values())
    maker = FactMaker(question)
    two_thirds = dict.fromkeys(range(question.m), 2 / 3)
    for fact in (*maker.degrees(), *program.pool):
        assert sum(sign * two_thirds[e] for e, sign in fact.terms) >= fact.bound - 1e-9


@pytest.mark.parametrize("parts", [(3, 4), (5, 7), (4, 9)])
def test_unequal_classes(parts: tuple[int, int]) -> None:
    # A bipartite graph with a Hamiltonian cycle has equal classes (common knowledge).
    small, large = parts
    edges = [(u, small + v) for u in range(small) for v in range(large)]
    assert settled(cycle(small + large, edges))
    assert settled(path(small + large, edges)) == (large > small + 1)


def test_parity_is_needed_and_found_for_the_subdivided_prism() -> None:
    # Three forced edges cross from one triangle to the other, and a cycle crosses an
    # even number of times.
    question = cycle(9, SUBDIVIDED_PRISM)
    counting = find_counting(question, budget=Budget.of(MINUTE))
    assert counting is not None
    assert counting.parity
    # Without parity: 1/2 on the triangles and 1 elsewhere satisfies degrees and cuts.
    x = [1.0 if v > 5 else 0.5 for _, v in question.edges]
    maker = FactMaker(question)
    cuts = [maker.cut(side) for k in range(1, 9) for side in itertools.combinations(range(9), k)]
    assert all(sum(x[e] for e, _ in fact.terms) == 2 for fact in maker.degrees())
    assert all(sum(x[e] for e, _ in fact.terms) >= 2 for fact in cuts)


def test_required_edges_count_with_negative_scores() -> None:
    # Two required edges at vertex 0 rule out the third, which is required too.
    question = Question(
        4, tuple(itertools.combinations(range(4), 2)), frozenset({(0, 1), (0, 2), (0, 3)})
    )
    counting = find_counting(question, budget=Budget.of(MINUTE))
    assert counting is not None
    assert counting.vertex == ((0, -1),)


# --- exactness, shortness, warm starts


@settings(deadline=None, max_examples=60, derandomize=True)
@given(question=questions(least=5))
def test_no_fact_is_redundant_and_shortest_is_no_longer(question: Question) -> None:
    counting = find_counting(question, budget=Budget.of(MINUTE))
    if counting is None:
        return
    shorter = find_counting(question, budget=Budget.of(MINUTE), shortest=True)
    assert shorter is not None
    assert shorter.length <= counting.length
    for part in ("vertex", "cut", "parity"):
        entries = getattr(shorter, part)
        for i in range(len(entries)):
            others = {p: getattr(shorter, p) for p in ("vertex", "cut", "parity")}
            others[part] = entries[:i] + entries[i + 1 :]
            assert not holds(question, Counting(**others))


def test_a_warm_program_agrees_with_a_cold_one() -> None:
    question = cycle(*famous("Coxeter"))
    rng = random.Random(7)
    program = CountingProgram(question)
    answers = set()
    for _ in range(60):
        chosen = rng.sample(question.edges, rng.randint(2, 8))
        used, removed = chosen[: len(chosen) // 3], chosen[len(chosen) // 3 :]
        warm = program.refute(used, removed, budget=Budget.of(MINUTE))
        derived = question.assume(used, removed)
        cold = find_counting(derived, budget=Budget.of(MINUTE))
        assert (warm is None) == (cold is None)
        answers.add(warm is None)
        x = program.fractional()
        if warm is None:
            assert x is not None
            assert all(x[e] > 1 - 1e-6 for e in used)
            assert all(x[e] < 1e-6 for e in removed)
            for v in range(question.n):
                assert sum(x[min(v, w), max(v, w)] for w in question.neighbours[v]) == (
                    pytest.approx(2)
                )
        else:
            assert x is None
            assert holds(derived, warm)
            assert is_well_formed(derived, warm)
            _, need, offer = evaluate(derived, warm)
            assert need > offer
    assert answers == {True, False}


def test_parity_facts_without_removed_edges() -> None:
    edges = tuple((u, v) for u in range(5) for v in range(5, 10))
    maker = FactMaker(Question(10, edges))
    fact = maker.parity((0, 1, 2, 3, 4), [0, 6, 12, 18, 24])
    assert maker.without(fact, frozenset({(0, 6)})) is fact
    assert maker.without(fact, frozenset({(0, 5)})) is None
    stronger = maker.without(fact, frozenset({(0, 5), (1, 6)}))
    assert stronger == maker.parity((0, 1, 2, 3, 4), [12, 18, 24])
    assert (fact.bound, stronger.bound) == (-4, -2)


def test_thinning_out_the_pool_changes_no_answer(monkeypatch: pytest.MonkeyPatch) -> None:
    question = cycle(*famous("Tutte"))
    cases = [random.Random(seed).sample(question.edges, 3) for seed in range(30)]
    answers, largest = [], []
    for size in (200, 2):
        monkeypatch.setattr(counting_module, "_POOL_SIZE", size)
        monkeypatch.setattr(counting_module, "_POOL_PER_VERTEX", 0)
        program = CountingProgram(question)
        found, pools = [], []
        for e, f, g in cases:
            found.append(program.refute([e], [f, g], budget=Budget.of(MINUTE)) is None)
            pools.append(len(program.pool))
        answers.append(found)
        largest.append(pools[-1])
    assert answers[0] == answers[1]
    assert largest[1] < largest[0]


def test_the_same_input_gives_the_same_bytes() -> None:
    for build in (lambda: path(*square_sums(24)), lambda: cycle(*knight(3, 8))):
        bodies = [
            find_counting(build(), budget=Budget.of(MINUTE), shortest=shortest)
            for shortest in (False, False, True, True)
        ]
        assert None not in bodies
        assert bodies[0] == bodies[1]
        assert bodies[2] == bodies[3]


def test_a_spent_budget_gives_nothing() -> None:
    program = CountingProgram(cycle(*knight(4, 4)))
    assert program.refute(budget=Budget.of(0)) is None
    assert program.fractional() is None


def test_nothing_is_printed(capfd: pytest.CaptureFixture[str]) -> None:
    assert settled(cycle(*knight(4, 4)), shortest=True)
    assert capfd.readouterr() == ("", "")
