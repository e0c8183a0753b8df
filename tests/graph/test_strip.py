"""Strips: which rules are recognised, that the pieces are equal, and what is refused."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from certify.claim.claim import read_claim
from certify.errors import ClaimError
from certify.graph.graph import Graph, Label
from certify.graph.strip import Strip, read_strip

NUMBERS = 'vertices = "1..n"'
ROUND = 'vertices = "0..n - 1"'
BOARD = 'vertices = { x = "1..n", y = "1..m" }'
TURNED = 'vertices = { y = "1..m", x = "1..n" }'
TWO_ROUNDS = 'vertices = { x = "0..n-1", y = "0..1" }'
PETERSEN = (
    "(a.x - b.x) % n in {1, n - 1} if a.y == b.y == 0 else "
    "(a.x - b.x) % n in {k, n - k} if a.y == b.y else a.x == b.x"
)


def read(folder: Path, graph: str, adjacent: str, instances: str = 'm = 4\nn = "2.."') -> Strip:
    claim = read_claim(write(folder, graph, adjacent, instances))
    return read_strip(claim, claim.rows[0])


def write(folder: Path, graph: str, adjacent: str, instances: str) -> Path:
    path = folder / "claim.toml"
    path.write_text(
        f'structure = "hamiltonian-cycle"\n[graph]\n{graph}\nadjacent = "{adjacent}"\n'
        f"[instances]\n{instances}\n"
    )
    return path


RECOGNISED = [
    # graph, rule, instances, zone, modulus, first: by hand from section 8.1 of FORMAT.md
    (NUMBERS, "abs(a - b) in {4, 7}", 'n = "2.."', 8, 1, 42),
    (NUMBERS, "abs(a - b) in {4, 7}", 'n = "60.."', 8, 1, 60),
    (NUMBERS, "abs(a - b) == 1", 'n = "2.."', 2, 1, 12),
    (NUMBERS, "a - b in {1, -1} or b - a == 2 or a - b == 2", 'n = "2.."', 3, 1, 17),
    (NUMBERS, "abs(a - b) < 4 and (a + b) % 3 == 1", 'n = "2.."', 5, 3, 31),
    (NUMBERS, "abs(a - b) in {1, 2} or {a, b} == {1, 4}", 'n = "2.."', 6, 1, 32),
    (NUMBERS, "abs(a - b) == 1 or {a, b} == {1, n}", 'n = "2.."', 3, 1, 17),
    (NUMBERS, "abs(a - b) == (1 if (a * 2 + b * 2) % 4 == 2 else 3)", 'n = "1.."', 4, 4, 28),
    (NUMBERS, "max(a, b) - min(a, b) in {2, 3}", 'n = "1.."', 4, 1, 22),
    ('vertices = "-3..n + 2"', "abs(a - b) == 2", 'n = "1.."', 3, 1, 17),
    ('vertices = "30..n"', "abs(a - b) == 2", 'n = "31.."', 3, 1, 46),
    ('vertices = "-1000..n"', "abs(a - b) == 2", 'n = "2.."', 3, 1, 17),
    (ROUND, "(a - b) % n in {1, n - 1, 3, n - 3}", 'n = "7.."', 4, 1, 22),
    (ROUND, "b == (a + 2) % n or a == (b + 2) % n", 'n = "7.."', 4, 1, 22),
    (BOARD, "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}", 'm = 4\nn = "2.."', 3, 1, 17),
    (TURNED, "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}", 'm = 4\nn = "2.."', 3, 1, 17),
    (NUMBERS, "abs(a - b) >= n - 5", 'n = "2.."', 6, 1, 32),
    (BOARD, "abs(a.x - b.x) * abs(a.y - b.y) == 6", 'm = 4\nn = "2.."', 7, 1, 37),
    (TWO_ROUNDS, PETERSEN, 'k = 2\nn = "5.."', 3, 1, 17),
    (BOARD, "abs(a.x - b.x) + abs(a.y - b.y) == 1", 'm = 3\nn = "1.."', 4, 1, 22),
]


@pytest.mark.parametrize(("graph", "rule", "instances", "zone", "modulus", "first"), RECOGNISED)
def test_strips_are_recognised_by_the_form_of_the_rule(
    graph: str, rule: str, instances: str, zone: int, modulus: int, first: int, tmp_path: Path
) -> None:
    strip = read(tmp_path, graph, rule, instances)
    assert (strip.zone, strip.modulus, strip.first) == (zone, modulus, first)


def cut_open(strip: Strip, graph: Graph, layer: int, n: int, added: int) -> set[frozenset[Label]]:
    """Return the edges without those over a gap before a layer, which is `added` wide.

    Named as in the longest graph: what is behind the gap is moved on, if it is shut.
    """
    last = strip.layers(n) - 1
    edges = set()
    for edge in graph.edges:
        ends = [graph.labels[v] for v in edge]
        low, high = sorted(map(strip.layer, ends))
        if layer <= low < layer + added or layer <= high < layer + added:
            continue
        if low < layer <= high and not (low < strip.zone and high > last - strip.zone):
            continue
        edges.add(frozenset(ends))
    return edges


@pytest.mark.parametrize(
    ("graph", "rule", "instances"), [case[:3] for case in RECOGNISED if "1000" not in case[0]]
)
def test_p_more_layers_are_put_into_the_middle_and_change_nothing_else(
    graph: str, rule: str, instances: str, tmp_path: Path
) -> None:
    strip = read(tmp_path, graph, rule, instances)
    size = strip.modulus
    for n in range(strip.first, strip.first + size):
        short, long = strip.graph(n), strip.graph(n + size)
        for layer in (2 * strip.zone, 2 * strip.zone + size, strip.layers(n) - 2 * strip.zone):
            moved = {
                frozenset(
                    strip.moved(label, size * (strip.layer(label) >= layer)) for label in edge
                )
                for edge in cut_open(strip, short, layer, n, 0)
            }
            assert moved == cut_open(strip, long, layer, n + size, size)
    middle = strip.layers(strip.first) // 2
    order = strip.order(strip.graph(strip.first))
    layers = [strip.layer(strip.graph(strip.first).labels[v]) for v in order]
    assert layers == sorted(layers)
    assert middle in layers


@pytest.mark.parametrize(
    ("graph", "rule", "instances", "said"),
    [
        (NUMBERS, "square(a + b)", 'n = "2.."', "square is asked of a number that grows"),
        (NUMBERS, "prime(abs(a - b))", 'n = "2.."', "prime is asked of a number that grows"),
        (NUMBERS, "gcd(a - b, 6) == 1", 'n = "2.."', "gcd is asked of a number that grows"),
        (NUMBERS, "a * b == 12", 'n = "2.."', "both factors grow"),
        (NUMBERS, "(a - b) ** 2 == 4", 'n = "2.."', "worked out from numbers that grow"),
        (NUMBERS, "abs(a // 2 - b // 2) == 1", 'n = "2.."', "worked out from numbers that grow"),
        (NUMBERS, "abs(a - b) in {1, n // 2}", 'n = "2.."', "worked out from numbers that grow"),
        (NUMBERS, "a + b == 12", 'n = "2.."', "it compares a [+] b with a constant"),
        (NUMBERS, "a + b == n", 'n = "2.."', "it compares a [+] b - n with a constant"),
        (
            NUMBERS,
            "abs(a - b) * 3 == n",
            'n = "2.."',
            "it compares 3[*]a - 3[*]b - n with a constant",
        ),
        (NUMBERS, "(a + b) % n == 1", 'n = "2.."', "this remainder grows"),
        (NUMBERS, "(a - b) % (2 * n) == 1", 'n = "2.."', "this remainder grows"),
        (NUMBERS, "abs(a - b) > 5", 'n = "2.."', "which are far apart"),
        (NUMBERS, "(a + b) % 2 == 1", 'n = "2.."', "which are far apart"),
        (NUMBERS, "abs(a - b) == n - 70", 'n = "2.."', "at most 60"),
        (NUMBERS, "abs(a - b) == 5 and (a + b) % 61 < 9", 'n = "2.."', "at most 60"),
        ('vertices = "1..7"', "abs(a - b) == 1", 'n = "2.."', "no coordinate ends at n"),
        ('vertices = "1..2 * n"', "abs(a - b) == 1", 'n = "2.."', "from a constant to n plus"),
        ('vertices = "n..2 * n"', "abs(a - b) == 1", 'n = "2.."', "from a constant to n plus"),
        ('vertices = "1..n // 2"', "abs(a - b) == 1", 'n = "2.."', "numbers that grow"),
        ('vertices = "1..max(n, 5)"', "abs(a - b) == 1", 'n = "2.."', "not one number"),
        (BOARD.replace("m", "n"), "abs(a.x - b.x) == 1", 'n = "2.."', "two coordinates grow"),
        (NUMBERS + '\nwhere = "a < 9"', "abs(a - b) == 1", 'n = "2.."', "too few vertices"),
        (NUMBERS + '\nwhere = "square(a)"', "abs(a - b) == 1", 'n = "2.."', "square is asked"),
        (BOARD, "abs(a.x - b.x) == 1 // a.y", 'm = 0\nn = "2.."', "too few|no value|empty"),
    ],
)
def test_what_is_no_strip_is_refused_with_one_sentence(
    graph: str, rule: str, instances: str, said: str, tmp_path: Path
) -> None:
    with pytest.raises(ClaimError, match=said) as caught:
        read(tmp_path, graph, rule, instances)
    message = str(caught.value).removeprefix(f"{tmp_path}{os.sep}")
    assert message.startswith("claim.toml:")
    assert "the family is no strip: " in message
    assert 'give an upper end, such as n = "2..60"' in message
    assert "\n" not in message


@pytest.mark.parametrize(
    "rule",
    [
        " + ".join(["(a - b) % n"] * 20) + " == 7",
        "(a - b) * (m + 1) % n == 3",
        "(" * 30 + "a - b" + ")" * 30 + " == 10 ** 12",
        "max(" + ", ".join(f"a - {i} * b" for i in range(60)) + ") == 1",
        "{" + ", ".join(f"a - b + n * {i}" for i in range(60)) + "} == {1, 2}",
        "abs(a - b) % (a - a + 5) == 1",
        "a - b == 9007199254740992",
        "2 ** (2 ** (2 ** 9)) == a - b",
        "1 // (m - 4) == a - b",
    ],
)
def test_hostile_rules_are_refused_or_read_at_once(rule: str, tmp_path: Path) -> None:
    said = ""
    try:
        first = read(tmp_path, NUMBERS, rule).first
    except ClaimError as error:
        first, said = 0, str(error)
    assert 0 < len(said) < 600 or 0 < first < 600
