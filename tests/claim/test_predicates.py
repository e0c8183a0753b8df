"""The number predicates, against published sequences and near the bound of 2^53."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.predicates import BOUND, PREDICATES

# Predicates against sequences of the On-Line Encyclopedia of Integer Sequences,
# first terms from memory, by the number of the sequence.
SEQUENCES = {
    "power": [1, 4, 8, 9, 16, 25, 27, 32, 36, 49, 64, 81, 100, 121, 125, 128, 144],  # A001597
    "pentagonal": [0, 1, 5, 12, 22, 35, 51, 70, 92, 117, 145, 176, 210, 247, 287],  # A000326
    "fibonacci": [0, 1, 2, 3, 5, 8, 13, 21, 34, 55, 89, 144, 233, 377, 610, 987],  # A000045
    "triangular": [0, 1, 3, 6, 10, 15, 21, 28, 36, 45, 55, 66, 78, 91, 105, 120],  # A000217
    "prime": [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53, 59],  # A000040
    "square": [0, 1, 4, 9, 16, 25, 36, 49, 64, 81, 100, 121, 144, 169],  # A000290
    "cube": [0, 1, 8, 27, 64, 125, 216, 343, 512, 729, 1000, 1331],  # A000578
}


def test_every_predicate_has_a_sequence() -> None:
    assert set(SEQUENCES) == set(PREDICATES)


@pytest.mark.parametrize(("name", "terms"), SEQUENCES.items())
def test_predicate_agrees_with_sequence(name: str, terms: list[int]) -> None:
    assert [i for i in range(terms[-1] + 1) if PREDICATES[name](i)] == terms


@pytest.mark.parametrize("name", [name for name in SEQUENCES if name != "cube"])
def test_negative_numbers_are_of_no_kind(name: str) -> None:
    assert not any(PREDICATES[name](i) for i in range(-200, 0))


def test_negative_cubes() -> None:
    assert [i for i in range(-130, 0) if PREDICATES["cube"](i)] == [-125, -64, -27, -8, -1]


@pytest.mark.parametrize(
    ("name", "below", "count"),
    [
        ("prime", 10**4, 1229),  # A006880, from memory
        ("power", 10**5, 366),  # A070428 gives 367 for 10^5 itself included, from memory
        ("fibonacci", BOUND, 78),  # F(78) = 8944394323791464 is the last (from memory)
    ],
)
def test_counts_of_kinds(name: str, below: int, count: int) -> None:
    if name == "fibonacci":
        a, b, found = 1, 2, 1
        while a < below:
            assert PREDICATES[name](a)
            a, b, found = b, a + b, found + 1
        assert found == count
    else:
        assert sum(PREDICATES[name](i) for i in range(below)) == count


@pytest.mark.parametrize(
    "pseudoprime",
    [
        3215031751,  # strong to the bases 2, 3, 5, 7 (Pomerance, Selfridge, Wagstaff 1980)
        3474749660383,  # to 2, ..., 13 (Jaeschke 1993, from memory)
        341550071728321,  # to 2, ..., 17 (Jaeschke 1993, from memory)
    ],
)
def test_strong_pseudoprimes_are_not_prime(pseudoprime: int) -> None:
    assert not PREDICATES["prime"](pseudoprime)


def test_primes_near_the_bound() -> None:
    # 2^53 - 111 is the largest prime below 2^53 (A013603, from memory); 2^31 - 1 is Euler's.
    assert [i for i in range(BOUND - 120, BOUND) if PREDICATES["prime"](i)] == [BOUND - 111]
    assert PREDICATES["prime"](2**31 - 1)


@settings(deadline=None)
@given(st.integers(0, 94906265))
def test_squares_near_the_bound_are_exact(k: int) -> None:
    square = PREDICATES["square"]
    assert square(k * k)
    assert square(k * k + 1) == (k == 0)
    assert PREDICATES["triangular"](k * (k + 1) // 2)
    assert PREDICATES["triangular"](k * (k + 1) // 2 + 1) == (k <= 1 and k == 0)


@settings(deadline=None)
@given(st.integers(-208063, 208063))
def test_cubes_near_the_bound_are_exact(k: int) -> None:
    assert PREDICATES["cube"](k**3)
    assert PREDICATES["cube"](k**3 + 1) == (k in (-1, 0))
    assert PREDICATES["power"](k**3) == (k > 0)


@settings(deadline=None)
@given(st.integers(2, 200000), st.integers(2, 53))
def test_powers_near_the_bound_are_exact(k: int, e: int) -> None:
    if k**e <= BOUND:
        assert PREDICATES["power"](k**e)
        # Catalan's conjecture (Mihailescu 2004): 8 and 9 are the only neighbours.
        assert PREDICATES["power"](k**e + 1) == (k**e == 8)


@settings(deadline=None)
@given(st.integers(1, 77000000))
def test_pentagonal_numbers_near_the_bound_are_exact(k: int) -> None:
    assert PREDICATES["pentagonal"](k * (3 * k - 1) // 2)
    assert PREDICATES["pentagonal"](k * (3 * k + 1) // 2) is False  # of negative k
