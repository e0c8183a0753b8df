"""What is said about a tree of cases: a numbered proof.

The tree is replayed with the forced moves. A case tells what it assumes, the
forced moves that matter for it or for a case below it, and how it closes. So the
cases below are composed first: each says on which edges decided above it rests.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass, field
from typing import Any

from certify.graph.graph import Edge, edge_between
from certify.report.balance import list_decisive
from certify.report.blocks import Block, Paragraph, Rows
from certify.report.classical import name_classical
from certify.report.counting import render_counting
from certify.report.moves import Known, Tale, tell_moves
from certify.report.obstruction import render_obstruction
from certify.report.structure import list_supporting
from certify.report.symmetry import tell_symmetry
from certify.report.words import HOW_TO_CHECK, Words, capital, count_of, join, number, plural
from certify.search.forced import Frame, State

MOST_NODES = 150
"""Larger trees are outlined: nobody reads them."""

Assumptions = tuple[frozenset[Edge], frozenset[Edge]]
_LEAVES = {
    "forced": "by forced edges",
    "obstruction": "by an obstruction",
    "counting": "by counting",
    "like": "by symmetry",
}


@dataclass
class _Told:
    """A case and all below it. rests_on: decided edges above it that it rests on."""

    blocks: list[Block]
    rests_on: frozenset[Edge]


@dataclass
class _Teller:
    """A tree being read in preorder; `place` is the next node."""

    words: Words
    nodes: list[list[Any]]
    symmetries: list[list[int]]
    place: int = 0
    labels: dict[int, str] = field(default_factory=dict)
    assumed: dict[int, Assumptions] = field(default_factory=dict)

    def tell(self, state: State, label: str, new: Assumptions, old: Assumptions) -> _Told:
        """Tell the next node and all below it.

        state: with the assumptions `old` of the nodes above and the `new` ones of this node, forced
        moves recorded.
        """
        index, node = self.place, self.nodes[self.place]
        self.place += 1
        self.labels[index] = label
        self.assumed[index] = (old[0] | new[0], old[1] | new[1])
        decided = dict.fromkeys(state.used_edges(), True)
        decided |= dict.fromkeys(state.removed_edges(), False)
        moves = state.moves or []
        moved = {move.edge for move in moves}
        before: Known = {e: used for e, used in decided.items() if e not in moved}
        # A contradiction can come up before all that is assumed was entered.
        before |= dict.fromkeys(new[0], True) | dict.fromkeys(new[1], False)
        depth = 0 if not label else label.count(".") + 1
        name, *parts = node
        if state.contradiction != (name == "forced"):
            raise self.words.fail("the forced moves do not lead where the tree says")
        close, below = self._close(state, index, name, parts, depth)
        tale = tell_moves(self.words, before, moves, below.rests_on, new[0])
        told = self._compose(label, new, tale, close, depth)
        rests = tale.rests_on | {e for e in below.rests_on if e in before}
        return _Told([*told, *below.blocks], frozenset(rests - new[0] - new[1]))

    def _close(
        self, state: State, index: int, name: str, parts: list[Any], depth: int
    ) -> tuple[str, _Told]:
        """Return how the node goes on, as the last sentence of its paragraph and what follows."""
        match name:
            case "forced":
                return "", _Told([], frozenset())
            case "obstruction" | "counting":
                return "", self._close_leaf(state, name, parts[0], depth)
            case "like":
                return self._close_like(state, *parts)
            case "edge":
                one, none = frozenset([(parts[0], parts[1])]), frozenset[Edge]()
                said = f"We distinguish whether {tell_assumptions(self.words, one, none)}."
                return said, self._branch(state, index, [(one, none), (none, one)])
            case "vertex":
                edges = state.frame.edges
                pairs = [frozenset([edges[i], edges[j]]) for i, j in state.pairs_at(parts[0])]
                told = self._branch(state, index, [(pair, frozenset()) for pair in pairs])
                used, left, unused = _edges_at(state, parts[0])
                told.rests_on |= {*used, *unused}
                return tell_choice(self.words, parts[0], used, left), told
        raise self.words.fail(f"there is no node {name!r}")

    def _branch(self, state: State, index: int, children: list[Assumptions]) -> _Told:
        label, old = self.labels[index], self.assumed[index]
        prefix = f"{label}." if label else ""
        blocks: list[Block] = []
        rests: frozenset[Edge] = frozenset()
        for i, (used, removed) in enumerate(children, start=1):
            frame = state.frame
            child = state.assume(
                sorted(frame.index[e] for e in used), sorted(frame.index[e] for e in removed)
            )
            told = self.tell(child, f"{prefix}{i}", (used, removed), old)
            blocks += told.blocks
            rests |= told.rests_on
        return _Told(blocks, rests)

    def _close_leaf(self, state: State, name: str, body: dict[str, Any], depth: int) -> _Told:
        original = self.words.question
        question = original.assume(state.used_edges(), state.removed_edges())
        words = self.words.inside(question)
        if name == "counting":
            classical = name_classical(question, body)
            if classical is None:
                used, removed = list_decisive(question, original, body)
                blocks = render_counting(words, body)
                return _Told(_deepen(blocks, depth), frozenset(used | removed))
            body = classical
        blocks = render_obstruction(words, body)
        return _Told(_deepen(blocks, depth), list_supporting(question, original, body))

    def _close_like(self, state: State, j: int, k: int) -> tuple[str, _Told]:
        if j not in self.labels or k >= len(self.symmetries):
            raise self.words.fail("a case is likened to none")
        p = self.symmetries[k]
        back = {image: v for v, image in enumerate(p)}
        used, removed = (
            frozenset(edge_between(back[u], back[v]) for u, v in edges) for edges in self.assumed[j]
        )
        if not (used <= set(state.used_edges()) and removed <= set(state.removed_edges())):
            raise self.words.fail("a symmetry does not map its case into the other one")
        label = self.labels[j]
        here = tell_assumptions(self.words, used, removed)
        there = tell_assumptions(self.words, *self.assumed[j])
        text = (
            f"By symmetry this is like Case {label}: the symmetry {tell_symmetry(self.words, p)} "
            f"turns what holds here ({here}) into what was assumed there ({there})."
        )
        return text, _Told([], used | removed)

    def _compose(
        self, label: str, new: Assumptions, tale: Tale, close: str, depth: int
    ) -> list[Block]:
        """Return the paragraph of a node: what is assumed, what follows, how it closes."""
        said = []
        if label:
            said.append(f"Case {label}: {tell_assumptions(self.words, *new)}.")
        if tale.clauses:
            start = "Then " if label else ""
            said.append(capital(f"{start}{'; '.join(tale.clauses)}."))
        if tale.end:
            said.append(f"Now {tale.end}: a contradiction.")
        if close:
            said.append(close)
        return [Paragraph(" ".join(said), depth)] if said else []


def _edges_at(state: State, v: int) -> tuple[list[Edge], list[Edge], list[Edge]]:
    """Return the used, the open and the unused edges at a vertex, sorted."""
    edges, used, removed = state.frame.edges, state.used_edges(), state.removed_edges()
    at = sorted(edges[i] for i, _ in state.frame.at[v])
    return (
        [e for e in at if e in used],
        [e for e in at if e not in used and e not in removed],
        [e for e in at if e in removed],
    )


def render_cases(words: Words, body: dict[str, Any]) -> list[Block]:
    """Return the proof by cases, or its outline when it has more than `MOST_NODES` nodes.

    Errors: ContradictionError when the tree does not close.
    """
    nodes = body["nodes"]
    if len(nodes) > MOST_NODES:
        return _outline(words, nodes)
    teller = _Teller(words, nodes, body["symmetries"])
    none: Assumptions = (frozenset(), frozenset())
    told = teller.tell(State.first(Frame(words.question), record=True), "", none, none)
    if teller.place != len(nodes):
        raise words.fail("the tree does not end where it should")
    leaves = sum(node[0] in _LEAVES for node in nodes)
    intro = (
        f"Suppose there is a Hamiltonian {words.thing}{words.conditions()}. Call an edge used "
        f"if the {words.thing} uses it, and unused otherwise."
    )
    if leaves > 1:
        intro += f" There are {number(leaves)} cases to close."
    end = "Every case is closed" if leaves > 1 else "Hence the contradiction"
    so = f"so there is no such {words.thing}."
    last = f"{end}, {so}" if leaves > 1 else f"So there is no such {words.thing}."
    return [Paragraph(intro), *told.blocks, Paragraph(last)]


def tell_choice(words: Words, v: int, used: list[Edge], left: list[Edge]) -> str:
    """Return why the cases at a vertex are all there are.

    used: no edge or one. left: the edges that are neither used nor unused.
    """
    apex = words.apex
    if v == apex:
        open_ends = join([words.name(u) for u, _ in left], "or")
        if used:
            return f"The other end, besides {words.name(used[0][0])}, is {open_ends}."
        return f"The two ends are among {words.names(u for u, _ in left)}."
    name = words.vertex(v)
    inner = [e for e in left if e[1] != apex]
    may_end = f", or {words.name(v)} is an end" if len(inner) < len(left) else ""
    if used and used[0][1] == apex:
        return f"The path ends at {words.name(v)} with {words.edge_names(inner, 'or')}."
    if used:
        one = f"one of {words.edge_names(inner)}" if len(inner) > 1 else words.edge_names(inner)
        return f"At {name} one more edge besides {words.edge(used[0])} is used, {one}{may_end}."
    if may_end:
        may_end = f", or one of them and {words.name(v)} is an end"
    return f"At {name} two of the {words.edges(inner)} are used{may_end}."


def tell_assumptions(words: Words, used: Iterable[Edge], removed: Iterable[Edge]) -> str:
    """Return what edges used and unused mean: "1-2 and 1-6 are used and 3 is not an end"."""
    parts = []
    for edges, is_used in ((sorted(used), True), (sorted(removed), False)):
        inner = [e for e in edges if e[1] != words.apex]
        ends = [u for u, v in edges if v == words.apex]
        if inner:
            state = "used" if is_used else "unused"
            parts.append(f"{words.edge_names(inner)} {plural('is', len(inner))} {state}")
        if ends:
            verb = f"{plural('is', len(ends))}{'' if is_used else ' not'}"
            noun = ("ends" if len(ends) > 1 else "an end") + " of the path"
            parts.append(f"{words.names(ends)} {verb} {noun}")
    return join(parts) if parts else "nothing"


def _deepen(blocks: list[Block], depth: int) -> list[Block]:
    return [
        Paragraph(block.text, depth) if isinstance(block, Paragraph) else Rows(block.rows, depth)
        for block in blocks
    ]


def _outline(words: Words, nodes: list[list[Any]]) -> list[Block]:
    leaves = Counter(node[0] for node in nodes if node[0] in _LEAVES)
    total = sum(leaves.values())
    how = [f"{leaves[name]} {_LEAVES[name]}" for name in _LEAVES if leaves[name]]
    first = nodes[0]
    start = ""
    if first[0] == "vertex":
        where = (
            "the two ends" if first[1] == words.apex else f"the edges at {words.vertex(first[1])}"
        )
        start = f" It begins with the cases for {where}."
    elif first[0] == "edge":
        said = tell_assumptions(words, [(first[1], first[2])], [])
        start = f" It begins with the question whether {said}."
    return [
        Paragraph(
            f"The proof distinguishes {count_of(total, 'case')}, which are closed {join(how)}."
            f"{start} It is too long to be read, so it is not printed here. The "
            f"evidence file holds it. To go through all of it: {HOW_TO_CHECK}."
        )
    ]
