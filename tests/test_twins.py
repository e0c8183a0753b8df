"""Two readings of one claim: the search's and the checker's.

Each is written from FORMAT.md and shares no code with the other. They have to agree
on everything: instances, graphs, questions, what is claimed, and what is an error.
"""

from __future__ import annotations

import re
import tempfile
from pathlib import Path
from typing import Any

import pytest
from hypothesis import assume, event, example, given, settings
from hypothesis import strategies as st

from certify.checker.claims import Claim as CheckerClaim
from certify.checker.lists import ENDINGS, read_list
from certify.checker.predicates import PREDICATES as CHECKER_PREDICATES
from certify.checker.strict import Rejected
from certify.claim.claim import read_claim
from certify.claim.predicates import PREDICATES
from certify.errors import CertifyError
from certify.graph.build import build_question, instances
from certify.graph.files import read_graphs
from tests.corrupt import corrupt_bytes

REFUSED = "refused"


def read_by_search(folder: Path) -> Any:
    """Return all that the search sees in a claim, or REFUSED."""
    try:
        claim = read_claim(folder / "claim.toml")
        seen = []
        for instance in instances(claim, folder):
            graph, key = instance.graph, instance.key
            question = build_question(claim, key, graph)
            row = (key, graph.labels, graph.edges, question.n, question.absent)
            asked = (question.edges, sorted(question.required), question.apex is not None)
            seen.append((*row, *asked, claim.claimed(key)))
    except CertifyError:
        return REFUSED
    return seen, claim.counts


def read_by_checker(folder: Path) -> Any:
    """Return all that the checker sees in a claim, or REFUSED."""
    try:
        claim = CheckerClaim((folder / "claim.toml").read_bytes())
        seen = []
        for key, graph in claim.instances(lambda name: (folder / name).read_bytes()):
            question = claim.question(key, graph)
            row = (key, tuple(graph.names), tuple(graph.edges), question.n, question.absent)
            asked = (tuple(sorted(question.edges)), sorted(question.required), question.path)
            seen.append((*row, *asked, claim.claimed(key)))
        if not seen:
            return REFUSED
    except Rejected:
        return REFUSED
    return seen, claim.counts


