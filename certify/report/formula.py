"""A rule of a claim, set as mathematics: words for the logic, LaTeX for the arithmetic.

The tree is the one that certify/claim has read and found in order; nothing is parsed
a second time. An integer part becomes a sympy expression, unevaluated so that it
stays as its author wrote it, and sympy prints it. The logic around it is put
in words: "a + b is a square, or a = 1".
"""

from __future__ import annotations

import ast
from collections.abc import Iterator, Mapping, Sequence
from itertools import pairwise

import sympy

from certify.claim.instances import Range
from certify.claim.language import Expression
from certify.claim.names import CONSTANTS, Scope
from certify.claim.predicates import PREDICATES
from certify.report.inline import formula, mark_dollars, split_marks

MEANINGS: Mapping[str, tuple[str, str]] = {
    "square": ("a square", r"a square is a number $k^2$ with $k \ge 0$"),
    "cube": ("a cube", r"a cube is a number $k^3$ with an integer $k$"),
    "triangular": (
        "a triangular number",
        r"a triangular number is a number $k(k+1)/2$ with $k \ge 0$",
    ),
    "pentagonal": (
        "a pentagonal number",
        r"a pentagonal number is a number $k(3k-1)/2$ with $k \ge 0$",
    ),
    "fibonacci": (
        "a Fibonacci number",
        r"the Fibonacci numbers are $0, 1, 1, 2, 3, 5, 8, \dots$, each from the third on the sum "
        "of the two before it",
    ),
    "prime": ("a prime", ""),
    "power": (
        "a perfect power",
        r"a perfect power is a number $k^e$ with $k \ge 1$ and $e \ge 2$",
    ),
}
"""What the predicates are called, and how they are defined where the name does not say it."""

_RELATIONS: Mapping[type[ast.cmpop], str] = {
    ast.Eq: "=",
    ast.NotEq: r"\ne",
    ast.Lt: "<",
    ast.LtE: r"\le",
    ast.Gt: ">",
    ast.GtE: r"\ge",
    ast.In: r"\in",
    ast.NotIn: r"\notin",
}
_OPPOSITE: Mapping[type[ast.cmpop], type[ast.cmpop]] = {
    ast.Eq: ast.NotEq,
    ast.NotEq: ast.Eq,
    ast.Lt: ast.GtE,
    ast.GtE: ast.Lt,
    ast.Gt: ast.LtE,
    ast.LtE: ast.Gt,
    ast.In: ast.NotIn,
    ast.NotIn: ast.In,
}
_ATOM, _JOINED = 0, 1


def name_symbol(name: str) -> str:
    """Return a parameter or coordinate as LaTeX: one letter in italics, a word upright."""
    if len(name) == 1:
        return name
    head = name.rstrip("0123456789")
    if len(head) == 1 and head != name:
        return f"{head}_{{{name[1:]}}}"
    escaped = name.replace("_", r"\_")
    return rf"\mathrm{{{escaped}}}"


def name_coordinate(name: str, vertex: str) -> str:
    """Return a coordinate of a vertex as LaTeX: a letter with an index, or a word as a function."""
    symbol = name_symbol(name)
    return f"{symbol}_{vertex}" if len(name) == 1 else f"{symbol}({vertex})"


