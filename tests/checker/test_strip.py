"""When a family is a strip, and that its graphs then depend on the capped numbers alone."""

from __future__ import annotations

import re
from collections.abc import Hashable
from typing import Any

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from certify.checker.claims import Claim
from certify.checker.endless import Family
from certify.checker.graphs import Graph
from certify.checker.strict import BadClaim
from certify.checker.strip import Strip, find_strip
from tests.checker.strips import Rule, hops, strip_of

WITH_M = 'm = 2\nn = "1.."'
LINE, RING = '"1..n"', '"0..n-1"'
BOARD = '{ x = "1..n", y = "1..3" }'
KNIGHT = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"

# By hand from FORMAT.md, 8.1: (rule, first, p, Z).
STRIPS = [
    (hops(4, 7), 42, 1, 8),
    (hops(4, 7, lo=50), 50, 1, 8),
    (Rule(RING, "(a - b) % n in {1, n - 1}", instances='n = "3.."'), 13, 1, 2),
    (Rule(RING, "a == (b + 1) % n or b == (a + 1) % n", instances='n = "3.."'), 17, 1, 3),
    (Rule(LINE, "abs(a - b) <= 2 and (a + b) % 3 != 0"), 21, 3, 3),
    (Rule(LINE, "abs(a - b) <= 2 and a % 2 + b % 2 < 2 and a % 3 + b % 3 > 0"), 27, 6, 3),
    (Rule(LINE, "abs(a - b) == 1 or abs(a - b) == 2 and n > 100"), 409, 1, 3),
    (Rule(LINE, "abs(a - b) <= 1 and min(a, b) + 1 > 1"), 12, 1, 2),
    (Rule(LINE, "abs(a - b) <= 2", where="a > 2"), 22, 1, 4),
    (Rule(BOARD, KNIGHT), 17, 1, 3),
    (Rule('{ y = "1..3", x = "1..n" }', KNIGHT), 17, 1, 3),
    (Rule(BOARD, "abs(a.x - b.x) * abs(a.y - b.y) == 2 and a.y // 2 < 5"), 17, 1, 3),
    (Rule('"-40..n"', "abs(a - b) in {1, 2}"), 17, 1, 3),
    (Rule('"40..n"', "abs(a - b) in {1, 2}", instances='n = "50.."'), 56, 1, 3),
    (Rule('"1..n+40"', "abs(a - b) in {1, 2}"), 17, 1, 3),
    (Rule('"1..n"', "abs(a - b) in {1, m}", instances='m = 3\nn = "m + 1.."'), 22, 1, 4),
]


@pytest.mark.parametrize(("rule", "first", "modulus", "zone"), STRIPS)
def test_the_numbers_of_a_strip(rule: Rule, first: int, modulus: int, zone: int) -> None:
    strip = strip_of(rule.family())
    assert (strip.first, strip.modulus, strip.zone) == (first, modulus, zone)