def compare(text: str | bytes, files: dict[str, bytes] | None = None) -> Any:
    """Return what both readers see in a claim."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        (folder / "claim.toml").write_bytes(text.encode() if isinstance(text, str) else text)
        for file, data in (files or {}).items():
            (folder / file).write_bytes(data)
        by_search, by_checker = read_by_search(folder), read_by_checker(folder)
    assert by_search == by_checker
    return by_checker


RULE = """structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {4, 7}"
[instances]
n = "3..14"
"""
BOARD = """structure = "hamiltonian-cycle"
[graph]
vertices = { x = "1..m", y = "1..n" }
where = "x + y > 2 and a.x * 2 != 99"
adjacent = "abs((a.x - b.x) * (a.y - b.y)) == 2"
[instances]
m = "2..3"
n = "m..4"
where = "m * n != 6"
[answers]
impossible = "m * n > 3"
"""
LIST = """structure = "hamiltonian-cycle"
[graph]
list = "graphs.g6"
[answers]
exists = 2
impossible = 1
"""
G6 = b"C~\nBw\nDhc\n"

GOOD = {
    "rule": RULE,
    "board": BOARD,
    "list": LIST,
    "one instance": RULE.split("[inst")[0].replace('"1..n"', '"-2..4"'),
    "integer range": RULE.replace('"3..14"', "5"),
    "no vertices": RULE.replace('"1..n"', '"n..n-1"'),
    "ends": 'ends = [1, "n"]\n' + RULE,
    "one end": 'ends = ["n - 4"]\n' + RULE,
    "the same end twice": "ends = [2, 2]\n" + RULE,
    "an end that is not there": "ends = [0]\n" + RULE,
    "required": 'required = [[1, 5], ["n", "n-4"]]\n' + RULE,
    "required loop": "required = [[1, 1]]\n" + RULE,
    "required and forbidden": "required = [[1, 5]]\nforbidden = [[5, 1]]\n" + RULE,
    "forbidden": "forbidden = [[2, 6], [2, 2], [99, 1]]\n" + RULE,
    "board ends": "required = [[[1, 2], [2, 4]], [[2, 3], [1, 1]]]\n" + BOARD,
    "claimed": RULE + '[answers]\nexists = "10 <= n <= 13 or n >= 17"\n',
    "claimed true": RULE + "[answers]\nexists = true\n",
    "claimed counts": RULE + "[answers]\nexists = 4\nimpossible = 8\n",
    "list ends": 'required = [["0", 1]]\nforbidden = [["02", 1]]\n' + LIST,
    "list of names": 'required = [["x", "1"], [1, "y"]]\n' + LIST.replace(".g6", ".edges"),
    "crlf": RULE.replace("\n", "\r\n"),
    "an empty range beside a long one": BOARD.replace('"1..m"', '"1..10**9"').replace(
        'y = "1..n"', 'y = "1..0"'
    ),
}


@pytest.mark.parametrize("text", GOOD.values(), ids=GOOD.keys())
def test_good_claims_are_read_alike(text: str) -> None:
    assert compare(text, {"graphs.g6": G6, "graphs.edges": b"x 1\n1 y\ny x\n"}) != REFUSED


BAD = {
    "unknown key": "color = 1\n" + RULE,
    "unknown structure": RULE.replace("path", "walk"),
    "no structure": RULE.split("\n", 1)[1],
    "title of the wrong sort": "title = 1\n" + RULE,
    "ends of a cycle": "ends = [1]\n" + RULE.replace("-path", "-cycle"),
    "three ends": "ends = [1, 2, 3]\n" + RULE,
    "no ends in ends": "ends = []\n" + RULE,
    "ends that are no list": 'ends = "1"\n' + RULE,
    "an end that is a truth value": "ends = [true]\n" + RULE,
    "an end that is a float": "ends = [1.0]\n" + RULE,
    "an end that is a date": "ends = [2020-01-01]\n" + RULE,
    "a nested end": "ends = [[1]]\n" + RULE,
    "a huge end": "ends = [0x" + "f" * 5000 + "]\n" + RULE,
    "an end of huge expression": 'ends = ["10**16"]\n' + RULE,
    "an edge of three": "required = [[1, 2, 3]]\n" + RULE,
    "an edge that is none": "required = [1]\n" + RULE,
    "graph no table": 'structure = "hamiltonian-path"\ngraph = 1\n',
    "no graph": 'structure = "hamiltonian-path"\n',
    "list and rule": RULE.replace("[graph]", '[graph]\nlist = "graphs.g6"'),
    "list with instances": LIST + "[instances]\nn = 3\n",
    "list with an expression": LIST.replace("exists = 2", 'exists = "1 == 1"').replace(
        "impossible = 1\n", ""
    ),
    "list of unknown ending": LIST.replace(".g6", ".dat"),
    "list of unknown format": LIST.replace('.g6"', '.g6"\nformat = "gml"'),
    "list format no string": LIST.replace('.g6"', '.g6"\nformat = ["graph6"]'),
    "format of a rule": RULE.replace("[graph]", '[graph]\nformat = "graph6"'),
    "no adjacent": RULE.replace("adjacent", "#"),
    "no vertices key": RULE.replace("vertices", "#"),
    "adjacent no text": RULE.replace('"abs(a - b) in {4, 7}"', "true"),
    "not symmetric": RULE.replace("abs(a - b) in {4, 7}", "a - b == 4"),
    "instances empty": RULE.replace('n = "3..14"', "").replace("1..n", "1..5"),
    "instances no table": 'instances = "1..3"\n' + RULE.split("[inst")[0],
    "only where": RULE.replace("n = ", "where = ").replace("1..n", "1..5"),
    "no instance left": RULE.replace("3..14", "3..2"),
    "a range that is one text": RULE.replace('"3..14"', '"5"'),
    "three points": RULE.replace("3..14", "3..5..7"),
    "three dots": RULE.replace("3..14", "3...14"),
    "a range of floats": RULE.replace('"3..14"', "5.0"),
    "a range of truth": RULE.replace('"3..14"', "true"),
    "a range of a deep table": RULE.replace('"3..14"', "{a.a.a.a = 1}"),
    "a later parameter": RULE + 'm = "1..2"\n' + 'k = "1..z"\n',
    "too many rows": RULE.replace("3..14", "1..1000001"),
    "too many instances": RULE.replace("3..14", "1..100001").replace("1..n", "1..2"),
    "a range beyond counting": RULE.replace("3..14", "-2**53..2**53"),
    "backward vertices": RULE.replace('"1..n"', '"n..n-2"'),
    "too many vertices": RULE.replace('"1..n"', '"1..4001"'),
    "too many candidates": RULE.replace('"1..n"', '"1..100001"\nwhere = "a < 4"'),
    "one coordinate": RULE.replace('"1..n"', '{ x = "1..n" }').replace("a - b", "a.x - b.x"),
    "no coordinate": RULE.replace('"1..n"', "{}"),
    "a coordinate that is a parameter": BOARD.replace("x =", "m ="),
    "a parameter called a": RULE.replace("\nn =", "\na ="),
    "a parameter called prime": RULE.replace("\nn =", "\nprime ="),
    "a parameter called if": RULE.replace("\nn =", "\nif =").replace("1..n", "1..5"),
    "a parameter called true": RULE.replace("\nn =", "\ntrue =").replace("1..n", "1..5"),
    "a parameter with an accent": RULE.replace("\nn =", '\n"né" =').replace("1..n", "1..5"),
    "a parameter with a line end": RULE.replace("\nn =", '\n"n\\n" =').replace("1..n", "1..5"),
    "too many parameters": RULE + "".join(f"k{i} = 1\n" for i in range(20)),
    "whole vertex of a board": BOARD.replace('"abs((a.x', '"a == b or abs((a.x'),
    "vertex of a board in one piece": "required = [[1, 2]]\n" + BOARD,
    "answers unknown": RULE + "[answers]\nopen = 3\n",
    "answers negative": RULE + "[answers]\nexists = -1\n",
    "answers float": RULE + "[answers]\nexists = 1.0\n",
    "answers both expressions": RULE + '[answers]\nexists = "n > 3"\nimpossible = "n < 3"\n',
    "answers count and truth": RULE + "[answers]\nexists = 3\nimpossible = true\n",
    "answers an integer expression": RULE + '[answers]\nexists = "n"\n',
    "answers of a vertex": RULE + '[answers]\nexists = "a > 1"\n',
    "answers huge": RULE + "[answers]\nexists = 0x" + "f" * 5000 + "\n",
    "answers that divide by zero": RULE + '[answers]\nexists = "1 // (n - 4) > 0"\n',
    "byte order mark": "\ufeff" + RULE,
    "doubled key": RULE + "n = 3\n",
    "not TOML": RULE + "]\n",
    "long dotted key": "a" + ".a" * 40 + " = 1\n" + RULE,
    "deep arrays": "ends = " + "[" * 5000 + "]" * 5000 + "\n" + RULE,
}


@pytest.mark.parametrize("text", BAD.values(), ids=BAD.keys())
def test_bad_claims_are_refused_by_both(text: str) -> None:
    assert compare(text, {"graphs.g6": G6}) == REFUSED


@given(st.sampled_from(sorted(GOOD)).flatmap(lambda name: corrupt_bytes(GOOD[name].encode())))
def test_damaged_claims_are_read_alike(data: bytes) -> None:
    seen = compare(data, {"graphs.g6": G6, "graphs.edges": b"x 1\n1 y\ny x\n"})
    event("refused" if seen == REFUSED else "read")


TOKENS = ["0", "1", "2", "4", "n", "m", "a", "b", "x", "+", "-", "*", "//", "<", "==", "and", "or"]


@st.composite
def reworded(draw: st.DrawFn) -> str:
    """Draw a good claim with a few of its words replaced."""
    text = GOOD[draw(st.sampled_from(sorted(GOOD)))]
    for _ in range(draw(st.integers(1, 2))):
        words = list(re.finditer(r"(?<![\w.\"])(?:[nmab]|\d+|[-+*<>]|==|and|or)(?![\w.\"])", text))
        word = draw(st.sampled_from(words))
        text = text[: word.start()] + draw(st.sampled_from(TOKENS)) + text[word.end() :]
    return text


@settings(max_examples=150)
@given(reworded())
def test_reworded_claims_are_read_alike(text: str) -> None:
    seen = compare(text, {"graphs.g6": G6, "graphs.edges": b"x 1\n1 y\ny x\n"})
    event("refused" if seen == REFUSED else "read")


# Expressions: of the grammar, and sometimes out of it.
names = st.sampled_from(["n", "a", "b"] * 9 + ["m", "k"])
large = [2**53, 2**53 + 1, 10**12, 10**12 + 1, 64, 3037000500]
numbers = st.sampled_from([*range(10)] * 6 + large).map(str)


def integers_from(part: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
    return st.one_of(
        st.tuples(part, st.sampled_from(["+", "-", "*"] * 3 + ["//", "%", "**"]), part).map(
            "".join
        ),
        st.tuples(st.sampled_from(["-{}", "+{}", "({})", "abs({})", "- {}"]), part).map(
            lambda pair: pair[0].format(pair[1])
        ),
        st.tuples(
            st.sampled_from(["min", "max", "gcd"]), st.lists(part, min_size=1, max_size=3)
        ).map(lambda pair: f"{pair[0]}({', '.join(pair[1])})"),
        st.tuples(part, truths, part).map(lambda t: f"({t[0]} if {t[1]} else {t[2]})"),
    )


displays = st.tuples(
    st.sampled_from(["{{{}}}", "{{{}}}", "({},)", "[{}]", "({})"]),
    st.lists(st.one_of(numbers, names), max_size=3).map(", ".join),
).map(lambda pair: pair[0].format(pair[1]))
simple = st.one_of(numbers, names)
truths: st.SearchStrategy[str] = st.deferred(
    lambda: st.one_of(
        st.tuples(whole, st.sampled_from(["==", "!=", "<", "<=", ">", ">="]), whole).map(" ".join),
        st.tuples(
            whole, st.sampled_from(["<", "=="]), whole, st.sampled_from([">=", "!="]), whole
        ).map(" ".join),
        st.tuples(whole, st.sampled_from(["in", "not in"]), displays).map(" ".join),
        st.tuples(displays, st.sampled_from(["==", "!="]), displays).map(" ".join),
        st.tuples(st.sampled_from([*sorted(PREDICATES), "abs"]), whole).map(
            lambda p: f"{p[0]}({p[1]})"
        ),
        st.tuples(truths, st.sampled_from(["and", "or"]), truths).map(lambda t: f"({' '.join(t)})"),
        truths.map(lambda part: f"not {part}"),
        st.sampled_from(["True", "False", "true", "false"]),
    )
)
whole: st.SearchStrategy[str] = st.recursive(simple, integers_from, max_leaves=6)
swap = str.maketrans("ab", "ba")
words = re.compile(r"\b[ab]\b")


def symmetric(text: str) -> str:
    """Return a rule that is symmetric whatever the given one is."""
    return f"({text}) == ({words.sub(lambda word: word[0].translate(swap), text)})"


rules = st.one_of(truths, truths.map(symmetric), truths.map(symmetric))


@settings(max_examples=400)
@given(rules, whole, whole)
@example("1if n > 3 else 2 == 2", "1", "n")
@example("1 in (1, 2) == {1, 2}", "1", "n")
@example("a in ()", "1", "n")
@example("a == b # no", "1", "n")
@example("{a} == {b}", "1", "n")
@example("abs(a - b) in (1, 1 // 0)", "1", "n")
@example("abs(a - b) == 1 or 1 // 0 == 2", "1", "n")
@example("a is b", "1", "n")
@example("-" * 30 + "a == b", "1", "n")
@example("-" * 60 + "a == b", "1", "n")
@example(" + ".join(["a * b"] * 19) + " > 0", "1", "n")
@example(" and ".join(["a + b > 0"] * 62), "1", "n")
@example(" and ".join(["a + b > 0"] * 63), "1", "n")
@example(" and ".join(["prime(a)"] * 167), "1", "n")
@example("(-1) ** (10 ** 12) == 1", "0 ** 60", "n")
@example("abs(a - b) in (-1, 1) and {n, 2} == {2, n} != {1}", "1", "n")
def test_expressions_are_read_alike(rule: str, low: str, high: str) -> None:
    low, high = (words.sub("n", part) for part in (low, high))
    head = f'structure = "hamiltonian-path"\nends = ["{low}"]\n[graph]\n'
    body = f"vertices = '-2..n'\nadjacent = '{rule}'\n[instances]\nn = '1..4'\nm = '1..2'\n"
    answers = f"[answers]\nimpossible = '{words.sub('n', rule)}'\n"
    event("refused" if compare(head + body + answers) == REFUSED else "read")
    one = RULE.replace('"1..n"', f'"{low}..{high}"').replace("3..14", "3..5")
    event("range: refused" if compare(one) == REFUSED else "range: read")


@given(st.integers(-(2**53), 2**53), st.integers(0, 2**18), st.integers(1, 20), st.integers(-1, 1))
def test_predicates_agree(i: int, k: int, e: int, off: int) -> None:
    close = [k**2, k**3, k * (k + 1) // 2, k * (3 * k - 1) // 2, min(k, 8) ** e, 2**e, 3**e, 2**53]
    for name, holds in PREDICATES.items():
        for value in (i, *(part + off for part in close)):
            if abs(value) <= 2**53:
                assert holds(value) == CHECKER_PREDICATES[name](value), (name, value)


DIMACS = b"c a triangle and a tail\np edge 4 4\ne 1 2\ne 2 3\ne 3 1\ne 3 4\n"
EDGES = b"# a triangle\nx 1 # one\n1 y\n y\tx\n\nalone\n"
GRAPHML = b"""<?xml version="1.0" encoding="UTF-8"?>
<graphml xmlns="http://graphml.graphdrawing.org/xmlns">
 <key id="w" for="edge"><default>1</default></key>
 <graph id="G" edgedefault="undirected">
  <desc>three <b>vertices</b></desc>
  <node id="x"/><node id="y"><data key="w">2</data></node>
  <edge source="x" target="z" directed="false"/><edge source="y" target="x"/>
  <node id="z"/>
 </graph>
