"""When the graphs of a family are strips: the same from some n on, but for their length.

Let n grow, let L, ..., n + c be the long coordinate's range, and let the *layer* s be the
vertices with x = L + s; its distance from the end is t = n + c - x. conditions.py shows that
whether a vertex is kept and whether two are joined are functions of the other coordinates, of
residues modulo p, and of the signs of A*x + B*y + N*n + k for certain (A, B, N) and abs(k) <= z.
The bounds of the long coordinate ask for no residue and no such sign, so that they are L and
n + c, or an error, for every n alike. Let d = x - y.

Claim 1. For n >= FIRST these signs follow from the *capped numbers*: for both vertices s and t,
and abs(d) and n - abs(d), where Z stands for Z or more, and the sign of d. Form by form, up to
sign:

* (A, -A, 0): if abs(d) >= Z > z, A*d + k has the sign of A*d; otherwise d is known.
* (1, -1, 1), (1, -1, -1): up to sign and order n + d + k. For d >= 0 it is positive, as n >= 5Z >
  z. For d < 0 it is n - abs(d) + k: positive if n - abs(d) >= Z > z, and known otherwise.
* (A, 0, 0): A*(L + s) + k has the sign of A if s >= Z > z + abs(L), and is known otherwise.
* (1, 0, -1): x - n + k = c + k - t is negative if t >= Z > z + abs(c), and known otherwise.
* (0, 0, N), (1, -1, N), (1, 0, N) with another N: N*n wins, as n > 4(z + abs(L) + abs(c) + 1): x
  lies between -abs(L) and n + abs(c), and abs(d) <= n + abs(L) + abs(c); against d N is 2 or more
  in size, and against x it is positive, or -2 or less.

Claim 2. Let n >= FIRST and m the one of FIRST, ..., FIRST + p - 1 with the same residue. Each
vertex, and each pair of vertices, of the graph for n (before `where`) has a *model* in that for
m: with the same other coordinates, residues, capped numbers and sign of d. Both have 5Z + 2p
layers or more. Keep an s or t below Z; bring the others down to Z, ..., Z + p - 1, by multiples
of p.

* abs(d) < Z: move both vertices by the same multiple of p. If one of the first or last Z layers
  is touched, it fixes the place; otherwise let the lower s be in Z, ..., Z + p - 1. Then t >= 5Z
  + 2p - 1 - (2Z + p) >= Z. In both graphs n - abs(d) >= 5Z - Z >= Z.
* abs(d) >= Z. Let s be that of the lower and t that of the upper vertex; n - abs(d) = s + t + L -
  c. If it is below Z, take the same s and t: then abs(d) = m - (n - abs(d)) > 5Z - Z in the
  model. If not, bring down s and t as above, and raise the one that is not below Z by multiples
  of p as long as s + t + L - c < Z. Then abs(d) is m + c - L - s - t >= 5Z + 2p - 1 - (2Z + 2p -
  2) > Z, or, when raised, more than m - Z - p > Z. If both are below Z they stay, and n - abs(d)
  is the same.

So the rule is symmetric and without error for all n >= FIRST if it is for those m; and if no pair
with abs(d) > Z is joined there but between the first Z and the last Z layers, no pair with abs(d)
>= Z is for any n (the model of one that is not of the first and last has abs(d) > Z).
"""

from __future__ import annotations

import ast
from collections.abc import Callable, Mapping
from dataclasses import dataclass

from .conditions import Reader
from .graphs import Graph
from .pieces import SMALL, Form, Pieces
from .ranges import read_range
from .strict import BadClaim

MOST_ZONE = 60
GROWS: Form = (0, 0, 1)


@dataclass(frozen=True)
class Texts:
    """A rule as the claim has it. coordinates: empty when a vertex is one integer."""

    coordinates: list[str]
    ranges: list[object]
    adjacent: str
    where: str | None = None


@dataclass(frozen=True)
class Strip:
    """A family whose graphs are strips for n >= first.

    modulus, zone: p and Z. long: the place of the long coordinate. low, shift: L and c.
    samples: the graphs for n = first, ..., first + p - 1.
    """

    first: int
    modulus: int
    zone: int
    long: int
    low: int
    shift: int
    samples: list[Graph]

    def count_layers(self, n: int) -> int:
        """Return the number of layers of the graph for n."""
        return n + self.shift - self.low + 1

    def cells(self, graph: Graph) -> list[tuple[int, ...]]:
        """Return the coordinates of a graph's vertices."""
        return [name if isinstance(name, tuple) else (name,) for name in graph.names]

    def layers(self, graph: Graph) -> list[int]:
        """Return the layer of each vertex of a graph, from 0."""
        return [cell[self.long] - self.low for cell in self.cells(graph)]