TANGLES = [
    (Rule(LINE, "true"), "spans more than 1 layers"),
    (Rule(LINE, "abs(a - b) > 3"), "spans more"),
    (Rule(LINE, "square(a + b)"), r"'square\(a \+ b\)' is not covered"),
    (Rule(LINE, "a + b == n + 1"), "the sign of 1"),
    (Rule(LINE, "2*a == b or 2*b == a"), "the sign of"),
    (Rule(LINE, "abs(a*a - b*b) == 3"), "'a [*] a' is not covered"),
    (Rule(LINE, "abs(a - b) % n in {1, a}"), "spans more|sign|covered"),
    (Rule(LINE, "(a - b) % (2*n) == 1"), "is not covered"),
    (Rule(LINE, "gcd(a - b, 6) == 2"), "is not covered"),
    (Rule(LINE, "abs(a - b) // 2 == 1"), "is not covered"),
    (Rule(LINE, "(a - b) % m == 0", instances='m = 0\nn = "1.."'), "is not covered"),
    # An edge between the first and the last layers of every graph, but ever longer ones.
    (Rule('"0..n+100"', "n - abs(a - b) == 1"), "spans more"),
    (Rule('"1..2*n"', "abs(a - b) == 1"), "not a constant and n plus a constant"),
    (Rule('"n..2*n"', "abs(a - b) == 1"), "not a constant and n plus a constant"),
    (Rule('"1..max(n, 5)"', "abs(a - b) == 1"), "not a constant and n plus a constant"),
    (Rule('{ x = "1..n", y = "1..n" }', KNIGHT), "2 coordinates, and not one"),
    (Rule('"1..9"', "abs(a - b) == 1"), "0 coordinates, and not one"),
    (Rule('{ x = "1..n", y = "1..0" }', KNIGHT), "the range of y is empty"),
    (Rule(LINE, "abs(a - b) == 1", where="a < 9"), "too few vertices near the end"),
    (Rule(LINE, "abs(a - b) == 1", where="1 > 2"), "too few vertices"),
    # The limits.
    (Rule(LINE, "a % 7 == b % 7 and a % 11 == 1"), "a period of more than 60"),
    (Rule(LINE, "abs(a - b) in {1, 60}"), "61 layers long"),
    (Rule(LINE, "abs(a - b) * (10**12) == 10**15"), "layers long|covered"),
    (Rule(LINE, "abs(a - b) == 1 and n != 10**12"), "more than 100000 vertices"),
    (Rule(LINE, "abs(a - b) == 1 + 0 * (1 // 0)"), "division by zero"),
    (Rule(LINE, "abs(a - b) == 1", instances='n = "100000.."'), "more than 4000 vertices"),
    (Rule(LINE, " + ".join(f"{3**k} * abs(a - b)" for k in range(9)) + " == 0"), "100 pieces"),
    (Rule(LINE, "a - b == 1"), "not symmetric"),
    (Rule(BOARD, "abs(a.x - b.x) == 1 % (a.y - b.y)"), "division by zero"),
]  # fmt: skip


@pytest.mark.parametrize(("rule", "reason"), TANGLES)
def test_what_is_no_strip(rule: Rule, reason: str) -> None:
    family = rule.family()
    with pytest.raises(BadClaim, match=reason):
        strip_of(family)


def bare_strip(family: Family) -> Strip:
    """Return the numbers of a strip without a look at its edges: `claim 1` needs none."""

    def build(n: int) -> Graph:
        coordinates = max(1, len(family.texts.coordinates))
        return Graph([(s,) * coordinates for s in range(-200, n + 200)], [])

    return find_strip(family.texts, family.fixed, family.growing, family.lo, build)


def cap(value: int, zone: int) -> int:
    return min(value, zone)


def outcomes(rule: Rule, ns: int) -> tuple[Strip, dict[int, dict[Hashable, Any]]]:
    """Return for n = FIRST, ... what the rule says, by the numbers that it may depend on."""
    claim, family = rule.claim(), rule.family()
    strip = bare_strip(family)
    p, zone, long = strip.modulus, strip.zone, strip.long
    seen: dict[int, dict[Hashable, Any]] = {}
    for n in range(strip.first, strip.first + ns):
        found = seen[n] = {}
        row = [*family.fixed.values(), n]
        spans = [range(bounds(row)[0], bounds(row)[1] + 1) for bounds in claim.ranges]
        cells = [[x] for x in spans[0]]
        for span in spans[1:]:
            cells = [[*cell, x] for cell in cells for x in span]

        def numbers(cell: list[int], n: int = n) -> tuple[Hashable, ...]:
            x = cell[long]
            start, end = x - strip.low, n + strip.shift - x
            others = cell[:long] + cell[long + 1 :]
            return x % p, cap(start, zone), cap(end, zone), *others

        def note(key: Hashable, value: object, found: dict[Hashable, Any] = found) -> None:
            assert found.setdefault(key, value) == value, (rule, key)

        for a in cells:
            if claim.keep is not None:
                note((n % p, *numbers(a)), outcome(claim, row + a, keep=True))
            for b in cells:
                if a != b:
                    d = a[long] - b[long]
                    far = cap(abs(d), zone), cap(n - abs(d), zone), d > 0, d == 0
                    note((n % p, *numbers(a), *numbers(b), *far), outcome(claim, row + a + b))
    return strip, seen


