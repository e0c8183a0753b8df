"""Lasting reasons: for which consecutive instances one and the same reason holds."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from typing import Any

from certify.claim.instances import Key
from certify.evidence.carry import carry_over
from certify.graph.graph import Graph


@dataclass(frozen=True)
class Lasting:
    """A run of instances that differ in one parameter by 1 and have the same reason.

    keys: at least two, in order. parameter: the one that grows.
    """

    keys: tuple[dict[str, int], ...]
    parameter: str

    @property
    def values(self) -> tuple[int, ...]:
        """Return the values of the growing parameter."""
        return tuple(key[self.parameter] for key in self.keys)

    def render(self) -> str:
        """Return the run as text: `n = 18, 19 and 20`, or `m = 4, n = 5 to 12`."""
        fixed = [f"{k} = {v}" for k, v in self.keys[0].items() if k != self.parameter]
        *most, last = map(str, self.values)
        span = f"{', '.join(most)} and {last}" if len(most) < 4 else f"{most[0]} to {last}"
        return ", ".join([*fixed, f"{self.parameter} = {span}"])


@dataclass(frozen=True)
class Settled:
    """A stored instance: its record, read, and its graph, of which the vertices are enough."""

    content: dict[str, Any]
    graph: Graph

    @property
    def key(self) -> Key:
        """Return the instance."""
        key: Key = self.content["instance"]
        return key

    def has_reason_of(self, other: Settled) -> bool:
        """Return whether the reason is that of another instance, vertex by vertex."""
        if self.content["kind"] != other.content["kind"]:
            return False
        carried = carry_over(
            other.content["kind"], other.content["evidence"], other.graph, self.graph
        )
        return carried is not None and carried.body() == self.content["evidence"]


class LastingRuns:
    """Finds the runs of at least two instances with one reason, as instances come in.

    Of these it keeps the last one, and the keys of the run that goes on.
    """

    def __init__(self) -> None:
        self._keys: list[Key] = []
        self._last: Settled | None = None
        self._parameter: str | None = None

    def add(self, item: Settled) -> Iterator[Lasting]:
        """Take the next instance, and yield the run that ends before it, if one does."""
        name = _next_parameter(self._keys[-1], item.key) if self._keys else None
        last = self._last
        if (
            last is None
            or name is None
            or self._parameter not in (None, name)
            or not item.has_reason_of(last)
        ):
            yield from self.end()
            name = None
        self._keys.append(item.key)
        self._last, self._parameter = item, name

    def end(self) -> Iterator[Lasting]:
        """Yield the run that goes on, if it is one; nothing of it is kept."""
        keys, self._keys, self._last = self._keys, [], None
        yield from _finish(keys, self._parameter)


def find_lasting(settled: Iterable[Settled]) -> Iterator[Lasting]:
    """Yield the runs of at least two instances with one reason, in order.

    settled: the instances in the order of the claim.
    """
    runs = LastingRuns()
    for item in settled:
        yield from runs.add(item)
    yield from runs.end()


def find_lasting_around(item: Settled, look_up: Callable[[Key], Settled | None]) -> Lasting | None:
    """Return the run that an instance belongs to; None if its reason holds there alone.

    look_up: gives another instance of the claim, None if it is not one or is not stored.
    """
    if isinstance(item.key, int):
        return None
    for parameter in reversed(item.key):
        before = _walk(item, parameter, -1, look_up)
        after = _walk(item, parameter, 1, look_up)
        run = [*reversed(before), item, *after]
        if len(run) > 1:
            return next(_finish([item.key for item in run], parameter))
    return None


def _walk(
    item: Settled, parameter: str, step: int, look_up: Callable[[Key], Settled | None]
) -> list[Settled]:
    found: list[Settled] = []
    last = item
    while isinstance(last.key, dict):
        other = look_up({**last.key, parameter: last.key[parameter] + step})
        if other is None or not other.has_reason_of(last):
            break
        found.append(other)
        last = other
    return found


def _next_parameter(one: Key, other: Key) -> str | None:
    """Return the parameter by 1 of which the second instance is the next; None if none is."""
    if isinstance(one, int) or isinstance(other, int):
        return None
    changed = [name for name in one if one[name] != other[name]]
    if len(changed) == 1 and other[changed[0]] == one[changed[0]] + 1:
        return changed[0]
    return None


def _finish(run: list[Key], parameter: str | None) -> Iterator[Lasting]:
    if parameter is not None:
        yield Lasting(tuple(key for key in run if isinstance(key, dict)), parameter)