def find_strip(
    texts: Texts, fixed: Mapping[str, int], growing: str, lo: int, build: Callable[[int], Graph]
) -> Strip:
    """Return the strip that a family is; BadClaim says why it is none.

    fixed: the values of the other parameters. growing: the name of n. lo: its least
    value. build: gives the graph for an n.
    """
    long, low, shift = _find_long(texts, fixed, growing)
    reader = _read_rule(texts, fixed, growing, long)
    zone, least = 1, lo
    for form, z in reader.conditions.items():
        zone_of, least_of = _demand(form, z, low, shift)
        zone, least = max(zone, zone_of), max(least, least_of)
    if zone > MOST_ZONE:
        raise BadClaim(f"no strip: its ends would be {zone} layers long, more than {MOST_ZONE}")
    modulus = reader.modulus
    needed = 5 * zone + 2 * modulus
    first = max(least, needed, needed - 1 - shift + low)
    samples = [build(n) for n in range(first, first + modulus)]
    strip = Strip(first, modulus, zone, long, low, shift, samples)
    for n, graph in enumerate(samples, first):
        _check_sample(strip, n, graph)
    return strip


def _find_long(texts: Texts, fixed: Mapping[str, int], growing: str) -> tuple[int, int, int]:
    """Return the place of the long coordinate, L and c."""
    naming = [place for place, value in enumerate(texts.ranges) if _is_naming(value, growing)]
    if len(naming) != 1:
        raise BadClaim(
            f"no strip: {len(naming)} coordinates, and not one, have {growing} in a bound"
        )
    bounds = str(texts.ranges[naming[0]]).split("..")
    reader = Reader(fixed, {growing: {GROWS: (0, 0)}})
    pieces = [reader.read(bound) for bound in bounds]
    found = []
    for form, part in zip((SMALL, GROWS), pieces, strict=True):
        if part is None or part.keys() != {form} or part[form][0] != part[form][1]:
            raise BadClaim(f"no strip: the bounds are not a constant and {growing} plus a constant")
        found.append(part[form][0])
    # Otherwise the bounds could be an error for some n that no sample shows.
    if reader.modulus > 1 or reader.conditions.keys() - {SMALL}:
        raise BadClaim(f"no strip: the bounds ask for more of {growing} than to be added")
    return naming[0], found[0], found[1]


def _is_naming(value: object, name: str) -> bool:
    """Return whether a range has bounds that name a parameter."""
    return isinstance(value, str) and any(
        isinstance(node, ast.Name) and node.id == name
        for bound in value.split("..")
        for node in ast.walk(ast.parse(bound.strip(), mode="eval"))
    )


def _read_rule(texts: Texts, fixed: Mapping[str, int], growing: str, long: int) -> Reader:
    """Return the reader that has read `adjacent` and `where`."""
    places = {name: place for place, name in enumerate(fixed)}
    varying: dict[str, Pieces] = {growing: {GROWS: (0, 0)}}
    for place, value in enumerate(texts.ranges):
        name = texts.coordinates[place] if texts.coordinates else ""
        point = f".{name}" if name else ""
        of_a: Pieces = {(1, 0, 0): (0, 0)}
        of_b: Pieces = {(0, 1, 0): (0, 0)}
        if place != long:
            low, high = read_range(value, places)(list(fixed.values()))
            if low > high:
                raise BadClaim(f"no strip: the range of {name} is empty")
            of_a = of_b = {SMALL: (low, high)}
        varying |= {f"a{point}": of_a, f"b{point}": of_b}
        if name:
            varying[name] = of_a
    reader = Reader(fixed, varying)
    reader.read(texts.adjacent)
    if texts.where is not None:
        reader.read(texts.where)
    return reader


def _demand(form: Form, z: int, low: int, shift: int) -> tuple[int, int]:
    """Return the least Z and the least n for which the sign of a condition is known (Claim 1)."""
    a, b, c = form if form > SMALL else tuple(-part for part in form)
    if form == SMALL:
        return 1, 0
    if (b == -a != 0 and c == 0) or ((a, b) == (1, -1) and abs(c) == 1):
        return z + 1, 0
    if c == 0 and (a == 0 or b == 0):
        return z + abs(low) + 1, 0
    if (a, b, c) in ((1, 0, -1), (0, 1, -1)):
        return z + abs(shift) + 1, 0
    if (a, b) in ((0, 0), (1, -1), (1, 0), (0, 1)):
        return 1, 4 * (z + abs(low) + abs(shift) + 1) + 1
    raise BadClaim(f"no strip: the sign of {a}*a + {b}*b + {c}*n + a constant is not covered")


def _check_sample(strip: Strip, n: int, graph: Graph) -> None:
    """Refuse a graph with an edge too far, or that a sweep may complete too early (layers.py)."""
    count, zone, layers = strip.count_layers(n), strip.zone, strip.layers(graph)
    if len(layers) < 3 or not any(zone <= count - 1 - s < 2 * zone for s in layers):
        raise BadClaim(f"no strip: for {n} there are too few vertices near the end")
    for u, v in graph.edges:
        lower, upper = sorted((layers[u], layers[v]))
        if upper - lower > zone and not (lower < zone and upper >= count - zone):
            raise BadClaim(
                f"no strip: for {n} the edge of {graph.names[u]} and {graph.names[v]} "
                f"spans more than {zone} layers"
            )
