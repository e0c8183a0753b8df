"""What the rule language refuses when a rule is read, and in what words."""

from __future__ import annotations

import warnings

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.language import TRUTH, check_name, read_expression
from certify.claim.names import Scope
from certify.errors import ClaimError
from tests.claim.test_language import CELLS, PAIR, PLAIN, holds, value


def refusal(text: str, scope: Scope = PAIR, sort: str = TRUTH) -> str:
    """Return the message with which a rule is refused when it is read."""
    with pytest.raises(ClaimError) as caught:
        read_expression(text, sort=sort, scope=scope, where="claim.toml:7: adjacent")
    message = str(caught.value)
    assert message.startswith("claim.toml:7: adjacent: ")
    assert "\n" not in message
    return message


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("a + c == 3", ["column 5", '"c"', "unknown name", "a, b, n"]),
        ("sqare(a + b)", ["column 1", '"sqare"', 'did you mean "square"?']),
        ("square(a + q)", ["column 12", '"q"']),
        ("a.x == 1", ["coordinate", "write a"]),
        ("a", ["a truth value", "an integer"]),
        ("a + (b == 1) == 2", ['"b == 1"', "an integer", "a truth value"]),
        ("a and b == 1", ['at "a"', "compare"]),
        ("not a", ["truth value"]),
        ("a == (b == 1)", ["cannot be equal"]),
        ("a < (b == 1)", ["smaller or larger"]),
        ("(a < b) < (b < a)", ["smaller or larger"]),
        ("1 if a else 2", ["truth value"]),
        ("(1 if a < b else true) == 1", ["an integer"]),
        ("a / b == 1", ['"//"']),
        ("a ^ b == 1", ['"**"']),
        ("a < b & b < a", ['"and"']),
        ("(a < b) | (b < a)", ['"or"']),
        ("~a == 1", ['"not"']),
        ("a is b", ['"=="']),
        ("a is not b", ['"!="']),
        ("a << b == 1", ["not part of the rule language"]),
        ("a @ b == 1", ["not part of the rule language"]),
        ("a = b", ['"=="', "column 3"]),
        ("a < b && b < a", ['"and"', "column 7"]),
        ("a < b || b < a", ['"or"']),
        ("!(a < b)", ['"not"']),
        ("a in b", ["set of integers"]),
        ("a in {}", ["set of integers"]),
        ("a in ()", ["empty"]),
        ("a in {1: 2}", ["set of integers"]),
        ("a in {*{1, 2}}", ["not part of the rule language"]),
        ("(a < b) in {1, 2}", ["asks for an integer"]),
        ("{1, 2} in {1, 2}", ["asks for an integer"]),
        ("a in {1, b == 2}", ["an integer"]),
        ("{a, b} == 1", ["cannot be equal"]),
        ("{a, b} < {1, 2}", ["smaller or larger"]),
        ("{a, b} == [1, 2]", ["braces"]),
        ("(a, b) == (1, 2)", ["braces"]),
        ("{a, b}", ["a set or list stands only"]),
        ("abs({1}) == 1", ["a set or list stands only"]),
        ("abs(a, b) == 1", ["one integer", "2 are given"]),
        ("square() or a == 1", ["one integer", "0 are given"]),
        ("min(a) == 1", ["two or more"]),
        ("gcd() == 1", ["two or more"]),
        ("abs(x=1) == 1", ["no name"]),
        ("abs(*[1]) == 1", ["not part of the rule language"]),
        ("min(*{1, 2}, 3) == 1", ["not part of the rule language"]),
        ("square", ["needs its arguments"]),
        ("a(1) == 1", ["cannot be called"]),
        ("print(1)", ["cannot be called"]),
        ("eval(a)", ["cannot be called"]),
        ("(abs)(a)(b) == 1", ["cannot be called"]),
        ("1(a) == 1", ["cannot be called"]),
        ("a.bit_length() == 1", ["cannot be called"]),
        ("a.__class__ == 1", ["coordinate"]),
        ("(1).__class__ == 1", ["coordinate of a vertex"]),
        ("abs.__self__ == 1", ["coordinate of a vertex"]),
        ("n.real == 1", ["coordinate of a vertex"]),
        ("a.x.y == 1", ["coordinate of a vertex"]),
        ("__import__ == 1", ["unknown name"]),
        ("(lambda: 1) == 1", ["not part of the rule language"]),
        ("(lambda: 1)() == 1", ["cannot be called"]),
        ("[i for i in {1}] == 1", ["not part of the rule language"]),
        ("a in [i for i in {1}]", ["set of integers"]),
        ("all(i < 1 for i in {1})", ["cannot be called"]),
        ("abs(i for i in {1}) == 1", ["not part of the rule language"]),
        ("(c := a) == 1", ["not part of the rule language"]),
        ("a[0] == 1", ["not part of the rule language"]),
        ("a == ...", ["only integers"]),
        ("a == None", ["only integers"]),
        ("a == 1.0", ["only integers"]),
        ("a == 1e3", ["only integers"]),
        ("a == 1j", ["only integers"]),
        ("a == 1000000000001", ["10^12"]),
        ("a == " + "9" * 1900, ["10^12"]),
        ("(yield) == 1", ["not part of the rule language"]),
        ("(await a) == 1", ["not"]),
        ('a == "1"', ["quotes"]),
        ("f'{a}' == 1", ["quotes"]),
        ("`a` == 1", ["quotes"]),
        ("a == 1 # one", ["comments"]),
        ("a == \\\n1", ["no place"]),
        ("a\0 == 1", ["U+0000"]),
        ("a\r == 1", ["U+000D"]),
        ("a\f == 1", ["U+000C"]),
        ("", ["empty"]),
        (" \n ", ["empty"]),
        ("a <", ["not an expression"]),
        ("a < b)", ["not an expression"]),
        ("(a < b", ["never closed"]),
        ("a == 1\nb == 2", ["not an expression"]),
        ("a == 1; b == 2", ["not an expression"]),
        ("import os", ["not an expression"]),
        ("a == 1 if b == 2", ["not an expression"]),
        ("a == 1if b == 1else b == 2", ["not an expression"]),
        ("a == 007", ["not an expression"]),
        ("a == 1__0", ["not an expression"]),
        ("pass", ["not an expression"]),
    ],
)
def test_refused(text: str, words: list[str]) -> None:
    message = refusal(text)
    for word in words:
        assert word in message, message