def outcome(claim: Claim, values: list[int], *, keep: bool = False) -> object:
    try:
        return claim.keep(values) if keep and claim.keep else claim.adjacent(values)
    except BadClaim as error:
        return str(error)


def check_invariance(rule: Rule) -> None:
    """Assert claims 1 and 2 of strip.py by looking at all pairs of a few graphs."""
    strip, seen = outcomes(rule, ns=0)
    _, seen = outcomes(rule, ns=2 * strip.modulus + 1)
    samples = [seen[n] for n in range(strip.first, strip.first + strip.modulus)]
    for n, found in seen.items():
        sample = samples[(n - strip.first) % strip.modulus]
        for key, value in found.items():
            assert key in sample, (rule, n, key)
            assert sample[key] == value, (rule, n, key)


@pytest.mark.parametrize("rule", [rule for rule, first, _, _ in STRIPS if first < 50])
def test_strips_depend_on_the_capped_numbers(rule: Rule) -> None:
    check_invariance(rule)


ODDITIES = [
    Rule(LINE, "abs(abs(a - b) - 2) == abs(3 - abs(b - a))"),
    Rule(LINE, "(a if a < 3 else 3) < 3 and (n - b if n - b < 2 else 2) < 2"),
    Rule(LINE, "min(a - b, 2, b - a + 1) % 2 == max(n - a, 3) % 2"),
    Rule(LINE, "(a % 3) ** 2 * abs(a - b) == 4"),
    Rule(LINE, "(a - b - 3) % (n + 2) in {1, n} or (b - 7) % (n - 3) < a"),
    Rule(LINE, "(a - b) % n <= 5 % n"),
    Rule(LINE, "(-a) % 4 == (b - n) % 4 and -7 % n < n - 3"),
    Rule('"-6..n-2"', "a < 0 or b > n - 4 or a - b == 2"),
    Rule('"-6..n-2"', "(a - b) % n == n - 1 or a % n == 2"),
    Rule('"2..n+3"', "abs(a - b) % n == 1 or (n if a > b else 3) > a - b + 1"),
    Rule('"7..n-2"', "n - abs(a - b) < 4 or n + a - b < 8", instances='n = "-9.."'),
    Rule(BOARD, "(a.x - b.x) * (a.y - b.y) == 2 or (a.y - 2) * a.x >= 3"),
    Rule(BOARD, "3 // (a.y - b.y) == a.x - b.x or 2 ** (a.y - b.y) == 2", where="x + 1 > y"),
    Rule(BOARD, "prime(a.y + b.y) == (a.x - b.x > 1) and gcd(a.y, b.x % 4) in (1, a.x)"),
    Rule('{ y = "1..m", x = "m..n-m" }', "{a.x - b.x, m} == {b.y, 2}", instances=WITH_M),
]  # fmt: skip


@pytest.mark.parametrize("rule", ODDITIES, ids=lambda rule: rule.adjacent)
def test_odd_rules_depend_on_the_capped_numbers(rule: Rule) -> None:
    check_invariance(rule)


ATOMS = st.sampled_from(
    [
        "a", "b", "n", "0", "1", "2", "3", "a-b", "b-a", "n-a", "n-b", "abs(a-b)", "n-abs(a-b)",
        "a%2", "(a+b)%3", "(n-a)%2", "(a-b)%n", "b%n", "(a-1)%(n+1)", "(2-b)%(n-1)", "-3%n",
        "abs(a-b)-2", "abs(n-a)",
    ]
)  # fmt: skip


