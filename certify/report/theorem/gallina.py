"""A rule of a claim as a term of Coq.

The tree is the one that certify/claim has read and found in order. Each operation goes to
the one of Coq's `Z` with the same values: `//` and `%` round down in both. Where a claim
would be in error (a division by zero, a number beyond 2^53) Coq's functions have some
value; a claim that was accepted never gets there.

`&&&` and `|||` are Coq's `&&` and `||` that look at the second part only where they have to.
Composite operands stand in parentheses, always: a reader need not know which sign of Coq
binds first.
"""

from __future__ import annotations

import ast
import re
from collections.abc import Iterable, Mapping, Sequence
from functools import reduce
from itertools import pairwise

from certify.claim.instances import Range
from certify.claim.language import Expression
from certify.claim.names import Scope
from certify.claim.predicates import PREDICATES

_PLAIN = re.compile(r"[a-z][a-z0-9]*|[A-Z]")
"""Names that may stay as they are: nearly all that Coq knows have capitals or underscores."""

_DELIMITER = re.compile(r"\(\*|\*\)")


def _words(*lines: str) -> frozenset[str]:
    return frozenset(" ".join(lines).split())


_KEYWORDS = _words(
    "as at by cofix do else end exists exists2 fix for forall fun if in let ltac match mod",
    "return then using where with",
)
"""Words of Coq that no variable can be called."""

_CONSTRUCTORS = _words(
    "conj cons exist exist2 false inhabits inl inleft inr inright left mkhypo mkmorph nil nothing",
    "more pair right true tt I O S",
)
"""Names that are no variables in `let '(m, n) := row in`, because they stand for a case."""

_OURS = (
    _words(
        "a adjacent b bool certificates claimed ends extend filter forbidden fst graphs h holds",
        "instances list map member negb query range required row same snd vertices Q Z",
    )
    | PREDICATES.keys()
)
"""Names that the files we write use themselves."""

_SIGNS: Mapping[type[ast.operator], str] = {
    ast.Add: "+",
    ast.Sub: "-",
    ast.Mult: "*",
    ast.FloorDiv: "/",
    ast.Mod: "mod",
    ast.Pow: "^",
}
_CHAINED = (ast.Add, ast.Mult)
_RELATIONS: Mapping[type[ast.cmpop], str] = {ast.Eq: "=?", ast.Lt: "<?", ast.LtE: "<=?"}
_TURNED: Mapping[type[ast.cmpop], str] = {ast.Gt: "<?", ast.GtE: "<=?"}


def write_name(name: str) -> str:
    """Return a parameter as a variable of Coq: itself, or with a prime where that may be taken.

    No name of a claim has a prime, so different names stay different; and no name that we
    make of a coordinate, such as `a_x`, is plain.
    """
    free = _PLAIN.fullmatch(name) and name not in _KEYWORDS | _CONSTRUCTORS | _OURS
    return name if free else f"{name}'"


def write_vertex(scope: Scope, vertex: str) -> str:
    """Return the pattern of a vertex as a function takes it: `a`, or `'(a_x, a_y)`."""
    if not scope.coordinates:
        return vertex
    return f"'({', '.join(f'{vertex}_{name}' for name in scope.coordinates)})"


def write_rule(rule: Expression) -> str:
    """Return a rule as a term: of type `Z` for an integer, `bool` for a truth value."""
    return _Writer(rule.scope).bare(rule.tree)


def write_integer(value: Expression | int) -> str:
    """Return an integer expression as an argument, in parentheses where it needs them."""
    if isinstance(value, int):
        return _number(value)
    return _Writer(value.scope).operand(value.tree)


def write_range(bounds: Range) -> str:
    """Return a range as a list."""
    return f"range {write_integer(bounds.low)} {write_integer(bounds.high)}"


def write_list(items: Iterable[str]) -> str:
    """Return a list."""
    return f"[{'; '.join(items)}]"


def write_comment(text: str) -> str:
    """Return somebody else's words so that they can stand in a comment, on one line.

    They must not end it, open another one or a text, nor turn the line around on a screen.
    """
    plain = "".join(c if c.isprintable() else " " for c in text)
    apart = plain.replace("*", " * ") if _DELIMITER.search(plain) else plain
    return " ".join(apart.replace('"', "'").split())


def _number(value: int) -> str:
    return str(value) if value >= 0 else f"({value})"


