"""Rules as terms of Coq have the values that they have in a claim."""

from __future__ import annotations

import random
import re
import subprocess
from pathlib import Path

import pytest

from certify.claim.language import INTEGER, TRUTH, read_expression
from certify.claim.names import Scope
from certify.claim.predicates import PREDICATES
from certify.errors import ClaimError
from certify.report.theorem import sheet
from certify.report.theorem.gallina import write_comment, write_name, write_rule, write_vertex

SCOPE = Scope(parameters=("m", "n"), vertices=("a", "b"))
CELLS = Scope(parameters=("n",), vertices=("a", "b"), coordinates=("x", "end"))
HEAD = """\
From Coq Require Import Bool List ZArith.
From Certify Require Import Rules.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.
"""
POINTS = 12
RULES = 150


def run_coq(compiled: Path, folder: Path, text: str) -> str:
    """Return what Coq prints about a file; it has to be in order."""
    file = folder / "text.v"
    file.write_text(text)
    done = subprocess.run(
        ["coqc", "-q", "-Q", str(compiled), "Certify", str(file)],
        capture_output=True, text=True, check=False,
    )  # fmt: skip
    assert done.returncode == 0, done.stderr
    return done.stdout


def compute(compiled: Path, folder: Path, terms: list[str]) -> list[str]:
    """Return what Coq says that terms of type `bool` are."""
    listed = ";\n ".join(terms)
    text = f"{HEAD}Definition values : list bool := [{listed}].\nEval vm_compute in values.\n"
    return re.findall("true|false", run_coq(compiled, folder, text))


def draw_integer(chance: random.Random, depth: int) -> str:
    """Return an integer expression."""
    if depth == 0 or chance.random() < 0.2:
        return chance.choice(["a", "b", "m", "n", "0", "1", "2", "7", "10"])
    one, two = (draw_integer(chance, depth - 1) for _ in range(2))
    return chance.choice(
        [
            f"({one} {chance.choice(['+', '-', '*', '//', '%'])} {two})",
            f"{one} + {two} - {one}",
            f"(-{one})",
            f"abs({one})",
            f"({one}) ** {chance.randint(0, 2)}",
            f"{chance.choice(['min', 'max', 'gcd'])}({one}, {two}, {chance.randint(-3, 9)})",
            f"({one} if {draw_truth(chance, depth - 1)} else {two})",
        ]
    )


def draw_truth(chance: random.Random, depth: int) -> str:
    """Return a truth value."""
    if depth == 0:
        return chance.choice(["true", "False", "a < b", "n == 2"])
    one, two, three = (draw_integer(chance, depth - 1) for _ in range(3))
    yes, no = (draw_truth(chance, depth - 1) for _ in range(2))
    order, other = (chance.choice(["==", "!=", "<", "<=", ">", ">="]) for _ in range(2))
    word = chance.choice(sorted(PREDICATES))
    return chance.choice(
        [
            f"({one} {order} {two})",
            f"({one} {order} {two} {other} {three})",
            f"({one} {chance.choice(['in', 'not in'])} {{{two}, {three}}})",
            f"({one} < {two} in ({three}, 1))",
            f"({{{one}, {two}}} {chance.choice(['==', '!='])} {{{three}, {one}}})",
            f"({yes} {chance.choice(['and', 'or'])} {no} {chance.choice(['and', 'or'])} {yes})",
            f"(({yes}) {chance.choice(['==', '!='])} ({no}))",
            f"(not {yes})",
            f"({yes} if {no} else {one} > 0)",
            f"{word}({one})",
            f"({word}({one}) == {word}({two}))",
        ]
    )


def test_random_rules_have_the_same_values(compiled: Path, tmp_path: Path) -> None:
    chance = random.Random(1)
    terms: list[str] = []
    expected: list[bool] = []
    for _ in range(RULES):
        texts = (draw_integer(chance, 3), draw_truth(chance, 3))
        for text, sort in zip(texts, (INTEGER, TRUTH), strict=True):
            rule = read_expression(text, sort=sort, scope=SCOPE, where="w")
            term = write_rule(rule)
            for _ in range(POINTS):
                m, n, a, b = (chance.randint(-3, 9) for _ in range(4))
                try:
                    value = rule.bind((m, n))(a, b)
                except ClaimError:
                    continue  # an error of the claim: Coq has some value
                call = f"((fun m n a b : Z => {term}) ({m}) ({n}) ({a}) ({b}))"
                terms.append(call if sort == TRUTH else f"({call} =? ({value}))")
                expected.append(bool(value) if sort == TRUTH else True)
    assert len(terms) > RULES * POINTS
    assert 0 < sum(expected) < len(expected)
    assert [word == "true" for word in compute(compiled, tmp_path, terms)] == expected


