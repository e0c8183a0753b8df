"""The rule language: which expressions there are, and of what sort each part is.

The syntax tree of a rule is walked once against a list of what is allowed; what
is not on the list is refused with its place. Each part is an *integer*, a
*truth value* or a *set* (a display in braces, brackets or parentheses, only
beside `in`, `==`, `!=`), decided here, before anything is evaluated. Values are
worked out by nested Python functions made from the tree (module `closures`);
no text is ever handed to `eval`, `exec` or `compile`.

A rule sees the names of its *scope*: the parameters of the claim, and the
vertices `a` and `b` where there are any.
"""

from __future__ import annotations

import ast
import keyword
import re
from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import cached_property

from certify.claim.closures import Spans, bind
from certify.claim.hints import did_you_mean, shown
from certify.claim.names import CONSTANTS, FUNCTIONS, Scope
from certify.claim.predicates import PREDICATES
from certify.claim.shapes import Run
from certify.claim.syntax import Source, read_tree
from certify.errors import ClaimError

MAX_LITERAL = 10**12

INTEGER = "an integer"
TRUTH = "a truth value"
SET = "a set"

_NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]*\Z", re.ASCII)
_ARITHMETIC = (ast.Add, ast.Sub, ast.Mult, ast.FloorDiv, ast.Mod, ast.Pow)
_DISPLAYS = (ast.Set, ast.List, ast.Tuple)
_ORDER = (ast.Lt, ast.LtE, ast.Gt, ast.GtE)
_FOREIGN_OPERATORS: dict[type[ast.AST], str] = {
    ast.Div: 'write "//", division rounded down, for "/"',
    ast.BitXor: 'write "**" for a power, not "^"',
    ast.BitAnd: 'write "and" for "&"',
    ast.BitOr: 'write "or" for "|"',
    ast.Invert: 'write "not" for "~"',
    ast.Is: 'write "==" for "is"',
    ast.IsNot: 'write "!=" for "is not"',
}
_ALLOWED = (
    "allowed are integers, names, + - * // % **, comparisons, in, not in, and, or, not, "
    "X if C else Y, and calls of " + ", ".join(sorted([*FUNCTIONS, *PREDICATES]))
)


@dataclass(frozen=True)
class Expression:
    """A rule that was read and found to be in order.

    sort: "an integer" or "a truth value".
    A *row* is the tuple of the values of the scope's parameters.
    """

    source: Source
    scope: Scope
    sort: str
    tree: ast.expr = field(repr=False, compare=False)

    def mentions(self, name: str) -> bool:
        """Return whether the rule names a parameter."""
        return any(isinstance(n, ast.Name) and n.id == name for n in ast.walk(self.tree))

    @cached_property
    def _over_rows(self) -> Run:
        return bind(self.source, self.tree, self.scope, row=None)

    def evaluate(self, row: Sequence[int]) -> int:
        """Return the value for a row, of a rule that speaks of parameters only.

        Errors: ClaimError for a division by zero, a negative exponent, or a
        number beyond 2^53.
        """
        return self._over_rows(row, row)

    def bind(self, row: Sequence[int], spans: Spans = ()) -> Run:
        """Return the rule as a function of two vertices, with the row's values put in.

        A vertex is an integer, or a tuple of them when the scope has
        coordinates. spans: for each coordinate the least and the greatest value
        that will be asked for; the empty default promises nothing.
        Errors: none here; the function raises ClaimError as `evaluate` does.
        Cost: linear in the rule; a call costs about 0.1 microseconds a node.
        """
        return bind(self.source, self.tree, self.scope, row=tuple(row), spans=spans)


def read_expression(text: str, *, sort: str, scope: Scope, where: str) -> Expression:
    """Read a rule.

    sort: what it has to be, INTEGER or TRUTH. where: file, line and key, the
    beginning of every error message.
    Errors: ClaimError with the place in the rule, what is wrong there, and what
    is allowed.
    """
    source = Source(text, where)
    tree = read_tree(source)
    _SortCheck(source, scope).expect(sort, tree)
    return Expression(source, scope, sort, tree)


