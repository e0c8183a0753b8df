"""Graphs from rules, and questions in normal form."""

from __future__ import annotations

from itertools import pairwise, permutations
from pathlib import Path

import networkx as nx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.claim import Claim, read_claim
from certify.claim.parts import STRUCTURES
from certify.errors import ClaimError, GraphFileError
from certify.graph.build import build_graph, build_question, instances
from certify.graph.graph import Graph
from certify.graph.question import BUILDERS, Question
from tests.brute import has_cycle

STRUCTURE = 'structure = "hamiltonian-path"\n'


def claim_of(folder: Path, text: str) -> Claim:
    path = folder / "claim.toml"
    path.write_text(text, encoding="utf-8")
    return read_claim(path)


def rule(folder: Path, vertices: str, adjacent: str, rest: str = "", top: str = STRUCTURE) -> Claim:
    """Return a claim whose graphs come from a rule."""
    text = f"{top}[graph]\nvertices = {vertices}\nadjacent = '{adjacent}'\n{rest}"
    return claim_of(folder, text)


def only_graph(claim: Claim, **key: int) -> Graph:
    return build_graph(claim, key)


def test_squares_up_to_fifteen(tmp_path: Path) -> None:
    """The one order of 1..15 in which neighbours sum to squares (OEIS A090460, from memory)."""
    graph = only_graph(rule(tmp_path, '"1..15"', "square(a + b)"))
    assert graph.labels == tuple(range(1, 16))
    order = [8, 1, 15, 10, 6, 3, 13, 12, 4, 5, 11, 14, 2, 7, 9]
    steps = {(min(p) - 1, max(p) - 1) for p in pairwise(order)}
    assert steps <= set(graph.edges)
    # The pairs a < b <= 15 with a + b = 4, 9, 16, 25: 1 + 4 + 7 + 3 of them.
    assert graph.m == 15


@pytest.mark.parametrize(("m", "n"), [(3, 3), (3, 4), (4, 5), (5, 8), (8, 8)])
def test_knight_boards(tmp_path: Path, m: int, n: int) -> None:
    """Knight moves on m x n: 2(m-1)(n-2) + 2(m-2)(n-1) (common practice; 168 on 8 x 8)."""
    board = '{ x = "1..m", y = "1..n" }'
    leap = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
    claim = rule(tmp_path, board, leap, '[instances]\nm = "1..8"\nn = "1..8"\n')
    graph = only_graph(claim, m=m, n=n)
    assert graph.m == 2 * (m - 1) * (n - 2) + 2 * (m - 2) * (n - 1)
    assert graph.labels == tuple((x, y) for x in range(1, m + 1) for y in range(1, n + 1))


def test_generalised_petersen_graphs(tmp_path: Path) -> None:
    rim = "a.x == 0 and b.x == 0 and (a.y - b.y) % n in {1, n - 1}"
    star = "a.x == 1 and b.x == 1 and (a.y - b.y) % n in {k, n - k}"
    spoke = "a.x != b.x and a.y == b.y"
    rest = '[instances]\nn = "3..9"\nk = "1..(n - 1) // 2"\n'
    ring = '{ x = "0..1", y = "0..n - 1" }'
    claim = rule(tmp_path, ring, f"{rim} or {star} or {spoke}", rest)
    known = {(5, 2): nx.petersen_graph(), (4, 1): nx.cubical_graph()}
    known |= {(8, 3): nx.moebius_kantor_graph()}  # G(8,3), Coxeter 1950 (from memory)
    for (n, k), expected in known.items():
        found = only_graph(claim, n=n, k=k)
        assert nx.is_isomorphic(nx.Graph(found.edges), expected)


def test_where_drops_vertices(tmp_path: Path) -> None:
    square = '{ x = "1..3", y = "1..3" }'
    near = "abs(a.x - b.x) + abs(a.y - b.y) == 1"
    graph = only_graph(rule(tmp_path, square, near, "where = 'not (x == 2 and a.y == 2)'\n"))
    assert nx.is_isomorphic(nx.Graph(graph.edges), nx.cycle_graph(8))
    graph = only_graph(rule(tmp_path, '"1..9"', "a + b == 10", "where = 'a % 2 == 1'\n"))
    assert graph == Graph((1, 3, 5, 7, 9), ((0, 4), (1, 3)))


