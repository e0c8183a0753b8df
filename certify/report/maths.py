"""Small formulas about the growing parameter, and periodic sets, as LaTeX between marks."""

from __future__ import annotations

import re

from certify.claim.periodic import PeriodicSet, Run, Singles, Tail
from certify.report.formula import name_symbol
from certify.report.inline import formula
from certify.report.runs import set_values
from certify.report.words import join

_TOKEN = re.compile(r"\d+|[^\W\d]\w*|>=|<=|\.\.\.|\s+|.")
_SIGNS = {">=": r"\ge", "<=": r"\le", "...": r"\dots"}


def set_maths(text: str) -> str:
    """Return a formula that is typed plainly, with blanks around signs: "n >= 42", "T(n + 2k)"."""
    said = (
        _SIGNS.get(token) or (name_symbol(token) if token.isidentifier() else token)
        for token in _TOKEN.findall(text)
    )
    return formula("".join(said))


def set_answers(answers: PeriodicSet, name: str) -> str:
    """Return a set of values of a parameter as a condition: "n is even and n >= 10".

    "" for the empty set.
    """
    parts = answers.parts()
    texts = [_set_part(part, name_symbol(name)) for part in parts]
    if len(parts) > 1 and isinstance(parts[-1], Tail) and parts[-1].start is not None:
        texts[-1] = f"({texts[-1]})"
    return join(texts, "or")


def _set_part(part: Run | Singles | Tail, symbol: str) -> str:
    match part:
        case Run(low, None):
            return formula(rf"{symbol} \ge {low}")
        case Run(low, int(high)):
            return formula(set_values(low, high, symbol))
        case Singles((number,)):
            return formula(f"{symbol} = {number}")
        case Singles(numbers):
            return formula(rf"{symbol} \in \{{{', '.join(map(str, numbers))}\}}")
        case Tail(start=None):
            return _set_residues(part, symbol)
        case Tail(start=start):
            bound = formula(rf"{symbol} \ge {start}")
            return f"{_set_residues(part, symbol)} and {bound}"
    raise TypeError(f"no part of a set: {part!r}")


def _set_residues(tail: Tail, symbol: str) -> str:
    if tail.modulus == 2:
        return f"{formula(symbol)} is {'odd' if tail.residues == (1,) else 'even'}"
    if len(tail.residues) == 1:
        sign = r"\not\equiv" if tail.excluded else r"\equiv"
        return formula(rf"{symbol} {sign} {tail.residues[0]} \pmod{{{tail.modulus}}}")
    sign = r"\notin" if tail.excluded else r"\in"
    listed = ", ".join(map(str, tail.residues))
    return formula(rf"{symbol} \bmod {tail.modulus} {sign} \{{{listed}\}}")
