"""Checking an LRAT proof: a list of clauses, each a consequence of earlier ones.

A line `ID LITERALS 0 HINTS 0` says: suppose all LITERALS are false; then each
hinted clause in turn has one literal left, which must be true, until the last
one has none. So the clauses before it imply the new one. The empty clause at the
end says that the clauses at the start cannot all hold.
"""

from __future__ import annotations

from .strict import Rejected

Clause = tuple[int, ...]


def check_proof(clauses: list[Clause], lines: list[str]) -> None:
    """Accept a proof of the empty clause from the clauses, which have IDs 1, 2, ...

    Sound: every clause added to `known` follows from those before it, by unit
    propagation alone; the last one has no literal and so is false.
    """
    known: list[Clause] = [(), *clauses]
    if not lines:
        raise Rejected("the proof has no steps")
    for number, line in enumerate(lines, 1):
        try:
            _check_step(known, line, last=number == len(lines))
        except Rejected as error:
            raise Rejected(f"proof line {number}: {error}") from None


def _check_step(known: list[Clause], line: str, *, last: bool) -> None:
    numbers = read_numbers(line)
    if numbers[-1] != 0 or numbers.count(0) != 2:
        raise Rejected("not 'ID LITERALS 0 HINTS 0'")
    middle = numbers.index(0)
    clause, hints = tuple(numbers[1:middle]), numbers[middle + 1 : -1]
    if numbers[0] != len(known):
        raise Rejected(f"the ID is {numbers[0]} and not {len(known)}")
    if not hints or min(hints) < 1 or max(hints) >= len(known):
        raise Rejected("a hint is no ID of an earlier clause, or there is none")
    if bool(clause) is last:
        raise Rejected("the last line, and no other, is the empty clause")
    false = set(clause)
    for literal in clause:
        if -literal in false:
            raise Rejected("a literal and its opposite")
    for hint in hints[:-1]:
        rest = [literal for literal in known[hint] if literal not in false]
        if len(set(rest)) != 1 or -rest[0] in false:
            raise Rejected(f"clause {hint} is not unit")
        false.add(-rest[0])
    if not false.issuperset(known[hints[-1]]):
        raise Rejected(f"clause {hints[-1]} is not false at the end")
    known.append(clause)


def read_numbers(line: str) -> list[int]:
    """Return the integers of a line, which are separated by single spaces."""
    words = line.split(" ")
    try:
        numbers = list(map(int, words))
    except ValueError:
        raise Rejected("not a line of integers") from None
    # "+1", "01" or "1_0" would be read as well: one number, one way to write it.
    if list(map(str, numbers)) != words:
        raise Rejected("an integer is not in its plain form")
    return numbers
