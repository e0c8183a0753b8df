"""Hamiltonian cycles by rotation and extension of a path.

A path grows at its end by unused vertices. When none is left there, an edge
from the end back into the path lets a part of the path be reversed, which gives
another end: a *rotation* (Posa, Discrete Mathematics 14 (1976) 359-364). Good on
graphs without long narrow parts. Required edges are never parted: a vertex
comes into the path together with the whole piece of required edges it is on.
"""

from __future__ import annotations

import random
from collections.abc import Sequence

from certify.graph.question import Question
from certify.search.budget import Budget

ROTATIONS_PER_VERTEX = 2
ROTATIONS_AT_LEAST = 40
"""Rotations for one path: a number for each vertex, and some for small graphs."""
SEED = 1976


def find_by_rotation(question: Question, *, paths: range, budget: Budget) -> tuple[int, ...] | None:
    """Find a Hamiltonian cycle through the required edges by rotations.

    question: at least three vertices, every degree at least two; the required
    edges form disjoint paths, and at a vertex with two of them there is no other
    edge. paths: the numbers of the paths to begin; each number has its own seed,
    so further numbers give further attempts. Deterministic: the work is counted
    in rotations, and the budget is used only to give up.
    Returns the vertices in the order of the cycle; None says no luck.
    Cost: O(n) for a rotation, O(m) for the rest of a path; the number of rotations
    is the larger of `ROTATIONS_AT_LEAST` and n times `ROTATIONS_PER_VERTEX`.
    """
    rotations = max(ROTATIONS_AT_LEAST, ROTATIONS_PER_VERTEX * question.n)
    for number in paths:
        path = _Path(question, random.Random(SEED + number))
        if path.grow(rotations, budget):
            return tuple(path.order)
        if budget.spent:
            return None
    return None


class _Path:
    """A path that grows.

    order: its vertices; place[v]: the place of v in it, -1 when v is not on it;
    ways[v]: how many neighbours of v are not on it.
    Invariant: the piece of required edges at a vertex of the path is on the path.
    """

    def __init__(self, question: Question, dice: random.Random) -> None:
        self._n = question.n
        self._near = question.neighbours
        self._must = _required_neighbours(question)
        self._dice = dice
        self.order: list[int] = []
        self._place = [-1] * question.n
        self._ways = [len(near) for near in self._near]
        start = dice.randrange(question.n)
        self._append(start)
        if len(self._must[start]) == 2:
            # The walk went one way along the piece; the rest lies the other way.
            self._flip()
            self._continue_piece()

    def grow(self, rotations: int, budget: Budget) -> bool:
        """Extend and rotate until the path closes to a Hamiltonian cycle; say whether it does."""
        near, order = self._near, self.order
        for step in range(rotations):
            while self._extend():
                pass
            self._flip()
            if self._extend():
                continue
            if order[0] in near[order[-1]]:
                if len(order) == self._n:
                    return True
                if self._reopen():
                    continue
            if not self._rotate():
                return False
            if step % 64 == 63 and budget.spent:
                return False
        return False

    def _append(self, v: int) -> None:
        """Append v and the piece of required edges it is on."""
        self._append_one(v)
        self._continue_piece()

    def _append_one(self, v: int) -> None:
        self._place[v] = len(self.order)
        self.order.append(v)
        ways = self._ways
        for w in self._near[v]:
            ways[w] -= 1

    def _continue_piece(self) -> None:
        """Follow required edges from the end."""
        place, must = self._place, self._must
        while onward := [w for w in must[self.order[-1]] if place[w] < 0]:
            self._append_one(onward[0])

    def _extend(self) -> bool:
        """Extend at the end, to a vertex with the fewest ways on; say whether there is one."""
        end, place, ways = self.order[-1], self._place, self._ways
        if not ways[end]:
            return False
        free = [w for w in self._near[end] if place[w] < 0]
        if len(free) > 1:
            least = min([ways[w] for w in free])
            free = [w for w in free if ways[w] == least]
        self._append(free[0] if len(free) == 1 else self._dice.choice(free))
        return True

    def _renumber(self, start: int) -> None:
        place = self._place
        for i in range(start, len(self.order)):
            place[self.order[i]] = i

    def _flip(self) -> None:
        self.order.reverse()
        self._renumber(0)

    def _reopen(self) -> bool:
        """Open the cycle that the path closes to beside a vertex with a way out."""
        order, n = self.order, len(self.order)
        start = self._dice.randrange(n)
        for i in range(start, start + n):
            v = order[i % n]
            if self._ways[v]:
                after = order[(i + 1) % n]
                turned = order[(i + 1) % n :] + order[: (i + 1) % n]
                if after in self._must[v]:
                    # Required edges are at most one here: part the other one.
                    turned = [v, *turned[:-1]][::-1]
                order[:] = turned
                self._renumber(0)
                return True
        return False

    def _rotate(self) -> bool:
        """Reverse the part behind a neighbour of the end; say whether there is one."""
        order, place = self.order, self._place
        end = order[-1]
        places = [
            place[w]
            for w in self._near[end]
            if place[w] < len(order) - 2 and order[place[w] + 1] not in self._must[w]
        ]
        if not places:
            return False
        if len(order) < self._n:
            better = [i for i in places if self._ways[order[i + 1]]]
        else:
            closing = set(self._near[order[0]])
            better = [i for i in places if order[i + 1] in closing]
        at = self._dice.choice(better or places) + 1
        order[at:] = order[: at - 1 : -1]
        self._renumber(at)
        return True


def _required_neighbours(question: Question) -> Sequence[Sequence[int]]:
    """Return for each vertex its neighbours along required edges."""
    lists: list[list[int]] = [[] for _ in range(question.n)]
    for u, v in sorted(question.required):
        lists[u].append(v)
        lists[v].append(u)
    return lists