@pytest.mark.parametrize(
    "text",
    [
        "\uff41 == 1",  # fullwidth a: Python's parser folds it into a
        "\uff41bs(a) == 1",
        "\u017fquare(a)",  # long s, folded into s
        "a.\uff58 == 1",
        "a == \uff11",
        "a == ²",
        "a\u00a0== 1",
        "a ≤ b",
        "\ufeffa == 1",
        "ª == 1",
    ],
)
def test_letters_beyond_ascii_are_refused(text: str) -> None:
    assert "ASCII" in refusal(text)


def test_several_coordinates() -> None:
    assert "write a.x, a.y" in refusal("a == b", CELLS)
    assert 'did you mean "x"' not in refusal("a.z == 1", CELLS)
    assert "Write a.x, b.x" in refusal("x == 1", CELLS)
    assert "no such coordinate" in refusal("a.n == 1", CELLS)
    assert "no vertex a" in refusal("a == 1", PLAIN)
    assert "nothing but numbers" in refusal("k == 1", Scope())
    assert "no vertex b" in refusal("b == 1", Scope(vertices=("a",)))


def test_place_in_a_rule_of_several_lines() -> None:
    message = refusal("\n  (a < b\n   or cc == 1)\n")
    assert 'line 3, column 7 at "cc"' in message


@pytest.mark.parametrize(
    "text",
    [
        "(" * 990 + "a" + ")" * 990,
        "-" * 1990 + "a == 1",
        "not " * 400 + "a == 1",
        "[" * 1999,
        "{" * 1500,
        "a" + "+ a" * 41 + " == 1",
        "abs(" * 45 + "a" + ")" * 45 + " == 1",
        "a == 1 or " * 166 + "a == 1",
        "a in {" + "1," * 900 + "1}",
        "2**" * 600 + "2 == 1",
        "(" * 60 + "1" + " if a < b else 1)" * 60 + " == 1",
        "a == 1" + " " * 2000,
    ],
)
def test_limits_of_size(text: str) -> None:
    refusal(text)


def test_sizes_within_the_limits_are_read() -> None:
    assert holds("a" + " + a" * 30 + " == 31")
    assert holds("(" * 100 + "a" + ")" * 100 + " == 1")
    assert holds("a in {" + "2," * 400 + "1}")
    assert holds(" or ".join(["a == 2"] * 150 + ["a == 1"]))
    assert holds("a == 1" + " " * 1990)


def test_number_of_one_value_is_checked_before_it_is_made() -> None:
    with pytest.raises(ClaimError, match="beyond"):
        value("7 ** 7 ** 7 ** 7 ** 7 ** 7")


def outcome(text: str) -> int | str:
    """Return the value of a rule, or the message with which it is refused."""
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        try:
            return read_expression(text, sort=TRUTH, scope=PAIR, where="w").bind((9,))(1, 2)
        except ClaimError as error:
            return str(error)


@settings(deadline=None)
@given(st.text(max_size=60) | st.text("ab n1+-*/%<>=!(){}[],.:|&^~@ \nifelsornt", max_size=40))
def test_any_text_is_read_or_refused(text: str) -> None:
    found = outcome(text)
    assert found in (True, False) or str(found).startswith("w: ")


@pytest.mark.parametrize("name", ["n", "m2", "rows_", "X", "match", "lo"])
def test_good_names(name: str) -> None:
    check_name(name, "w")


@pytest.mark.parametrize(
    "name",
    [
        "a",
        "b",
        "where",
        "abs",
        "gcd",
        "square",
        "true",
        "false",
        "True",
        "None",
        "if",
        "lambda",
        "",
        "_n",
        "2n",
        "n-1",
        "n m",
        "é",
        "\uff4e",
        "n\n",
        "n.x",
    ],
)
def test_bad_names(name: str) -> None:
    with pytest.raises(ClaimError, match="w: "):
        check_name(name, "w")
