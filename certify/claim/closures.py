"""A checked rule turned into nested Python functions of two vertices.

Every part of the tree becomes a *piece*: a function of (a, b), and the least
and the greatest value it can have. The bounds decide once, when the rule is
bound, which results have to be held against the limit of 2^53 at all: for the
vertices 1..500 no sum or difference has, so `abs(a - b) in {4, 7}` costs one
call for `abs(a - b)` and one for `in`. Parts without a vertex become constants.
Where evaluation of such a part fails, it is left to fail when it is reached:
Python's lazy order is kept.

The tree has passed `language`, which is why no case here needs to look for what
the language does not have.
"""

from __future__ import annotations

import ast
import operator
from collections.abc import Callable, Sequence
from typing import Any, NamedTuple

from certify.claim import shapes
from certify.claim.names import CONSTANTS, FUNCTIONS, Scope
from certify.claim.predicates import BOUND, PREDICATES
from certify.claim.shapes import Leaf, Run
from certify.claim.syntax import Source
from certify.errors import ClaimError

Spans = Sequence[tuple[int, int]]

_BEYOND = "a number beyond 2^53 in size"


class Piece(NamedTuple):
    """A part of a rule: its function, its bounds, and what is known of its shape.

    fixed: the value is `low` (== `high`), whatever the vertices, and cannot fail.
    leaf: the vertex or coordinate that the part is, if it is just that.
    apart: the coordinate (None: the whole vertex) when the part is `a - b`.
    """

    run: Run
    low: int
    high: int
    fixed: bool = False
    leaf: Leaf | None = None
    apart: tuple[int | None] | None = None


def bind(
    source: Source, tree: ast.expr, scope: Scope, *, row: Sequence[int] | None, spans: Spans = ()
) -> Run:
    """Return the function of two vertices that a rule stands for.

    row: the values of the parameters, put in as constants; with None the
    function takes the row in place of its first argument.
    spans: least and greatest value for each coordinate of the vertices.
    """
    return _Binder(source, scope, row, spans).build(tree).run


