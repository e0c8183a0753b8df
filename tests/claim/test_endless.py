"""Endless claims: which are read, what they say for every n, and what is refused."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from certify.claim.claim import Claim, count_instances, name_key, read_claim
from certify.claim.endless import claimed_set, endless_key, find_row, key_of, row_of
from certify.errors import ClaimError, InputError
from certify.graph.build import instances

ROWS = """\
structure = "hamiltonian-path"
[graph]
vertices = { x = "1..n", y = "1..m" }
adjacent = "abs(a.x - b.x) + abs(a.y - b.y) == 1"
[instances]
m = "2..4"
n = "m + 1.."
where = "m != 3"
"""
HOPS = """\
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) == 2"
[instances]
n = "2.."
"""


def read(folder: Path, text: str) -> Claim:
    (folder / "claim.toml").write_text(text)
    return read_claim(folder / "claim.toml")


def test_the_rows_are_those_of_the_other_parameters(tmp_path: Path) -> None:
    claim = read(tmp_path, ROWS)
    assert (claim.growing, count_instances(claim)) == ("n", 2)
    keys = [endless_key(claim, row) for row in claim.rows]
    assert keys == [{"m": 2, "n": "3.."}, {"m": 4, "n": "5.."}]
    assert [name_key(key) for key in keys] == ["m=2,n=3..", "m=4,n=5.."]
    assert [row_of(claim, key) for key in keys] == list(claim.rows)
    assert key_of(claim, claim.rows[1], 70) == {"m": 4, "n": 70}
    assert [instance.name for instance in instances(claim, tmp_path)] == ["m=2,n=3..", "m=4,n=5.."]


def test_one_n_of_a_row_can_be_named(tmp_path: Path) -> None:
    claim = read(tmp_path, ROWS)
    assert find_row(claim, "m=4,n=5..") == (claim.rows[1], None)
    assert find_row(claim, "m = 2, n = 1000003") == (claim.rows[0], 1_000_003)
    for name in ("m=3,n=9", "m=2,n=2", "m=2", "n=9", "m=2,n=x", "m=2,n=9..", "m=2,n=5,k=1", ""):
        with pytest.raises(InputError, match="there is no instance") as caught:
            find_row(claim, name)
        assert "m=2,n=3.." in str(caught.value)


@pytest.mark.parametrize(
    ("claimed", "text"),
    [
        ('exists = "10 <= n <= 13 or n >= 17"', "n in {10, 11, 12, 13} or n >= 17"),
        ('impossible = "n < 5 or n % 6 == 5"', "n != 5 mod 6 and n >= 6"),
        ("exists = true", "every n >= 2"),
        ("impossible = true", "no n"),
        ('exists = "n in {4, 2 * 3} or abs(n - 20) > 10 and n % 4 in {0, 2}"', None),
        ('exists = "min(n, 30) == n"', None),
        ('exists = "(n % 2 if n > 9 else 1) == 1"', None),
        ('exists = "(3 * n + 1) % 5 == n % 7 % 5"', None),
        ('exists = "7 % n == 7 or prime(n % 12)"', None),
    ],
)
def test_the_claimed_set_is_what_the_expression_says(
    claimed: str, text: str | None, tmp_path: Path
) -> None:
    claim = read(tmp_path, f"{HOPS}[answers]\n{claimed}\n")
    held = claimed_set(claim, claim.rows[0])
    assert held is not None
    assert text is None or held.text("n") == text
    for n in range(2, 500):
        assert (n in held) == claim.claimed({"n": n})


def test_nothing_may_be_claimed(tmp_path: Path) -> None:
    claim = read(tmp_path, HOPS)
    assert claimed_set(claim, claim.rows[0]) is None


@pytest.mark.parametrize(
    ("claimed", "said"),
    [
        ("square(n)", "square is asked of a number that grows"),
        ("n ** 2 > 9", "worked out from numbers that grow"),
        ("n * n > 9", "both factors grow"),
        ("n // 2 > 9", "worked out from numbers that grow"),
        ("gcd(n, 6) == 1", "gcd is asked of a number that grows"),
        ("n % n == 0 and n % (2 * n) == n", "this remainder grows"),
        ("n % (n - n) == 0", "what it is divided by is not one number|this remainder"),
        ("n % 1009 == 1", "a period of at most"),
        ("n > 10 ** 9", "periodic from"),
        ("n > 1 // 0", "division by zero"),
    ],
)
def test_claims_that_are_not_periodic_by_their_form(
    claimed: str, said: str, tmp_path: Path
) -> None:
    claim = read(tmp_path, f'{HOPS}[answers]\nexists = "n > 3 or n == 2"\n')
    text = f'{HOPS}[answers]\nexists = "n == 2 or {claimed}"\n'
    claim = read(tmp_path, text)
    with pytest.raises(ClaimError, match=said) as caught:
        claimed_set(claim, claim.rows[0])
    message = str(caught.value).removeprefix(f"{tmp_path}{os.sep}")
    assert message.startswith("claim.toml:8: [answers] exists")
    assert "\n" not in message


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('n = "2.."', 'n = "2.."\nk = "1.."', ":7: [instances] k: only one parameter"),
        ('n = "2.."', 'n = "2.."\nk = "n..n + 1"', ":7: [instances] k: n is endless"),
        ('n = "2.."', 'n = "2.."\nwhere = "n % 2 == 0"', ":7: [instances] where: n is endless"),
        ('n = "2.."', 'n = "n.."', ":6: [instances] n: first value"),
        ('n = "2.."', 'n = " .."', ":6: [instances] n"),
        ("[graph]", 'ends = [1, "n"]\n[graph]', ":2: ends: an endless claim has no ends"),
        ("[graph]", "required = [[1, 3]]\n[graph]", ":2: required: an endless claim"),
        ("[graph]", "forbidden = []\n[graph]", ":2: forbidden: an endless claim"),
        ('"2.."', '"2.."\n[answers]\nexists = 5', ":8: [answers] exists: an endless claim"),
        ('"1..n"', '"1.."', ":3: [graph] vertices"),
    ],
)
def test_what_an_endless_claim_cannot_have(old: str, new: str, said: str, tmp_path: Path) -> None:
    with pytest.raises(ClaimError) as caught:
        read(tmp_path, HOPS.replace(old, new))
    assert said in str(caught.value)
    assert "\n" not in str(caught.value)
