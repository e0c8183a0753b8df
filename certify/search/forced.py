"""The forced moves of a state, repeated until none applies.

A *state* is a question with some edges *used* (at first the required ones) and
some *removed*. Of every Hamiltonian cycle H that uses the used edges and avoids
the removed ones we know more, because H has exactly two edges at every vertex
and is one cycle through all n of them. These are the *forced moves*, with the
numbers of FORMAT.md:

1. fewer than two edges left at a vertex, or three used: a contradiction;
2. two used edges at a vertex: the other edges there are removed;
3. exactly two edges left at a vertex: both are used;
4. used edges that close a cycle on fewer than n vertices: a contradiction;
5. used edges that form a path from u to v on fewer than n vertices: the edge
   {u, v} is removed.

Each adds what holds for H anyway, so the end does not depend on their order,
unless there is a contradiction, and then no H exists. A *piece* is a path of
used edges (a single vertex, at first).
"""

from __future__ import annotations

import enum
from collections import deque
from collections.abc import Iterable
from dataclasses import dataclass

from certify.graph.graph import Edge
from certify.graph.question import Question


class Reason(enum.Enum):
    """Why a move is forced, or why the moves end in a contradiction."""

    TOO_FEW = 1
    """Contradiction: fewer than two edges are left at the vertex."""
    TOO_MANY = 2
    """Contradiction: three edges are used at the vertex."""
    FULL = 3
    """The edge is removed: two others are used at the vertex."""
    LAST_TWO = 4
    """The edge is used: only two are left at the vertex."""
    SHORT_CYCLE = 5
    """Contradiction: the used edges close a cycle that misses a vertex."""
    SHORTCUT = 6
    """The edge is removed: it would close the path to a cycle that misses a vertex."""


@dataclass(frozen=True, slots=True)
class Move:
    """One forced move.

    edge: the edge that is used or removed; None for a contradiction.
    vertices: the vertex that the reason speaks of, or the path (for SHORTCUT),
    or the cycle (for SHORT_CYCLE), in order along it.
    """

    reason: Reason
    edge: Edge | None
    vertices: tuple[int, ...]


_OPEN, _USED, _REMOVED = 0, 1, 2


class Frame:
    """What all states of one question share: its edges, numbered in sorted order."""

    def __init__(self, question: Question) -> None:
        self.question = question
        self.n = question.n
        self.edges = question.edges
        self.index: dict[Edge, int] = {edge: i for i, edge in enumerate(question.edges)}
        at: list[list[tuple[int, int]]] = [[] for _ in range(question.n)]
        for i, (u, v) in enumerate(question.edges):
            at[u].append((i, v))
            at[v].append((i, u))
        self.at = tuple(tuple(sorted(pairs, key=lambda pair: pair[1])) for pairs in at)
        """For each vertex the numbers of its edges with their other ends, by the latter."""

    def mask(self, edges: Iterable[Edge]) -> int:
        """Return a set of edges as an integer, bit i for edge number i."""
        mask = 0
        for edge in edges:
            mask |= 1 << self.index[edge]
        return mask

    def edges_of(self, mask: int) -> tuple[Edge, ...]:
        """Return the edges of a mask, sorted."""
        found = []
        while mask:
            low = mask & -mask
            found.append(self.edges[low.bit_length() - 1])
            mask ^= low
        return tuple(found)


