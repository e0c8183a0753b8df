"""The rule language, as the checker reads it (FORMAT.md, 3.1).

Python's parser gives a tree; each kind of node that the language knows is
turned into a small function of the *values*, a list that holds the parameters
and coordinates at fixed places. A node that the language does not know is an
error. No text is ever executed.
"""

from __future__ import annotations

import ast
import operator
import warnings
from collections.abc import Callable, Mapping
from typing import Any, NoReturn

from .predicates import FUNCTIONS, PREDICATES
from .strict import BadClaim

Values = list[int]
Evaluate = Callable[[Values], Any]
INTEGER, TRUTH, SET = "an integer", "a truth value", "a set"

MOST_CHARACTERS, MOST_NODES, MOST_LEVELS = 2000, 500, 40
MOST_LITERAL, MOST_RESULT = 10**12, 2**53


def _refuse_result() -> NoReturn:
    raise BadClaim("a result is beyond 2^53")


def _power(base: int, exponent: int) -> int:
    if exponent < 0:
        raise BadClaim("a negative exponent")
    if abs(base) > 1 and exponent > 53:
        _refuse_result()
    return int(base**exponent)


def _divisor(value: int) -> int:
    if value == 0:
        raise BadClaim("a division by zero")
    return value


_ARITHMETIC: dict[type[ast.operator], Callable[[int, int], int]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.FloorDiv: lambda x, y: x // _divisor(y),
    ast.Mod: lambda x, y: x % _divisor(y),
    ast.Pow: _power,
}
_COMPARISON: dict[type[ast.cmpop], Callable[[Any, Any], bool]] = {
    ast.Eq: operator.eq,
    ast.NotEq: operator.ne,
    ast.Lt: operator.lt,
    ast.LtE: operator.le,
    ast.Gt: operator.gt,
    ast.GtE: operator.ge,
    ast.In: lambda x, y: x in y,
    ast.NotIn: lambda x, y: x not in y,
}


def compile_rule(text: object, places: Mapping[str, int], sort: str) -> Evaluate:
    """Turn a text into a function of the values; `places` says where each name's value is."""
    if not isinstance(text, str) or len(text) > MOST_CHARACTERS or not text.isascii():
        raise BadClaim(f"{str(text)[:40]!r} is not an expression of at most 2,000 ASCII characters")
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")
            tree = ast.parse(text.strip(), mode="eval").body
    except (SyntaxError, ValueError, RecursionError, MemoryError):
        raise BadClaim(f"{text!r} is not an expression") from None
    found, evaluate = _Compiler(places).compile(tree, 1)
    if found != sort:
        raise BadClaim(f"{text!r} is {found} and not {sort}")
    return evaluate


