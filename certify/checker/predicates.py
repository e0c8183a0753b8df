"""The named predicates and functions of the rule language (FORMAT.md, 3.1)."""

from __future__ import annotations

from collections.abc import Callable
from functools import lru_cache
from math import gcd, isqrt

# Miller-Rabin with these bases decides primality below 3.3 * 10^24:
# Sorenson and Webster, Math. Comp. 86 (2017) 985-1003.
_BASES = (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37)
_ODD_PRIMES = (3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53)


def is_square(i: int) -> bool:
    """Whether i = k^2."""
    return i >= 0 and isqrt(i) ** 2 == i


def _is_power_of(i: int, e: int) -> bool:
    """Whether i = k^e for some k >= 1, where 1 <= i <= 2^53."""
    # The floating root is off by less than 1, and what counts is the exact power.
    near = round(i ** (1 / e))
    return any(k**e == i for k in (near - 1, near, near + 1))


@lru_cache(maxsize=1 << 16)
def is_cube(i: int) -> bool:
    """Whether i = k^3, for any integer k."""
    return i == 0 or _is_power_of(abs(i), 3)


def is_triangular(i: int) -> bool:
    """Whether i = k(k+1)/2, k >= 0."""
    # i = k(k+1)/2 says that 8i + 1 = (2k+1)^2; odd squares are never negative.
    return is_square(8 * i + 1)


def is_pentagonal(i: int) -> bool:
    """Whether i = k(3k-1)/2, k >= 0."""
    # i = k(3k-1)/2 says that 24i + 1 = (6k-1)^2; k = 0 gives 0.
    return i == 0 or (is_square(24 * i + 1) and isqrt(24 * i + 1) % 6 == 5)


def is_fibonacci(i: int) -> bool:
    """Whether i is 0, 1, 2, 3, 5, 8, ..."""
    # Gessel, Fibonacci Quarterly 10 (1972) 417-419: 5i^2 + 4 or 5i^2 - 4 is a square.
    return i >= 0 and (is_square(5 * i * i + 4) or is_square(5 * i * i - 4))


@lru_cache(maxsize=1 << 16)
def is_prime(i: int) -> bool:
    """Whether i is prime."""
    if i < 2:
        return False
    for p in _BASES:
        if i % p == 0:
            return i == p
    odd, twos = i - 1, 0
    while odd % 2 == 0:
        odd, twos = odd // 2, twos + 1
    for base in _BASES:
        x = pow(base, odd, i)
        if x in (1, i - 1):
            continue
        for _ in range(twos - 1):
            x = x * x % i
            if x == i - 1:
                break
        else:
            return False
    return True


@lru_cache(maxsize=1 << 16)
def is_power(i: int) -> bool:
    """Whether i = k^e with k >= 1 and e >= 2."""
    # k^e = (k^(e/p))^p for a prime p that divides e, and 2^54 is beyond all values.
    return i > 0 and (is_square(i) or any(_is_power_of(i, e) for e in _ODD_PRIMES))


PREDICATES: dict[str, Callable[[int], bool]] = {
    "square": is_square,
    "cube": is_cube,
    "triangular": is_triangular,
    "pentagonal": is_pentagonal,
    "fibonacci": is_fibonacci,
    "prime": is_prime,
    "power": is_power,
}
# Functions of two or more integers; `abs`, of one, is the fourth name of this sort.
FUNCTIONS: dict[str, Callable[..., int]] = {"min": min, "max": max, "gcd": gcd}
