"""Hamiltonian cycles by merging the cycles of a 2-factor.

A *2-factor* is a set of edges, two at each vertex: disjoint cycles that cover
the graph, a Hamiltonian cycle when there is but one. A solver of cardinality
constraints finds a 2-factor through the required edges; its cycles are merged
by *exchanges*: take out an edge of each of two cycles and put in two edges that
join the loose ends. When several cycles stay, the solver is told
that a cycle leaves each of their vertex sets (Dantzig, Fulkerson, Johnson,
Operations Research 2 (1954) 393-410), and is asked again, near the last
2-factor. Good on graphs that repeat a small piece, where cycles of a few
vertices abound and short exchanges merge them.
"""

from __future__ import annotations

from collections.abc import Iterator

from pysat.solvers import Solver

from certify.graph.graph import Edge, edge_between
from certify.graph.question import Question
from certify.search.budget import Budget

ROUNDS = 40
"""How many 2-factors are tried."""
CONFLICTS_PER_VERTEX = 20
CONFLICTS_AT_LEAST = 1_000
"""Conflicts of the solver for one 2-factor; counts, so the clock decides nothing."""


def find_by_merging(question: Question, *, budget: Budget) -> tuple[int, ...] | None:
    """Find a Hamiltonian cycle through the required edges by merging cycles.

    question: at least three vertices, every degree at least two. Deterministic;
    the budget is used only to give up.
    Returns the vertices in the order of the cycle; None says no luck.
    Cost: `ROUNDS` calls of the solver, each followed by O(n d^2) steps for
    a merged cycle, d the largest degree.
    """
    number = {edge: i for i, edge in enumerate(question.edges, start=1)}
    with Solver(name="minicard") as solver:
        for v, near in enumerate(question.neighbours):
            at_v = [number[edge_between(v, w)] for w in near]
            solver.add_atmost(at_v, 2)
            solver.add_atmost([-e for e in at_v], len(at_v) - 2)
        for edge in sorted(question.required):
            solver.add_clause([number[edge]])
        for _ in range(ROUNDS):
            solver.conf_budget(max(CONFLICTS_AT_LEAST, CONFLICTS_PER_VERTEX * question.n))
            if budget.spent or solver.solve_limited() is not True:
                return None
            chosen = [question.edges[e - 1] for e in solver.get_model()[: question.m] if e > 0]
            factor = _TwoFactor(question, chosen)
            cycles = factor.cycles()
            factor.merge()
            merged = factor.cycles()
            if len(merged) == 1:
                return tuple(merged[0])
            for cycle in {min(c): c for c in (*cycles, *merged)}.values():
                inside = set(cycle)
                leaving = [
                    number[edge_between(u, w)]
                    for u in sorted(inside)
                    for w in question.neighbours[u]
                    if w not in inside
                ]
                solver.add_clause(leaving)
            kept = factor.edges()
            solver.set_phases([i if edge in kept else -i for edge, i in number.items()])
    return None


class _TwoFactor:
    """Disjoint cycles that cover the graph.

    links[v]: the two neighbours of v on its cycle; name[v]: the name of the
    cycle; members: the vertices of each cycle by name, in no order that matters.
    """

    def __init__(self, question: Question, chosen: list[Edge]) -> None:
        self._question = question
        self.links: list[list[int]] = [[] for _ in range(question.n)]
        for u, v in chosen:
            self.links[u].append(v)
            self.links[v].append(u)
        self.name = [-1] * question.n
        self.members: list[list[int]] = []
        for v in range(question.n):
            if self.name[v] < 0:
                cycle = self._walk(v)
                for u in cycle:
                    self.name[u] = len(self.members)
                self.members.append(cycle)

    def cycles(self) -> list[list[int]]:
        """Return the cycles, each in order."""
        return [self._walk(members[0]) for members in self.members if members]

    def edges(self) -> set[Edge]:
        """Return the edges."""
        return {edge_between(u, v) for u, pair in enumerate(self.links) for v in pair}

    def merge(self) -> None:
        """Merge cycles by exchanges until no exchange is left.

        A pass costs O(n d^2); each vertex changes its name O(log n) times in all.
        """
        while sum(map(self._merge_at, range(self._question.n))) > 0:
            pass

    def _walk(self, start: int) -> list[int]:
        cycle, last, here = [start], start, self.links[start][0]
        while here != start:
            cycle.append(here)
            first, second = self.links[here]
            last, here = here, second if first == last else first
        return cycle

    def _free_links(self, v: int) -> Iterator[int]:
        """Yield the neighbours of v on its cycle along edges that are not required."""
        required = self._question.required
        return (w for w in self.links[v] if edge_between(v, w) not in required)

    def _merge_at(self, b: int) -> bool:
        """Merge the cycle of b with another one; say whether an exchange at b does it.

        Takes out ab here and cd elsewhere, puts in bc and da.
        """
        for c in self._question.neighbours[b]:
            if self.name[c] == self.name[b]:
                continue
            for a in self._free_links(b):
                for d in self._free_links(c):
                    if self._question.has_edge(d, a):
                        self._exchange(a, b, c, d)
                        return True
        return False

    def _exchange(self, a: int, b: int, c: int, d: int) -> None:
        for u, old, new in ((a, b, d), (b, a, c), (c, d, b), (d, c, a)):
            self.links[u][self.links[u].index(old)] = new
        small, large = self.name[b], self.name[c]
        if len(self.members[small]) > len(self.members[large]):
            small, large = large, small
        for v in self.members[small]:
            self.name[v] = large
        self.members[large] += self.members[small]
        self.members[small] = []
