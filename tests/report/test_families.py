"""The appendix of endless claims: what is stated for every n, and what it is stated from."""

from __future__ import annotations

import json
import re
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from certify.claim.periodic import PeriodicSet
from certify.evidence.endless import read_answers
from certify.report.appendix import render_appendix
from certify.report.inline import formula
from certify.report.items import measure
from certify.report.maths import set_answers, set_maths
from tests.flow.conftest import Command, certify
from tests.report import folders

__all__ = ["certify"]  # the fixture

HOPS = folders.HOPS.replace('"1..14"', '"1.."')
KNIGHT = """\
structure = "hamiltonian-cycle"
[graph]
vertices = { x = "1..n", y = "1..m" }
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"
[instances]
m = "2..3"
n = "m.."
"""
CLAIMED = """
[answers]
exists = "m == 3 and n % 2 == 0 and n >= 10"
"""
NEVER = """
[answers]
exists = false
"""
TEXTS = {
    "hops": HOPS,
    "surveyed": KNIGHT,
    "claimed": KNIGHT + CLAIMED,
    "never": KNIGHT.replace("2..3", "2..2") + NEVER,
    "one": KNIGHT.replace("2..3", "3..3"),
}


@pytest.fixture(scope="module")
def proved(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Path]:
    root = tmp_path_factory.mktemp("families")
    return {name: folders.prove_text(root / name, text) for name, text in TEXTS.items()}


def read(folder: Path) -> str:
    return " ".join(render_appendix(folder, "latex").text.split())


def records(folder: Path) -> list[dict[str, Any]]:
    return [json.loads(line) for line in (folder / "evidence.jsonl").read_text().splitlines()]


def test_the_theorem_speaks_of_every_n(proved: dict[str, Path]) -> None:
    text = read(proved["hops"])
    assert "Let $n \\ge 1$. Then $G(n)$ has a Hamiltonian path if and only if" in text
    answers = read_answers(records(proved["hops"])[0]["evidence"])
    exact = f"if and only if {set_answers(answers, 'n')}."
    assert exact.replace("\ue002", "$").replace("\ue003", "$") in text
    assert r"$n \in \{1, 7, 8, 9, 10\}$ or $n \ge 12$" in text


def test_the_closed_knights_tours_on_three_rows(proved: dict[str, Path]) -> None:
    """Schwenk, Math. Mag. 64 (1991) 325-332: with 3 rows for the even n >= 10, with 2 never."""
    said = r"$n$ is even and $n \ge 10$"
    where = r"Let $m = 3$ and $n \ge m$"
    one = read(proved["one"])
    assert f"{where}. Then $G(m, n)$ has a Hamiltonian cycle if and only if {said}." in one
    surveyed = read(proved["surveyed"])
    assert f"in exactly these cases: for $m = 2$ never; for $m = 3$ if {said}." in surveyed
    assert r"if and only if $m = 3$ and $n \equiv 0 \pmod{2}$ and $n \ge 10$." in (
        read(proved["claimed"])
    )
    assert r"Let $m = 2$ and $n \ge m$. Then $G(m, n)$ has no Hamiltonian cycle." in (
        read(proved["never"])
    )


@pytest.mark.parametrize("name", TEXTS)
def test_every_row_has_a_proposition_and_its_numbers(proved: dict[str, Path], name: str) -> None:
    text = read(proved[name])
    labels = re.findall(r"\\label\{([^}]*)\}", text)
    assert len(labels) == len(set(labels))
    assert set(re.findall(r"\\ref\{([^}]*)\}", text)) <= set(labels)
    found = records(proved[name])
    assert sum(":family:" in label for label in labels) == len(found)
    for number, record in enumerate(found, 1):
        body = record["evidence"]
        assert f"in line {number} of" in text
        for part in body["classes"]:
            size = sum(part["states"])
            assert f"{size} states" in text or size == 0
        assert rf"n \ge {body['first']}$" in text
    digest = json.loads((proved[name] / "manifest.json").read_text())["sha256"]["evidence.jsonl"]
    assert text.replace(r"\allowbreak ", "").count(digest) == 2
    assert "Let $T(n)$ be the set of all states" in text


@pytest.mark.parametrize("form", ["latex", "markdown"])
@pytest.mark.parametrize("name", TEXTS)
def test_the_text_holds_no_mark_and_no_object(
    proved: dict[str, Path], name: str, form: str
) -> None:
    text = render_appendix(proved[name], form).text
    assert not re.search("[\ue000-\uf8ff]", text)
    assert not re.search(r"None|\bdict\b|'\w+':|apex|Traceback", text)


