"""What a rule asks for every n: its conditions, as linear forms.

In an endless claim one parameter n grows. Every integer part of a rule is read as
a finite set of *forms* A*a.x + B*b.x + N*n + [low, high]: on each case of its
definition the part equals one of them, with a constant between low and high
(FORMAT.md, section 8.1). A *condition* is a form whose sign decides something in
the rule, a *modulus* a number that a remainder is taken by. What a rule says is
settled by the signs of its conditions, the residues for its moduli, and by parts
that do not depend on a.x, b.x and n at all, the *small* ones.
"""

from __future__ import annotations

import ast
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import pairwise
from typing import NamedTuple

from certify.claim.language import INTEGER, Expression
from certify.claim.names import CONSTANTS, FUNCTIONS
from certify.claim.predicates import BOUND, PREDICATES
from certify.errors import ClaimError

MAX_FORMS = 100
"""How many forms a part of a rule may have."""
MAX_FACTORS = 64
"""How far apart the ends of the interval of a factor may be."""
SHIFTS = range(-2, 3)
"""e mod (n + k) is e plus one of these multiples of n + k, for all large n."""


class Form(NamedTuple):
    """A*a.x + B*b.x + N*n + [low, high], with a = A, b = B, n = N."""

    a: int
    b: int
    n: int
    low: int
    high: int

    @property
    def slope(self) -> tuple[int, int, int]:
        """Return (A, B, N)."""
        return self[:3]

    @property
    def size(self) -> int:
        """Return the largest absolute value of the constant."""
        return max(abs(self.low), abs(self.high))

    def times(self, k: int) -> Form:
        """Return the form multiplied by k."""
        low, high = sorted((k * self.low, k * self.high))
        return Form(k * self.a, k * self.b, k * self.n, low, high)

    def plus(self, other: Form) -> Form:
        """Return the sum of two forms."""
        return Form(*(i + j for i, j in zip(self, other, strict=True)))


Forms = tuple[Form, ...]


def constant(low: int, high: int | None = None) -> Forms:
    """Return the forms of a part whose values lie between two integers."""
    return (Form(0, 0, 0, low, low if high is None else high),)


def is_small(forms: Forms) -> bool:
    """Return whether a part does not depend on a.x, b.x and n."""
    return all(form.slope == (0, 0, 0) for form in forms)


def unite(forms: Iterable[Form]) -> Forms:
    """Return the forms of a part with those of one slope made one."""
    hulls: dict[tuple[int, int, int], Form] = {}
    for form in forms:
        other = hulls.get(form.slope, form)
        low, high = min(form.low, other.low), max(form.high, other.high)
        hulls[form.slope] = Form(*form.slope, low, high)
    return tuple(hulls.values())


@dataclass(frozen=True)
class Reading:
    """What was read of the rules so far: conditions and moduli, in order of appearance."""

    conditions: dict[Form, None] = field(default_factory=dict)
    moduli: dict[int, None] = field(default_factory=dict)


def read_linear(
    rule: Expression, names: Mapping[str, Forms], reading: Reading, refusal: tuple[str, str]
) -> Forms:
    """Read a rule into its conditions and moduli, and return its forms if it is an integer.

    names: the forms of everything the rule can name: parameters, `a`, `b`, bare
    coordinates, `a.x` and so on. refusal: what is said before and after the reason
    when the rule asks for what is not covered.
    Errors: ClaimError with the place in the rule.
    Cost: linear in the rule, its depth, and the square of MAX_FORMS.
    """
    return _Reader(rule, names, reading, refusal).read(rule.tree)


