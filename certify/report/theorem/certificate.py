"""Evidence as a term of Coq, of the type `certificate` of the kernel.

The kernel counts vertices from 1. Nothing here is trusted: a term that says something else
than the evidence does not compile, or proves what it says.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from typing import Any

from certify.report.theorem.gallina import write_list
from certify.report.theorem.packing import pack_lists, write_texts

MOST_NUMBERS = 2_000_000
"""Numbers that a proof by clauses may have: Coq takes about ten seconds to read a million."""

_SORTS = {"degree": 1, "cut": 2, "required": 3, "mirror": 4}

Files = Callable[[str], bytes]
"""Gives the text of a bulky file that a record names, unpacked."""


class NotTakenError(Exception):
    """The kernel does not take this evidence; the text says why."""


def write_certificate(record: Mapping[str, Any], read_text: Files) -> str:
    """Return the evidence of a record as a term.

    Errors: NotTakenError for a kind, or a size, that the kernel does not take.
    """
    kind, body = record["kind"], record["evidence"]
    if record["answer"] == "open":
        raise NotTakenError("it is open")
    writer = _WRITERS.get(kind)
    if writer is None:
        raise NotTakenError(f"the kernel does not take evidence of kind {kind}")
    return writer(body, read_text)


def _vertices(numbers: Iterable[int]) -> str:
    inside = "; ".join(str(v + 1) for v in numbers)
    return f"[{inside}]%positive" if inside else "[]"


def _pairs(edges: Iterable[Sequence[int]]) -> str:
    inside = "; ".join(f"({u + 1}, {v + 1})" for u, v in edges)
    return f"[{inside}]%positive" if inside else "[]"


def _integer(value: int) -> str:
    return str(value) if value >= 0 else f"({value})"


def _witness(body: Mapping[str, Any], _: Files) -> str:
    return f"ByWitness {_vertices(body['order'])}"


def _obstruction(body: Mapping[str, Any], _: Files) -> str:
    if body["form"] == "absent":
        return "ByAbsence"
    return f"ByObstruction {_obstruction_body(body)}"


def _obstruction_body(body: Mapping[str, Any]) -> str:
    form = body["form"]
    match form:
        case "small":
            return "Obstruction.Small"
        case "leaf":
            return f"(Obstruction.Leaf {body['vertex'] + 1})%positive"
        case "crowded":
            numbers = " ".join(str(v + 1) for v in (body["vertex"], *body["neighbours"]))
            return f"(Obstruction.Crowded {numbers})%positive"
        case "ring":
            return f"(Obstruction.Ring {_vertices(body['vertices'])})"
        case "separator" | "independent":
            return f"(Obstruction.{form.capitalize()} {_vertices(body['set'])})"
    raise NotTakenError(f"the kernel does not take obstructions of the form {form}")


def _counting(body: Mapping[str, Any], _: Files) -> str:
    return f"ByCounting {_counting_body(body)}"


def _counting_body(body: Mapping[str, Any]) -> str:
    weights = (f"({v + 1}%positive, {_integer(y)})" for v, y in body["vertex"])
    cuts = (f"({_vertices(s)}, {z})" for s, z in body["cut"])
    parities = (f"({_vertices(s)}, {_pairs(f)}, {z})" for s, f, z in body["parity"])
    return (
        f"{{| Counting.weights := {write_list(weights)}; Counting.cuts := {write_list(cuts)};\n"
        f"     Counting.parities := {write_list(parities)} |}}"
    )


def _cases(body: Mapping[str, Any], _: Files) -> str:
    nodes = ";\n     ".join(map(_node, body["nodes"]))
    symmetries = ";\n     ".join(map(_vertices, body["symmetries"]))
    return f"ByCases {{| Cases.nodes := [{nodes}];\n     Cases.symmetries := [{symmetries}] |}}"


def _node(node: Sequence[Any]) -> str:
    match node:
        case ["forced"]:
            return "Cases.Forced"
        case ["edge", u, v]:
            return f"(Cases.Edge {u + 1} {v + 1})%positive"
        case ["vertex", v]:
            return f"(Cases.Vertex {v + 1})%positive"
        case ["like", j, k]:
            return f"(Cases.Like {j} {k})%nat"
        case ["obstruction", body]:
            return f"Cases.ByObstruction {_obstruction_body(body)}"
        case ["counting", body]:
            return f"Cases.ByCounting {_counting_body(body)}"
    raise NotTakenError(f"the kernel does not take nodes of the form {node[0]}")


def _sweep(body: Mapping[str, Any], _: Files) -> str:
    return f"BySweep {_vertices(body['order'])}"


def _clauses(body: Mapping[str, Any], read_text: Files) -> str:
    facts = list(_facts(read_text(body["cnf"])))
    steps = list(_steps(read_text(body["lrat"])))
    count = sum(map(len, facts)) + sum(map(len, steps))
    if count > MOST_NUMBERS:
        raise NotTakenError(
            f"its clause proof has {count:,} numbers, and a theorem takes {MOST_NUMBERS:,}; "
            "certify check --referee kernel takes it"
        )
    packed = (write_texts(pack_lists(lists)) for lists in (facts, steps))
    return "ByClauses (Packed.packed {}\n  {})".format(*packed)


def _facts(cnf: bytes) -> Iterator[list[int]]:
    """Yield each fact as numbers: its sort, then what it speaks of."""
    for line in cnf.decode("ascii").split("\n"):
        match line.split(" "):
            case ["c", "fact", "mirror", length, *images]:
                yield [_SORTS["mirror"], int(length), *(int(v) + 1 for v in images)]
            case ["c", "fact", sort, *vertices]:
                yield [_SORTS[sort], *(int(v) + 1 for v in vertices)]
            case _:
                return


def _steps(lrat: bytes) -> Iterator[list[int]]:
    """Yield the literals of each step, 2x for x and 2x + 1 for its opposite, then its hints."""
    for line in lrat.decode("ascii").splitlines():
        numbers = [int(word) for word in line.split(" ")]
        end = numbers.index(0)
        yield [2 * x if x > 0 else 1 - 2 * x for x in numbers[1:end]]
        yield numbers[end + 1 : -1]


_WRITERS: Mapping[str, Callable[[Mapping[str, Any], Files], str]] = {
    "witness": _witness,
    "obstruction": _obstruction,
    "counting": _counting,
    "cases": _cases,
    "sweep": _sweep,
    "clauses": _clauses,
}
