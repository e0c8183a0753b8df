"""The rule language: the values of its expressions, and when they have none."""

from __future__ import annotations

from math import gcd

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.language import INTEGER, TRUTH, read_expression
from certify.claim.names import Scope
from certify.claim.predicates import BOUND
from certify.errors import ClaimError

PAIR = Scope(parameters=("n",), vertices=("a", "b"))
CELLS = Scope(parameters=("m", "n"), vertices=("a", "b"), coordinates=("x", "y"))
PLAIN = Scope(parameters=("m", "n"))


def value(text: str, **row: int) -> int:
    """Evaluate an integer expression in parameters."""
    scope = Scope(parameters=tuple(row))
    return read_expression(text, sort=INTEGER, scope=scope, where="w").evaluate(tuple(row.values()))


def holds(text: str, a: object = 1, b: object = 2, scope: Scope = PAIR, row: object = (9,)) -> int:
    """Evaluate a rule for two vertices."""
    return read_expression(text, sort=TRUTH, scope=scope, where="w").bind(row)(a, b)  # type: ignore[arg-type]


# Values.


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("2 + 3 * 4", 14),
        ("-7 // 2", -4),
        ("-7 % 3", 2),
        ("7 % -3", -2),
        ("2 ** 53", BOUND),
        ("-2 ** 2", -4),
        ("2 ** 3 ** 2", 512),
        ("0 ** 0", 1),
        ("(-1) ** 1000001", -1),
        ("1 ** (10 ** 12)", 1),
        ("0 ** 99", 0),
        ("gcd(12, 18, 8)", 2),
        ("gcd(-4, 6)", 2),
        ("gcd(0, 0)", 0),
        ("min(3, 1, 2) + max(3, 1, 2)", 4),
        ("abs(-5)", 5),
        ("+3 - -3", 6),
        ("1 if 2 < 1 else 5", 5),
        ("1_000", 1000),
        ("10 ** 12", 10**12),
        ("  4 ", 4),
        ("(1 +\n 2)", 3),
        ("1 if true and not False else 0", 1),
        ("1 if 1 < 2 < 3 <= 3 != 4 else 0", 1),
        ("1 if 3 in {1, 3} and 3 not in (1, 2) and 3 in [3] else 0", 1),
        ("1 if {1, 2} == {2, 1, 1} != {2} else 0", 1),
        ("1 if (1 < 2) == (2 < 3) else 0", 1),
        ("1 if 1 < 2 in {2} else 0", 1),
    ],
)
def test_value(text: str, expected: int) -> None:
    assert value(text) == expected


def test_parameters_and_vertices() -> None:
    assert value("m * n - 1", m=3, n=4) == 11
    assert holds("a + b == n", 4, 5)
    assert holds("a.x - b.x == m and {a.y, b.y} == {n, 1}", (5, 1), (2, 7), CELLS, (3, 7))
    bare = Scope(parameters=("n",), vertices=("a",), coordinates=("x", "y"), bare=True)
    rule = read_expression("x == a.x and y < n", sort=TRUTH, scope=bare, where="w").bind((3,))
    assert [rule((1, y), (1, y)) for y in (2, 3)] == [True, False]


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("n == 9 or 1 // 0 == 1", True),
        ("n == 8 and 1 // 0 == 1", False),
        ("a == 1 or 1 // 0 == 1", True),
        ("1 == (1 if n == 9 else 1 // 0)", True),
        ("n < 9 < 1 // 0", False),
        ("a < 1 < 1 // 0", False),
    ],
)
def test_evaluation_is_lazy(text: str, expected: bool) -> None:
    assert holds(text) == expected


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        ("1 // 0 == 1 or n == 9", "division by zero"),
        ("a // (b - 2) == 1", "division by zero"),
        ("a % (b - 2) == 1", "division by zero"),
        ("a in {1, 1 // 0}", "division by zero"),
        ("0 * (1 // 0) == 0", "division by zero"),
        ("2 ** -1 == 1", "exponent is negative"),
        ("1 ** (a - b) == 1", "exponent is negative"),
        ("2 ** 54 > 1", "beyond 2^53"),
        ("9 ** 9 ** 9 > 1", "beyond 2^53"),
        ("2 ** (10 ** 12) > 1", "beyond 2^53"),
        ("(2 ** 53) + a > 1", "beyond 2^53"),
        ("-(2 ** 53) - a < 1", "beyond 2^53"),
        ("10 ** 12 * 10 ** 12 > 1", "beyond 2^53"),
        ("(a + 10 ** 8) * (b + 10 ** 8) > 1", "beyond 2^53"),
        ("(a + 99) ** 9 > 1", "beyond 2^53"),
    ],
)
@pytest.mark.parametrize("spans", [(), ((1, 2),)])
def test_evaluation_that_fails(text: str, problem: str, spans: tuple[tuple[int, int], ...]) -> None:
    rule = read_expression(text, sort=TRUTH, scope=PAIR, where="f:1: r").bind((9,), spans)
    with pytest.raises(ClaimError, match=r"f:1: r: column \d+ at .*" + problem.replace("^", r"\^")):
        rule(1, 2)