class Setter:
    """Sets the parts of rules of one scope.

    bare: whether the vertex `a` is the only one, so that its coordinates need no
    vertex beside them.
    """

    def __init__(self, scope: Scope, *, bare: bool = False) -> None:
        self._scope = scope
        self._bare = bare
        self._printed: dict[sympy.Symbol, str] = {}
        self.meaning: dict[sympy.Symbol, tuple[str, tuple[sympy.Expr, ...]]] = {}
        """What the placeholders stand for: the name of an operation, and its arguments."""
        words = [*scope.parameters, *scope.coordinates]
        self._times = r" \cdot " if any(len(word) > 1 for word in words) else None

    def set_integer(self, node: ast.expr) -> str:
        """Return an integer part as LaTeX."""
        return self._print(self.integer(node))

    def _print(self, part: sympy.Expr) -> str:
        return str(
            sympy.latex(
                part, order="none", symbol_names=dict(self._printed), mul_symbol=self._times
            )
        )

    def integer(self, node: ast.expr) -> sympy.Expr:
        """Return an integer part as a sympy expression, in its author's order."""
        match node:
            case ast.Constant(value=int(value)):
                return sympy.Integer(value)
            case ast.Name(id=name):
                return self._symbol(name)
            case ast.Attribute(value=ast.Name(id=vertex), attr=name):
                return self._symbol(name, vertex)
            case ast.UnaryOp(op=ast.UAdd(), operand=operand):
                return self.integer(operand)
            case ast.UnaryOp(operand=operand):
                return self._negative(self.integer(operand))
            case ast.BinOp(left=left, op=op, right=right):
                return self._arithmetic(op, self.integer(left), self.integer(right))
            case ast.IfExp(test=test, body=body, orelse=orelse):
                one, other = self.set_integer(body), self.set_integer(orelse)
                when = _in_formula(self.truth(test))
                return self._placeholder(
                    rf"\begin{{cases}} {one} & \text{{if }} {when}, \\ "
                    rf"{other} & \text{{otherwise}} \end{{cases}}"
                )
            case ast.Call(func=ast.Name(id=name), args=args):
                return self._call(name, [self.integer(argument) for argument in args])
        raise TypeError(f"no integer part of a rule: {ast.dump(node)}")

    def _symbol(self, name: str, vertex: str = "") -> sympy.Symbol:
        symbol = sympy.Symbol(f"{vertex}.{name}" if vertex else name, integer=True)
        if vertex and not (self._bare and vertex == "a"):
            self._printed[symbol] = name_coordinate(name, vertex)
        else:
            self._printed[symbol] = name_symbol(name)
        return symbol

    def _placeholder(self, printed: str, name: str = "", *parts: sympy.Expr) -> sympy.Symbol:
        """Return a symbol for what sympy would not print, or only after evaluating it."""
        symbol = sympy.Symbol(f".{len(self._printed)}", integer=True)
        self._printed[symbol] = printed
        self.meaning[symbol] = (name, parts)
        return symbol

    def _bracket(self, part: sympy.Expr) -> sympy.Symbol:
        """Return a part in parentheses, where sympy would print none."""
        return self._placeholder(rf"\left({self._print(part)}\right)", "()", part)

    def _negative(self, part: sympy.Expr) -> sympy.Expr:
        if isinstance(part, sympy.Integer):
            return sympy.Integer(-int(part))
        if part.is_Add or part.could_extract_minus_sign():
            part = self._bracket(part)
        return sympy.Mul(-1, part, evaluate=False)

    def _arithmetic(self, op: ast.operator, left: sympy.Expr, right: sympy.Expr) -> sympy.Expr:
        match op:
            case ast.Add():
                return sympy.Add(left, right, evaluate=False)
            case ast.Sub():
                return sympy.Add(left, self._negative(right), evaluate=False)
            case ast.Mult():
                if isinstance(right, sympy.Integer) and not isinstance(left, sympy.Integer):
                    left, right = right, left
                if isinstance(right, sympy.Mul | sympy.Integer) and right.is_negative is not False:
                    right = self._bracket(right)
                if isinstance(left, sympy.Mul) and left.could_extract_minus_sign():
                    left = self._bracket(left)
                return sympy.Mul(left, right, evaluate=False)
            case ast.FloorDiv():
                return self._placeholder(
                    rf"\left\lfloor \frac{{{self._print(left)}}}{{{self._print(right)}}} "
                    r"\right\rfloor",
                    "//",
                    left,
                    right,
                )
            case ast.Mod():
                if isinstance(left, sympy.Mod | sympy.Mul):
                    left = self._bracket(left)
                if isinstance(right, sympy.Mod | sympy.Mul):
                    right = self._bracket(right)
                return sympy.Mod(left, right, evaluate=False) if right != 0 else left
            case _:
                if not (left.is_Symbol or (left.is_Integer and left.is_nonnegative)):
                    left = self._bracket(left)
                return self._placeholder(
                    f"{self._print(left)}^{{{self._print(right)}}}", "**", left, right
                )

    def _call(self, name: str, arguments: list[sympy.Expr]) -> sympy.Expr:
        if name == "abs":
            return sympy.Abs(arguments[0], evaluate=False)
        listed = ", ".join(map(self._print, arguments))
        return self._placeholder(rf"\{name}({listed})", name, *arguments)

    def truth(self, node: ast.expr) -> str:
        """Return a truth-valued part as a clause, with its formulas marked."""
        return self._clause(node)[0]

    def _clause(self, node: ast.expr, *, negated: bool = False) -> tuple[str, int]:
        """Return a clause, and whether it joins others by and, or, if."""
        match node:
            case ast.Constant(value=value):
                return _always(bool(value) != negated), _ATOM
            case ast.Name(id=name):
                return _always(CONSTANTS[name] != negated), _ATOM
            case ast.UnaryOp(operand=operand):
                return self._clause(operand, negated=not negated)
            case ast.BoolOp(op=op, values=values):
                word = "and" if isinstance(op, ast.And) != negated else "or"
                return self._join(word, [self._clause(v, negated=negated) for v in values])
            case ast.IfExp(test=test, body=body, orelse=orelse):
                one = _bracketed(self._clause(body, negated=negated))
                other = _bracketed(self._clause(orelse, negated=negated))
                return f"{one} if {_bracketed(self._clause(test))}, and {other} if not", _JOINED
            case ast.Compare(left=left, ops=ops, comparators=comparators):
                return self._comparison([left, *comparators], ops, negated=negated)
            case ast.Call(func=ast.Name(id=name), args=[argument]):
                verb = "is not" if negated else "is"
                return f"{formula(self.set_integer(argument))} {verb} {MEANINGS[name][0]}", _ATOM
        raise TypeError(f"no truth-valued part of a rule: {ast.dump(node)}")

    def _join(self, word: str, parts: Sequence[tuple[str, int]]) -> tuple[str, int]:
        if word == "and":
            return " and ".join(_bracketed(part) for part in parts), _JOINED
        wide = any(level == _JOINED for _, level in parts)
        return (", or " if wide else " or ").join(text for text, _ in parts), _JOINED

    def _comparison(
        self, parts: list[ast.expr], ops: list[ast.cmpop], *, negated: bool
    ) -> tuple[str, int]:
        if all(_is_truth(part) for part in parts):
            clauses = [_bracketed(self._clause(part)) for part in parts]
            said = [
                f"{one} {'if and only if' if isinstance(op, ast.Eq) else 'or else'} {other}"
                for op, (one, other) in zip(ops, pairwise(clauses), strict=True)
            ]
            whole = " and ".join(f"({text})" for text in said) if len(said) > 1 else said[0]
            return (f"not ({whole})" if negated else whole), _JOINED
        if len(ops) == 1 and negated:
            ops, negated = [_OPPOSITE[type(ops[0])]()], False
        text = self._congruence(parts, ops) or self._set_side(parts[0]) + "".join(
            f" {_RELATIONS[type(op)]} {self._set_side(part)}"
            for op, part in zip(ops, parts[1:], strict=True)
        )
        return (f"not {formula(text)}", _JOINED) if negated else (formula(text), _ATOM)

    def _set_side(self, node: ast.expr) -> str:
        if isinstance(node, ast.Set | ast.List | ast.Tuple):
            return rf"\{{{', '.join(self.set_integer(part) for part in node.elts)}\}}"
        return self.set_integer(node)

    def _congruence(self, parts: list[ast.expr], ops: list[ast.cmpop]) -> str:
        """Return equal remainders as a congruence; "" when the comparison is no such."""
        same = all(isinstance(op, ast.Eq) for op in ops)
        if not (same or (len(ops) == 1 and isinstance(ops[0], ast.NotEq))):
            return ""
        modulus, sides = None, []
        for part in parts:
            match part:
                case ast.BinOp(left=left, op=ast.Mod(), right=ast.Constant(value=int(k))) if (
                    k > 1 and modulus in (None, k)
                ):
                    modulus = k
                    sides.append(left)
                case ast.Constant():
                    sides.append(part)
                case _:
                    return ""
        if modulus is None or not all(
            0 <= part.value < modulus  # type: ignore[operator]  # an integer by its sort
            for part in parts
            if isinstance(part, ast.Constant)
        ):
            return ""
        sign = r" \equiv " if same else r" \not\equiv "
        return f"{sign.join(map(self.set_integer, sides))} \\pmod{{{modulus}}}"


