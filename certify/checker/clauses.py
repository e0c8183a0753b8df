"""Kind `clauses`: facts that hold for a Hamiltonian cycle, as clauses that cannot all hold.

Variable e_i says that H uses the i-th edge. Each fact is looked at in the graph
alone (`_clauses_of` says why it holds), its clauses follow by a fixed rule, and
the proof shows that the clauses contradict each other (lrat.py). Nothing has to
be complete: if any H existed, it would satisfy every fact.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations
from typing import Any

from .graphs import Edge, Question, edge, is_automorphism, need_question_of_cycle
from .lrat import Clause, check_proof, read_numbers
from .strict import Rejected, need_integer, need_keys

MOST_DIRECT_DEGREE = 6
FACTS = ("degree", "cut", "required", "mirror")


def check_clauses(question: Question, body: dict[str, Any], cnf: str, lrat: str, drat: str) -> None:
    """Accept facts and a proof, given as the texts of the three files."""
    need_question_of_cycle(question)
    need_keys(body, {"clauses", "steps", "cnf", "lrat", "drat"}, "clauses")
    facts = _read_facts(cnf)
    clauses, text = write_formula(question, facts)
    if text != cnf:
        raise Rejected("the formula is not the one that its facts give")
    steps = _lines(lrat, "LRAT")
    if need_integer(body["clauses"], "clauses") != len(clauses):
        raise Rejected(f"there are {len(clauses)} clauses and not {body['clauses']}")
    if need_integer(body["steps"], "steps") != len(steps):
        raise Rejected(f"there are {len(steps)} steps and not {body['steps']}")
    check_proof(clauses, steps)
    without_hints = [step.split(" ", 1)[1].split(" ") for step in steps]
    if drat != "".join([" ".join(words[: words.index("0") + 1]) + "\n" for words in without_hints]):
        raise Rejected("the DRAT file does not have the steps of the LRAT file")


def _lines(text: str, what: str) -> list[str]:
    if not text.endswith("\n"):
        raise Rejected(f"the {what} file is cut short")
    return text[:-1].split("\n")


def _read_facts(cnf: str) -> list[tuple[str, list[int]]]:
    facts = []
    for line in _lines(cnf, "CNF"):
        if not line.startswith("c fact "):
            break
        name, _, rest = line.removeprefix("c fact ").partition(" ")
        if name not in FACTS:
            raise Rejected(f"unknown fact {name!r}")
        facts.append((name, read_numbers(rest)))
    return facts


def write_formula(
    question: Question, facts: list[tuple[str, list[int]]]
) -> tuple[list[Clause], str]:
    """Return the clauses of the facts, and the text of the CNF file."""
    builder = _Builder(question)
    for name, numbers in facts:
        if any(not 0 <= v < question.n for v in numbers[name == "mirror" :]):
            raise Rejected(f"fact {name} names a vertex that is not in the graph")
        builder.clauses.extend(builder.clauses_of(name, numbers))
    by_number = ("degree", "required")
    keys = [(FACTS.index(name), numbers if name in by_number else []) for name, numbers in facts]
    if keys != sorted(keys):
        raise Rejected("the facts are not in their order")
    head = [f"c fact {name} {' '.join(map(str, numbers))}\n" for name, numbers in facts]
    size = f"p cnf {builder.variables} {len(builder.clauses)}\n"
    body = [" ".join(map(str, (*clause, 0))) + "\n" for clause in builder.clauses]
    return builder.clauses, "".join([*head, size, *body])


class _Builder:
    """Gives facts their clauses, and new variables their numbers."""

    def __init__(self, question: Question) -> None:
        self.question = question
        self.edges = sorted(question.edges)
        self.variable = {e: i for i, e in enumerate(self.edges, 1)}
        self.variables = len(self.edges)
        self.clauses: list[Clause] = []

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
