"""Families of graphs of which it is known for every member whether it has a Hamiltonian cycle."""

from __future__ import annotations

import pytest

from tests.published.conftest import ProveClaim, unreadable

PETERSEN = """\
[graph]
vertices = { ring = "0..1", i = "0..n - 1" }
adjacent = '''a.ring != b.ring and a.i == b.i \
or a.ring == b.ring == 0 and (a.i - b.i) % n in {1, n - 1} \
or a.ring == b.ring == 1 and (a.i - b.i) % n in {k, n - k}'''
"""
"""The generalised Petersen graph GP(n, k): an outer ring, spokes, and inner steps of k."""

FLOWER = """\
[graph]
vertices = { petal = "0..k - 1", part = "0..3" }
adjacent = '''a.petal == b.petal and a.part != b.part and 0 in {a.part, b.part} \
or a.part == b.part == 1 and (a.petal - b.petal) % k in {1, k - 1} \
or a.part == b.part and a.part in {2, 3} and abs(a.petal - b.petal) == 1 \
or {a.part, b.part} == {2, 3} and abs(a.petal - b.petal) == k - 1'''
"""
"""The flower J_k: k stars (part 0 in the middle) in a ring. The parts 1 are in one ring, the
parts 2 and 3 in two rows that cross over once, between the last petal and the first."""

CYCLE = 'structure = "hamiltonian-cycle"\n'
PATH = 'structure = "hamiltonian-path"\n'


def test_generalised_petersen_graphs(prove_claim: ProveClaim) -> None:
    """No cycle exactly for the graphs isomorphic to GP(n, 2) with n = 5 mod 6.

    Alspach, Journal of Combinatorial Theory B 34 (1983) 293-312 (the wording from
    memory); GP(n, k) is GP(n, 2) for k = 2 and k = (n - 1)/2.
    """
    outcomes = prove_claim(
        CYCLE
        + PETERSEN
        + """
[instances]
n = "3..26"
k = "1..(n - 1) // 2"
[answers]
impossible = "n % 6 == 5 and k in {2, (n - 1) // 2}"
"""
    )
    assert unreadable([outcomes["k=2,n=5"], outcomes["k=2,n=11"]]) == []
    long = '[instances]\nn = "27..41"\nk = "2..2"\n[answers]\nimpossible = "n % 6 == 5"\n'
    prove_claim(CYCLE + PETERSEN + long)


def test_petersen_graphs_with_an_inner_matching(prove_claim: ProveClaim) -> None:
    """The degenerate case k = n/2: no cycle exactly for n = 0 mod 4, n >= 8.

    Alspach, as above (from memory). That all have a path: by a second method, no source.
    """
    rows = PETERSEN + '[instances]\nk = "2..13"\nn = "2 * k..2 * k"\n[answers]\n'
    prove_claim(CYCLE + rows + 'impossible = "n % 4 == 0 and n >= 8"\n')
    prove_claim(PATH + rows + "exists = true\n")


def test_petersen_graphs_with_every_vertex_in_turn_removed(prove_claim: ProveClaim) -> None:
    """GP(n, 2), n = 5 mod 6, is hypohamiltonian, and has a path.

    Mai, Wang and Hsu, Computers and Mathematics with Applications 55 (2008) 2076-2085.
    """
    graph = PETERSEN.replace("{k, n - k}", "{2, n - 2}")
    prove_claim(
        CYCLE
        + graph
        + """\
where = "not (ring == r and i == v)"
[instances]
n = "5..17"
r = "0..1"
v = "0..n - 1"
where = "n % 6 == 5"
[answers]
exists = true
"""
    )
    prove_claim(PATH + graph + '[instances]\nn = "5..23"\n[answers]\nexists = true\n')


def test_flower_snarks(prove_claim: ProveClaim) -> None:
    """J_k has a cycle exactly for even k.

    Isaacs, American Mathematical Monthly 82 (1975) 221-239 (from memory).
    """
    rows = FLOWER + '[instances]\nk = "3..21"\n[answers]\n'
    prove_claim(CYCLE + rows + 'exists = "k % 2 == 0"\n')
    prove_claim(PATH + rows + "exists = true\n")


def test_flower_snarks_with_every_vertex_in_turn_removed(prove_claim: ProveClaim) -> None:
    """J_k is hypohamiltonian for odd k >= 5, and J_3 is not.

    Clark and Entringer, Periodica Mathematica Hungarica 14 (1983) 57-68 (from memory); J_3
    by a second method, no source.
    """
    rows = """\
where = "not (petal == p and part == v)"
[instances]
k = "{}"
p = "0..k - 1"
v = "0..3"
where = "k % 2 == 1"
"""
    prove_claim(CYCLE + FLOWER + rows.format("5..11") + "[answers]\nexists = true\n")
    three = prove_claim(CYCLE + FLOWER + rows.format("3..3")).values()
    assert "impossible" in {outcome.record.answer for outcome in three}


EVERY_ONE = {
    # Elementary.
    "prisms": """
vertices = { ring = "0..1", i = "0..n - 1" }
adjacent = "a.i == b.i or a.ring == b.ring and (a.i - b.i) % n in {1, n - 1}"
[instances]
n = "3..26"
[answers]
exists = true
""",
    # Elementary: the rim.
    "Moebius ladders": """
vertices = "0..2 * k - 1"
adjacent = "(a - b) % (2 * k) in {1, k, 2 * k - 1}"
[instances]
k = "3..13"
[answers]
exists = true
""",
    # Steps of s and t round a ring: every connected Cayley graph of an abelian group, on three
    # vertices or more, has a cycle. Chen and Quimpo, LNM 884 (1981)
    # 23-34 (from memory).
    "circulant graphs": """
vertices = "0..n - 1"
adjacent = "(a - b) % n in {s, n - s, t, n - t}"
[instances]
n = "4..20"
s = "1..n // 2"
t = "s + 1..n // 2"
[answers]
exists = "gcd(gcd(n, s), t) == 1"
""",
    # Common practice.
    "complete bipartite graphs": """
vertices = "1..r + s"
adjacent = "(a <= r) != (b <= r)"
[instances]
r = "1..8"
s = "r..8"
[answers]
exists = "r == s >= 2"
""",
}


@pytest.mark.parametrize("name", EVERY_ONE)
def test_cycles(name: str, prove_claim: ProveClaim) -> None:
    outcomes = prove_claim(CYCLE + "[graph]" + EVERY_ONE[name])
    assert unreadable(outcomes.values()) == []