class _Writer:
    """Writes the parts of rules of one scope."""

    def __init__(self, scope: Scope) -> None:
        self._coordinates = scope.coordinates

    def operand(self, node: ast.expr) -> str:
        """Return a part so that it can stand beside any sign."""
        return _operand(self.bare(node))

    def bare(self, node: ast.expr) -> str:
        """Return a part so that it can stand in parentheses."""
        match node:
            case ast.Constant(value=bool(value)):
                return "true" if value else "false"
            case ast.Constant(value=int(value)):
                return _number(value)
            case ast.Name(id=name):
                return self._name(name)
            case ast.Attribute(value=ast.Name(id=vertex), attr=name):
                return f"{vertex}_{name}"
            case ast.UnaryOp(op=ast.Not(), operand=inner):
                return f"negb {self.operand(inner)}"
            case ast.UnaryOp(op=ast.USub(), operand=inner):
                return f"- {self.operand(inner)}"
            case ast.UnaryOp(operand=inner):
                return self.bare(inner)
            case ast.BinOp(left=left, op=op, right=right):
                return self._arithmetic(left, op, right)
            case ast.BoolOp(op=op, values=values):
                sign = " &&& " if isinstance(op, ast.And) else " ||| "
                return sign.join(map(self.operand, values))
            case ast.IfExp(test=test, body=body, orelse=orelse):
                return f"if {self.bare(test)} then {self.bare(body)} else {self.operand(orelse)}"
            case ast.Compare(left=left, ops=ops, comparators=rest):
                return self._comparison([left, *rest], ops)
            case ast.Call(func=ast.Name(id=function), args=arguments):
                return self._call(function, arguments)
        raise AssertionError(f"a rule that was read has no {type(node).__name__}")

    def _name(self, name: str) -> str:
        if name in ("true", "false"):
            return name
        if name in self._coordinates:  # bare, in `where`: a coordinate of the one vertex
            return f"a_{name}"
        return name if name in ("a", "b") else write_name(name)

    def _arithmetic(self, left: ast.expr, op: ast.operator, right: ast.expr) -> str:
        chained = isinstance(left, ast.BinOp) and type(left.op) is type(op) in _CHAINED
        first = self.bare(left) if chained else self.operand(left)
        return f"{first} {_SIGNS[type(op)]} {self.operand(right)}"

    def _comparison(self, parts: Sequence[ast.expr], ops: Sequence[ast.cmpop]) -> str:
        texts = [
            self._relation(left, op, right)
            for (left, right), op in zip(pairwise(parts), ops, strict=True)
        ]
        return texts[0] if len(texts) == 1 else " &&& ".join(f"({text})" for text in texts)

    def _relation(self, left: ast.expr, op: ast.cmpop, right: ast.expr) -> str:
        match op:
            case ast.In():
                return f"member {self.operand(left)} {self._display(right)}"
            case ast.NotIn():
                return f"negb (member {self.operand(left)} {self._display(right)})"
            case ast.NotEq():
                return f"negb ({self._equality(left, right)})"
            case ast.Eq():
                return self._equality(left, right)
        if type(op) in _TURNED:
            return f"{self.operand(right)} {_TURNED[type(op)]} {self.operand(left)}"
        return f"{self.operand(left)} {_RELATIONS[type(op)]} {self.operand(right)}"

    def _equality(self, left: ast.expr, right: ast.expr) -> str:
        if isinstance(left, ast.Set):
            return f"same_set {self._display(left)} {self._display(right)}"
        if _is_truth(left):
            return f"Bool.eqb {self.operand(left)} {self.operand(right)}"
        return f"{self.operand(left)} =? {self.operand(right)}"

    def _display(self, node: ast.expr) -> str:
        assert isinstance(node, ast.Set | ast.List | ast.Tuple)
        return write_list(map(self.bare, node.elts))

    def _call(self, function: str, arguments: Sequence[ast.expr]) -> str:
        parts = [self.operand(argument) for argument in arguments]
        if function in ("min", "max", "gcd"):
            return reduce(lambda before, part: f"Z.{function} {_operand(before)} {part}", parts)
        return f"{'Z.abs' if function == 'abs' else function} {parts[0]}"


def _operand(text: str) -> str:
    return text if _is_word(text) else f"({text})"


def _is_word(text: str) -> bool:
    """Return whether a term needs no parentheses: a name, a number, or in parentheses already."""
    if text.replace("_", "").replace("'", "").isalnum():
        return True
    depth = 0
    for place, character in enumerate(text):
        depth += (character == "(") - (character == ")")
        if depth == 0:
            return character == ")" and place == len(text) - 1
    return False


def _is_truth(node: ast.expr) -> bool:
    """Return whether a part that is no set is a truth value."""
    match node:
        case ast.Constant(value=value):
            return isinstance(value, bool)
        case ast.Name(id=name):
            return name in ("true", "false")
        case ast.Compare() | ast.BoolOp() | ast.UnaryOp(op=ast.Not()):
            return True
        case ast.IfExp(body=body):
            return _is_truth(body)
        case ast.Call(func=ast.Name(id=function)):
            return function in PREDICATES
    return False
