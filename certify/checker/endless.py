"""Kind `endless`: the answer for every n, from the sweep of a strip (FORMAT.md, section 8).

Sound because n < FIRST have each their own evidence, and every n >= FIRST is an n(i) of one of the
p residues, whose answer classes.py finds for the reasons given in layers.py and strip.py.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import gcd, lcm
from typing import Any

from .classes import Class, check_class
from .conditions import Reader
from .graphs import Graph, Question
from .layers import Plan
from .pieces import SMALL
from .recipes import check_recipe
from .strict import Rejected, need_integer, need_keys, need_list, need_object, need_text
from .strip import GROWS, Strip, Texts, find_strip

MOST_COMPARED, MOST_RECIPES = 1_000_000, 20

CheckSmall = Callable[[Question, str, str, dict[str, Any]], None]


@dataclass(frozen=True)
class Family:
    """The graphs of one row of an endless claim, in which one parameter grows.

    fixed: the values of the other parameters. growing: its name. lo: its least value.
    graph, question: for a value of it, the graph, and the question about a graph. says:
    whether the object is claimed to exist for a value; None if nothing is claimed.
    text: the claimed expression; None also when it is a truth value.
    """

    texts: Texts
    fixed: dict[str, int]
    growing: str
    lo: int
    graph: Callable[[int], Graph]
    question: Callable[[Graph], Question]
    says: Callable[[int], bool] | None = None
    text: str | None = None

    def ask(self, n: int) -> tuple[Graph, Question]:
        """Return the graph for n and the question about it."""
        graph = self.graph(n)
        return graph, self.question(graph)


@dataclass(frozen=True)
class Settled:
    """The answers for n = lo, ..., first - 1, and for all n from first on, by residue."""

    lo: int
    small: list[bool]
    classes: list[Class]

    @property
    def first(self) -> int:
        return self.lo + len(self.small)

    @property
    def visited(self) -> int:
        """How many states all T(i) have together."""
        return sum(found.visited for found in self.classes)

    def exists(self, n: int) -> bool:
        """Return the answer for an n >= lo."""
        if n < self.first:
            return self.small[n - self.lo]
        i, residue = divmod(n - self.first, len(self.classes))
        return self.classes[residue].exists(i)


def check_endless(family: Family, body: dict[str, Any], check_small: CheckSmall) -> Settled:
    """Accept evidence for all n, and return the answers.

    check_small: checks evidence of one n from a question, an answer, a kind and a body.
    """
    keys = {"classes", "first", "modulus", "recipes", "small", "zone"}
    need_keys(body, keys, "endless")
    strip = find_strip(family.texts, family.fixed, family.growing, family.lo, family.graph)
    for name, value in [("first", strip.first), ("modulus", strip.modulus), ("zone", strip.zone)]:
        if need_integer(body[name], name) != value:
            raise Rejected(f"{name} is {value} and not {body[name]}")
    small, classes, recipes = (
        need_list(body[name], name) for name in ("small", "classes", "recipes")
    )
    if len(small) != strip.first - family.lo or len(classes) != strip.modulus:
        raise Rejected(
            f"there are {len(small)} small instances and {len(classes)} classes, "
            f"not {strip.first - family.lo} and {strip.modulus}"
        )
    if len(recipes) > MOST_RECIPES:
        raise Rejected(f"there are more than {MOST_RECIPES} recipes")
    shown = [_check_small(family, n, told, check_small) for n, told in enumerate(small, family.lo)]
    found = [
        check_class(strip, _plan(family, strip, n), told, f"class {n}")
        for n, told in enumerate(classes, strip.first)
    ]
    for number, told in enumerate(recipes):
        check_recipe(strip, told, family.ask, f"recipe {number}")
    return Settled(family.lo, shown, found)


def _plan(family: Family, strip: Strip, n: int) -> tuple[Plan, Plan]:
    first, second = (Plan(strip, number, *family.ask(number)) for number in (n, n + strip.modulus))
    return first, second


def _check_small(family: Family, n: int, told: object, check_small: CheckSmall) -> bool:
    """Return the answer for a small n, for which there is evidence of its own."""
    name = f"{family.growing} = {n}"
    entry = need_keys(told, {"answer", "evidence", "kind"}, name)
    answer = need_text(entry["answer"], f"{name}: answer")
    kind = need_text(entry["kind"], f"{name}: kind")
    body = need_object(entry["evidence"], f"{name}: evidence")
    try:
        check_small(family.ask(n)[1], answer, kind, body)
    except Rejected as error:
        raise Rejected(f"{name}: {error}") from None
    return answer == "exists"


def find_counterexample(family: Family, settled: Settled) -> int | None:
    """Return the least n for which the answer is not what is claimed; None says there is none.

    Finitely many n are enough. The answers of a class repeat from its preperiod on. The
    claimed expression depends on the signs of N*n + k for abs(k) <= z, which are constant
    for n > z, and on residues of n (conditions.py; in `e % m` e is a constant t here, and
    t + 2m and t - 2m are among the conditions, so that n > z gives abs(t) < 2m as well). So
    from the larger of both on, what is compared repeats with both periods' multiple.
    """
    if family.says is None:
        return None
    reader = Reader(family.fixed, {family.growing: {GROWS: (0, 0)}})
    if family.text is not None:
        reader.read(family.text)
    # A condition without n has a constant sign from the start.
    steady = 1 + max([z for form, z in reader.conditions.items() if form != SMALL], default=-1)
    step, end = len(settled.classes), family.lo
    for n, found in enumerate(settled.classes, settled.first):
        start = max(found.preperiod, -((n - steady) // step))
        repeat = lcm(found.period, reader.modulus // gcd(reader.modulus, step))
        end = max(end, n + step * (start + repeat))
    if end - family.lo > MOST_COMPARED:
        raise Rejected(f"more than {MOST_COMPARED} values of {family.growing} are to be compared")
    for n in range(family.lo, end):
        if family.says(n) != settled.exists(n):
            return n
    return None
