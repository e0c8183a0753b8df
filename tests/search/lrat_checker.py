"""A plain reader of DIMACS and checker of LRAT, written from FORMAT.md for the tests."""

from __future__ import annotations


def read_cnf(text: bytes) -> tuple[list[str], int, list[list[int]]]:
    """Return the comments, the number of variables, and the clauses."""
    lines = text.decode("ascii").splitlines()
    header = next(i for i, line in enumerate(lines) if line.startswith("p"))
    _, _, variables, count = lines[header].split()
    clauses = [[int(word) for word in line.split()] for line in lines[header + 1 :]]
    assert all(clause[-1] == 0 and 0 not in clause[:-1] for clause in clauses)
    assert len(clauses) == int(count)
    return lines[:header], int(variables), [clause[:-1] for clause in clauses]


def check_lrat(clauses: list[list[int]], text: bytes) -> str:
    """Return what is wrong with the proof by FORMAT.md, "" when nothing is."""
    known = {i: set(clause) for i, clause in enumerate(clauses, start=1)}
    lines = text.decode("ascii").splitlines()
    for i, line in enumerate(lines):
        number, *rest = map(int, line.split(" "))
        end = rest.index(0)
        literals, hints, last = rest[:end], rest[end + 1 : -1], rest[-1]
        if number != len(known) + 1 or last != 0 or not hints:
            return f"line {i}: malformed"
        if (not literals) != (i == len(lines) - 1):
            return f"line {i}: the last line, and no other, has no literals"
        false = set(literals)
        for hint in hints[:-1]:
            left = known[hint] - false
            if len(left) != 1 or -min(left) in false:
                return f"line {i}: hint {hint} is not unit"
            false.add(-min(left))
        if known[hints[-1]] - false:
            return f"line {i}: no contradiction"
        known[number] = set(literals)
    return ""