def check_name(name: str, where: str) -> None:
    """Refuse a name that no parameter or coordinate can have.

    Errors: ClaimError.
    """
    if not _NAME.match(name):
        raise ClaimError(
            f"{where}: {shown(name)} is not a name; a name is a letter, then letters, digits and _"
        )
    taken = {"a", "b", "where", *CONSTANTS, *FUNCTIONS, *PREDICATES}
    if name in taken or keyword.iskeyword(name):
        raise ClaimError(
            f'{where}: "{name}" has a meaning in the rules already; choose another name'
        )


@dataclass(frozen=True)
class _SortCheck:
    """Finds the sort of each part, or says why it has none."""

    source: Source
    scope: Scope

    def expect(self, wanted: str, node: ast.expr) -> None:
        """Refuse a part that is not of the wanted sort."""
        found = self.sort(node)
        if found != wanted:
            hint = "; compare it with something" if (wanted, found) == (TRUTH, INTEGER) else ""
            raise self.source.fault(node, f"needed is {wanted}, and this is {found}{hint}")

    def sort(self, node: ast.expr) -> str:
        """Return the sort of a part that is not a set."""
        match node:
            case ast.Constant(value=value):
                return self._constant(node, value)
            case ast.Name(id=name):
                return self._name(node, name)
            case ast.Attribute(value=owner, attr=name):
                return self._coordinate(node, owner, name)
            case ast.UnaryOp(op=ast.Not(), operand=operand):
                self.expect(TRUTH, operand)
                return TRUTH
            case ast.UnaryOp(op=ast.USub() | ast.UAdd(), operand=operand):
                self.expect(INTEGER, operand)
                return INTEGER
            case ast.BinOp(left=left, op=op, right=right) if isinstance(op, _ARITHMETIC):
                self.expect(INTEGER, left)
                self.expect(INTEGER, right)
                return INTEGER
            case ast.BoolOp(values=parts):
                for part in parts:
                    self.expect(TRUTH, part)
                return TRUTH
            case ast.Compare(left=left, ops=ops, comparators=comparators):
                return self._comparison(node, [left, *comparators], ops)
            case ast.IfExp(test=test, body=body, orelse=orelse):
                self.expect(TRUTH, test)
                found = self.sort(body)
                self.expect(found, orelse)
                return found
            case ast.Call(func=func, args=args, keywords=keywords):
                return self._call(node, func, args, keywords)
            case ast.UnaryOp(op=op) | ast.BinOp(op=op) if type(op) in _FOREIGN_OPERATORS:
                raise self.source.fault(node, _FOREIGN_OPERATORS[type(op)])
            case ast.Set() | ast.List() | ast.Tuple():
                raise self.source.fault(
                    node, 'a set or list stands only after "in", or beside "==" and another set'
                )
        raise self.source.fault(node, f"this is not part of the rule language; {_ALLOWED}")

    def _constant(self, node: ast.expr, value: object) -> str:
        if isinstance(value, bool):
            return TRUTH
        if not isinstance(value, int):
            raise self.source.fault(node, "only integers are numbers here")
        if value > MAX_LITERAL:
            raise self.source.fault(node, "this number is too large; numbers go up to 10^12")
        return INTEGER

    def _name(self, node: ast.expr, name: str) -> str:
        scope = self.scope
        if name in CONSTANTS:
            return TRUTH
        if name in scope.parameters or (scope.bare and name in scope.coordinates):
            return INTEGER
        if name in scope.vertices:
            if not scope.coordinates:
                return INTEGER
            raise self.source.fault(
                node, f"a vertex has coordinates; write {_listed(scope.of_vertex(name))}"
            )
        if name in FUNCTIONS or name in PREDICATES:
            raise self.source.fault(node, f"{name} needs its arguments, as in {name}(...)")
        if name in scope.coordinates:
            choices = [f"{vertex}.{name}" for vertex in scope.vertices]
            raise self.source.fault(node, f"of which vertex? Write {_listed(choices)}")
        if name in ("a", "b"):
            raise self.source.fault(
                node, f"there is no vertex {name} here; known here: {_listed(scope.names)}"
            )
        known = [*scope.names, *FUNCTIONS, *PREDICATES]
        raise self.source.fault(
            node, f"unknown name; known here: {_listed(scope.names)}{did_you_mean(name, known)}"
        )

    def _coordinate(self, node: ast.expr, owner: ast.expr, name: str) -> str:
        scope = self.scope
        if not isinstance(owner, ast.Name) or owner.id not in scope.vertices:
            raise self.source.fault(
                node, f"a point stands only in the coordinate of a vertex; {_ALLOWED}"
            )
        if name not in scope.coordinates:
            known = scope.of_vertex(owner.id)
            raise self.source.fault(
                node,
                f"a vertex has no such coordinate; write {_listed(known)}"
                + did_you_mean(name, scope.coordinates),
            )
        return INTEGER

    def _comparison(self, node: ast.expr, parts: list[ast.expr], ops: list[ast.cmpop]) -> str:
        for op, after in zip(ops, parts[1:], strict=True):
            if isinstance(op, ast.In | ast.NotIn) and not isinstance(after, _DISPLAYS):
                raise self.source.fault(
                    after, '"in" needs a set of integers to its right, such as {4, 7}'
                )
        sorts = [self._side(part) for part in parts]
        for i, op in enumerate(ops):
            left, right = sorts[i], sorts[i + 1]
            if isinstance(op, ast.In | ast.NotIn):
                if left != INTEGER:
                    raise self.source.fault(parts[i], f'"in" asks for an integer, not for {left}')
            elif isinstance(op, ast.Eq | ast.NotEq):
                if left != right:
                    raise self.source.fault(
                        node, f"{left} and {right} cannot be equal; compare two of one sort"
                    )
                for part in parts[i : i + 2]:
                    if isinstance(part, ast.List | ast.Tuple):
                        raise self.source.fault(part, "write a set to compare with braces: {1, 2}")
            elif isinstance(op, _ORDER):
                for part, found in zip(parts[i : i + 2], (left, right), strict=True):
                    if found != INTEGER:
                        raise self.source.fault(
                            part, f"only integers are smaller or larger, and this is {found}"
                        )
            else:
                raise self.source.fault(node, _FOREIGN_OPERATORS[type(op)])
        return TRUTH

    def _side(self, node: ast.expr) -> str:
        """Return the sort of one side of a comparison, where sets are allowed."""
        if not isinstance(node, _DISPLAYS):
            return self.sort(node)
        if not node.elts:
            raise self.source.fault(node, "this set is empty; it needs an integer at least")
        for element in node.elts:
            self.expect(INTEGER, element)
        return SET

    def _call(
        self, node: ast.expr, func: ast.expr, args: list[ast.expr], keywords: list[ast.keyword]
    ) -> str:
        if not isinstance(func, ast.Name) or (
            func.id not in FUNCTIONS and func.id not in PREDICATES
        ):
            word = func.id if isinstance(func, ast.Name) else ""
            known = [*FUNCTIONS, *PREDICATES]
            raise self.source.fault(
                func,
                "this cannot be called; there is "
                + _listed(sorted(known))
                + did_you_mean(word, known),
            )
        if keywords:
            raise self.source.fault(keywords[0], "an argument has no name here; give the value")
        one = func.id in PREDICATES or func.id == "abs"
        if (len(args) != 1) if one else (len(args) < 2):
            wanted = "one integer" if one else "two or more integers"
            raise self.source.fault(
                node, f"{func.id} takes {wanted}, and here {len(args)} are given"
            )
        for argument in args:
            self.expect(INTEGER, argument)
        return TRUTH if func.id in PREDICATES else INTEGER


def _listed(words: Sequence[str]) -> str:
    return ", ".join(words) if words else "nothing but numbers"