def test_small_ranges(tmp_path: Path) -> None:
    rest = '[instances]\nn = "0..2"\n'
    claim = rule(tmp_path, '"1..n"', "a != b", rest)
    assert [(i.graph.n, i.graph.m) for i in instances(claim, tmp_path)] == [(0, 0), (1, 0), (2, 1)]
    assert [i.name for i in instances(claim, tmp_path)] == ["n=0", "n=1", "n=2"]
    empty = rule(tmp_path, '{ x = "1..0", y = "1..1000000" }', "a.x == b.x")
    assert only_graph(empty).n == 0


@settings(deadline=None)
@given(st.integers(1, 12), st.integers(-3, 3), st.integers(1, 5), st.integers(0, 4))
def test_graph_is_that_of_the_definition(
    tmp_path_factory: pytest.TempPathFactory, n: int, low: int, q: int, r: int
) -> None:
    folder = tmp_path_factory.getbasetemp()
    text = f"(a * b + a + b) % {q} == {r} or abs(a - b) == {r}"
    graph = only_graph(rule(folder, f'"{low}..{low + n - 1}"', text))
    names = range(low, low + n)
    expected = {
        (a - low, b - low)
        for a in names
        for b in names
        if a < b and ((a * b + a + b) % q == r or abs(a - b) == r)
    }
    assert graph == Graph(tuple(names), tuple(sorted(expected)))


@pytest.mark.parametrize(
    ("vertices", "adjacent", "rest", "words"),
    [
        ('"1..9"', "a < b", "", [":4: [graph] adjacent", "not symmetric", "a = 1, b = 2"]),
        ('"1..9"', "a - b == 8", "", ["not symmetric: false for a = 1, b = 9 and true for"]),
        ('"1..n"', "a == 1", "[instances]\nn = '2..3'\n", ["(instance n=2, between 1 and 2)"]),
        ('{ x = "1..2", y = "1..2" }', "a.x < b.x", "", ["a = (1, 1), b = (2, 1)"]),
        ('"1..9"', "1 // (a - 3) == 9", "", ["division by zero", "(between 1 and 3)"]),
        ('"1..9"', "a * 10 ** 12 * b * 10 ** 12 == 0", "", ["beyond 2^53", "(between 1 and 2)"]),
        ('"1..9"', "a != b", "where = '1 // (a - 3) < 9'\n", [":5:", "zero", "(at 3)"]),
        ('"3..1"', "a != b", "", [":3: [graph] vertices", "3..1 runs backwards"]),
        ('"1..n - 5"', "a != b", "[instances]\nn = '2..9'\n", ["backwards", "(instance n=2)"]),
        ('"1..4001"', "a != b", "", [":3: [graph] vertices", "4,001", "4,000"]),
        ('"1..100001"', "a != b", "", ["100,001", "100,000"]),
        ('"1..2 ** 53"', "a != b", "", ["100,000"]),
        ('{ x = "1..400", y = "1..400" }', "a != b".replace("a", "a.x").replace("b", "b.x"), "",
         ["160,000"]),
        ('"1..1 // 0"', "a != b", "", ["division by zero"]),
    ],
)  # fmt: skip
def test_rules_that_fail(
    tmp_path: Path, vertices: str, adjacent: str, rest: str, words: list[str]
) -> None:
    claim = rule(tmp_path, vertices, adjacent, rest)
    with pytest.raises(ClaimError) as caught:
        next(instances(claim, tmp_path))
    message = str(caught.value)
    assert message.startswith(f"{tmp_path / 'claim.toml'}:")
    for word in words:
        assert word in message, message


def test_rule_is_not_asked_about_one_vertex_twice(tmp_path: Path) -> None:
    assert only_graph(rule(tmp_path, '"1..5"', "10 // (a - b) == 10 // (a - b)")).m == 10


def test_limits_themselves_are_allowed(tmp_path: Path) -> None:
    claim = rule(tmp_path, '"1..100000"', "false", "where = 'a % 50 == 0'\n")
    assert only_graph(claim).n == 2000


