"""Rules set as mathematics: read aloud, and computed with."""

from __future__ import annotations

import operator
from collections.abc import Callable
from math import gcd

import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.language import INTEGER, TRUTH, read_expression
from certify.claim.names import Scope
from certify.claim.predicates import PREDICATES
from certify.report.formula import MEANINGS, Setter, define_predicates, set_rule
from certify.report.inline import split_marks

NUMBERS = Scope(("m", "n"), ("a", "b"))
CELLS = Scope(("m", "n"), ("a", "b"), ("row", "column"))
RINGS = Scope(("n",), ("a", "b"), ("r", "i"))


def dollars(text: str) -> str:
    """Return a text with its formulas between dollars."""
    return "".join(f"${part}$" if kind == "formula" else part for kind, part in split_marks(text))


def said(rule: str, scope: Scope = NUMBERS) -> str:
    return dollars(set_rule(read_expression(rule, sort=TRUTH, scope=scope, where="rule")))


@pytest.mark.parametrize(
    ("rule", "text"),
    [
        ("abs(a - b) in {4, 7}", r"$\left|{a - b}\right| \in \{4, 7\}$"),
        ("square(a * b + 1)", "$a b + 1$ is a square"),
        ("not prime(a + b)", "$a + b$ is not a prime"),
        ("n % 2 == m % 2 == 1", r"$n \equiv m \equiv 1 \pmod{2}$"),
        ("(a - b) % n in {1, n - 1}", r"$\left(a - b\right) \bmod n \in \{1, n - 1\}$"),
        ("a // 2 == b", r"$\left\lfloor \frac{a}{2} \right\rfloor = b$"),
        ("n == 1 or 10 <= n <= 13", r"$n = 1$ or $10 \le n \le 13$"),
        (
            "m == 3 and (n == 4 or n >= 7) or m >= 5",
            r"$m = 3$ and ($n = 4$ or $n \ge 7$), or $m \ge 5$",
        ),
        ("a - (b - n) == 2 * 3", r"$a - \left(b - n\right) = 2 \cdot 3$"),
        ("a - -1 == b", "$a + 1 = b$"),
        ("(a * b) % 5 % 3 == m", r"$\left(\left(a b\right) \bmod 5\right) \bmod 3 = m$"),
        ("(a + 1) ** 2 != b", r"$\left(a + 1\right)^{2} \ne b$"),
        ("not (a < b)", r"$a \ge b$"),
        ("not (a == 1 and b == 2)", r"$a \ne 1$ or $b \ne 2$"),
        ("square(a) == square(b)", "$a$ is a square if and only if $b$ is a square"),
        ("a == 1 if n > 3 else b == 1", "$a = 1$ if $n > 3$, and $b = 1$ if not"),
        (
            "(a if a < b else b) == m",
            r"$\begin{cases} a & \text{if } a < b, \\ b & \text{otherwise} \end{cases} = m$",
        ),
        ("gcd(a, b) == 1", r"$\gcd(a, b) = 1$"),
        ("{a, b} == {1, 2}", r"$\{a, b\} = \{1, 2\}$"),
    ],
)
def test_a_rule_is_read_as_a_mathematician_writes_it(rule: str, text: str) -> None:
    assert said(rule) == text


def test_coordinates_have_their_vertex_beside_them() -> None:
    assert said("abs(a.row - b.row) == 1", CELLS) == (
        r"$\left|{\mathrm{row}(a) - \mathrm{row}(b)}\right| = 1$"
    )
    assert said("(a.i - b.i) % n == 1", RINGS) == r"$\left(i_a - i_b\right) \bmod n = 1$"


def test_every_predicate_has_a_name_and_the_less_known_ones_a_definition() -> None:
    assert set(MEANINGS) == set(PREDICATES)
    rule = read_expression("pentagonal(a + b)", sort=TRUTH, scope=NUMBERS, where="rule")
    assert dollars(define_predicates(rule, None)) == (
        r"Here a pentagonal number is a number $k(3k-1)/2$ with $k \ge 0$."
    )
    plain = read_expression("prime(a + b)", sort=TRUTH, scope=NUMBERS, where="rule")
    assert define_predicates(plain) == ""


def write_integers(depth: int) -> st.SearchStrategy[str]:
    leaf = st.sampled_from(["m", "n", "1", "2", "3", "7"])
    if depth == 0:
        return leaf
    part = write_integers(depth - 1)
    return st.one_of(
        leaf,
        st.builds("({} {} {})".format, part, st.sampled_from("+-*"), part),
        st.builds("({} {} {})".format, part, st.sampled_from(["//", "%"]), st.integers(2, 5)),
        st.builds("(-{})".format, part),
        st.builds("abs({})".format, part),
        st.builds("{}({}, {})".format, st.sampled_from(["min", "max"]), part, part),
        st.builds("({}) ** 2".format, part),
    )


OPERATIONS: dict[str, Callable[..., int]] = {
    "()": int,
    "//": operator.floordiv,
    "**": operator.pow,
    "min": min,
    "max": max,
    "gcd": gcd,
}


def compute(setter: Setter, part: sympy.Expr, values: dict[str, int]) -> int:
    """Return the value of what is printed."""
    known = {}
    for symbol in part.free_symbols:
        if symbol in setter.meaning:
            name, parts = setter.meaning[symbol]
            known[symbol] = OPERATIONS[name](*(compute(setter, p, values) for p in parts))
        else:
            known[symbol] = values[symbol.name]
    return int(part.subs(known).doit())


@settings(max_examples=60)
@given(write_integers(3), st.integers(-6, 6), st.integers(-6, 6))
def test_the_expression_that_is_printed_has_the_value_of_the_rule(
    text: str, m: int, n: int
) -> None:
    scope = Scope(("m", "n"))
    rule = read_expression(text, sort=INTEGER, scope=scope, where="rule")
    setter = Setter(scope)
    value = setter.integer(rule.tree)
    assert compute(setter, value, {"m": m, "n": n}) == rule.evaluate((m, n))


@settings(max_examples=60)
@given(write_integers(3))
def test_what_is_printed_is_balanced_and_has_no_two_signs_in_a_row(text: str) -> None:
    scope = Scope(("m", "n"))
    rule = read_expression(text, sort=INTEGER, scope=scope, where="rule")
    latex = Setter(scope).set_integer(rule.tree)
    assert latex.count("{") == latex.count("}")
    assert latex.count(r"\left") == latex.count(r"\right")
    bare = latex.replace(" ", "")
    assert not any(pair in bare for pair in ("--", "+-", "-+", r"\cdot-", "^-"))
