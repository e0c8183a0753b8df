"""A claim as a mathematician states it: which graphs, which objects, for which instances.

The definition of the graphs, and the claim itself as a theorem. Formulas are those of
formula.py, from the rule as certify/claim has read it.
"""

from __future__ import annotations

import tomllib
from collections.abc import Mapping, Sequence
from pathlib import PurePosixPath

from certify.claim.claim import Claim
from certify.claim.instances import read_range
from certify.claim.language import TRUTH, Expression, read_expression
from certify.claim.names import Scope
from certify.claim.parts import FORMATS, Rule, Vertex
from certify.report.blocks import mark
from certify.report.formula import (
    define_predicates,
    name_coordinate,
    name_symbol,
    set_bounds,
    set_number,
    set_rule,
)
from certify.report.inline import emphasize, formula, mark_dollars
from certify.report.runs import AnyKey, Run, set_values
from certify.report.words import capital, join, name_label, number

OBJECTS = {"hamiltonian-path": "Hamiltonian path", "hamiltonian-cycle": "Hamiltonian cycle"}
_MOST_RUNS = 12
_TUPLES = {2: "pairs", 3: "triples"}
_NAMES_IN_LISTS = {
    "graph6": r"numbered $0, 1, 2, \dots$",
    "sparse6": r"numbered $0, 1, 2, \dots$",
    "dimacs": r"numbered $1, 2, 3, \dots$",
    "graphml": "named by their id in the file",
    "edges": "named by their words in the file",
}


class ClaimWords:
    """The language of one claim.

    count: the number of instances, which for a list only its file tells.
    structure: what is asked for, such as "Hamiltonian path". thing: "path" or "cycle".
    """

    def __init__(self, claim: Claim, count: int) -> None:
        self.claim, self.count = claim, count
        self.structure = OBJECTS[claim.structure]
        self.thing = self.structure.split()[1]
        self.is_list = claim.list_name is not None

    @property
    def has_instances(self) -> bool:
        """Return whether there is more than the one graph of a rule without parameters."""
        return self.count > 1 if self.is_list else bool(self.claim.parameters)

    @property
    def any_graph(self) -> str:
        """Return the symbol of a graph of the claim: `G(m, n)`, `G_k`, `G`."""
        if self.is_list:
            return formula("G_k" if self.count > 1 else "G_1")
        if not self.claim.parameters:
            return formula("G")
        return formula(f"G({', '.join(map(name_symbol, self.claim.parameters))})")

    def graph(self, key: AnyKey) -> str:
        """Return the symbol of the graph of an instance: `G(18)`."""
        if isinstance(key, int):
            return formula(f"G_{{{key}}}")
        if not key:
            return formula("G")
        values = [
            name_symbol(name) if isinstance(key[name], str) else str(key[name])
            for name in self.claim.parameters
        ]
        return formula(f"G({', '.join(values)})")

    def instance(self, key: AnyKey) -> str:
        """Return an instance: `n = 18`, `m = 3, n = 4`, `k = 17`; "" for the only one."""
        return self.run(Run(key, key, range(1)))

    def run(self, run: Run) -> str:
        """Return a run of instances: `m = 3, 8 <= n <= 12`."""
        if isinstance(run.first, int) or isinstance(run.last, int):
            if not (isinstance(run.first, int) and isinstance(run.last, int)):
                raise TypeError("a run of a list and of a rule")
            return formula(set_values(run.first, run.last, "k"))
        pairs = [
            set_values(run.first[name], run.last[name], name_symbol(name))
            for name in self.claim.parameters
        ]
        return formula(r",\ ".join(pairs)) if pairs else ""

    def range(self) -> str:
        """Return for which instances the claim speaks, as a clause; "" for one graph."""
        if not self.has_instances:
            return ""
        if self.is_list:
            return formula(rf"1 \le k \le {self.count}")
        table = tomllib.loads(self.claim.raw.decode()).get("instances", {})
        names = self.claim.parameters
        parts = []
        for place, name in enumerate(names):
            bounds = read_range(table[name], names[:place], self.claim.where, may_grow=True)
            parts.append(formula(set_bounds(name_symbol(name), bounds)))
        if "where" in table:
            scope = Scope(names)
            keep = read_expression(table["where"], sort=TRUTH, scope=scope, where=self.claim.where)
            parts.append(set_rule(keep))
        return join(parts)


