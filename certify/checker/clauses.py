"""Kind `clauses`: facts that hold for a Hamiltonian cycle, as clauses that cannot all hold.

Variable e_i says that H uses the i-th edge. Each fact is looked at in the graph
alone (`_clauses_of` says why it holds), its clauses follow by a fixed rule, and
the proof shows that the clauses contradict each other (lrat.py). Nothing has to
be complete: if any H existed, it would satisfy every fact.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations, zip_longest
from typing import Any

from .graphs import Edge, Question, edge, is_automorphism, need_question_of_cycle
from .lrat import Clause, check_proof, read_lines, read_numbers, write_clause
from .strict import Rejected, need_integer, need_keys

MOST_DIRECT_DEGREE = 6
FACTS = ("degree", "cut", "required", "mirror")


def check_clauses(
    question: Question, body: dict[str, Any], cnf: bytes, lrat: bytes, drat: bytes
) -> None:
    """Accept facts and a proof, given as what the three files hold."""
    need_question_of_cycle(question)
    need_keys(body, {"clauses", "steps", "cnf", "lrat", "drat"}, "clauses")
    clauses = check_formula(question, cnf)
    if need_integer(body["clauses"], "clauses") != len(clauses):
        raise Rejected(f"there are {len(clauses)} clauses and not {body['clauses']}")
    added = check_proof(clauses, read_lines(lrat, "LRAT"))
    if need_integer(body["steps"], "steps") != len(added):
        raise Rejected(f"there are {len(added)} steps and not {body['steps']}")
    for line, clause in zip_longest(read_lines(drat, "DRAT"), added):
        if clause is None or line != write_clause(clause):
            raise Rejected("the DRAT file does not have the steps of the LRAT file")


def check_formula(question: Question, cnf: bytes) -> list[Clause]:
    """Return the clauses of a CNF file, if they are those of the true facts above them.

    The facts are read and their clauses compared as they come, so that a file
    of a few facts with large clauses takes no more room than the file.
    """
    start = 0 if cnf.startswith(b"p") else cnf.find(b"\np") + 1
    lines = read_lines(cnf[start:], "CNF")
    size = next(lines, "")
    builder = _Builder(question)
    clauses: list[Clause] = []
    last: tuple[int, list[int]] = (-1, [])
    for fact in read_lines(cnf[:start], "CNF"):
        name, numbers = _read_fact(question, fact)
        by_number = name in ("degree", "required")
        this = (FACTS.index(name), numbers if by_number else [])
        if this < last or (this == last and by_number):
            raise Rejected("the facts are not in their order, or one is doubled")
        last = this
        for clause in builder.clauses_of(name, numbers):
            if next(lines, None) != write_clause(clause):
                raise Rejected(f"the clauses of the fact {fact!r} are other ones")
            clauses.append(clause)
    if size != f"p cnf {builder.variables} {len(clauses)}" or next(lines, None) is not None:
        raise Rejected("the formula has other variables or clauses than its facts")
    return clauses


def _read_fact(question: Question, line: str) -> tuple[str, list[int]]:
    words = line.split(" ", 3)
    if len(words) < 4 or words[:2] != ["c", "fact"] or words[2] not in FACTS:
        raise Rejected(f"not a fact: {line!r}")
    name, numbers = words[2], read_numbers(words[3])
    if any(not 0 <= v < question.n for v in numbers[1 if name == "mirror" else 0 :]):
        raise Rejected(f"fact {name} names a vertex that is not in the graph")
    return name, numbers


class _Builder:
    """Gives facts their clauses, and new variables their numbers."""

    def __init__(self, question: Question) -> None:
        self.question = question
        self.edges = sorted(question.edges)
        self.variable = {e: i for i, e in enumerate(self.edges, 1)}
        self.variables = len(self.edges)

    def new(self) -> int:
        self.variables += 1
        return self.variables

    def at(self, edges: list[Edge]) -> list[int]:
        return sorted(self.variable[e] for e in edges)

    def clauses_of(self, name: str, numbers: list[int]) -> Iterator[Clause]:
        """Yield the clauses of a fact that is true; a fact that is not is rejected."""
        question = self.question
        if name == "degree" and len(numbers) == 1:
            # H has exactly two edges at every vertex.
            (v,) = numbers
            if len(question.near[v]) < 2:
                raise Rejected(f"vertex {v} has fewer than two edges: use the form 'leaf'")
            yield from self.exactly_two(self.at([edge(v, w) for w in question.near[v]]))
        elif name == "cut":
            # H is connected and leaves a set that is neither empty nor everything.
            if numbers != sorted(set(numbers)) or not 0 < len(numbers) < question.n:
                raise Rejected("the set of a cut is not sorted, is empty or is everything")
            yield tuple(self.at(question.leaving(numbers)))
        elif name == "required" and len(numbers) == 2:
            # What the question demands of H.
            u, v = numbers
            if (u, v) not in question.required:
                raise Rejected(f"{numbers} is not a required edge")
            yield (self.variable[u, v],)
        elif name == "mirror" and len(numbers) == question.n + 1 and numbers[0] >= 1:
            yield from self.no_larger_than_image(numbers[0], numbers[1:])
        else:
            raise Rejected(f"not a fact: {name} {numbers}")

    def exactly_two(self, e: list[int]) -> Iterator[Clause]:
        """Yield clauses that hold exactly when two of the literals are true."""
        d = len(e)
        if d <= MOST_DIRECT_DEGREE:
            yield from [tuple(e[:i] + e[i + 1 :]) for i in range(d)]
            yield from [(-x, -y, -z) for x, y, z in combinations(e, 3)]
            return
        # s: one of the first i literals is true; t: two of them are. Both are
        # defined by equivalences, so every H gives them values.
        s, t = e[0], 0
        for i in range(2, d + 1):
            x = e[i - 1]
            new_s = self.new() if i < d else 0
            new_t = self.new()
            if i < d:
                yield from [(-s, new_s), (-x, new_s), (-new_s, s, x)]
            if i == 2:
                yield from [(-new_t, s), (-new_t, x), (-s, -x, new_t)]
            else:
                yield from [(-new_t, t, s), (-new_t, t, x), (-t, new_t), (-t, -x)]
                yield (-s, -x, new_t)
            s, t = new_s, new_t
        yield (t,)

    def no_larger_than_image(self, most: int, image: list[int]) -> Iterator[Clause]:
        """Yield clauses that hold for the first of all images of H.

        Among the images of H under the automorphisms that the mirrors generate,
        all of them Hamiltonian cycles, take the one with the lexicographically
        least edge vector. It is no larger than its own images, for every mirror at
        once, as all use the one order of the edges.
        """
        # n numbers below n, all different, are a permutation.
        if len(set(image)) != len(image) or not is_automorphism(self.question, image):
            raise Rejected("a mirror does not map the question onto itself")
        back = {self.variable[edge(image[u], image[v])]: i for (u, v), i in self.variable.items()}
        pairs = [(x, back[x]) for x in range(1, len(self.edges) + 1) if back[x] != x][:most]
        equal = 0
        for place, (x, y) in enumerate(pairs, 1):
            so_far = (-equal,) if equal else ()
            yield (*so_far, -x, y)
            if place < len(pairs):
                # `equal` may be set true whenever both vectors agree up to here.
                further = self.new()
                yield from [(*so_far, -x, further), (*so_far, y, further)]
                equal = further