def set_rule(expression: Expression, *, bare: bool = False) -> str:
    """Return a truth-valued rule as a clause, with its formulas marked.

    bare: write the coordinates of `a` without the vertex, where there is no other.
    """
    return Setter(expression.scope, bare=bare).truth(expression.tree)


def set_number(value: Expression | int) -> str:
    """Return a bound or a coordinate as LaTeX."""
    if isinstance(value, int):
        return str(value)
    return Setter(value.scope).set_integer(value.tree)


def set_bounds(name: str, bounds: Range) -> str:
    """Return `lo <= name <= hi` as LaTeX; `name` is LaTeX, too."""
    low = set_number(bounds.low)
    if bounds.endless:
        return rf"{name} \ge {low}"
    high = set_number(bounds.high)
    return f"{name} = {low}" if low == high else rf"{low} \le {name} \le {high}"


def define_predicates(*rules: Expression | None) -> str:
    """Return the definitions of the predicates that the rules name, as a sentence or ""."""
    used = {
        node.id
        for rule in rules
        if rule is not None
        for node in ast.walk(rule.tree)
        if isinstance(node, ast.Name)
    }
    said = [mark_dollars(MEANINGS[name][1]) for name in PREDICATES if name in used]
    text = "; ".join(text for text in said if text)
    return f"Here {text}." if text else ""


def _bracketed(clause: tuple[str, int]) -> str:
    text, level = clause
    return f"({text})" if level == _JOINED else text


def _always(value: bool) -> str:
    return "always" if value else "never"


def _in_formula(clause: str) -> str:
    r"""Return a clause as it stands inside a formula: its words in \text{}."""
    return "".join(
        part if kind == "formula" else rf"\text{{{part}}}" for kind, part in split_marks(clause)
    )


def _is_truth(node: ast.expr) -> bool:
    match node:
        case ast.Constant(value=value):
            return isinstance(value, bool)
        case ast.Name(id=name):
            return name in CONSTANTS
        case ast.UnaryOp(op=op):
            return isinstance(op, ast.Not)
        case ast.IfExp(body=body):
            return _is_truth(body)
        case ast.Call(func=ast.Name(id=name)):
            return name in PREDICATES
    return isinstance(node, ast.BoolOp | ast.Compare)


def find_moduli(expression: Expression) -> Iterator[tuple[ast.expr, ast.expr]]:
    """Yield the left and the right side of every `%` of a rule, in order."""
    for node in ast.walk(expression.tree):
        if isinstance(node, ast.BinOp) and isinstance(node.op, ast.Mod):
            yield node.left, node.right