class _Binder:
    def __init__(
        self, source: Source, scope: Scope, row: Sequence[int] | None, spans: Spans
    ) -> None:
        self.source = source
        self.scope = scope
        self.row = row
        self.spans = spans

    def build(self, node: ast.expr) -> Piece:
        """Return the piece for a part that is not a set."""
        match node:
            case ast.Constant(value=int(value)):
                return _fixed(value)
            case ast.Name(id=name):
                return self._name(name)
            case ast.Attribute(value=ast.Name(id=vertex), attr=name):
                return self._leaf(vertex, self.scope.coordinates.index(name))
            case ast.UnaryOp(op=op, operand=operand):
                return self._unary(op, self.build(operand))
            case ast.BinOp(left=left, op=op, right=right):
                return self._arithmetic(node, op, self.build(left), self.build(right))
            case ast.BoolOp(op=op, values=values):
                return _junction(isinstance(op, ast.And), [self.build(value) for value in values])
            case ast.Compare(left=left, ops=ops, comparators=comparators):
                return self._comparison(left, ops, comparators)
            case ast.IfExp(test=test, body=body, orelse=orelse):
                return _choice(self.build(test), self.build(body), self.build(orelse))
            case ast.Call(func=ast.Name(id=name), args=args):
                return _call(name, [self.build(argument) for argument in args])
        raise self.source.fault(node, "this is not part of the rule language")

    def _name(self, name: str) -> Piece:
        if name in CONSTANTS:
            return _fixed(CONSTANTS[name])
        if name in self.scope.parameters:
            index = self.scope.parameters.index(name)
            if self.row is None:
                return Piece(lambda a, b: a[index], -BOUND, BOUND)
            return _fixed(self.row[index])
        if name in self.scope.coordinates:
            return self._leaf("a", self.scope.coordinates.index(name))
        return self._leaf(name, None)

    def _leaf(self, vertex: str, index: int | None) -> Piece:
        low, high = self.spans[index or 0] if self.spans else (-BOUND, BOUND)
        return Piece(shapes.leaf(vertex, index), low, high, leaf=(vertex, index))

    def _unary(self, op: ast.unaryop, part: Piece) -> Piece:
        f = part.run
        if isinstance(op, ast.Not):
            return _folded(Piece(lambda a, b: not f(a, b), 0, 1), part)
        if isinstance(op, ast.UAdd):
            return part
        return _folded(Piece(lambda a, b: -f(a, b), -part.high, -part.low), part)

    def _arithmetic(self, node: ast.expr, op: ast.operator, left: Piece, right: Piece) -> Piece:
        if isinstance(op, ast.FloorDiv | ast.Mod):
            return _folded(self._division(node, op, left, right), left, right)
        if isinstance(op, ast.Pow):
            return _folded(self._power(node, left, right), left, right)
        combine = shapes.COMBINE[type(op)]
        corners = [combine(x, y) for x in (left.low, left.high) for y in (right.low, right.high)]
        run = (
            shapes.of_leaves(type(op), left.leaf, right.leaf) if left.leaf and right.leaf else None
        )
        if run and isinstance(op, ast.Sub) and left.leaf:
            piece = self._within(node, run, min(corners), max(corners))
            return piece._replace(apart=(left.leaf[1],)) if piece.run is run else piece
        if not run:
            run = (
                shapes.COMBINED_WITH[type(op)](left.run, right.low)
                if right.fixed
                else shapes.COMBINED[type(op)](left.run, right.run)
            )
        return _folded(self._within(node, run, min(corners), max(corners)), left, right)

    def _within(self, node: ast.expr, run: Run, low: int, high: int) -> Piece:
        """Return a piece whose values are checked against the limit if the bounds need it."""
        if low >= -BOUND and high <= BOUND:
            return Piece(run, low, high)
        source = self.source

        def checked(a: Any, b: Any) -> int:
            value = run(a, b)
            if -BOUND <= value <= BOUND:
                return value
            raise source.fault(node, _BEYOND)

        return Piece(checked, max(low, -BOUND), min(high, BOUND))

    def _division(self, node: ast.expr, op: ast.operator, left: Piece, right: Piece) -> Piece:
        """Return a quotient (no larger than the dividend) or a remainder (than the divisor)."""
        f, g = left.run, right.run
        apply: Callable[[int, int], int] = (
            operator.floordiv if isinstance(op, ast.FloorDiv) else operator.mod
        )
        larger = left if isinstance(op, ast.FloorDiv) else right
        size = max(abs(larger.low), abs(larger.high))
        low = 0 if right.low > 0 and (left.low >= 0 or larger is right) else -size
        if right.fixed and right.low != 0:
            divisor = right.low
            return Piece(lambda a, b: apply(f(a, b), divisor), low, size)
        source = self.source

        def divided(a: Any, b: Any) -> int:
            dividend, divisor = f(a, b), g(a, b)
            if divisor == 0:
                raise source.fault(node, "division by zero")
            return apply(dividend, divisor)

        return Piece(divided, low, size)

    def _power(self, node: ast.expr, left: Piece, right: Piece) -> Piece:
        f, g = left.run, right.run
        source = self.source
        size = max(abs(left.low), abs(left.high))
        if right.fixed and 0 <= right.low <= 53 and size**right.low <= BOUND:
            exponent = right.low
            most = max(1, size**exponent)
            return Piece(lambda a, b: f(a, b) ** exponent, -most, most)

        def power(a: Any, b: Any) -> int:
            base, exponent = f(a, b), g(a, b)
            if exponent < 0:
                raise source.fault(node, "the exponent is negative")
            if exponent > 53 and not -1 <= base <= 1:  # |base| >= 2: beyond 2^53 for certain
                raise source.fault(node, _BEYOND)
            value: int = base ** (exponent if exponent <= 53 else 2 + exponent % 2)
            if not -BOUND <= value <= BOUND:
                raise source.fault(node, _BEYOND)
            return value

        return Piece(power, -BOUND, BOUND)

    def _comparison(
        self, left: ast.expr, ops: list[ast.cmpop], comparators: list[ast.expr]
    ) -> Piece:
        if len(ops) == 1:
            return self._pair(left, ops[0], comparators[0])
        sides = [self._side(part) for part in (left, *comparators)]
        first = sides[0][0]
        links = [
            (shapes.COMPARE[type(op)], side[0]) for op, side in zip(ops, sides[1:], strict=True)
        ]

        def chain(a: Any, b: Any) -> bool:
            value = first(a, b)
            for compare, side in links:
                following = side(a, b)
                if not compare(value, following):
                    return False
                value = following
            return True

        return _folded_if(all(side[1] for side in sides), Piece(chain, 0, 1))

    def _pair(self, left: ast.expr, op: ast.cmpop, right: ast.expr) -> Piece:
        f, left_fixed = self._side(left)
        g, right_fixed = self._side(right)
        run: Run
        if right_fixed:
            value: Any = g((), ())
            run = shapes.COMPARED_WITH[type(op)](f, value)
        else:
            compare = shapes.COMPARE[type(op)]

            def run(a: Any, b: Any) -> bool:
                return compare(f(a, b), g(a, b))

        return _folded_if(left_fixed and right_fixed, Piece(run, 0, 1))

    def _side(self, node: ast.expr) -> tuple[Callable[[Any, Any], Any], bool]:
        """Return one side of a comparison as a function, and whether it is constant."""
        if not isinstance(node, ast.Set | ast.List | ast.Tuple):
            piece = self.build(node)
            return piece.run, piece.fixed
        parts = [self.build(element) for element in node.elts]
        runs = [part.run for part in parts]
        if all(part.fixed for part in parts):
            values = frozenset(part.low for part in parts)
            return (lambda a, b: values), True
        if len(runs) == 2:
            f, g = runs
            return (lambda a, b: {f(a, b), g(a, b)}), False
        return (lambda a, b: {run(a, b) for run in runs}), False


