"""What a rule depends on when n is large: its pieces, conditions and moduli (FORMAT.md, 8.1).

Write x for a.x and y for b.x, the long coordinates of two vertices. For an integer part of a
rule, `pieces` maps each form (A, B, N) to an interval [low, high], such that

    (*) the part is equal to A*x + B*y + N*n + k for one of these forms and a k of its
        interval; and the form and k are functions of the *data*.

The data are the other coordinates, the residues of x, y and n modulo `modulus`, and the signs of
all A*x + B*y + N*n + k where (A, B, N) is in `conditions` and abs(k) at most the number given
there. By induction over the rule's tree: (*) holds for every integer part, and every truth value
is a function of the data. For

* literals, names, sums, differences, negatives: at once. Here and below two pieces of one form
  are made one with the hull of both intervals, which keeps (*).
* a product with a small part (a part whose only form is (0, 0, 0), so that its value is a
  function of the data): its value k is a whole number of its interval, and k times a piece has
  the form k times and a constant that is a function of the data.
* any operator of small parts: the value is a function of the data, and in the interval.
* `e % k`, k > 0 constant: e is A*x + B*y + N*n + t, all of which, modulo k, are functions of the
  data, as k divides `modulus`.
* `abs(e)`, `min`, `max`: the result is the piece (or its negative) that the signs of the
  conditions select. `X if C else Y`: C is a function of the data.
* `e % m`, m = n + k: the forms of e are (0, 0, 0), (1, 0, 0), (0, 1, 0), (1, -1, 0) up to sign,
  so abs(e) <= n + abs(L) + abs(c) + t, where t is the largest constant; and e + 2m, e - 2m are
  among the conditions, for which strip.py demands n > 4(t + 2*abs(k) + abs(L) + abs(c) + 1). So
  abs(e) < 2m, and e % m is e + j*m, where the signs of e - 2m, ..., e + 2m say which j of -1,
  ..., 2.
* a comparison of e with f: the sign of e - f, which is a piece of e less one of f. Membership in
  a display, and equality of two displays, are made of such comparisons.

Laziness only leaves out parts; what is looked at, and its error if it has one, is then a function
of the data too.
"""

from __future__ import annotations

import ast
from collections.abc import Mapping
from itertools import pairwise
from math import lcm
from typing import NoReturn

from .pieces import (
    SMALL,
    Form,
    Pieces,
    add,
    difference,
    is_small,
    one,
    scale,
    size,
    small_result,
    unite,
)
from .predicates import FUNCTIONS, PREDICATES
from .rules import INTEGER, Compiler
from .strict import BadClaim

MOST_WIDTH, MOST_MODULUS = 64, 60
_COVERED_BY_N = {SMALL, (1, 0, 0), (-1, 0, 0), (0, 1, 0), (0, -1, 0), (1, -1, 0), (-1, 1, 0)}


