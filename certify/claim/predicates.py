"""The number predicates of the rule language, exact for |i| <= 2^53.

Each takes one integer and says whether it is of that kind; section 3.1 of
FORMAT.md defines the kinds. Floating point is used only to guess a root, which
is then checked in integers. The two costly predicates remember their last
answers: the rules ask about the same few sums again and again.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from functools import lru_cache
from math import isqrt

BOUND = 2**53
"""The largest absolute value a number of the rule language can have."""

_REMEMBERED = 1 << 16


def is_square(i: int) -> bool:
    """Return whether i = k^2 for some k >= 0."""
    return i >= 0 and isqrt(i) ** 2 == i


def is_cube(i: int) -> bool:
    """Return whether i = k^3 for some integer k."""
    return _is_power(abs(i), 3)


def is_triangular(i: int) -> bool:
    """Return whether i = k(k+1)/2 for some k >= 0, that is, 8i + 1 = (2k+1)^2."""
    return i >= 0 and is_square(8 * i + 1)


def is_pentagonal(i: int) -> bool:
    """Return whether i = k(3k-1)/2 for some k >= 0, that is, 24i + 1 = (6k-1)^2."""
    if i <= 0:
        return i == 0
    root = isqrt(24 * i + 1)
    return root * root == 24 * i + 1 and root % 6 == 5


def is_fibonacci(i: int) -> bool:
    """Return whether i is one of 0, 1, 2, 3, 5, 8, ..."""
    return i in _FIBONACCI


@lru_cache(maxsize=_REMEMBERED)
def is_prime(i: int) -> bool:
    """Return whether i is a prime.

    Trial division by the primes up to 23, then the strong pseudoprime test to
    these nine bases, which errs for no i below 3,825,123,056,546,413,051 (Jiang
    and Deng, Mathematics of Computation 83 (2014) 2915-2924).
    """
    if i < 2:
        return False
    for p in _BASES:
        if i % p == 0:
            return i == p
    if i < 29 * 29:
        return True
    odd = i - 1
    twos = (odd & -odd).bit_length() - 1
    odd >>= twos
    return all(_passes(i, base, odd, twos) for base in _BASES)


@lru_cache(maxsize=_REMEMBERED)
def is_power(i: int) -> bool:
    """Return whether i = k^e for some k >= 1, e >= 2.

    A prime e is enough: k^(ef) = (k^e)^f.
    """
    if i < 4 or is_square(i):
        return i > 0 and is_square(i)
    most = i.bit_length()  # 2^e <= i
    return any(_is_power(i, e) for e in _ODD if e < most)


def _is_power(i: int, e: int) -> bool:
    """Return whether i = k^e, 0 <= i <= 2^53.

    The floating root of k^e is off by far less than 1/2 (k <= 2^18 for e >= 3).
    """
    root = round(i ** (1 / e))
    return bool(root**e == i)


def _passes(i: int, base: int, odd: int, twos: int) -> bool:
    """Return whether i = odd * 2^twos + 1 is a strong probable prime to the base."""
    x = pow(base, odd, i)
    if x in (1, i - 1):
        return True
    for _ in range(twos - 1):
        x = x * x % i
        if x == i - 1:
            return True
    return False


def _fibonacci_numbers() -> frozenset[int]:
    numbers = [0, 1]
    while numbers[-1] <= BOUND:
        numbers.append(numbers[-1] + numbers[-2])
    return frozenset(numbers)


_BASES = (2, 3, 5, 7, 11, 13, 17, 19, 23)
_ODD = (3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53)
_FIBONACCI = _fibonacci_numbers()

PREDICATES: Mapping[str, Callable[[int], bool]] = {
    "square": is_square,
    "cube": is_cube,
    "triangular": is_triangular,
    "pentagonal": is_pentagonal,
    "fibonacci": is_fibonacci,
    "prime": is_prime,
    "power": is_power,
}