@pytest.mark.parametrize("name", TEXTS)
def test_the_lengths_of_small_instances_add_up(proved: dict[str, Path], name: str) -> None:
    """The stored length is the sum over all parts (FORMAT.md, section 8.3)."""
    for record in records(proved[name]):
        body = record["evidence"]
        states = sum(sum(part["states"]) for part in body["classes"])
        small = [measure(part["kind"], part["evidence"]) for part in body["small"]]
        assert record["length"] == states + sum(small)


def test_the_table_goes_on_for_ever(proved: dict[str, Path]) -> None:
    text = render_appendix(proved["claimed"], "latex").text
    rows = re.findall(r"^\$[23]\$ & .*$", text, re.MULTILINE)
    assert re.match(r"\$2\$ & \$17, 18, \\dots\$ & none & repeating states & 0 & Prop", rows[1])
    assert re.match(r"\$3\$ & \$17, 18, \\dots\$ & if \$n\$ is even & repeating states", rows[-1])


def test_constructions_are_printed_with_their_limits(proved: dict[str, Path]) -> None:
    text = read(proved["hops"])
    (record,) = records(proved["hops"])
    recipes = record["evidence"]["recipes"]
    assert recipes
    for recipe in recipes:
        assert f"$n = {recipe['n']} + {recipe['step']}k$" in text
    assert "does not rest on it" in text
    assert "Hamiltonian cycles in the large graphs" not in read(proved["never"])


def test_a_row_left_open_is_left_out(certify: Command, tmp_path: Path) -> None:
    folder = folders.prove_text(tmp_path / "all", KNIGHT + CLAIMED)
    redone = certify("prove", folder / "claim.toml", "--redo", "m=3,n=3..", "--budget", "0.000001")
    assert redone.code == 4
    appendix = render_appendix(folder, "latex")
    text = " ".join(appendix.text.split())
    assert appendix.left_open == 1
    assert r"but leave out $m = 3,\ n \ge 3$." in text
    assert r"For $m = 3,\ n \ge 3$ neither a Hamiltonian cycle nor a reason" in text
    assert "accepted 1 of 2 families (1 is open)" in text
    everything = certify("prove", folder / "claim.toml", "--redo", "all", "--budget", "0.000001")
    assert everything.code == 4
    nothing = render_appendix(folder, "latex")
    assert nothing.left_open == 2
    assert r"\begin{evidencetheorem}" not in nothing.text
    assert r"\begin{evidenceproposition}" not in nothing.text


def test_small_formulas() -> None:
    assert set_maths("T(n + 2k) = T(n)") == formula("T(n + 2k) = T(n)")
    assert set_maths("width >= 42") == formula(r"\mathrm{width} \ge 42")
    assert set_maths("0, 2, ..., 2k") == formula(r"0, 2, \dots, 2k")


def holds_even(n: int) -> bool:
    return n % 2 == 0


@pytest.mark.parametrize(
    ("low", "start", "period", "holds", "said"),
    [
        (2, 2, 1, lambda n: False, ""),
        (2, 2, 1, lambda n: True, r"<n \ge 2>"),
        (3, 3, 2, holds_even, "<n> is even"),
        (3, 5, 2, lambda n: n % 2 == 1 and n > 4, r"<n> is odd and <n \ge 5>"),
        (1, 1, 3, lambda n: n % 3 == 1, r"<n \equiv 1 \pmod{3}>"),
        (1, 1, 3, lambda n: n % 3 != 1, r"<n \not\equiv 1 \pmod{3}>"),
        (1, 1, 5, lambda n: n % 5 in {0, 1}, r"<n \bmod 5 \in \{0, 1\}>"),
        (1, 9, 1, lambda n: n in {1, 3}, r"<n \in \{1, 3\}>"),
        (1, 20, 1, lambda n: 2 <= n <= 9 or n >= 17, r"<2 \le n \le 9> or <n \ge 17>"),
        (
            1,
            9,
            2,
            lambda n: n == 3 or (n > 6 and n % 2 == 0),
            r"<n = 3> or (<n> is even and <n \ge 8>)",
        ),
    ],
)
def test_sets_are_told(
    low: int, start: int, period: int, holds: Callable[[int], bool], said: str
) -> None:
    text = set_answers(PeriodicSet.sample(low, start, period, holds), "n")
    assert text.replace("\ue002", "<").replace("\ue003", ">") == said
