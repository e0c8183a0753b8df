"""Checking an LRAT proof: a list of clauses, each a consequence of earlier ones.

A line `ID LITERALS 0 HINTS 0` says: suppose all LITERALS are false; then each
hinted clause in turn has one literal left, which must be true, until the last
one has none. So the clauses before it imply the new one. The empty clause at the
end says that the clauses at the start cannot all hold.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from io import BytesIO

from .strict import Rejected

Clause = tuple[int, ...]

_NUMBER = "(?:0|-?[1-9][0-9]{0,17})"
_NUMBERS = re.compile(f"{_NUMBER}(?: {_NUMBER})*+")


def check_proof(clauses: list[Clause], lines: Iterable[str]) -> list[Clause]:
    """Accept a proof of the empty clause from the clauses, which have IDs 1, 2, ...

    Returns the clauses that the proof adds, one a line.
    Sound: every clause added to `known` follows from those before it, by unit
    propagation alone; the last one has no literal and so is false.
    """
    known: list[Clause] = [(), *clauses]
    finished = False
    for number, line in enumerate(lines, 1):
        if finished:
            raise Rejected(f"proof line {number}: it comes after the empty clause")
        try:
            clause = _check_step(known, line)
        except Rejected as error:
            raise Rejected(f"proof line {number}: {error}") from None
        known.append(clause)
        finished = not clause
    if not finished:
        raise Rejected("the proof does not end with the empty clause")
    return known[1 + len(clauses) :]


def _check_step(known: list[Clause], line: str) -> Clause:
    """Return the clause of a line if it follows from the known ones; known[0] is no clause."""
    numbers = read_numbers(line)
    if numbers[-1] != 0 or numbers.count(0) != 2:
        raise Rejected("not 'ID LITERALS 0 HINTS 0'")
    middle = numbers.index(0)
    clause, hints = tuple(numbers[1:middle]), numbers[middle + 1 : -1]
    if numbers[0] != len(known):
        raise Rejected(f"the ID is not {len(known)}")
    if not hints or min(hints) < 1 or max(hints) >= len(known):
        raise Rejected("a hint is no ID of an earlier clause, or there is none")
    if len(set(map(abs, clause))) != len(clause):
        raise Rejected("a literal twice, or with its opposite")
    false = set(clause)
    last = hints.pop()
    for hint in hints:
        rest = [literal for literal in known[hint] if literal not in false]
        # No clause has a literal twice, so one that is left is the only one.
        if len(rest) != 1 or -rest[0] in false:
            raise Rejected(f"clause {hint} is not unit")
        false.add(-rest[0])
    if not false.issuperset(known[last]):
        raise Rejected(f"clause {last} is not false at the end")
    return clause


def read_numbers(line: str) -> list[int]:
    """Return the integers of a line, which are separated by single spaces.

    "+1", "01", "1_0" and foreign digits are refused: one number, one way to write it.
    """
    if not _NUMBERS.fullmatch(line):
        raise Rejected("not a line of integers in their plain form")
    return list(map(int, line.split(" ")))


def write_clause(clause: Clause) -> str:
    """Return a clause as a line has it."""
    return " ".join(map(str, (*clause, 0)))


def read_lines(data: bytes, what: str) -> Iterator[str]:
    """Yield the lines of an ASCII text, each of which ends with a line end."""
    for line in BytesIO(data):
        if not line.endswith(b"\n"):
            raise Rejected(f"the {what} file is cut short")
        try:
            yield line[:-1].decode("ascii")
        except UnicodeDecodeError:
            raise Rejected(f"the {what} file is not ASCII text") from None