class Reader:
    """Reads expressions, and gathers their conditions and the modulus.

    fixed: the values of the parameters that do not grow. varying: the pieces of all other
    names, such as `a.x` or `n`. conditions: for each form the largest absolute value of its
    constants.
    """

    def __init__(self, fixed: Mapping[str, int], varying: Mapping[str, Pieces]) -> None:
        self._pieces = {**varying, **{name: one(value) for name, value in fixed.items()}}
        self._varying = set(varying)
        self._places = {name: place for place, name in enumerate(fixed)}
        self._values = list(fixed.values())
        self.conditions: dict[Form, int] = {}
        self.modulus = 1

    def read(self, text: str) -> Pieces | None:
        """Return the pieces of an expression that compile_rule accepts; None for a truth value."""
        return self._visit(ast.parse(text.strip(), mode="eval").body)

    def _visit(self, node: ast.expr) -> Pieces | None:
        if not _is_truth(node):
            return self._integer(node)
        if isinstance(node, ast.BoolOp | ast.IfExp):
            for part in ast.iter_child_nodes(node):
                if isinstance(part, ast.expr):
                    self._visit(part)
        elif isinstance(node, ast.UnaryOp):
            self._visit(node.operand)
        elif isinstance(node, ast.Compare):
            self._compare(node)
        elif isinstance(node, ast.Call) and not is_small(self._integer(node.args[0])):
            self._refuse(node)
        return None

    def _integer(self, node: ast.expr) -> Pieces:
        """Return the pieces of an integer part."""
        if isinstance(node, ast.Name | ast.Attribute):
            return self._pieces[ast.unparse(node)]
        if not any(ast.unparse(part) in self._varying for part in _names(node)):
            return one(Compiler(self._places).want(INTEGER, node)(self._values))
        if isinstance(node, ast.UnaryOp):
            inner = self._integer(node.operand)
            return scale(inner, -1) if isinstance(node.op, ast.USub) else inner
        if isinstance(node, ast.IfExp):
            self._visit(node.test)
            return unite([self._integer(node.body), self._integer(node.orelse)])
        if isinstance(node, ast.BinOp):
            return self._arithmetic(node, self._integer(node.left), self._integer(node.right))
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name):
            return self._call(node, node.func.id, [self._integer(part) for part in node.args])
        return self._refuse(node)

    def _arithmetic(self, node: ast.BinOp, left: Pieces, right: Pieces) -> Pieces:
        if isinstance(node.op, ast.Add):
            return add(left, right)
        if isinstance(node.op, ast.Sub):
            return add(left, scale(right, -1))
        if is_small(left) and is_small(right):
            return {SMALL: small_result(node.op, left[SMALL], right[SMALL])}
        if isinstance(node.op, ast.Mult) and (is_small(left) or is_small(right)):
            factor, other = (left, right) if is_small(left) else (right, left)
            low, high = factor[SMALL]
            if high - low <= MOST_WIDTH:
                return unite([scale(other, k) for k in range(low, high + 1)])
        if isinstance(node.op, ast.Mod) and len(right) == 1:
            ((form, (k, high)),) = right.items()
            if form == SMALL and k == high > 0:
                self.modulus = lcm(self.modulus, k)
                if self.modulus > MOST_MODULUS:
                    raise BadClaim(
                        f"no strip: the moduli need a period of more than {MOST_MODULUS}"
                    )
                return {SMALL: (0, k - 1)}
            if form == (0, 0, 1) and k == high and _COVERED_BY_N.issuperset(left):
                around = [add(left, scale(right, j)) for j in range(-2, 3)]
                for moved in around:
                    self._mark(moved, one(0))
                return unite(around)
        return self._refuse(node)

    def _call(self, node: ast.Call, name: str, parts: list[Pieces]) -> Pieces:
        if name == "abs":
            self._mark(parts[0], one(0))
            return unite([parts[0], scale(parts[0], -1)])
        if name in ("min", "max"):
            earlier: Pieces = {}
            for part in parts:
                self._mark(part, earlier)
                earlier = unite([earlier, part], most=None)
            return unite(parts)
        if name in FUNCTIONS and all(map(is_small, parts)):
            return {SMALL: (0, max(size(part[SMALL]) for part in parts))}
        return self._refuse(node)

    def _compare(self, node: ast.Compare) -> None:
        sides = [self._side(part) for part in (node.left, *node.comparators)]
        for left, right in pairwise(sides):
            self._mark(left, right)

    def _side(self, node: ast.expr) -> Pieces:
        """Return the pieces of an integer, of all members of a display, none of a truth value.

        That members are not told apart changes no number: the largest difference of two
        hulls is one of two members. And it keeps a comparison of long displays quick.
        """
        if isinstance(node, ast.Set | ast.Tuple | ast.List):
            return unite([self._integer(part) for part in node.elts], most=None)
        return self._visit(node) or {}

    def _mark(self, e: Pieces, f: Pieces) -> None:
        """Note that the sign of e - f matters."""
        for form, interval in difference(e, f):
            self.conditions[form] = max(self.conditions.get(form, 0), size(interval))

    def _refuse(self, node: ast.expr) -> NoReturn:
        raise BadClaim(f"no strip: {ast.unparse(node)!r} is not covered for every n")


def _is_truth(node: ast.expr) -> bool:
    """Return whether a part, which compile_rule has accepted, is a truth value."""
    if isinstance(node, ast.IfExp):
        return _is_truth(node.body)
    if isinstance(node, ast.UnaryOp):
        return isinstance(node.op, ast.Not)
    if isinstance(node, ast.Call):
        return isinstance(node.func, ast.Name) and node.func.id in PREDICATES
    if isinstance(node, ast.Constant):
        return isinstance(node.value, bool)
    if isinstance(node, ast.Name):
        return node.id in ("true", "false")
    return isinstance(node, ast.BoolOp | ast.Compare)


def _names(node: ast.expr) -> list[ast.expr]:
    return [part for part in ast.walk(node) if isinstance(part, ast.Name | ast.Attribute)]