def listed(folder: Path, top: str, content: str, name: str = "list.txt") -> Claim:
    (folder / name).write_text(content, encoding="utf-8")
    return claim_of(folder, f'{top}[graph]\nlist = "{name}"\n')


def test_instances_of_a_list(tmp_path: Path) -> None:
    claim = listed(tmp_path, STRUCTURE, "A_\nBw\n", "list.g6")
    found = list(instances(claim, tmp_path))
    assert [(i.key, i.name, i.graph.m, i.source) for i in found] == [
        (1, "1", 1, b"A_\n"),
        (2, "2", 3, b"Bw\n"),
    ]
    with pytest.raises(ClaimError, match="no rule"):
        build_graph(claim, {})
    with pytest.raises(GraphFileError, match=r"list\.g6"):
        next(instances(claim, tmp_path / "elsewhere"))


def test_vertices_of_a_list_go_by_name(tmp_path: Path) -> None:
    text = "1 01\n01 two\n"
    for ends, expected in [
        ('["1", "two"]', {(0, 3), (2, 3)}),
        ('[1, "01"]', {(0, 3), (1, 3)}),
    ]:
        claim = listed(tmp_path, f"{STRUCTURE}ends = {ends}\n", text)
        [instance] = instances(claim, tmp_path)
        assert build_question(claim, 1, instance.graph).required == expected
    for ends in ('["001"]', "[2]", '["Two"]', '[""]'):
        claim = listed(tmp_path, f"{STRUCTURE}ends = {ends}\n", text)
        assert build_question(claim, 1, instance.graph).absent
    for ends, present in [('["0"]', True), ("[1]", True), ('["00"]', False), ("[-1]", False)]:
        claim = listed(tmp_path, f"{STRUCTURE}ends = {ends}\n", "A_\n", "list.g6")
        [instance] = instances(claim, tmp_path)
        assert build_question(claim, 1, instance.graph).absent is not present


def test_every_structure_has_a_question() -> None:
    assert set(STRUCTURES) == set(BUILDERS)


def question_of(folder: Path, top: str, vertices: str = '"1..4"') -> Question:
    claim = rule(folder, vertices, "abs(a - b) == 1", top=top)
    return build_question(claim, {}, only_graph(claim))


def test_questions_about_a_path_of_four(tmp_path: Path) -> None:
    inner = ((0, 1), (1, 2), (2, 3))
    free = question_of(tmp_path, STRUCTURE)
    assert (free.n, free.apex, free.required, free.absent) == (5, 4, frozenset(), False)
    assert free.edges == tuple(sorted([*inner, (0, 4), (1, 4), (2, 4), (3, 4)]))
    one = question_of(tmp_path, STRUCTURE + "ends = [2]\n")
    assert (one.edges, one.required) == (free.edges, {(1, 4)})
    two = question_of(tmp_path, STRUCTURE + 'ends = [4, "2 - 1"]\n')
    assert two.edges == tuple(sorted([*inner, (0, 4), (3, 4)]))
    assert two.required == {(0, 4), (3, 4)}
    same = question_of(tmp_path, STRUCTURE + "ends = [2, 2]\n")
    assert (same.required, same.absent) == ({(1, 4)}, False)
    cycle = question_of(tmp_path, 'structure = "hamiltonian-cycle"\nrequired = [[2, 1]]\n')
    assert (cycle.n, cycle.apex, cycle.edges, cycle.required) == (4, None, inner, {(0, 1)})


@pytest.mark.parametrize(
    ("top", "absent"),
    [
        ("ends = [5]", True),
        ("ends = [1, 5]", True),
        ("ends = [0, 5]", True),
        ("ends = [1]", False),
        ("required = [[1, 3]]", True),
        ("required = [[1, 1]]", True),
        ("required = [[4, 5]]", True),
        ("required = [[1, 2], [3, 1]]", True),
        ("required = [[3, 2]]", False),
        ("required = [[3, 2]]\nforbidden = [[2, 3]]", True),
        ("required = [[3, 2]]\nforbidden = [[1, 2]]", False),
        ("forbidden = [[1, 3], [2, 2], [4, 5], [8, 9]]", False),
    ],
)
def test_what_is_absent(tmp_path: Path, top: str, absent: bool) -> None:
    for structure in STRUCTURES:
        if top.startswith("ends") and "ends" not in STRUCTURES[structure]:
            continue
        question = question_of(tmp_path, f'structure = "{structure}"\n{top}\n')
        assert question.absent is absent
        assert question.required <= question.edge_set


