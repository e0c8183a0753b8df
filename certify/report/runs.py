"""Runs of instances: consecutive ones that a table or a theorem tells as one."""

from __future__ import annotations

from collections.abc import Callable, Hashable, Iterable, Sequence
from dataclasses import dataclass

from certify.claim.instances import EndlessKey, Key

AnyKey = Key | EndlessKey


@dataclass(frozen=True)
class Run:
    """Consecutive instances: of a list, or with one parameter, the last, growing by 1.

    first, last: their keys, equal for a run of one. places: of the instances among all,
    from 0.
    """

    first: AnyKey
    last: AnyKey
    places: range


def find_runs(keys: Sequence[AnyKey], same: Callable[[int], Hashable]) -> list[Run]:
    """Return the runs of consecutive instances for which `same`, of their places, is equal."""
    runs: list[Run] = []
    start = 0
    for place in range(1, len(keys) + 1):
        if (
            place == len(keys)
            or same(place) != same(start)
            or not follows(keys[place - 1], keys[place])
        ):
            runs.append(Run(keys[start], keys[place - 1], range(start, place)))
            start = place
    return runs


def follows(one: AnyKey, other: AnyKey) -> bool:
    """Return whether the second instance is the next one in the last parameter."""
    if isinstance(one, int) or isinstance(other, int):
        return isinstance(one, int) and isinstance(other, int) and other == one + 1
    if not one:
        return False
    last = list(one)[-1]
    if any(one[name] != other[name] for name in one if name != last):
        return False
    before, after = one[last], other[last]
    return isinstance(before, int) and isinstance(after, int) and after == before + 1


def set_values(first: int | str, last: int | str, symbol: str) -> str:
    """Return the values of a parameter as LaTeX: equal to one, between two, or from one on."""
    if isinstance(first, str):
        return rf"{symbol} \ge {first.removesuffix('..')}"
    if first == last:
        return f"{symbol} = {first}"
    if isinstance(last, int) and last == first + 1:
        return rf"{symbol} \in \{{{first}, {last}\}}"
    return rf"{first} \le {symbol} \le {last}"


def span(values: Iterable[int]) -> str:
    """Return the least and the largest of some numbers: "5", "5 to 9"."""
    listed = sorted(values)
    return str(listed[0]) if listed[0] == listed[-1] else f"{listed[0]} to {listed[-1]}"