def _fixed(value: int) -> Piece:
    return Piece(lambda a, b: value, value, value, fixed=True)


def _folded(piece: Piece, *parts: Piece) -> Piece:
    """Return the constant that a piece made of constants is."""
    return _folded_if(all(part.fixed for part in parts), piece)


def _folded_if(fixed: bool, piece: Piece) -> Piece:
    if not fixed:
        return piece
    try:
        return _fixed(piece.run((), ()))
    except ClaimError:
        return piece  # it fails when it is reached, and only then


def _junction(both: bool, parts: list[Piece]) -> Piece:
    """Return `and` (both) or `or` of truth values, lazily from the left."""
    kept: list[Piece] = []
    for part in parts:
        if part.fixed and bool(part.low) == both:
            continue  # changes nothing
        kept.append(part)
        if part.fixed:
            break  # the rest is never reached
    if not kept:
        return _fixed(both)
    if len(kept) == 1:
        return kept[0]
    f, g = kept[0].run, kept[1].run
    if len(kept) == 2:
        if both:
            return Piece(lambda a, b: f(a, b) and g(a, b), 0, 1)
        return Piece(lambda a, b: f(a, b) or g(a, b), 0, 1)
    runs = [part.run for part in kept]

    def junction(a: Any, b: Any) -> bool:
        for run in runs:
            if run(a, b) != both:
                return not both
        return both

    return Piece(junction, 0, 1)


def _choice(test: Piece, body: Piece, orelse: Piece) -> Piece:
    if test.fixed:
        return body if test.low else orelse
    f, g, h = test.run, body.run, orelse.run
    low, high = min(body.low, orelse.low), max(body.high, orelse.high)
    return Piece(lambda a, b: g(a, b) if f(a, b) else h(a, b), low, high)


def _call(name: str, parts: list[Piece]) -> Piece:
    """Return a call of a function; none gives more than the largest argument in size."""
    f = parts[0].run
    if name in PREDICATES:
        holds = PREDICATES[name]
        return _folded(Piece(lambda a, b: holds(f(a, b)), 0, 1), *parts)
    size = max(max(abs(part.low), abs(part.high)) for part in parts)
    if name == "abs":
        if parts[0].apart:
            return Piece(shapes.distance(parts[0].apart[0]), 0, size)
        return _folded(Piece(lambda a, b: abs(f(a, b)), 0, size), *parts)
    function = FUNCTIONS[name]
    if len(parts) == 2:
        g = parts[1].run
        return _folded(Piece(lambda a, b: function(f(a, b), g(a, b)), -size, size), *parts)
    runs = [part.run for part in parts]
    return _folded(Piece(lambda a, b: function(*[r(a, b) for r in runs]), -size, size), *parts)