def test_forbidden_edges_are_gone(tmp_path: Path) -> None:
    question = question_of(tmp_path, STRUCTURE + "forbidden = [[3, 2], [9, 1]]\n")
    assert not question.has_edge(1, 2)
    assert question.m == 6


@pytest.mark.parametrize(
    ("top", "vertices", "one"),
    [
        ("", '"1..1"', True),
        ("ends = [1]\n", '"1..1"', True),
        ("ends = [1, 1]\n", '"1..1"', True),
        ("ends = [2]\n", '"1..1"', False),
        ("required = [[1, 1]]\n", '"1..1"', False),
        ("", '"1..0"', False),
        ("", '"1..2"', False),
    ],
)
def test_one_vertex_path(tmp_path: Path, top: str, vertices: str, one: bool) -> None:
    assert question_of(tmp_path, STRUCTURE + top, vertices).is_one_vertex_path is one


def test_vertices_may_depend_on_the_parameters(tmp_path: Path) -> None:
    top = STRUCTURE + 'ends = ["n", "n // 2"]\n'
    claim = rule(tmp_path, '"1..n"', "a != b", '[instances]\nn = "1..4"\n', top)
    found = [build_question(claim, i.key, i.graph) for i in instances(claim, tmp_path)]
    assert [q.absent for q in found] == [True, False, False, False]
    assert found[3].required == {(3, 4), (1, 4)}
    claim = rule(
        tmp_path,
        '"1..n"',
        "a != b",
        '[instances]\nn = "1..4"\n',
        STRUCTURE + 'ends = ["1 // (n - 1)"]\n',
    )
    first = next(instances(claim, tmp_path))
    with pytest.raises(ClaimError, match=r"ends: vertex 1.*zero.*\(instance n=1\)"):
        build_question(claim, first.key, first.graph)


PAIRS = st.lists(st.tuples(st.integers(1, 6), st.integers(1, 6)).map(list), max_size=2)


@settings(deadline=None)
@given(
    st.integers(0, 5),
    st.frozensets(st.tuples(st.integers(1, 5), st.integers(1, 5)), max_size=10),
    st.lists(st.integers(1, 6), max_size=2),
    PAIRS,
    PAIRS,
    st.sampled_from(sorted(STRUCTURES)),
)
def test_question_has_the_answer_of_the_definition(
    tmp_path_factory: pytest.TempPathFactory,
    n: int,
    pairs: frozenset[tuple[int, int]],
    ends: list[int],
    required: list[list[int]],
    forbidden: list[list[int]],
    structure: str,
) -> None:
    """Try every order of the vertices against the words of the claim."""
    edges = {(min(p), max(p)) for p in pairs if p[0] != p[1] and max(p) <= n}
    text = " or ".join(f"{{a, b}} == {{{u}, {v}}}" for u, v in sorted(edges)) or "false"
    top = f'structure = "{structure}"\nrequired = {required}\nforbidden = {forbidden}\n'
    path = "ends" in STRUCTURES[structure]
    ends = ends if path else []
    top += f"ends = {ends}\n" if ends else ""
    claim = rule(tmp_path_factory.getbasetemp(), f'"1..{n}"', text, top=top)
    question = build_question(claim, {}, only_graph(claim))

    allowed = edges - {(min(p), max(p)) for p in forbidden}
    wanted = {(min(p), max(p)) for p in required}

    def fits(order: tuple[int, ...]) -> bool:
        closed = order if path else (*order, order[0])
        steps = [(min(p), max(p)) for p in pairwise(closed)]
        tips = [(order[0], order[-1]), (order[-1], order[0])]
        at_ends = not ends or any(list(tip[: len(ends)]) == ends for tip in tips)
        return set(steps) <= allowed and wanted <= set(steps) and at_ends

    least = 1 if path else 3
    expected = n >= least and any(fits(order) for order in permutations(range(1, n + 1)))
    found = question.is_one_vertex_path or has_cycle(question)
    assert found == expected