def define_graphs(words: ClaimWords) -> str:
    """Return the definition of the graphs of a claim, and of what is asked for if it is special."""
    claim = words.claim
    rule = claim.graphs
    text = _define_by_rule(words, rule) if isinstance(rule, Rule) else _define_list(words)
    return " ".join(part for part in (text, _define_object(words)) if part)


def _define_by_rule(words: ClaimWords, rule: Rule) -> str:
    graph = words.any_graph
    parameters = [name_symbol(name) for name in words.claim.parameters]
    start = f"Let {graph} be the graph whose vertices are "
    if parameters:
        noun = "integers" if len(parameters) > 1 else "an integer"
        start = f"For {noun} {formula(', '.join(parameters))} l{start[1:]}"
    vertices = _tell_vertices(rule)
    two = f"two different vertices {formula('a')} and {formula('b')}"
    if rule.coordinates:
        symbols = [name_symbol(name) for name in rule.coordinates]
        if all(len(name) == 1 for name in rule.coordinates):
            tuples = [
                f"{v} = ({', '.join(name_coordinate(name, v) for name in rule.coordinates)})"
                for v in "ab"
            ]
            two = f"two different vertices {formula(tuples[0])} and {formula(tuples[1])}"
        else:
            listed = join([formula(rf"{symbol}(a)") for symbol in symbols])
            two += f", with coordinates {listed} and likewise for {formula('b')},"
    said = set_rule(rule.adjacent)
    if said in ("always", "never"):
        joined = f"Any {two}" if said == "always" else f"No {two}"
        rest = f"{joined} are adjacent."
    else:
        rest = f"{capital(two)} are adjacent if and only if {said}."
    meaning = define_predicates(rule.adjacent, rule.keep)
    return " ".join(part for part in (f"{start}{vertices}.", rest, meaning) if part)


def _tell_vertices(rule: Rule) -> str:
    if not rule.coordinates:
        (bounds,) = rule.ranges
        if rule.keep is None:
            low, high = (set_number(value) for value in (bounds.low, bounds.high))
            if low == high:
                return f"the integer {formula(low)} alone"
            return f"the integers {formula(_count_up(low, high))}"
        limits = formula(set_bounds("a", bounds))
        return f"the integers {formula('a')} with {limits} for which {_keep(rule.keep)}"
    symbols = [name_symbol(name) for name in rule.coordinates]
    limits = join(
        [
            formula(set_bounds(symbol, bounds))
            for symbol, bounds in zip(symbols, rule.ranges, strict=True)
        ]
    )
    tuple_ = f"({', '.join(symbols)})"
    tuples = _TUPLES.get(len(symbols), f"{number(len(symbols))}-tuples")
    text = f"the {tuples} {formula(tuple_)} of integers with {limits}"
    return text if rule.keep is None else f"{text} for which {_keep(rule.keep)}"


def _count_up(low: str, high: str) -> str:
    if low.isdigit() and high.isdigit() and int(high) - int(low) < 4:
        return ", ".join(map(str, range(int(low), int(high) + 1)))
    second = f" {int(low) + 1}," if low.isdigit() else ""
    return rf"{low},{second} \dots, {high}"


def _keep(keep: Expression) -> str:
    said = set_rule(keep, bare=True)
    return {"always": "nothing else is asked", "never": "the impossible holds"}.get(said, said)


def _define_list(words: ClaimWords) -> str:
    claim = words.claim
    name = claim.list_name or ""
    ending = PurePosixPath(name).suffix
    form = getattr(claim.graphs, "format", None) or next(
        (form for form, endings in FORMATS.items() if ending in endings), "graph6"
    )
    where = f"the file {mark(f'`{name}`')}, in the format {form}"
    named = mark_dollars(_NAMES_IN_LISTS[form])
    if form not in ("graph6", "sparse6"):
        return f"Let {formula('G_1')} be the graph of {where}. Its vertices are {named}."
    return (
        f"Let {formula('G_k')} be the {formula('k')}-th graph of {where}. Its vertices are {named}."
    )