</graphml>
"""
SPARSE6 = b">>sparse6<<:CcKI\n:GaYnLz\n:@\n:?\nBw\n"
FILES = {
    "graph6": G6, "graph6 header": b">>graph6<<" + G6, "no end": G6[:-1], "sparse6": SPARSE6,
    "dimacs": DIMACS, "edges": EDGES, "graphml": GRAPHML,
    "crlf": DIMACS.replace(b"\n", b"\r\n"),
}  # fmt: skip
FORM = {name: name for name in ENDINGS.values()} | {
    "graph6 header": "graph6", "no end": "graph6", "crlf": "dimacs"
}  # fmt: skip


def compare_lists(data: bytes, form: str) -> Any:
    """Return the graphs that both readers see in a file."""
    by_search: Any
    by_checker: Any
    with tempfile.TemporaryDirectory() as name:
        path = Path(name, "graphs")
        path.write_bytes(data)
        try:
            by_search = [(g.labels, g.edges) for g in read_graphs(path, form)] or REFUSED
        except CertifyError:
            by_search = REFUSED
    try:
        by_checker = [(tuple(g.names), tuple(g.edges)) for g in read_list(data, form)] or REFUSED
    except Rejected:
        by_checker = REFUSED
    assert by_search == by_checker
    return by_checker


@pytest.mark.parametrize("name", FILES)
def test_lists_are_read_alike(name: str) -> None:
    assert compare_lists(FILES[name], FORM[name]) != REFUSED


@settings(max_examples=400)
@given(
    st.sampled_from(sorted(FILES)).flatmap(lambda n: st.tuples(st.just(n), corrupt_bytes(FILES[n])))
)
def test_damaged_lists_are_read_alike(case: tuple[str, bytes]) -> None:
    form = FORM[case[0]]
    # The difference of test_what_the_checker_alone_refuses.
    assume(not re.match(rb">>(graph|sparse)6<<\r?\n", case[1]))
    end = b"\n" if form in ("graph6", "sparse6") and not case[1].endswith(b"\n") else b""
    seen = compare_lists(case[1] + end, form)
    event(f"{FORM[case[0]]}: {'refused' if seen == REFUSED else 'read'}")


@settings(max_examples=300)
@given(
    st.tuples(
        st.sampled_from([*range(63, 73), 79, 80, 126]),
        st.lists(st.integers(63, 126) | st.sampled_from([63, 126]), max_size=4),
    ).map(lambda pair: bytes([pair[0], *pair[1]])),
    st.sampled_from([b"", b":"]),
    st.sampled_from([b"\n", b"\r\n", b"\n\n"]),
)
def test_any_lines_of_graph6_and_sparse6_are_read_alike(
    body: bytes, mark: bytes, end: bytes
) -> None:
    seen = compare_lists(mark + body + end, "graph6")
    event(f"{mark.decode()}: {'refused' if seen == REFUSED else 'read'}")


@pytest.mark.parametrize(
    "data",
    [b":An", b">>graph6<<\nBw\n", b"Bw", b"Bw\r", b">>sparse6<<Bw\n", b"Bw\nBw", b"\nBw\n", b""],
)
def test_ends_and_headers_are_read_alike(data: bytes) -> None:
    compare_lists(data, "graph6")


WORDS = ["c", "p", "e", "edge", "col", "1", "2", "3", "4", "03", "+1", "-1", "1_0", "x", "#", ""]
WORDS += ["\uff11", "\u00a0", "\u2028", "\x0b", "\x0c", "\x1c", "\x85", "\r", "\t", " ", "\ufeff"]
WORDS += ["0" * 11 + "1", "0" * 12 + "1"]


@settings(max_examples=400)
@given(
    st.sampled_from(["dimacs", "edges"]),
    st.lists(st.lists(st.sampled_from(WORDS), max_size=4).map(" ".join), max_size=5),
)
@example("dimacs", ["p edge 2 1", "e 1 2", ""])
@example("dimacs", ["c x\x0be 1 2", "p edge 2 0"])
@example("dimacs", [" p col 2 1", " e  1 2 "])
@example("edges", [])
def test_any_lines_of_words_are_read_alike(form: str, lines: list[str]) -> None:
    compare_lists("\n".join(lines).encode(), form)


HOSTILE_XML = {
    "entities": b'<!DOCTYPE g [<!ENTITY a "x">]>' + GRAPHML.split(b"\n", 1)[1],
    "utf-16": GRAPHML.decode().encode("utf-16"),
    "another encoding": GRAPHML.replace(b"UTF-8", b"cp500"),
    "latin-1": GRAPHML.replace(b"UTF-8", b"iso-8859-1"),
    "directed edge": GRAPHML.replace(b'"false"', b'"1"'),
    "directed graph": GRAPHML.replace(b"undirected", b"directed"),
    "no default": GRAPHML.replace(b'edgedefault="undirected"', b""),
    "two graphs": GRAPHML.replace(b"</graph>", b'</graph><graph edgedefault="undirected"/>', 1),
    "nested": GRAPHML.replace(b'="z"/>', b'="z"><graph edgedefault="undirected"/></node>'),
    "hyperedge": GRAPHML.replace(b"<desc>", b"<hyperedge/><desc>"),
    "undeclared": GRAPHML.replace(b'target="z"', b'target="q"'),
    "doubled id": GRAPHML.replace(b'id="z"', b'id="y"'),
    "no id": GRAPHML.replace(b'<node id="z"/>', b'<node id="z"/><node/>'),
    "loop": GRAPHML.replace(b'target="z"', b'target="x"'),
    "text": GRAPHML.replace(b"</graph>", b"loose</graph>"),
    "another root": GRAPHML.replace(b"graphml", b"graphxml"),
    "no graph": b"<graphml/>",
    "deep": b"<graphml>" + b"<graph>" * 20000,
    "empty": b"",
    "byte order mark": b"\xef\xbb\xbf" + GRAPHML,
}  # fmt: skip


@pytest.mark.parametrize("data", HOSTILE_XML.values(), ids=HOSTILE_XML.keys())
def test_hostile_graphml_is_refused_by_both(data: bytes) -> None:
    assert compare_lists(data, "graphml") == REFUSED


def test_graphml_without_a_name_space_is_read_alike() -> None:
    plain = GRAPHML.replace(b' xmlns="http://graphml.graphdrawing.org/xmlns"', b"")
    assert compare_lists(plain, "graphml") == compare_lists(GRAPHML, "graphml") != REFUSED
