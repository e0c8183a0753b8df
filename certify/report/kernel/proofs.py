"""A clause proof in words: the facts above its formula, and its steps."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Sequence

from certify.report.kernel.strict import RefusedError, below, integer, parts

Read = Callable[[str, object], str]
"""Gives the text of a file of a clause proof: by the sort of file, and the name that the
record has for it."""

_FACT = re.compile(r"c fact [a-z]+( (0|[1-9][0-9]{0,17}))+")
_STEP = re.compile(r"[1-9][0-9]{0,17}( -?[1-9][0-9]{0,17})* 0( [1-9][0-9]{0,17})+ 0")


def clauses(body: object, n: int, read: Read) -> Iterator[str]:
    """Yield the words of a clause proof, in pieces of a line of its files."""
    given, count, cnf, lrat, drat = parts(body, "clauses", "steps", "cnf", "lrat", "drat")
    yield "clauses ["
    for line in _comments(read("cnf", cnf)):
        yield f" {_fact(line, n)}"
    yield " ] ["
    steps = _lines(read("lrat", lrat))
    if len(steps) != integer(count):
        raise RefusedError(f"the proof has {len(steps)} steps, and not {count}")
    read("drat", drat)
    for number, line in enumerate(steps, integer(given) + 1):
        yield f"\n{_step(line, number)}"
    yield " ]"


def _lines(content: str) -> list[str]:
    lines = content.split("\n")
    if lines.pop():
        raise RefusedError("a file of the proof is cut short")
    return lines


def _comments(content: str) -> Iterator[str]:
    for line in _lines(content):
        if not line.startswith("c"):
            return
        yield line


def _fact(line: str, n: int) -> str:
    if not _FACT.fullmatch(line):
        raise RefusedError(f"no fact: {line[:60]!r}")
    _, _, sort, *words = line.split(" ")
    numbers = [int(word) for word in words]
    match sort, numbers:
        case "degree", [v]:
            return f"degree {_vertices([v], n)}"
        case "cut", members:
            return f"cut [ {_vertices(members, n)} ]"
        case "required", [u, v]:
            return f"required {_vertices([u, v], n)}"
        case "mirror", [places, *images] if places > 0:
            return f"mirror {places:x} [ {_vertices(images, n)} ]"
    raise RefusedError(f"no fact: {line[:60]!r}")


def _vertices(numbers: Sequence[int], n: int) -> str:
    return " ".join(f"{below(v, n) + 1:x}" for v in numbers)


def _step(line: str, number: int) -> str:
    """Return a step; the kernel numbers the steps itself, so the number must be this one."""
    if not _STEP.fullmatch(line):
        raise RefusedError(f"no step of a proof: {line[:60]!r}")
    first, *words = map(int, line.split(" "))
    end = words.index(0)
    if first != number:
        raise RefusedError(f"step {first} has the place of step {number}")
    literals = " ".join(f"{2 * x if x > 0 else 1 - 2 * x:x}" for x in words[:end])
    hints = " ".join(f"{hint:x}" for hint in words[end + 1 : -1])
    return f"[ {literals} ] [ {hints} ]"