class _Reader:
    """Walks a rule; an integer part returns its forms, a truth value none."""

    def __init__(
        self,
        rule: Expression,
        names: Mapping[str, Forms],
        reading: Reading,
        refusal: tuple[str, str],
    ) -> None:
        self.rule = rule
        self.source = rule.source
        self.names = names
        self.row = tuple(forms[0].low for forms in map(names.get, rule.scope.parameters) if forms)
        self.steady = {
            name
            for name in (*rule.scope.parameters, *CONSTANTS, *FUNCTIONS, *PREDICATES)
            if name not in names or is_small(names[name])
        }
        self.reading = reading
        self.refusal = refusal

    def fault(self, node: ast.expr, reason: str) -> ClaimError:
        before, after = self.refusal
        return self.source.fault(node, f"{before}{reason}{after}")

    def read(self, node: ast.expr) -> Forms:
        if not _is_truth(node) and self.is_steady(node):
            return self.value(node)
        match node:
            case ast.Constant():
                return ()
            case ast.Name(id=name):
                return self.names.get(name, ())
            case ast.Attribute(value=ast.Name(id=vertex), attr=name):
                return self.names[f"{vertex}.{name}"]
            case ast.UnaryOp(op=op, operand=operand):
                forms = self.read(operand)
                return self.scaled(forms, [-1]) if isinstance(op, ast.USub) else forms
            case ast.BinOp(left=left, op=op, right=right):
                return self.arithmetic(node, op, self.read(left), self.read(right))
            case ast.BoolOp(values=parts):
                for part in parts:
                    self.read(part)
                return ()
            case ast.Compare(left=first, comparators=others):
                for one, other in pairwise([self.side(side) for side in (first, *others)]):
                    self.compare(one, other)
                return ()
            case ast.IfExp(test=test, body=body, orelse=orelse):
                self.read(test)
                return self.limited(node, (*self.read(body), *self.read(orelse)))
            case ast.Call(func=ast.Name(id=name), args=args):
                return self.call(node, name, [self.read(argument) for argument in args])
        raise self.source.fault(node, "this is not part of the rule language")

    def is_steady(self, node: ast.expr) -> bool:
        """Return whether a part names no vertex, no coordinate and nothing that grows."""
        return all(part.id in self.steady for part in ast.walk(node) if isinstance(part, ast.Name))

    def value(self, node: ast.expr) -> Forms:
        """Return the value of a part that is the same for all vertices and every n."""
        try:
            part = Expression(self.source, self.rule.scope, INTEGER, node)
            return constant(part.evaluate(self.row))
        except ClaimError as error:
            raise self.fault(
                node, f"this has no value ({str(error).rpartition(': ')[2]})"
            ) from None

    def side(self, node: ast.expr) -> Forms:
        """Return the forms of a part, or of all members of a display together.

        What matters of conditions is the least and the greatest constant for each
        slope, so the members need not be told apart.
        """
        members = node.elts if isinstance(node, ast.Set | ast.List | ast.Tuple) else [node]
        return unite(form for member in members for form in self.read(member))

    def compare(self, left: Forms, right: Forms) -> None:
        self.ask(self.sums(left, self.scaled(right, [-1])))

    def ask(self, forms: Iterable[Form]) -> None:
        """Note the conditions; those that compare constants need no thought."""
        conditions = (form for form in forms if form.slope != (0, 0, 0))
        self.reading.conditions.update(dict.fromkeys(conditions))

    def limited(self, node: ast.expr, forms: Iterable[Form]) -> Forms:
        different = unite(forms)
        if len(different) > MAX_FORMS:
            raise self.fault(node, f"this has more than {MAX_FORMS} cases")
        return different

    def scaled(self, forms: Forms, factors: Iterable[int]) -> Forms:
        return unite(form.times(k) for k in factors for form in forms)

    def sums(self, left: Forms, right: Forms) -> Forms:
        return unite(p.plus(q) for p in left for q in right)

    def arithmetic(self, node: ast.expr, op: ast.operator, left: Forms, right: Forms) -> Forms:
        match op:
            case ast.Add():
                return self.limited(node, self.sums(left, right))
            case ast.Sub():
                return self.limited(node, self.sums(left, self.scaled(right, [-1])))
            case ast.Mult():
                return self.product(node, left, right)
            case ast.Mod() if not is_small(left) or not is_small(right):
                return self.remainder(node, left, right)
        if not is_small(left) or not is_small(right):
            raise self.fault(node, "this is worked out from numbers that grow")
        return _small(op, left[0], right[0])

    def product(self, node: ast.expr, left: Forms, right: Forms) -> Forms:
        if is_small(left) and is_small(right):
            corners = [i * j for i in left[0][3:] for j in right[0][3:]]
            return constant(min(corners), max(corners))
        factor, forms = (left, right) if is_small(left) else (right, left)
        if not is_small(factor):
            raise self.fault(node, "both factors grow")
        low, high = factor[0].low, factor[0].high
        if high - low > MAX_FACTORS:
            raise self.fault(node, f"the factor has more than {MAX_FACTORS:,} values")
        return self.limited(node, self.scaled(forms, range(low, high + 1)))

    def remainder(self, node: ast.expr, left: Forms, right: Forms) -> Forms:
        modulus = right[0]
        if len(right) > 1 or modulus.low != modulus.high:
            raise self.fault(node, "what it is divided by is not one number")
        if modulus.slope == (0, 0, 0) and modulus.low > 0:
            self.reading.moduli[modulus.low] = None
            return constant(0, modulus.low - 1)
        slopes = {(1, -1, 0), (-1, 1, 0), (1, 0, 0), (-1, 0, 0), (0, 1, 0), (0, -1, 0), (0, 0, 0)}
        if modulus.slope != (0, 0, 1) or any(form.slope not in slopes for form in left):
            raise self.fault(node, "this remainder grows")
        forms = self.sums(left, self.scaled(right, SHIFTS))
        self.ask(forms)
        return self.limited(node, forms)

    def call(self, node: ast.expr, name: str, parts: Sequence[Forms]) -> Forms:
        if name == "abs":
            self.ask(parts[0])
            return self.limited(node, self.scaled(parts[0], [1, -1]))
        if name in ("min", "max"):
            for i, one in enumerate(parts):
                self.compare(one, unite(form for other in parts[:i] for form in other))
            return self.limited(node, (form for forms in parts for form in forms))
        if not all(map(is_small, parts)):
            raise self.fault(node, f"{name} is asked of a number that grows")
        if name in PREDICATES:
            return ()
        return constant(0, max(form.size for forms in parts for form in forms))


def _is_truth(node: ast.expr) -> bool:
    """Return whether a part is a truth value, by its form."""
    match node:
        case ast.Compare() | ast.BoolOp() | ast.UnaryOp(op=ast.Not()):
            return True
        case ast.Constant(value=value):
            return isinstance(value, bool)
        case ast.Name(id=name) | ast.Call(func=ast.Name(id=name)):
            return name in CONSTANTS or name in PREDICATES
        case ast.IfExp(body=body):
            return _is_truth(body)
    return False


def _small(op: ast.operator, left: Form, right: Form) -> Forms:
    """Return the interval of a quotient, remainder or power of small parts."""
    match op:
        case ast.FloorDiv():
            return constant(-left.size, left.size)
        case ast.Mod():
            if right.low == right.high > 0:
                return constant(0, right.high - 1)
            return constant(-right.size, right.size)
    base, exponent = max(1, left.size), max(0, right.high)
    most = BOUND if base > 1 and exponent > 53 else min(BOUND, base**exponent)
    return constant(-most, most)