def _define_object(words: ClaimWords) -> str:
    """Return which paths or cycles count, where the claim does not admit all of them."""
    claim, parts = words.claim, []
    ends = [_vertex(end) for end in claim.ends]
    if len(ends) == 2:
        parts.append(f"joins {ends[0]} to {ends[1]}")
    elif ends:
        parts.append(f"has an end at {ends[0]}")
    for verb, pairs in (("contains", claim.required), ("avoids", claim.forbidden)):
        if pairs:
            noun = "edges" if len(pairs) > 1 else "edge"
            listed = join([_edge(pair) for pair in pairs])
            parts.append(f"{verb} the {noun} {listed}")
    if not parts:
        return ""
    return f"Here a {emphasize(words.structure)} of this graph means one that {join(parts)}."


def _vertex(vertex: Vertex) -> str:
    if isinstance(vertex, str):
        return mark(name_label(vertex))
    values = [set_number(value) for value in vertex]
    return formula(f"({', '.join(values)})" if len(values) > 1 else values[0])


def _edge(pair: tuple[Vertex, Vertex]) -> str:
    return f"from {_vertex(pair[0])} to {_vertex(pair[1])}"


def state_claim(
    words: ClaimWords, where: str, found: Mapping[str, Sequence[Run]], counts: dict[str, int]
) -> str:
    """Return the theorem: what is claimed, or for a survey what was found; "" if that is nothing.

    where: the instances, as a clause ("" for one graph alone). found, counts: for each
    answer the instances with it in runs, and how many.
    """
    truth, thing, graph = words.claim.answers.truth, words.structure, words.any_graph
    if not found.get("exists") and not found.get("impossible"):
        return ""
    total = sum(counts.values())
    start = f"Let {where}. Then {graph}" if where else f"The graph {graph}"
    if found.get("open"):
        start = f"Let {where}, {_except(words, found['open'])}. Then {graph}"
    if isinstance(truth, Expression):
        verb = "has no" if words.claim.answers.inverted else "has a"
        return f"{start} {verb} {thing} if and only if {set_rule(truth)}."
    yes, no = found.get("exists", ()), found.get("impossible", ())
    if not no or not yes:
        return f"{start} has {'no' if no else 'a'} {thing}."
    told, verb, rest = (yes, "has a", "no") if len(yes) <= len(no) else (no, "has no", "a")
    count, left = counts["exists"], counts["impossible"]
    if told is no:
        count, left = left, count
    if words.is_list and not found.get("open"):
        start = f"Of the {total} graphs {formula('G_1')} to {formula(f'G_{{{total}}}')}, exactly"
        text = f"{start} {count} {'has' if count == 1 else 'have'} {verb.split()[1]} {thing}"
        others = "other has" if left == 1 else f"{left} others have"
        text += f", and the {others} {'one' if rest == 'a' else 'none'}."
        if len(told) <= _MOST_RUNS:
            are = "one is that" if count == 1 else f"{number(count)} are those"
            text += f" The {are} with {_either(words, told)}."
        return text
    if len(told) > _MOST_RUNS:
        return f"{start} {verb} {thing} exactly where the table says so."
    return f"{start} {verb} {thing} if and only if {_either(words, told)}."


def _except(words: ClaimWords, runs: Sequence[Run]) -> str:
    if len(runs) > _MOST_RUNS:
        return "and leave out the instances that are open in the table"
    return f"but leave out {join([words.run(run) for run in runs])}"


def _either(words: ClaimWords, runs: Sequence[Run]) -> str:
    """Return which instances lie in one of the runs: `k in {3, 5}`, or `8 <= k <= 12`."""
    single = [run.first for run in runs if run.first == run.last]
    symbol = "k" if words.is_list else "".join(map(name_symbol, words.claim.parameters[:1]))
    if len(single) < 2 or len(words.claim.parameters) > 1:
        return join([words.run(run) for run in runs], "or")
    values = [str(v) for key in single for v in ([key] if isinstance(key, int) else key.values())]
    listed = formula(rf"{symbol} \in \{{{', '.join(values)}\}}")
    return join([*(words.run(run) for run in runs if run.first != run.last), listed], "or")
