"""Strips: families of graphs that grow by repeating the same piece.

One coordinate, the *long* one, runs from L to n + c. A *layer* is the set of
vertices with one value of it, numbered from 0. By the form of the rule
(FORMAT.md, section 8.1) what is joined depends, for all n >= first, only on the
residues modulo p, the *modulus*, and on distances that count as Z when they are Z
or more; Z is the *zone*. So edges join layers less than Z apart, or one of the
first Z with one of the last Z, and p layers more change nothing but the length.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from math import lcm

from certify.claim.claim import Claim
from certify.claim.endless import endless_key, first_value, key_of, parameter_forms
from certify.claim.instances import Range, Row, in_instance, number
from certify.claim.language import Expression
from certify.claim.linear import Form, Forms, Reading, constant, read_linear
from certify.claim.parts import Rule
from certify.errors import ClaimError
from certify.graph.build import build_graph, build_question, shown_label
from certify.graph.graph import Graph, Label
from certify.graph.question import Question

MAX_SIZE = 60
"""How large the zone and the modulus may be."""
LEAST_VERTICES = 3


@dataclass(frozen=True)
class Strip:
    """A family of graphs that is a strip from n = first on.

    row: the values of the parameters (of the growing one, its first value). long: which
    coordinate is the long one, None when a vertex is one integer. offset: L; reach: c.
    zone: Z. modulus: p.
    """

    claim: Claim = field(repr=False)
    row: Row
    long: int | None
    offset: int
    reach: int
    zone: int
    modulus: int
    first: int

    @property
    def low(self) -> int:
        """Return the first value of the growing parameter."""
        return first_value(self.claim, self.row)

    @property
    def growing(self) -> str:
        """Return the name of the growing parameter."""
        return str(self.claim.growing)

    def key(self, n: int) -> dict[str, int]:
        """Return the key of the instance for a value of the growing parameter."""
        return key_of(self.claim, self.row, n)

    def graph(self, n: int) -> Graph:
        """Build the graph for a value of the growing parameter. Errors: ClaimError."""
        return build_graph(self.claim, self.key(n))

    def question(self, n: int, graph: Graph) -> Question:
        """Build the question about the graph for n."""
        return build_question(self.claim, self.key(n), graph)

    def layers(self, n: int) -> int:
        """Return the number of layers for n."""
        return n + self.reach - self.offset + 1

    def layer(self, label: Label) -> int:
        """Return the layer of a vertex, counted from 0."""
        if isinstance(label, tuple) and self.long is not None:
            return label[self.long] - self.offset
        return int(label) - self.offset  # type: ignore[arg-type]  # labels of rules are integers

    def moved(self, label: Label, layers: int) -> Label:
        """Return the place of a vertex, moved along the strip."""
        if isinstance(label, tuple) and self.long is not None:
            return tuple(v + layers * (k == self.long) for k, v in enumerate(label))
        return int(label) + layers  # type: ignore[arg-type]  # as above

    def order(self, graph: Graph) -> list[int]:
        """Return the vertices by layers, within a layer by their other coordinates."""
        return sorted(range(graph.n), key=lambda v: (self.layer(graph.labels[v]), v))


def read_strip(claim: Claim, row: Row) -> Strip:
    """Recognise the strip that the rule of an endless claim describes, for one row.

    Errors: ClaimError when the family is no strip, saying what is in the way.
    Cost: bounded for the rule; then p graphs are built, of about 5Z + 3p layers.
    """
    rule = claim.graphs
    if not isinstance(rule, Rule) or claim.growing is None:
        raise ClaimError(f"{claim.where}: this claim is not endless")
    try:
        strip = _read(claim, rule, row)
    except ClaimError as error:
        raise in_instance(error, endless_key(claim, row)) from None
    for n in range(strip.first, strip.first + strip.modulus):
        _check_graph(strip, strip.graph(n), n)
    return strip


def _refusal(claim: Claim) -> tuple[str, str]:
    """Return what is said before and after the reason why a family is no strip."""
    return (
        "the family is no strip: ",
        ", so the same piece does not repeat; give an upper end, such as "
        f'{claim.growing} = "2..60"',
    )


def _fault(claim: Claim, where: str, reason: str) -> ClaimError:
    before, after = _refusal(claim)
    return ClaimError(f"{where}: {before}{reason}{after}")


def _read(claim: Claim, rule: Rule, row: Row) -> Strip:
    parameters = parameter_forms(claim, row)
    long, offset, reach = _find_long(claim, rule, parameters, row)
    reading = Reading()
    names = dict(parameters)
    for k, range_ in enumerate(rule.ranges):
        inner = None if k == long else range_.bounds(row)
        for vertex, form in (("a", Form(1, 0, 0, 0, 0)), ("b", Form(0, 1, 0, 0, 0))):
            forms = (form,) if inner is None else constant(*inner)
            if not rule.coordinates:
                names[vertex] = forms
                continue
            names[f"{vertex}.{rule.coordinates[k]}"] = forms
            if vertex == "a":
                names[rule.coordinates[k]] = forms
    for part in filter(None, (rule.keep, rule.adjacent)):
        read_linear(part, names, reading, _refusal(claim))
    return _measure(claim, rule, row, reading, (long if rule.coordinates else None, offset, reach))


def _find_long(
    claim: Claim, rule: Rule, names: Mapping[str, Forms], row: Row
) -> tuple[int, int, int]:
    """Return which coordinate grows, its L and its c."""
    growing = str(claim.growing)
    found: list[int] = []
    for k, range_ in enumerate(rule.ranges):
        bounds = [b for b in (range_.low, range_.high) if isinstance(b, Expression)]
        if any(bound.mentions(growing) for bound in bounds):
            found.append(k)
    if not found:
        where = rule.ranges[0].where
        raise _fault(claim, where, f"no coordinate ends at {growing} plus a constant")
    if len(found) > 1:
        raise _fault(claim, rule.ranges[found[1]].where, "two coordinates grow")
    range_ = rule.ranges[found[0]]
    reading = Reading()
    low = _bound(claim, range_, range_.low, (names, reading), row)
    high = _bound(claim, range_, range_.high, (names, reading), row)
    if low.slope != (0, 0, 0) or high.slope != (0, 0, 1):
        raise _fault(
            claim,
            range_.where,
            f"the long coordinate has to run from a constant to {growing} plus a constant",
        )
    if reading.conditions or lcm(*reading.moduli) > 1:
        # Otherwise the bounds could be an error for some n that is never looked at.
        raise _fault(claim, range_.where, f"the bounds ask for more of {growing} than to be added")
    return found[0], low.low, high.low


def _bound(
    claim: Claim,
    range_: Range,
    bound: Expression | int,
    context: tuple[Mapping[str, Forms], Reading],
    row: Row,
) -> Form:
    """Return a bound of the long coordinate as a form with one constant."""
    if isinstance(bound, int):
        return constant(bound)[0]
    if not bound.mentions(str(claim.growing)):
        return constant(number(bound, row))[0]
    forms = read_linear(bound, *context, _refusal(claim))
    if len(forms) != 1 or forms[0].low != forms[0].high:
        raise _fault(claim, range_.where, "the bound is not one number")
    return forms[0]


def _measure(
    claim: Claim, rule: Rule, row: Row, reading: Reading, shape: tuple[int | None, int, int]
) -> Strip:
    """Find the zone, the modulus and the first n of the strip."""
    long, offset, reach = shape
    where = rule.adjacent.source.where
    modulus = lcm(*reading.moduli)
    zone, beyond = 1, 0
    for form in reading.conditions:
        demand = _demand(form, offset, reach)
        if demand is None:
            raise _fault(claim, where, f"it compares {_say(claim, rule, form)} with a constant")
        zone, beyond = max(zone, demand[0]), max(beyond, demand[1])
    if max(zone, modulus) > MAX_SIZE:
        raise _fault(
            claim,
            where,
            f"it would take {max(zone, modulus):,} layers to see what repeats "
            f"(at most {MAX_SIZE:,} are looked at)",
        )
    least = 5 * zone + 2 * modulus
    low = first_value(claim, row)
    first = max(low, least, least - reach + offset - 1, beyond + 1 if beyond else low)
    return Strip(claim, row, long, offset, reach, zone, modulus, first)


def _demand(form: Form, offset: int, reach: int) -> tuple[int, int] | None:
    """Return how large Z is at least, and what n exceeds, for a condition to be settled.

    None: no Z is enough, as the sign changes with n in the middle of the strip.
    """
    size = form.size
    for a, b, n in (form.slope, form.times(-1).slope):
        match a, b, n:
            case (_, _, 0) if a == -b:
                return size + 1, 0
            case (1, -1, 1 | -1):
                return size + 1, 0
            case (_, 0, 0) | (0, _, 0):
                return size + abs(offset) + 1, 0
            case (1, 0, -1) | (0, 1, -1):
                return size + abs(reach) + 1, 0
            case (0, 0, _) | (1, -1, _) | (1, 0, _) | (0, 1, _):
                return 1, 4 * (size + abs(offset) + abs(reach) + 1)
    return None


def _say(claim: Claim, rule: Rule, form: Form) -> str:
    """Return the part of a condition that grows, as the rule would write it."""
    long = next(
        (
            name
            for name, range_ in zip(rule.coordinates or ("",), rule.ranges, strict=True)
            for bound in (range_.low, range_.high)
            if isinstance(bound, Expression) and bound.mentions(str(claim.growing))
        ),
        None,
    )
    point = f".{long}" if long else ""
    names = (f"a{point}", f"b{point}", str(claim.growing))
    text = ""
    for factor, name in zip(form.slope, names, strict=True):
        if factor:
            sign = (" - " if factor < 0 else " + ") if text else ("-" if factor < 0 else "")
            text += sign + (f"{abs(factor)}*{name}" if abs(factor) > 1 else name)
    return text


def _check_graph(strip: Strip, graph: Graph, n: int) -> None:
    """Refuse a family with far edges, or without vertices that go on for ever."""
    claim, zone, last = strip.claim, strip.zone, strip.layers(n) - 1
    rule = claim.graphs
    if not isinstance(rule, Rule):
        return
    layers = [strip.layer(label) for label in graph.labels]
    for u, v in graph.edges:
        near, far = sorted((layers[u], layers[v]))
        if far - near > zone and not (near < zone and far > last - zone):
            where = rule.adjacent.source.where
            one, other = shown_label(graph.labels[u]), shown_label(graph.labels[v])
            raise _fault(
                claim,
                where,
                f"for {strip.growing} = {n} it joins {one} and {other}, which are far apart",
            )
    middle = range(last + 1 - 2 * zone, last + 1 - zone)
    if graph.n < LEAST_VERTICES or not any(layer in middle for layer in layers):
        raise _fault(claim, rule.ranges[0].where, "there are too few vertices to go on")