@st.composite
def integers(draw: st.DrawFn, depth: int = 2) -> str:
    if depth == 0:
        return f"({draw(ATOMS)})"
    one, two = draw(integers(depth - 1)), draw(integers(depth - 1))
    return draw(
        st.sampled_from(
            [
                one, one, f"({one} + {two})", f"({one} - {two})", f"abs({one})", f"({one} * 2)",
                f"min({one}, {two})", f"max({one}, {two})", f"({one} % 2)", f"({one} % n)",
                f"({one} * {two})", f"({one} // {two})", f"gcd({one}, {two})", f"(-{one})",
                f"({one} if {two} > 1 else {draw(ATOMS)})", f"({one} ** 2)", f"({one} % {two})",
            ]
        )
    )  # fmt: skip


@st.composite
def rules(draw: st.DrawFn) -> Rule:
    one, two, three = (draw(integers(draw(st.integers(0, 2)))) for _ in range(3))
    compare = draw(st.sampled_from(["==", "<", ">=", "!="]))
    text = draw(
        st.sampled_from(
            [
                f"{one} {compare} {two}", f"{one} in {{{two}, {three}}}",
                f"{one} {compare} {two} and {two} < {three}", f"{{{one}, {two}}} == {{{three}, 1}}",
                f"square({one} % 5) or {two} <= {three}", f"{one} < {two} <= {three}",
            ]
        )
    )  # fmt: skip
    low, shift = draw(st.integers(-3, 4)), draw(st.integers(-3, 3))
    line = Rule(f'"{low}..n+{shift}"', text, instances='n = "-5.."')
    return line if draw(st.booleans()) else as_board(line, draw(integers(1)))


def as_board(rule: Rule, part: str) -> Rule:
    """Return the rule with two rows: a row's number is added here and there, and a `where`."""
    text, where = (
        re.sub(r"\b([ab])\b", r"\1.x", old).replace("3", "(a.y + 1)").replace("2", "(b.y)")
        for old in (rule.adjacent, f"{part} != 1")
    )
    vertices = f"{{ y = '1..2', x = {rule.vertices} }}"
    return Rule(vertices, text, where=where.replace("b.", "a."), instances=rule.instances)


@given(rules())
def test_random_rules_depend_on_the_capped_numbers(rule: Rule) -> None:
    family = rule.family()
    try:
        strip = bare_strip(family)
    except BadClaim:
        strip = None
    assume(strip is not None and strip.first < 45 and strip.modulus <= 6)
    check_invariance(rule)


SPANS = st.frozensets(st.integers(1, 4), min_size=1, max_size=3)


@given(SPANS, SPANS, st.integers(1, 3), st.integers(0, 2), st.integers(-9, 9), st.integers(-9, 9))
def test_no_edge_of_an_accepted_strip_goes_too_far(
    near: frozenset[int], wrap: frozenset[int], k: int, rest: int, low: int, shift: int
) -> None:
    """Random differences, differences around the end, and a residue condition."""
    text = (
        f"(abs(a - b) in {{{', '.join(map(str, sorted(near)))}}} or n - abs(a - b) in "
        f"{{{', '.join(map(str, sorted(wrap)))}}}) and (a + b) % {k} != {rest}"
    )
    family = Rule(f'"{low}..n+{shift}"', text, instances='n = "3.."').family()
    try:
        strip = strip_of(family)
    except BadClaim:
        strip = None
    # With L = c - 1 or more, few of the differences around the end lead from end to end.
    assume(strip is not None)
    for n in range(strip.first, strip.first + strip.modulus + 9):
        graph = family.graph(n)
        layers, count = strip.layers(graph), strip.count_layers(n)
        for u, v in graph.edges:
            lower, upper = sorted((layers[u], layers[v]))
            ends = lower < strip.zone and upper >= count - strip.zone
            assert upper - lower < strip.zone or ends