class State:
    """A question with used and removed edges, closed under the forced moves.

    Edges are numbers of the frame. Once `contradiction` is true the rest is
    unfinished work and means nothing. `complete` says that the used edges
    are a Hamiltonian cycle. `open_count` edges are neither used nor removed;
    `used_mask` and `removed_mask` are the others, as masks of the frame.
    `moves` lists the forced moves since the last assumption, in the order made;
    None when they are not recorded.
    Cost: a copy O(n + m); the moves O(degree) each, with a walk along a piece
    where moves are recorded.
    """

    __slots__ = (
        "_end",
        "_left",
        "_pending",
        "_size",
        "_status",
        "_used_at",
        "complete",
        "contradiction",
        "frame",
        "moves",
        "open_count",
        "removed_mask",
        "used_mask",
    )

    frame: Frame
    moves: list[Move] | None
    contradiction: bool
    complete: bool
    open_count: int
    used_mask: int
    removed_mask: int
    _status: bytearray
    _left: list[int]
    _used_at: list[int]
    # For an end of a piece the other end, and the number of vertices; else out of date.
    _end: list[int]
    _size: list[int]
    _pending: deque[tuple[int, Reason, tuple[int, ...]]]

    @classmethod
    def first(cls, frame: Frame, *, record: bool = False) -> State:
        """Return the state in which the required edges are used, moves made.

        A question on fewer than three vertices or an absent one has no states:
        the caller answers it before.
        """
        state = cls()
        state.frame = frame
        state.moves = [] if record else None
        state._status = bytearray(len(frame.edges))
        state.open_count = len(frame.edges)
        state._left = [len(pairs) for pairs in frame.at]
        state._used_at = [0] * frame.n
        state._end = list(range(frame.n))
        state._size = [1] * frame.n
        state.contradiction = state.complete = False
        state.used_mask = state.removed_mask = 0
        state._pending = deque()
        for v in range(frame.n):
            state._look_at(v)
        state._make([frame.index[edge] for edge in sorted(frame.question.required)], [])
        return state

    def assume(self, used: Iterable[int], removed: Iterable[int] = ()) -> State:
        """Return a new state in which these edges are used and removed too, moves made.

        The edges must not be decided against: not removed, or not used, before.
        """
        child = type(self)()
        child.frame = self.frame
        child.moves = None if self.moves is None else []
        child._status = self._status[:]
        child.open_count = self.open_count
        child._left = self._left[:]
        child._used_at = self._used_at[:]
        child._end = self._end[:]
        child._size = self._size[:]
        child.contradiction = self.contradiction
        child.complete = self.complete
        child.used_mask = self.used_mask
        child.removed_mask = self.removed_mask
        child._pending = deque()
        if not child.contradiction:
            child._make(used, removed)
        return child

    def is_open(self, edge: int) -> bool:
        """Return whether the edge is neither used nor removed."""
        return self._status[edge] == _OPEN

    def used_count(self, v: int) -> int:
        """Return how many edges are used at v."""
        return self._used_at[v]

    def left_count(self, v: int) -> int:
        """Return how many edges are not removed at v."""
        return self._left[v]

    def open_edges(self) -> list[int]:
        """Return the edges that are neither used nor removed, ascending."""
        return [i for i, status in enumerate(self._status) if status == _OPEN]

    def pairs_at(self, v: int) -> list[tuple[int, int]]:
        """Return the pairs of edges that v may use, in the order of the pairs of neighbours.

        Edges left at v, taken in twos, such that the used ones are among them.
        """
        left = [i for i, _ in self.frame.at[v] if self._status[i] != _REMOVED]
        used = {i for i in left if self._status[i] == _USED}
        return [
            (i, j) for k, i in enumerate(left) for j in left[k + 1 :] if len(used - {i, j}) == 0
        ]

    def used_edges(self) -> tuple[Edge, ...]:
        """Return the used edges, sorted."""
        return self.frame.edges_of(self.used_mask)

    def removed_edges(self) -> tuple[Edge, ...]:
        """Return the removed edges, sorted."""
        return self.frame.edges_of(self.removed_mask)

    def _make(self, used: Iterable[int], removed: Iterable[int]) -> None:
        """Decide the given edges, then make the forced moves in the order of their discovery."""
        for edge in used:
            if self._status[edge] == _OPEN and not self.contradiction:
                self._use(edge)
        for edge in removed:
            if self._status[edge] == _OPEN and not self.contradiction:
                self._remove(edge)
        pending = self._pending
        while pending and not self.contradiction:
            edge, reason, vertices = pending.popleft()
            # An edge that waits here can have been decided since, but only in
            # the same way: the other way is a contradiction seen at once.
            if self._status[edge] != _OPEN:
                continue
            if self.moves is not None:
                self.moves.append(Move(reason, self.frame.edges[edge], vertices))
            if reason is Reason.LAST_TWO:
                self._use(edge)
            else:
                self._remove(edge)
        pending.clear()

    def _use(self, edge: int) -> None:
        u, v = self.frame.edges[edge]
        self._status[edge] = _USED
        self.open_count -= 1
        self.used_mask |= 1 << edge
        for w in (u, v):
            self._used_at[w] += 1
            if self._used_at[w] == 3:
                self._contradict(Reason.TOO_MANY, (w,))
                return
        start, stop = self._end[u], self._end[v]
        if start == v:
            if self._size[u] < self.frame.n:
                self._contradict(Reason.SHORT_CYCLE, self._walk(u))
                return
            self.complete = True
        else:
            size = self._size[start] + self._size[stop]
            self._end[start], self._end[stop] = stop, start
            self._size[start] = self._size[stop] = size
            if size < self.frame.n:
                self._forbid_shortcut(start, stop)
        for w in (u, v):
            if self._used_at[w] == 2 and self._left[w] > 2:
                for i, _ in self.frame.at[w]:
                    if self._status[i] == _OPEN:
                        self._pending.append((i, Reason.FULL, (w,)))

    def _forbid_shortcut(self, start: int, stop: int) -> None:
        i = self.frame.index.get((start, stop) if start < stop else (stop, start))
        if i is not None and self._status[i] == _OPEN:
            self._pending.append((i, Reason.SHORTCUT, self._walk(start)))

    def _remove(self, edge: int) -> None:
        self._status[edge] = _REMOVED
        self.open_count -= 1
        self.removed_mask |= 1 << edge
        for w in self.frame.edges[edge]:
            self._left[w] -= 1
            self._look_at(w)

    def _look_at(self, w: int) -> None:
        if self._left[w] < 2:
            self._contradict(Reason.TOO_FEW, (w,))
        elif self._left[w] == 2:
            for i, _ in self.frame.at[w]:
                if self._status[i] == _OPEN:
                    self._pending.append((i, Reason.LAST_TWO, (w,)))

    def _contradict(self, reason: Reason, vertices: tuple[int, ...]) -> None:
        # The first one stands; a second one adds nothing.
        if not self.contradiction:
            self.contradiction = True
            if self.moves is not None:
                self.moves.append(Move(reason, None, vertices))

    def _walk(self, start: int) -> tuple[int, ...]:
        """Return the vertices along the used edges from `start`; () when nobody records."""
        if self.moves is None:
            return ()
        path, last, here = [start], -1, start
        while True:
            onward = [w for i, w in self.frame.at[here] if self._status[i] == _USED and w != last]
            if not onward or onward[0] == start:
                return tuple(path)
            last, here = here, onward[0]
            path.append(here)
