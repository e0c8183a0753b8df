"""Periodic sets: least form, and words that say exactly the set."""

from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from certify.claim.periodic import PeriodicSet

bits = st.lists(st.booleans(), max_size=12)
cycles = st.lists(st.booleans(), min_size=1, max_size=8)


def reading(text: str, low: int, n: int) -> bool:
    """Read the words as a reader would, with Python's own operators."""
    if text == "no n":
        return False
    text = re.sub(r"every (n >= -?\d+)", r"\1", text)
    text = re.sub(r"n not in (\{[^}]*\}) mod (\d+)", r"n % \2 not in \1", text)
    text = re.sub(r"n in (\{[^}]*\}) mod (\d+)", r"n % \2 in \1", text)
    text = re.sub(r"n (!?)=+ (\d+) mod (\d+)", r"n % \3 \1== \2", text).replace("!==", "!=")
    text = text.replace("n even", "n % 2 == 0").replace("n odd", "n % 2 == 1")
    text = re.sub(r"n = (-?\d+)", r"n == \1", text)
    return n >= low and bool(eval(text, {}, {"n": n}))


@given(st.integers(-3, 5), bits, cycles)
def test_words_and_membership_say_the_same_set(
    low: int, head: list[bool], cycle: list[bool]
) -> None:
    held = PeriodicSet.of(low, head, cycle)
    whole = [*head, *cycle * 10]
    assert [n in held for n in range(low, low + len(whole))] == whole
    assert low - 1 not in held
    text = held.text("n")
    assert [reading(text, low, n) for n in range(low, low + len(whole))] == whole


@given(bits, cycles, bits, cycles)
def test_equal_sets_have_equal_least_forms_and_others_differ_first_where_they_do(
    head: list[bool], cycle: list[bool], other_head: list[bool], other_cycle: list[bool]
) -> None:
    one = PeriodicSet.of(2, head, cycle)
    longer = PeriodicSet.of(2, [*head, *cycle, cycle[0]], [*cycle[1:], cycle[0]] * 3)
    assert one == longer
    assert one.first_difference(longer) is None
    other = PeriodicSet.of(2, other_head, other_cycle)
    differing = [n for n in range(2, 200) if (n in one) != (n in other)]
    assert one.first_difference(other) == (differing[0] if differing else None)


@pytest.mark.parametrize(
    ("holds", "text"),
    [
        (lambda n: n in (10, 11, 12, 13) or n >= 17, "n in {10, 11, 12, 13} or n >= 17"),
        (lambda n: False, "no n"),
        (lambda n: True, "every n >= 2"),
        (lambda n: n % 2 == 0 and n >= 10, "n even and n >= 10"),
        (lambda n: n % 2 == 0, "n even"),
        (lambda n: n % 6 == 5, "n = 5 mod 6"),
        (lambda n: n % 6 != 5, "n != 5 mod 6"),
        (lambda n: n % 5 in (1, 3), "n in {1, 3} mod 5"),
        (lambda n: n % 5 not in (1, 3), "n not in {1, 3} mod 5"),
        (lambda n: n == 4, "n = 4"),
        (lambda n: n == 4 or n >= 7, "n = 4 or n >= 7"),
        (lambda n: n == 8 or (n % 2 == 0 and n >= 16), "n = 8 or (n even and n >= 16)"),
        (lambda n: n == 7 or n % 2 == 0, "n = 7 or n even"),
        (lambda n: n != 30, "2 <= n <= 29 or n >= 31"),
    ],
)
def test_words(holds: object, text: str) -> None:
    assert callable(holds)
    assert PeriodicSet.sample(2, 50, 30, holds).text("n") == text
