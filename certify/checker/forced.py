"""Forced moves: what follows at once from edges that are used or removed.

H is any Hamiltonian cycle that uses every used edge and no removed one. Each
move adds only what holds for every such H (FORMAT.md, kind `cases`):

1. H has two edges at a vertex, so fewer left or three used are a contradiction;
2. with two used at a vertex H has no other edge there;
3. with two left at a vertex H uses both;
4. H has no cycle inside it but itself;
5. so it has no edge that closes a used path before all vertices are on it.
"""

from __future__ import annotations

from .graphs import Edge, Question


class State:
    """A question with used and removed edges, closed under the forced moves.

    `contradiction` says that no Hamiltonian cycle fits.
    """

    def __init__(self, question: Question) -> None:
        self.n = question.n
        self.edges = question.edges
        # The neighbours along edges not removed, and along used ones. Frozen sets, so that
        # a copy of the lists is a copy of the state.
        self.left = [frozenset(at_v) for at_v in question.near]
        self.used: list[frozenset[int]] = [frozenset()] * question.n
        # For the ends of a used path: its other end, and its number of vertices.
        self.other_end = list(range(question.n))
        self.size = [1] * question.n
        self.contradiction = False
        self._waiting = list(range(question.n))
        for u, v in sorted(question.required):
            self._use(u, v)
        self._settle()

    def copy(self) -> State:
        """Return a state of its own with the same edges."""
        twin = object.__new__(State)
        twin.n, twin.edges, twin.contradiction = self.n, self.edges, self.contradiction
        twin.left, twin.used = list(self.left), list(self.used)
        twin.other_end, twin.size = list(self.other_end), list(self.size)
        twin._waiting = []
        return twin

    def assume(self, used: list[Edge], removed: list[Edge]) -> State:
        """Return the state after some edges are used and removed, and all forced moves."""
        state = self.copy()
        for u, v in used:
            state._use(u, v)
        for u, v in removed:
            state._remove(u, v)
        state._settle()
        return state

    def used_edges(self) -> set[Edge]:
        """Return the used edges."""
        return {(u, v) for u in range(self.n) for v in self.used[u] if u < v}

    def removed_edges(self) -> set[Edge]:
        """Return the edges of the question that are removed."""
        return {(u, v) for u, v in self.edges if v not in self.left[u]}

    def is_open(self, u: int, v: int) -> bool:
        """Return whether {u, v} is an edge that is neither used nor removed."""
        return v in self.left[u] and v not in self.used[u]

    def _use(self, u: int, v: int) -> None:
        if v in self.used[u] or self.contradiction:
            return
        if v not in self.left[u] or len(self.used[u]) > 1 or len(self.used[v]) > 1:
            self.contradiction = True
            return
        first, last = self.other_end[u], self.other_end[v]
        size = self.size[first] + self.size[last]
        closes = first == v
        if closes and self.size[u] < self.n:
            self.contradiction = True
            return
        self.used[u] |= {v}
        self.used[v] |= {u}
        if not closes:
            self.other_end[first], self.other_end[last] = last, first
            self.size[first] = self.size[last] = size
            if size < self.n and self.is_open(first, last):
                self._remove(first, last)
        self._waiting += [u, v]

    def _remove(self, u: int, v: int) -> None:
        if v not in self.left[u]:
            return
        if v in self.used[u]:
            self.contradiction = True
            return
        self.left[u] -= {v}
        self.left[v] -= {u}
        self._waiting += [u, v]

    def _settle(self) -> None:
        while self._waiting and not self.contradiction:
            v = self._waiting.pop()
            if len(self.left[v]) < 2:
                self.contradiction = True
            elif len(self.used[v]) == 2:
                for w in sorted(self.left[v] - self.used[v]):
                    self._remove(v, w)
            elif len(self.left[v]) == 2:
                for w in sorted(self.left[v]):
                    self._use(v, w)
        self._waiting = []


def question_of(state: State, question: Question) -> Question:
    """Return the question in which the used edges are required and the removed are gone."""
    edges = {(u, v) for u, v in question.edges if v in state.left[u]}
    return Question(question.n, edges, state.used_edges(), question.path)
