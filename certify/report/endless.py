"""What is said about an endless claim: why finitely many steps settle every n."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any

from certify.claim.periodic import PeriodicSet
from certify.evidence.endless import Recipe, find_recipe, read_answers
from certify.graph.graph import Graph, Label
from certify.graph.strip import Strip
from certify.report.blocks import Block, Paragraph, Rows, mark
from certify.report.explain import render_reason
from certify.report.plain import set_plain
from certify.report.words import HOW_TO_CHECK, count_of, join, name_label, number, plural
from certify.search.lengthen import lengthen

MOST_UNBROKEN = 50
"""Longer texts of a set may be broken between lines."""
MOST_SHOWN = 2_000
"""Objects on more vertices than this are described and not written out."""


def render_endless(strip: Strip, body: dict[str, Any], n: int | None = None) -> str:
    """Return the reason for a row of an endless claim, or for one n, in plain English.

    strip: as read from the claim. body: evidence of kind endless, which the checker has
    accepted. n: at least the first value of the growing parameter; None for all n.
    Cost: O(n) for one n; the graph is built for n up to MOST_SHOWN vertices only.
    """
    argument = Argument(strip, body)
    if n is None:
        return set_plain(argument.explain_all())
    if n < strip.first:
        return _render_small(strip, body, n)
    return set_plain(argument.explain_one(n))


def _render_small(strip: Strip, body: dict[str, Any], n: int) -> str:
    """Return the reason for an n below the strip, which has evidence of its own."""
    graph = strip.graph(n)
    content = {"instance": strip.key(n), **body["small"][n - strip.low]}
    return render_reason(graph, strip.question(n, graph), content)


@dataclass(frozen=True)
class Argument:
    """The wording for one row.

    body: evidence of kind endless. maths: sets a small formula such as "n >= 42"; as
    plain text by default.
    """

    strip: Strip
    body: dict[str, Any]
    maths: Callable[[str], str] = mark

    @property
    def name(self) -> str:
        """Return the name of the growing parameter."""
        return self.strip.growing

    @property
    def thing(self) -> str:
        """Return what the claim asks for: "Hamiltonian path"."""
        return self.strip.claim.structure.replace("hamiltonian-", "Hamiltonian ")

    @property
    def short(self) -> str:
        """Return "path" or "cycle"."""
        return self.thing.split()[1]

    @property
    def answers(self) -> PeriodicSet:
        """Return for which n the object exists."""
        return read_answers(self.body)

    def for_row(self) -> str:
        """Return "For m = 3" or nothing."""
        claim = self.strip.claim
        values = zip(claim.parameters, self.strip.row, strict=True)
        return join(
            [self.maths(f"{name} = {value}") for name, value in values if name != self.name]
        )

    def with_n(self, text: object) -> str:
        """Return "n = 42"."""
        return self.maths(f"{self.name} = {text}")

    def explain_all(self) -> list[Block]:
        """Return the whole argument."""
        row = self.for_row()
        given = f"for {row} " if row else ""
        low = self.maths(f"{self.name} >= {self.strip.low}")
        answers = self.answers
        if not answers.parts():
            said = f"has no {self.thing}, for any {low}"
        elif answers.complement().parts():
            said = f"has a {self.thing}, among the {low}, exactly for {self.set_of(answers)}"
        else:
            said = f"has a {self.thing} for every {low}"
        return [
            Paragraph(f"The graph {given}{said}."),
            *self.say_strip(),
            *self.say_states(),
            *self.say_periods(),
            *self.say_small(),
            *self.say_recipes(),
            Paragraph(
                "The sets of states are for a machine: their sizes are stored, and whoever "
                f"checks makes them again. To repeat it: {HOW_TO_CHECK}."
            ),
        ]

    def set_of(self, answers: PeriodicSet) -> str:
        """Return a set in words, which may break between lines if it is long."""
        text = answers.text(self.name)
        return mark(text) if len(text) <= MOST_UNBROKEN else text

    def layer_words(self) -> tuple[str, str]:
        """Return what a layer is, and what else a vertex has."""
        rule = self.strip.claim.graphs
        coordinates: Sequence[str] = getattr(rule, "coordinates", ())
        if self.strip.long is None:
            return "each vertex by itself", ""
        long = coordinates[self.strip.long]
        others = [self.maths(c) for c in coordinates if c != long]
        return f"the vertices with one value of {self.maths(long)}", f"on {join(others)}, "

    def say_strip(self) -> list[Block]:
        """Return of which pieces the graphs are made."""
        strip = self.strip
        layer, other = self.layer_words()
        residues = f"on residues modulo {strip.modulus}, " if strip.modulus > 1 else ""
        more = count_of(strip.modulus, "more layer")
        closing = (
            f", or one of the first {strip.zone} with one of the last {strip.zone}"
            if self.closes_around
            else ""
        )
        return [
            Paragraph(
                f"Call {layer} a layer; there are {self.maths(self.length())} of them, in a row. "
                f"From {self.with_n(strip.first)} on the graphs are made of equal pieces. By the "
                "form of the rule, whether two vertices are joined depends only "
                f"{other}{residues}on how far their layers are apart and how far they are from "
                f"both ends, and here all distances of {strip.zone} or more count as one. So an "
                f"edge joins two layers less than {strip.zone} apart{closing}; and when "
                f"{self.maths(self.name)} grows by {strip.modulus}, {more} of the same kind "
                f"{plural('is', strip.modulus)} put into "
                "the middle."
            )
        ]

    @property
    def closes_around(self) -> bool:
        """Return whether the last layers are joined to the first ones."""
        graph = self.strip.graph(self.strip.first)
        layers = [self.strip.layer(label) for label in graph.labels]
        return any(abs(layers[u] - layers[v]) > self.strip.zone for u, v in graph.edges)

    def length(self) -> str:
        """Return the number of layers, in terms of n."""
        extra = self.strip.layers(0)
        return self.name if extra == 0 else f"{self.name} {'+' if extra > 0 else '-'} {abs(extra)}"

    def say_states(self) -> list[Block]:
        """Return what the states are, and why their sets repeat."""
        strip, name, maths = self.strip, self.name, self.maths
        left = 3 * strip.zone
        step = strip.modulus
        states, n = maths(f"T({name})"), maths(name)
        return [
            Paragraph(
                f"Take the layers one after the other, and choose at each vertex the edges of the "
                f"{self.short} that lead on. What the rest can see of the choices made so far is "
                "their state: which of the vertices still to come have no, one or two chosen "
                "edges, and which pairs of them are the two ends of one piece of the "
                f"{self.short}. Let {states} be the set of all states that can be reached when "
                f"{left} layers are left. The vertices still to come that a state speaks of are "
                f"then in the next {strip.zone} or in the last {strip.zone} layers, and look the "
                f"same for every {n}. So {maths(f'T({name} + {step})')} is found from {states} by "
                f"taking {count_of(step, 'more layer')}, in a way that does not depend on {n}, "
                "and as there are only finitely many states, these sets repeat from some point "
                "on, for ever:"
            ),
        ]

    def say_periods(self) -> list[Block]:
        """Return where the sets repeat, and that the answers repeat with them."""
        left = 3 * self.strip.zone
        every = self.maths(f"{self.name} >= {self.strip.first}")
        return [
            Rows(tuple(map(self.say_class, range(self.strip.modulus)))),
            Paragraph(
                f"The last {left} layers, too, are taken from a set of states in a way that "
                f"depends on the set alone. So the answers repeat with the sets, and those for "
                f"one preperiod and one period, which were computed, settle every {every}."
            ),
        ]

    def say_class(self, place: int) -> tuple[str, str]:
        """Return for one residue from where on the sets repeat, and how large they are."""
        part, strip = self.body["classes"][place], self.strip
        start = strip.first + place
        step = strip.modulus
        head = self.with_n(f"{start}, {start + step}, ...") if step > 1 else ""
        states = part["states"]
        begin = start + step * part["preperiod"]
        period = step * part["period"]
        most = f", at most {max(states)} in one" if len(states) > 1 and any(states) else ""
        return (
            head,
            f"{self.maths(f'T({self.name} + {period}) = T({self.name})')} for all "
            f"{self.maths(f'{self.name} >= {begin}')}; {count_of(len(states), 'set')} with "
            f"{count_of(sum(states), 'state')}{most}",
        )

    def say_small(self) -> list[Block]:
        """Return which evidence the small n have."""
        small, low = self.body["small"], self.strip.low
        if not small:
            return []
        rows = []
        for kind in dict.fromkeys(part["kind"] for part in small):
            chosen = [part["kind"] == kind for part in small]
            rows.append((kind, self.set_of(PeriodicSet.of(low, chosen, [False]))))
        last = self.strip.first - 1
        some = f"certify explain FOLDER {self.name}={low}"
        return [
            Paragraph(
                f"Each {mark(self.name)} from {low} to {last} has evidence of its own, which "
                f"{mark(f'`{some}`')}, for example, explains. By kind of evidence:"
            ),
            Rows(tuple(rows)),
        ]

    def say_recipes(self) -> list[Block]:
        """Return that the object can be written down, and for which n."""
        recipes = self.body["recipes"]
        if not recipes:
            return []
        first = join([mark(f"{r['n']} + {r['step']}k") for r in recipes])
        return [
            Paragraph(
                f"{self.say_growth()} This is stored for "
                f"{mark(f'{self.name} =')} {first} (k = 0, 1, 2, ...); "
                f"{mark(f'`certify explain FOLDER {self.name}=NUMBER`')} shows it."
            )
        ]

    def say_growth(self) -> str:
        """Return how the object becomes longer."""
        n = self.maths(self.name)
        return (
            f"For large {n} the {self.thing} can be written down, too: one for a small {n} has two "
            "equal stretches, and is made longer by repeating what lies between them."
        )

    def explain_one(self, n: int) -> list[Block]:
        """Return the answer for one n of the strip, and why."""
        strip = self.strip
        row = self.for_row()
        given = f"{row} and {self.with_n(n)}" if row else self.with_n(n)
        exists = n in self.answers
        i, place = divmod(n - strip.first, strip.modulus)
        part = self.body["classes"][place]
        mu, period = part["preperiod"], part["period"]
        j = i if i < mu else mu + (i - mu) % period
        same = strip.first + place + j * strip.modulus
        left = 3 * strip.zone
        can = "can be continued to" if exists else "none can be continued to"
        blocks: list[Block] = [
            Paragraph(
                f"For {given} the graph has {'a' if exists else 'no'} {self.thing}. The graphs "
                f"for {mark(f'{self.name} >= {strip.first}')} are made of equal pieces, and all "
                f"of them were settled together; "
                f"{mark(f'`certify explain FOLDER {self.row_name()}`')} tells how."
            )
        ]
        why = (
            f"The states that can be reached when {left} layers are left form the set T({n})"
            + (f", which is T({same}), as these sets repeat" if same != n else "")
            + f". There are {number(part['states'][j])} of them; "
            + (f"from one the {self.short} {can} the end." if exists else f"{can} a {self.thing}.")
        )
        blocks.append(Paragraph(why))
        if exists:
            blocks += self.say_object(n)
        return blocks

    def row_name(self) -> str:
        key = {**self.strip.key(self.strip.low), self.name: f"{self.strip.low}.."}
        return ",".join(f"{name}={key[name]}" for name in sorted(key))

    def say_object(self, n: int) -> list[Block]:
        """Return the object for n from a recipe, if one reaches it."""
        recipe = find_recipe(self.body, n)
        if recipe is None:
            return []
        times = (n - recipe.n) // recipe.step
        graph = self.strip.graph(recipe.n)
        blocks: list[Block] = [
            Paragraph(f"To write it down, take this {self.short} for {self.with_n(recipe.n)}:"),
            _row([graph.labels[v] for v in recipe.order]),
        ]
        if times:
            blocks.append(Paragraph(self.say_repeat(recipe, times)))
            blocks += self.show(recipe, graph, n, times)
        return blocks

    def say_construction(self, recipe: Recipe) -> list[Block]:
        """Return what a recipe makes, for all n that it reaches."""
        labels = self.strip.graph(recipe.n).labels
        reached = self.with_n(f"{recipe.n} + {_times(recipe.step, 'k')}")
        return [
            Paragraph(
                f"For {reached}, {self.maths('k >= 0')}, take this {self.short} for "
                f"{self.with_n(recipe.n)}:"
            ),
            _row([labels[v] for v in recipe.order]),
            Paragraph(self.say_repeat(recipe, None)),
        ]

    def say_repeat(self, recipe: Recipe, times: int | None) -> str:
        """Return how a recipe is made longer; times: how often, None for k times."""
        step = recipe.step
        first, last = recipe.cut + 2, recipe.cut + 1 + step
        span = f"layer {first}" if first == last else f"layers {first} to {last}"
        if times is None:
            total, copies = self.maths(_times(step, "k")), self.maths("k + 1")
            moves = self.maths(f"0, {step}, ..., {_times(step, 'k')}")
        else:
            total, copies = str(times * step), str(times + 1)
            some = (0, step, "...", total) if times > 2 else range(0, times * step + 1, step)
            moves = ", ".join(map(str, some))
        around = (
            f" (but if it leads to the last {self.strip.zone} layers, move its other end on by "
            f"{total} layers)"
            if self.closes_around
            else ""
        )
        return (
            "Count the layers from 1, and let an edge belong to the lower layer of its two "
            f"ends. Keep each edge of the first {recipe.cut + 1} layers{around}. Take those of "
            f"{span}, {copies} times in all, moved on by {moves} layers. Move all others on by "
            f"{total} layers."
        )

    def show(self, recipe: Recipe, graph: Graph, n: int, times: int) -> list[Block]:
        """Return the object itself, if it is not too long."""
        size = graph.n * n // max(1, recipe.n)
        if size > MOST_SHOWN:
            return []
        labels = lengthen(self.strip, recipe, graph, times)
        return [Paragraph(f"This gives, for {self.with_n(n)}:"), _row(labels)]


def _row(labels: Sequence[Label]) -> Rows:
    return Rows((("", ", ".join(mark(name_label(label)) for label in labels)),))


def _times(step: int, name: str) -> str:
    return name if step == 1 else f"{step}{name}"
