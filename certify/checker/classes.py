"""One residue of a strip: all its T(i), and the answers for all its n (FORMAT.md, 8.2 and 8.3)."""

from __future__ import annotations

from dataclasses import dataclass

from .layers import MOST_STATES, Plan, Renaming, sweep_origins, sweep_steps
from .strict import Rejected, need_integer, need_keys, need_list
from .strip import Strip

MOST_SETS, MOST_BITS = 10_000, 1 << 31


@dataclass(frozen=True)
class Class:
    """The answers for n(0), n(1), ...: those of `answers`, of which the last `period` repeat.

    answers: "1" where the object exists. visited: how many states all T(i) have together.
    """

    preperiod: int
    period: int
    answers: str
    visited: int

    def exists(self, i: int) -> bool:
        """Return whether the object exists for n(i)."""
        if i >= self.preperiod:
            i = self.preperiod + (i - self.preperiod) % self.period
        return self.answers[i] == "1"


def check_class(strip: Strip, plans: tuple[Plan, Plan], told: object, what: str) -> Class:
    """Return the class if the sweeps, done again here, give what is told of it.

    plans: those of the graphs for n(0) and n(1).
    """
    entry = need_keys(told, {"answers", "period", "preperiod", "states"}, what)
    preperiod = need_integer(entry["preperiod"], f"{what}: preperiod", 0)
    period = need_integer(entry["period"], f"{what}: period", 1)
    sizes = [need_integer(size, f"{what}: states", 0) for size in need_list(entry["states"], what)]
    if len(sizes) > MOST_SETS:
        raise Rejected(f"{what} repeats only after more than {MOST_SETS} steps")
    if len(sizes) != preperiod + period:
        raise Rejected(f"{what} has {len(sizes)} numbers of states, not {preperiod + period}")
    sets = Sets(strip, plans)
    for i, size in enumerate(sizes):
        if len(sets.current) != size:
            raise Rejected(f"{what}: T({i}) has {len(sets.current)} states and not {size}")
        sets.advance(i)
    # Sound by layers.py: from here on everything repeats. That no T(i) came back before
    # is asked only so that there is one way to write a class.
    if not sets.is_back_at(preperiod, sizes[preperiod]):
        raise Rejected(f"{what}: T({len(sizes)}) is not T({preperiod})")
    same = [(preperiod + k, preperiod) for k in range(1, period) if period % k == 0]
    if preperiod > 0:
        same.append((len(sizes) - 1, preperiod - 1))
    if any(sizes[i] == sizes[j] and sets.share(i, j) == sizes[i] for i, j in same):
        raise Rejected(f"{what}: the states repeat before T({len(sizes)})")
    complete = sets.complete()
    answers = "".join(["01"[complete >> i & 1] for i in range(len(sizes))])
    if entry["answers"] != answers:
        raise Rejected(f"{what}: the answers are {answers}")
    return Class(preperiod, period, answers, sum(sizes))


class Sets:
    """T(0), T(1), ..., kept together: for each state the i with the state in T(i), as bits."""

    def __init__(self, strip: Strip, plans: tuple[Plan, Plan]) -> None:
        first, second = plans
        if first.width != second.width:
            raise Rejected("the frontiers are not alike: this is no strip")
        done, start = first.moments[first.count - 3 * strip.zone]
        begin, here = second.moments[first.count - 3 * strip.zone]
        end, there = second.moments[second.count - 3 * strip.zone]
        self._piece = second.steps[begin:end]
        self._last = first.steps[done:]
        self._back = Renaming(there, here, second.width)
        self._out = Renaming(here, start, first.width)
        self.current = sweep_steps(second.steps[:begin], {bytes(range(second.width))})
        self._origins: dict[bytes, int] = {}

    def advance(self, i: int) -> None:
        """Note that the current states are T(i), and go on to T(i + 1)."""
        bit = 1 << i
        for state in self.current:
            self._origins[state] = self._origins.get(state, 0) | bit
        if len(self._origins) > min(MOST_STATES, MOST_BITS // (i + 1)):
            raise Rejected(f"T(0) to T({i}) together have {len(self._origins)} states: too many")
        self.current = {self._back.apply(s) for s in sweep_steps(self._piece, self.current)}

    def is_back_at(self, i: int, size: int) -> bool:
        """Return whether the current states are those of T(i), which has this size."""
        return len(self.current) == size and all(
            self._origins.get(state, 0) >> i & 1 for state in self.current
        )

    def share(self, i: int, j: int) -> int:
        """Return how many states T(i) and T(j) have in common."""
        both = 1 << i | 1 << j
        return sum(origins & both == both for origins in self._origins.values())

    def complete(self) -> int:
        """Return the set of i, as bits, for which the last layers complete a cycle from T(i)."""
        states = {self._out.apply(state): bits for state, bits in self._origins.items()}
        return sweep_origins(self._last, states)