def test_limit_itself_is_reached_and_not_exceeded() -> None:
    assert holds("2 ** 53 - 1 + a == 2 ** 53")
    with pytest.raises(ClaimError, match="beyond"):
        holds("2 ** 53 + a - 1 == 2 ** 53")


# Every small expression has the value that Python gives it.

NAMES = {"abs": abs, "min": min, "max": max, "gcd": gcd, "true": True, "false": False}
ATOMS = st.sampled_from(["a", "b", "n", "m", "0", "1", "2", "7"])


def _integers(inner: st.SearchStrategy[tuple[str, str]]) -> st.SearchStrategy[str]:
    i, t = inner.map(lambda pair: pair[0]), inner.map(lambda pair: pair[1])
    return st.one_of(
        st.tuples(i, st.sampled_from(["+", "-", "*", "//", "%"]), i).map(
            lambda p: f"({' '.join(p)})"
        ),
        i.map(lambda x: f"(-{x})"),
        i.map(lambda x: f"abs({x})"),
        st.tuples(i, st.sampled_from("012")).map(lambda p: f"{p[0]} ** {p[1]}").map("({})".format),
        st.tuples(st.sampled_from(["min", "max", "gcd"]), i, i).map(
            "{0[0]}({0[1]}, {0[2]})".format
        ),
        st.tuples(i, t, i).map("({0[0]} if {0[1]} else {0[2]})".format),
    )


def _truths(inner: st.SearchStrategy[tuple[str, str]]) -> st.SearchStrategy[str]:
    i, t = inner.map(lambda pair: pair[0]), inner.map(lambda pair: pair[1])
    order = st.sampled_from(["==", "!=", "<", "<=", ">", ">="])
    return st.one_of(
        st.tuples(i, order, i).map("({0[0]} {0[1]} {0[2]})".format),
        st.tuples(i, order, i, order, i).map(lambda p: f"({' '.join(p)})"),
        st.tuples(i, st.sampled_from(["in", "not in"]), i, i).map(
            "({0[0]} {0[1]} {{{0[2]}, {0[3]}}})".format
        ),
        st.tuples(i, i, i, i).map("({{{0[0]}, {0[1]}}} == {{{0[2]}, {0[3]}}})".format),
        st.tuples(t, st.sampled_from(["and", "or", "=="]), t).map(lambda p: f"({' '.join(p)})"),
        st.tuples(t, t, t).map(" and ".join).map("({})".format),
        t.map("(not {})".format),
        st.sampled_from(["true", "False"]),
    )


EXPRESSIONS = st.recursive(
    st.tuples(ATOMS, st.sampled_from(["(a < b)", "True", "(n == 2)"])),
    lambda inner: st.tuples(_integers(inner), _truths(inner)),
    max_leaves=12,
)


@settings(deadline=None)
@given(EXPRESSIONS, st.tuples(*[st.integers(-3, 9)] * 4), st.booleans())
def test_value_is_that_of_python(
    pair: tuple[str, str], point: tuple[int, ...], known: bool
) -> None:
    a, b, m, n = point
    scope = Scope(parameters=("m", "n"), vertices=("a", "b"))
    for text, sort in zip(pair, (INTEGER, TRUTH), strict=True):
        expression = read_expression(text, sort=sort, scope=scope, where="w")
        names = {**NAMES, "a": a, "b": b, "m": m, "n": n}
        try:
            expected = eval(text, {"__builtins__": {}}, names)
        except ZeroDivisionError:
            expected = None
        run = expression.bind((m, n), ((-3, 9),) if known else ())
        try:
            found = run(a, b)
        except ClaimError as error:
            found = None
            if "beyond" in str(error):
                continue  # Python has no such bound
        assert found == expected


def test_specialised_shapes_agree_with_general_ones() -> None:
    """`a - b` in its own function gives what it gives in pieces."""
    for plain, roundabout in [
        ("abs(a - b) in {4, 7}", "abs(+a + (0 - b * 1)) in {4, n - 2}"),
        ("a + b == 12", "a * 1 + b * 1 == 12"),
        ("a - b < 3", "a * 1 - b * 1 < 3"),
    ]:
        for a in range(1, 12):
            for b in range(1, 12):
                assert holds(plain, a, b) == holds(roundabout, a, b)
