"""An instance and its evidence in the words that the kernel's program reads.

The form is described at the top of certify/kernel/driver.ml. What the kernel does not look
at is left out: the states and digest of a sweep, which it computes itself; of a clause
proof the clauses, which it makes from the facts, and the DRAT file.
"""

from __future__ import annotations

import json
from collections.abc import Callable, Iterable, Iterator, Mapping
from typing import Any

from certify.claim.claim import Claim
from certify.graph.build import Instance, NamedVertices, name_vertices
from certify.graph.graph import Graph
from certify.report.kernel.proofs import Read, clauses
from certify.report.kernel.strict import (
    NotTakenError,
    RefusedError,
    below,
    entries,
    integer,
    parts,
    text,
)

NOWHERE = -1
"""Stands for a vertex that the graph does not have."""


def write_instance(claim: Claim, instance: Instance, record: object, read: Read) -> Iterator[str]:
    """Yield the text of an instance with its certificate, in pieces.

    record: the value of a line of evidence. read: gives the text of a file of its clause proof.
    Errors: RefusedError when the evidence is not written as FORMAT.md says, or is of another
    instance; NotTakenError when the kernel does not take such evidence.
    """
    key, n, m, said, its_kind, body, _ = parts(
        record, "instance", "vertices", "edges", "answer", "kind", "evidence", "length"
    )
    # Compared as text: in Python true == 1.
    if json.dumps(key) != json.dumps(instance.key, sort_keys=True):
        raise RefusedError("the record is of another instance")
    answer, kind, graph = text(said), text(its_kind), instance.graph
    if (integer(n), integer(m)) != (graph.n, graph.m):
        raise RefusedError(f"the graph has {graph.n} vertices and {graph.m} edges")
    if (answer, kind) == ("open", "none"):
        raise NotTakenError("left open: there is no evidence")
    if (answer, kind) == ("settled", "endless"):
        raise NotTakenError("endless evidence, which certify theorem proves")
    if (answer == "exists") != (kind == "witness") or answer not in ("exists", "impossible"):
        raise RefusedError(f"{kind!r} is no evidence for {answer!r}")
    named = name_vertices(claim, instance.key, graph)
    yield write_question(claim.structure, answer, graph, named)
    # The apex of a path is a vertex too, but for the path itself.
    is_path = claim.structure == "hamiltonian-path"
    yield from write_evidence(kind, body, graph.n + (is_path and kind != "witness"), read)


def write_question(structure: str, answer: str, graph: Graph, named: NamedVertices) -> str:
    """Return what is claimed: the answer to a question about a graph."""
    required, forbidden = (
        _list(f"{_place(u)} {_place(v)}" for u, v in pairs)
        for pairs in (named.required, named.forbidden)
    )
    return (
        f"{structure.removeprefix('hamiltonian-')} {answer} {graph.n:x}\n"
        f"{_list(f'{u:x} {v:x}' for u, v in graph.edges)}\n"
        f"{_list(_place(v) for v in named.ends)} {required} {forbidden}\n"
    )


def write_evidence(kind: str, body: object, n: int, read: Read) -> Iterator[str]:
    """Yield the certificate, in pieces; n: the number of vertices it can speak of."""
    if kind not in _WRITERS:
        raise RefusedError(f"{kind!r} is no kind of evidence")
    yield from _WRITERS[kind](body, n, read)
    yield "\n"


def _list(words: Iterable[str]) -> str:
    return " ".join(("[", *words, "]"))


def _place(v: int | None) -> str:
    return f"{NOWHERE if v is None else v:x}"


def _vertex(value: object, n: int) -> str:
    return f"{below(value, n) + 1:x}"


def _vertices(value: object, n: int) -> str:
    return _list(_vertex(v, n) for v in entries(value))


def _edge(value: object, n: int) -> str:
    u, v = entries(value, 2)
    return f"{_vertex(u, n)} {_vertex(v, n)}"


def _weight(value: object) -> str:
    return f"{integer(value):x}"


def _witness(body: object, n: int, _: Read) -> Iterator[str]:
    (order,) = parts(body, "order")
    yield f"witness {_vertices(order, n)}"


def _obstruction(body: object, n: int, _: Read) -> Iterator[str]:
    if body == {"form": "absent"}:
        yield "absent"
    else:
        yield f"obstruction {_form(body, n)}"


def _form(body: object, n: int) -> str:
    match body:
        case {"form": "small"}:
            parts(body, "form")
            return "small"
        case {"form": "leaf"}:
            _, v = parts(body, "form", "vertex")
            return f"leaf {_vertex(v, n)}"
        case {"form": "crowded"}:
            _, v, three = parts(body, "form", "vertex", "neighbours")
            return " ".join(["crowded", *(_vertex(w, n) for w in (v, *entries(three, 3)))])
        case {"form": "ring"}:
            _, ring = parts(body, "form", "vertices")
            return f"ring {_vertices(ring, n)}"
        case {"form": "separator" | "independent" as form}:
            _, members = parts(body, "form", "set")
            return f"{form} {_vertices(members, n)}"
    raise RefusedError("not an obstruction of a known form")


def _counting(body: object, n: int, _: Read) -> Iterator[str]:
    yield f"counting {_weights(body, n)}"


def _weights(body: object, n: int) -> str:
    vertex, cut, parity = parts(body, "vertex", "cut", "parity")
    lists: list[list[str]] = [[], [], []]
    for entry in entries(vertex):
        v, y = entries(entry, 2)
        lists[0].append(f"{_vertex(v, n)} {_weight(y)}")
    for entry in entries(cut):
        members, z = entries(entry, 2)
        lists[1].append(f"{_vertices(members, n)} {_weight(z)}")
    for entry in entries(parity):
        members, edges, z = entries(entry, 3)
        flipped = _list(_edge(e, n) for e in entries(edges))
        lists[2].append(f"{_vertices(members, n)} {flipped} {_weight(z)}")
    return " ".join(map(_list, lists))


def _cases(body: object, n: int, _: Read) -> Iterator[str]:
    nodes, symmetries = map(entries, parts(body, "nodes", "symmetries"))
    written = (_node(entries(node), n, len(nodes), len(symmetries)) for node in nodes)
    yield f"cases {_list(written)} {_list(_vertices(p, n) for p in symmetries)}"


def _node(node: Any, n: int, nodes: int, symmetries: int) -> str:
    match node:
        case ["forced"]:
            return "forced"
        case ["edge", u, v]:
            return f"edge {_vertex(u, n)} {_vertex(v, n)}"
        case ["vertex", v]:
            return f"vertex {_vertex(v, n)}"
        case ["like", j, k]:
            # Counted in the kernel by a successor for each: so they must not be any number.
            return f"like {below(j, nodes):x} {below(k, symmetries):x}"
        case ["obstruction", body]:
            return f"obstruction {_form(body, n)}"
        case ["counting", body]:
            return f"counting {_weights(body, n)}"
    raise RefusedError("not a node of a known form")


def _sweep(body: object, n: int, _: Read) -> Iterator[str]:
    order, _states, _digest = parts(body, "order", "states", "digest")
    yield f"sweep {_vertices(order, n)}"


_WRITERS: Mapping[str, Callable[[object, int, Read], Iterator[str]]] = {
    "witness": _witness,
    "obstruction": _obstruction,
    "counting": _counting,
    "cases": _cases,
    "sweep": _sweep,
    "clauses": clauses,
}