def test_names_that_coq_or_the_files_use_get_a_prime() -> None:
    plain = ["n", "m", "k", "rows", "size2", "N"]
    assert [write_name(name) for name in plain] == plain
    taken = ["end", "Q", "h", "row", "fun", "more", "nil", "mod", "O", "a_x", "n_1", "IF", "Some"]
    assert [write_name(name) for name in taken] == [f"{name}'" for name in taken]


def test_no_name_that_coq_knows_stands_for_something_else(compiled: Path, tmp_path: Path) -> None:
    """Every name in sight is taken for a parameter once, in each place where one can stand.

    In a pattern a constructor is no variable; a keyword is none anywhere.
    """
    found = run_coq(compiled, tmp_path, f"{sheet.HEAD}Search _.\nPrint Grammar constr.\n")
    names = set(re.findall(r"^([A-Za-z]\w*):", found, re.M | re.A))
    names |= set(re.findall(r'"([A-Za-z]\w*)"', found, re.A))
    assert {"Some", "more", "nil", "conj", "forall", "mod", "extend"} <= names
    assert len(names) > 1000
    variables = sorted(set(map(write_name, names)))
    assert len(variables) == len(names)
    checks = [
        f"Check (fun row : Z * Z => let '({v}, x1) := row in filter (Z.eqb {v}) (range 1 x1)).\n"
        f"Check (forall {v} x1, 1 <= {v} <= 2 -> exists h, h = {v} + x1)."
        for v in variables
    ]
    run_coq(compiled, tmp_path, sheet.HEAD + "\n".join(checks))


@pytest.mark.parametrize(
    "text",
    [
        "ends *) Axiom easy : False. (* it",
        "(*) and **) and (**) and ( *",
        'a text " that does not end',
        "two\nlines\u2028and \x00\x07\x1b controls",
        "turned \u202e around",
        "*" * 9 + ")" * 9 + "(" * 9 + "*" * 9,
        "back\\slash, caf\u00e9 \u2014 n\u00b2",
    ],
)
def test_no_words_end_a_comment(text: str, compiled: Path, tmp_path: Path) -> None:
    comment = write_comment(text)
    assert comment.isprintable()
    said = run_coq(compiled, tmp_path, f"(** * {comment} *)\n(** {comment}, {comment} *)\nCheck I.")
    assert said.split() == ["I", ":", "True"]


def test_words_that_do_no_harm_stay_as_they_are() -> None:
    for text in ("a * b + 1", "Kn\u00f6del's graphs (n = 2^k)", "2 ** n in {1, 4}"):
        assert write_comment(text) == text


def test_coordinates_are_variables_of_a_pattern(compiled: Path, tmp_path: Path) -> None:
    text = "a.x + b.end == n and a.end < b.x"
    rule = read_expression(text, sort=TRUTH, scope=CELLS, where="w")
    a, b = write_vertex(CELLS, "a"), write_vertex(CELLS, "b")
    assert (a, b) == ("'(a_x, a_end)", "'(b_x, b_end)")
    term = f"(fun (n : Z) {a} {b} => {write_rule(rule)})"
    calls = [f"{term} 9 (4, 1) (2, 5)", f"{term} 9 (4, 2) (2, 5)", f"{term} 9 (4, 1) (2, 4)"]
    assert compute(compiled, tmp_path, calls) == ["true", "false", "false"]


@pytest.mark.parametrize(
    ("text", "term"),
    [
        ("square(a + b)", "square (a + b)"),
        ("abs(a - b) in {4, 7}", "member (Z.abs (a - b)) [4; 7]"),
        ("2 <= a < n", "(2 <=? a) &&& (a <? n)"),
        ("a * b + 1 != m ** 2", "negb (((a * b) + 1) =? (m ^ 2))"),
        ("{a, b} == {1, 2} or not a > b", "(same_set [a; b] [1; 2]) ||| (negb (b <? a))"),
    ],
)
def test_terms_read_like_the_rule(text: str, term: str) -> None:
    assert write_rule(read_expression(text, sort=TRUTH, scope=SCOPE, where="w")) == term
