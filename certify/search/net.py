"""The net of a question: the same graph, but no edge is required any more.

A *subdivision* builds the required edges in: a new vertex, the *middle*, stands
in each of them, with the two ends as its only neighbours. So every Hamiltonian
cycle of the net uses both halves, and the cycles of the net are those of the
question through the required edges. A set of the question's vertices that
leaves c pieces and holds r required edges leaves c + r pieces of the net: the
middles of these edges are pieces by themselves.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from certify.graph.question import Question

_FAR = 1 << 60
"""A number that no vertex gets in a depth-first search: marks the removed ones."""


@dataclass(frozen=True)
class Net:
    """A question with its required edges subdivided.

    n: vertices of the question, 0..n-1; the middles are numbered on from n.
    near: the neighbours of each vertex and middle.
    """

    n: int
    near: tuple[Sequence[int], ...]

    @property
    def work(self) -> int:
        """Return vertices plus edges: what a walk through the net costs."""
        return len(self.near) + sum(map(len, self.near)) // 2


def build_net(question: Question) -> Net:
    """Build the net of a question. Cost: O(n + m)."""
    if not question.required:
        return Net(question.n, question.neighbours)
    near = [list(at_v) for at_v in question.neighbours]
    for middle, (u, v) in enumerate(sorted(question.required), start=question.n):
        near[u][near[u].index(v)] = middle
        near[v][near[v].index(u)] = middle
        near.append([u, v])
    return Net(question.n, tuple(near))


def count_pieces(net: Net, removed: Iterable[int]) -> tuple[int, list[int]]:
    """Count the pieces left, and for each vertex how many more its removal would leave.

    The second is -1 for a vertex that is a piece by itself, and meaningless for
    removed ones. By depth-first search (Tarjan, SIAM J. Comput. 1 (1972) 146-160).
    Cost: O(n + m).
    """
    near = net.near
    number = [0] * len(near)
    for v in removed:
        number[v] = _FAR
    low = number[:]
    more = [0] * len(near)
    pieces = clock = 0
    for root in range(len(near)):
        if number[root]:
            continue
        pieces += 1
        clock += 1
        number[root] = low[root] = clock
        more[root] = -1
        path = [root]
        ways = [iter(near[root])]
        while path:
            v = path[-1]
            lowest = low[v]
            for w in ways[-1]:
                seen = number[w]
                if not seen:
                    clock += 1
                    number[w] = low[w] = clock
                    low[v] = lowest
                    path.append(w)
                    ways.append(iter(near[w]))
                    break
                if seen < lowest:
                    lowest = seen
            else:
                low[v] = lowest
                path.pop()
                ways.pop()
                if path:
                    parent = path[-1]
                    if lowest >= number[parent]:
                        more[parent] += 1
                    elif lowest < low[parent]:
                        low[parent] = lowest
    return pieces, more