class _Compiler:
    """Turns nodes into functions, and counts them."""

    def __init__(self, places: Mapping[str, int]) -> None:
        self.places = places
        self.nodes = 0

    def compile(self, node: ast.expr, level: int) -> tuple[str, Evaluate]:
        """Return the sort of a node and the function that evaluates it."""
        self.nodes += 1
        if self.nodes > MOST_NODES or level > MOST_LEVELS:
            raise BadClaim("the expression has more than 500 nodes or 40 levels")
        method = getattr(self, "on_" + type(node).__name__, None)
        if method is None:
            raise BadClaim(f"{type(node).__name__} is not part of the language")
        sort, evaluate = method(node, level + 1)
        return sort, evaluate

    def want(self, sort: str, node: ast.expr, level: int) -> Evaluate:
        """Return the function of a node that must have this sort."""
        found, evaluate = self.compile(node, level)
        if found != sort:
            raise BadClaim(f"{ast.unparse(node)!r} is {found} and not {sort}")
        return evaluate

    def on_Constant(self, node: ast.Constant, level: int) -> tuple[str, Evaluate]:
        value = node.value
        if type(value) is bool:
            return TRUTH, lambda values: value
        if type(value) is not int or value > MOST_LITERAL:
            raise BadClaim("a literal is not an integer up to 10^12")
        return INTEGER, lambda values: value

    def on_Name(self, node: ast.Name, level: int) -> tuple[str, Evaluate]:
        if node.id in self.places:
            return INTEGER, operator.itemgetter(self.places[node.id])
        if node.id in ("true", "false"):
            truth = node.id == "true"
            return TRUTH, lambda values: truth
        raise BadClaim(f"unknown name {node.id!r}")

    def on_Attribute(self, node: ast.Attribute, level: int) -> tuple[str, Evaluate]:
        name = f"{node.value.id}.{node.attr}" if isinstance(node.value, ast.Name) else "?"
        if name not in self.places:
            raise BadClaim(f"unknown name {name!r}")
        return INTEGER, operator.itemgetter(self.places[name])

    def on_UnaryOp(self, node: ast.UnaryOp, level: int) -> tuple[str, Evaluate]:
        if isinstance(node.op, ast.Not):
            truth = self.want(TRUTH, node.operand, level)
            return TRUTH, lambda values: not truth(values)
        number = self.want(INTEGER, node.operand, level)
        if isinstance(node.op, ast.USub):
            return INTEGER, lambda values: -number(values)
        if isinstance(node.op, ast.UAdd):
            return INTEGER, number
        raise BadClaim("'~' is not part of the language")

    def on_BinOp(self, node: ast.BinOp, level: int) -> tuple[str, Evaluate]:
        apply = _ARITHMETIC.get(type(node.op))
        if apply is None:
            raise BadClaim(f"{type(node.op).__name__} is not part of the language")
        left = self.want(INTEGER, node.left, level)
        right = self.want(INTEGER, node.right, level)
        return INTEGER, lambda values: (
            result
            if -MOST_RESULT <= (result := apply(left(values), right(values))) <= MOST_RESULT
            else _refuse_result()
        )

    def on_BoolOp(self, node: ast.BoolOp, level: int) -> tuple[str, Evaluate]:
        parts = [self.want(TRUTH, part, level) for part in node.values]
        stop = isinstance(node.op, ast.Or)

        def evaluate(values: Values) -> bool:
            for part in parts:
                if bool(part(values)) is stop:
                    return stop
            return not stop

        return TRUTH, evaluate

    def on_IfExp(self, node: ast.IfExp, level: int) -> tuple[str, Evaluate]:
        test = self.want(TRUTH, node.test, level)
        sort, then = self.compile(node.body, level)
        other = self.want(sort, node.orelse, level)
        if sort == SET:
            raise BadClaim("a set cannot be the value of 'if'")
        return sort, lambda values: then(values) if test(values) else other(values)

    def on_Set(self, node: ast.Set | ast.Tuple | ast.List, level: int) -> tuple[str, Evaluate]:
        parts = [self.want(INTEGER, part, level) for part in node.elts]
        return SET, lambda values: {part(values) for part in parts}

    def on_Compare(self, node: ast.Compare, level: int) -> tuple[str, Evaluate]:
        operands = [self.operand(node.left, False, level)]
        steps = []
        for op, right in zip(node.ops, node.comparators, strict=True):
            member = isinstance(op, ast.In | ast.NotIn)
            operands.append(self.operand(right, member, level))
            (sort, _), (other, _) = operands[-2:]
            fits = {
                ast.In: sort == INTEGER and other == SET,
                ast.NotIn: sort == INTEGER and other == SET,
                ast.Eq: sort == other,
                ast.NotEq: sort == other,
            }.get(type(op), sort == other == INTEGER)
            if not fits or type(op) not in _COMPARISON:
                raise BadClaim(f"{ast.unparse(node)!r} compares {sort} with {other}")
            steps.append((_COMPARISON[type(op)], operands[-1][1]))
        first = operands[0][1]
        if len(steps) == 1:
            compare, second = steps[0]
            return TRUTH, lambda values: compare(first(values), second(values))

        def evaluate(values: Values) -> bool:
            left = first(values)
            for compare, operand in steps:
                right = operand(values)
                if not compare(left, right):
                    return False
                left = right
            return True

        return TRUTH, evaluate

    def operand(self, node: ast.expr, member: bool, level: int) -> tuple[str, Evaluate]:
        """Return one side of a comparison; a display of constants is built once."""
        if member and isinstance(node, ast.Tuple | ast.List):
            self.nodes += 1
            sort, evaluate = self.on_Set(node, level + 1)
        else:
            sort, evaluate = self.compile(node, level)
        if sort == SET and all(
            isinstance(part, ast.Constant)
            for part in ast.iter_child_nodes(node)
            if not isinstance(part, ast.expr_context)
        ):
            constant = evaluate([])
            return sort, lambda values: constant
        return sort, evaluate

    def on_Call(self, node: ast.Call, level: int) -> tuple[str, Evaluate]:
        name = node.func.id if isinstance(node.func, ast.Name) else "?"
        if node.keywords or not node.args:
            raise BadClaim(f"{name!r} is called without an integer")
        parts = [self.want(INTEGER, part, level) for part in node.args]
        first, count = parts[0], len(parts)
        if name in PREDICATES and count == 1:
            holds = PREDICATES[name]
            return TRUTH, lambda values: holds(first(values))
        if name == "abs" and count == 1:
            return INTEGER, lambda values: abs(first(values))
        if name in FUNCTIONS and count >= 2:
            apply = FUNCTIONS[name]
            return INTEGER, lambda values: apply(*[part(values) for part in parts])
        raise BadClaim(f"{name!r} is not a function of {count} integers")
