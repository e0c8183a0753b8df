"""Sets of integers that are periodic from some point on, exactly and in their least form.

The answers of an endless claim are such a set: the n >= low for which the object
exists. `PeriodicSet.parts` says it in a few *parts*, of which the words here and
other ways to set it are made: a run, some single numbers, or a *tail* of residues.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from itertools import groupby

LONGEST_LISTED = 4
"""Runs of more consecutive numbers are written by their ends."""


@dataclass(frozen=True)
class Run:
    """All numbers from low to high; high None: no end."""

    low: int
    high: int | None


@dataclass(frozen=True)
class Singles:
    """Some numbers."""

    numbers: tuple[int, ...]


@dataclass(frozen=True)
class Tail:
    """The numbers with one of these residues, from `start` on; start None: no bound is needed.

    excluded: the residues are those that the numbers do not have.
    """

    modulus: int
    residues: tuple[int, ...]
    excluded: bool
    start: int | None


@dataclass(frozen=True)
class PeriodicSet:
    """A set of integers from `low` on, in least form.

    head: whether low, low + 1, ... are in the set, as long as there is no rule.
    cycle: the same for the numbers that follow, repeated for ever.
    Two such values are equal if and only if `low` and the sets are.
    """

    low: int
    head: tuple[bool, ...]
    cycle: tuple[bool, ...]

    @classmethod
    def of(cls, low: int, head: Sequence[bool], cycle: Sequence[bool]) -> PeriodicSet:
        """Return the set in least form: least period first, then the shortest head."""
        first = tuple(map(bool, head))
        period = tuple(map(bool, cycle))
        for size in range(1, len(period) + 1):
            if len(period) % size == 0 and period == period[:size] * (len(period) // size):
                period = period[:size]
                break
        while first and first[-1] == period[-1]:
            first, period = first[:-1], (period[-1], *period[:-1])
        return cls(low, first, period)

    @classmethod
    def sample(cls, low: int, start: int, period: int, holds: Callable[[int], bool]) -> PeriodicSet:
        """Return the set of all n >= low that `holds`, which is periodic from `start` on."""
        start = max(low, start)
        return cls.of(
            low,
            [holds(n) for n in range(low, start)],
            [holds(n) for n in range(start, start + period)],
        )

    @property
    def start(self) -> int:
        """Return where the head ends."""
        return self.low + len(self.head)

    @property
    def period(self) -> int:
        """Return the least period."""
        return len(self.cycle)

    def __contains__(self, n: object) -> bool:
        if not isinstance(n, int) or n < self.low:
            return False
        return self.head[n - self.low] if n < self.start else self._follows(n)

    def first_difference(self, other: PeriodicSet) -> int | None:
        """Return the least n that is in one of two sets with equal `low` only, None if equal.

        Cost: linear in the heads and the product of the periods, at most.
        """
        if self == other:
            return None
        last = max(self.start, other.start) + self.period * other.period
        return next((n for n in range(self.low, last) if (n in self) != (n in other)), None)

    def complement(self) -> PeriodicSet:
        """Return the other numbers from `low` on."""
        return PeriodicSet(
            self.low, tuple(not v for v in self.head), tuple(not v for v in self.cycle)
        )

    def parts(self) -> tuple[Run | Singles | Tail, ...]:
        """Return the set in parts: numbers that stand alone first, then what never ends.

        None for the empty set. The rule of the endless part is taken back as far as it
        holds, where numbers outside it may be in the set as well.
        """
        start = self.start
        while start > self.low and (start - 1 in self or not self._follows(start - 1)):
            start -= 1
        alone = [
            n
            for n in range(self.low, self.start)
            if n in self and not (n >= start and self._follows(n))
        ]
        parts: list[Run | Singles | Tail] = []
        runs = [[n for _, n in group] for _, group in groupby(enumerate(alone), _offset)]
        for is_long, group in groupby(runs, lambda run: len(run) > LONGEST_LISTED):
            if is_long:
                parts += [Run(run[0], run[-1]) for run in group]
            else:
                parts.append(Singles(tuple(n for run in group for n in run)))
        if all(self.cycle):
            parts.append(Run(start, None))
        elif any(self.cycle):
            parts.append(self._tail(start))
        return tuple(parts)

    def _follows(self, n: int) -> bool:
        """Return whether the rule of the cycle, taken back, puts n into the set."""
        return self.cycle[(n - self.start) % self.period]

    def _tail(self, start: int) -> Tail:
        numbers = range(self.start, self.start + self.period)
        inside = tuple(sorted(n % self.period for n in numbers if n in self))
        outside = tuple(sorted(n % self.period for n in numbers if n not in self))
        excluded = len(outside) < len(inside)
        first = next(n for n in range(start, start + self.period) if self._follows(n))
        return Tail(
            self.period,
            outside if excluded else inside,
            excluded,
            None if start == self.low else first,
        )

    def text(self, name: str) -> str:
        """Return the set in words: "n in {10, 11, 12, 13} or n >= 17"."""
        parts = self.parts()
        if not parts:
            return f"no {name}"
        if parts == (Run(self.low, None),):
            return f"every {name} >= {self.low}"
        texts = [_say(part, name) for part in parts]
        if len(parts) > 1 and isinstance(parts[-1], Tail) and parts[-1].start is not None:
            texts[-1] = f"({texts[-1]})"
        return " or ".join(texts)


def _offset(item: tuple[int, int]) -> int:
    place, n = item
    return n - place


def _say(part: Run | Singles | Tail, name: str) -> str:
    match part:
        case Run(low, None):
            return f"{name} >= {low}"
        case Run(low, high):
            return f"{low} <= {name} <= {high}"
        case Singles((number,)):
            return f"{name} = {number}"
        case Singles(numbers):
            return f"{name} in {{{', '.join(map(str, numbers))}}}"
        case Tail(start=None):
            return _say_residues(part, name)
    return f"{_say_residues(part, name)} and {name} >= {part.start}"


def _say_residues(tail: Tail, name: str) -> str:
    if tail.modulus == 2:
        return f"{name} {'odd' if tail.residues == (1,) else 'even'}"
    if len(tail.residues) == 1:
        return f"{name} {'!=' if tail.excluded else '='} {tail.residues[0]} mod {tail.modulus}"
    listed = ", ".join(map(str, tail.residues))
    return f"{name} {'not in' if tail.excluded else 'in'} {{{listed}}} mod {tail.modulus}"
