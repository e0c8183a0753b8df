"""Claim files: what they may hold, what is refused, and where the error is said to be."""

from __future__ import annotations

import os
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.claim.claim import Claim, count_instances, name_key, read_claim
from certify.claim.parts import GraphList, Rule
from certify.errors import ClaimError

HOPS = """\
title = "Hops of four or seven"
statement = "The channels 1..n can be visited by hops of 4 or 7 exactly for ..."
structure = "hamiltonian-path"

[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {4, 7}"

[instances]
n = "2..20"

[answers]
exists = "10 <= n <= 13 or n >= 17"
"""

LEAPS = """\
structure = "hamiltonian-cycle"
required = [[[1, 1], ["m", "n - 1"]]]
forbidden = []

[graph]
vertices = { x = "1..m", y = "1..n" }
where = "x + y > 2 or a.x == 1"
adjacent = "{abs(a.x - b.x), abs(a.y - b.y)} == {1, 2}"

[instances]
m = "2..4"
n = "m..5"
where = "m * n % 2 == 0"

[answers]
impossible = "true"
"""

LIST = """\
structure = "hamiltonian-cycle"
[graph]
list = "lists/cubic-14.g6"
[answers]
exists = 474
impossible = 35
"""


def written(folder: Path, text: str | bytes, name: str = "claim.toml") -> Path:
    path = folder / name
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


def read(folder: Path, text: str | bytes) -> Claim:
    return read_claim(written(folder, text))


def refusal(folder: Path, text: str | bytes) -> str:
    """Return the message with which a file is refused, without the folder."""
    path = written(folder, text)
    with pytest.raises(ClaimError) as caught:
        read_claim(path)
    message = str(caught.value)
    assert message.startswith(f"{path}:")
    assert "\n" not in message
    assert len(message) < 600
    return message.removeprefix(f"{folder}{os.sep}")


def test_a_rule_with_one_parameter(tmp_path: Path) -> None:
    claim = read(tmp_path, HOPS)
    assert (claim.name, claim.raw, claim.list_name) == ("claim.toml", HOPS.encode(), None)
    assert (claim.title, claim.structure) == ("Hops of four or seven", "hamiltonian-path")
    assert claim.statement.startswith("The channels")
    assert isinstance(claim.graphs, Rule)
    assert count_instances(claim) == 19
    assert list(claim.instance_keys()) == [{"n": n} for n in range(2, 21)]
    found = [n for n in range(2, 21) if claim.claimed({"n": n})]
    assert found == [10, 11, 12, 13, 17, 18, 19, 20]
    assert claim.counts == {}


def test_a_table_of_two_parameters(tmp_path: Path) -> None:
    claim = read(tmp_path, LEAPS)
    keys = [tuple(key.items()) for key in claim.instance_keys()]
    assert keys == [
        (("m", m), ("n", n)) for m in range(2, 5) for n in range(m, 6) if m * n % 2 == 0
    ]
    assert {claim.claimed(key) for key in claim.instance_keys()} == {False}
    assert len(claim.required) == 1
    assert claim.forbidden == ()


def test_a_list(tmp_path: Path) -> None:
    claim = read(tmp_path, LIST)
    assert claim.list_name == "lists/cubic-14.g6"
    assert claim.graphs == GraphList("lists/cubic-14.g6", None)
    assert claim.counts == {"exists": 474, "impossible": 35}
    assert claim.claimed(3) is None
    assert count_instances(claim) is None
    assert list(claim.instance_keys()) == []
    assert (claim.title, claim.statement) == ("", "")


@pytest.mark.parametrize(
    ("answers", "expected"),
    [
        ("", None),
        ("[answers]", None),
        ("[answers]\nexists = true", True),
        ("[answers]\nexists = false", False),
        ("[answers]\nimpossible = true", False),
        ("[answers]\nimpossible = false", True),
        ('[answers]\nexists = "n == 3"', True),
        ('[answers]\nimpossible = "n == 3"', False),
        ("[answers]\nexists = 1", None),
    ],
)
def test_answers(tmp_path: Path, answers: str, expected: bool | None) -> None:
    text = HOPS.partition("[answers]")[0] + answers
    assert read(tmp_path, text).claimed({"n": 3}) is expected


def test_counts_are_compared(tmp_path: Path) -> None:
    claim = read(tmp_path, LIST)
    assert claim.check_counts(["exists"] * 474 + ["impossible"] * 35) is None
    complaint = claim.check_counts(["exists"] * 473 + ["impossible"] * 36)
    assert complaint is not None
    assert "474" in complaint
    assert "36" in complaint
    assert read(tmp_path, HOPS).check_counts(["exists"]) is None


def test_without_instances_there_is_one(tmp_path: Path) -> None:
    text = 'structure = "hamiltonian-path"\n[graph]\nvertices = "1..9"\nadjacent = "a + b < 9"\n'
    claim = read(tmp_path, text)
    assert list(claim.instance_keys()) == [{}]
    assert count_instances(claim) == 1
    assert claim.row({}) == ()


def test_ranges(tmp_path: Path) -> None:
    def keys(instances: str) -> list[tuple[int, ...]]:
        head = 'structure = "hamiltonian-path"\n[graph]\nvertices = 5\nadjacent = "a < 0"\n'
        return list(read(tmp_path, head + "[instances]\n" + instances).rows)

    assert keys("n = 7") == [(7,)]
    assert keys('n = "7..7"') == [(7,)]
    assert keys('n = "-2 .. 1"') == [(-2,), (-1,), (0,), (1,)]
    assert keys('m = "1..3"\nn = "m + 1 .. 3"') == [(1, 2), (1, 3), (2, 3)]
    assert keys('m = "1..3"\nwhere = "m != 2"') == [(1,), (3,)]
    assert keys('n = "1..100000"')[-1] == (100000,)
    assert keys('n = "1..300000"\nwhere = "n % 3 == 0"')[-1] == (300000,)


def test_keys_as_words() -> None:
    assert name_key({"n": 18}) == "n=18"
    assert name_key({"n": 4, "m": 3}) == "m=3,n=4"
    assert name_key(17) == "17"


def hops(**changes: str) -> str:
    """Return HOPS with lines replaced; the name of a change is the key of its line."""
    lines = HOPS.splitlines()
    for key, new in changes.items():
        at = next(i for i, line in enumerate(lines) if line.startswith(f"{key} ="))
        lines[at] = new
    return "\n".join(lines) + "\n"


@pytest.mark.parametrize(
    ("text", "words"),
    [
        # keys
        (hops(title='tittle = "x"'), ["claim.toml:1: tittle", 'did you mean "title"?']),
        (hops(title="colour = 1"), ["claim.toml:1: colour", "no such key", "structure"]),
        (hops(title='adjacent = "a < b"'), [":1: adjacent", "belongs in [graph]"]),
        (hops(title='where = "a < b"'), ["belongs in [graph] or [instances]"]),
        (hops(vertices='ends = [1]\nvertices = "1..n"'), [":6: [graph] ends", "at the top"]),
        (hops(exists="required = []"), [":13: [answers] required", "at the top"]),
        (hops(n="structure = 'hamiltonian-path'"), [":10: [instances] structure", "at the top"]),
        (hops(exists='exist = "n > 3"'), [":13: [answers] exist", 'did you mean "exists"?']),
        (hops(structure=""), ["structure is missing"]),
        (hops(structure="structure = 'hamiltonian-paht'"), [":3: structure", "did you mean"]),
        (hops(structure="structure = 3"), [":3: structure", "hamiltonian-cycle"]),
        (hops(title="title = 3"), [":1: title", "text"]),
        (hops(statement="statement = ['x']"), [":2: statement", "text"]),
        ('structure = "hamiltonian-path"\n', ["[graph] is missing"]),
        ('structure = "hamiltonian-path"\ngraph = 3\n', [":2: ", "table"]),
        ('structure = "hamiltonian-path"\n[[graph]]\nlist = "x"\n', [":2: ", "table"]),
        (hops(vertices=""), [":5: [graph]", "vertices is missing"]),
        (hops(adjacent=""), [":5: [graph]", "adjacent is missing"]),
        # ranges
        (hops(n='n = "..9"'), [":10: [instances] n", "beginning"]),
        (hops(n='n = ".."'), [":10: [instances] n"]),
        (hops(n='n = "9"'), [":10: [instances] n", "not a range"]),
        (hops(n='n = "1..2..3"'), [":10: [instances] n", "not a range"]),
        (hops(n="n = 1.5"), [":10: [instances] n", "a range is needed"]),
        (hops(n="n = true"), [":10: [instances] n", "a range is needed"]),
        (hops(n="n = [1, 2]"), [":10: [instances] n", "a range is needed"]),
        (hops(n="n = { lo = 1 }"), [":10: [instances] n", "a range is needed"]),
        (hops(n=f"n = {2**53 + 1}"), [":10: [instances] n", "2^53"]),
        (hops(n='n = "9..2"'), [":9: [instances]", "no instance"]),
        (hops(n='n = "2..9"\nwhere = "n > 9"'), [":9: [instances]", "no instance"]),
        (hops(n='n = "1..100001"'), [":9: [instances]", "100,001"]),
        (hops(n='n = "1..10**12"'), [":10: [instances] n", "1,000,000"]),
        (hops(n='n = "1..1000000"\nk = "n..n"'), [":11: [instances] k", "1,000,000"]),
        (hops(n='n = "1..k"\nk = "1..2"'), [":10: [instances] n: last value", '"k"']),
        (hops(n='n = "1..1 // 0"'), [":10: [instances] n: last value", "zero"]),
        (hops(n='n = "1..2"\nk = "1..1 // (n - 2)"'), [":11:", "zero", "instance n=2"]),
        (hops(n='n = "1..2"\nwhere = "1 // (n - 2) < 5"'), [":11:", "zero", "instance n=2"]),
        (hops(n='n = "1..2"\nwhere = "n"'), [":11: [instances] where", "truth value"]),
        (hops(n='n = "1..2"\nwhere = true'), [":11: [instances] where", "text"]),
        (hops(n=""), [":9: [instances]", "no parameter"]),
        (hops(n='a = "1..2"'), [":10: [instances] a", "another name"]),
        (hops(n='square = "1..2"'), [":10: [instances] square", "another name"]),
        (hops(n='if = "1..2"'), [":10: [instances] if", "another name"]),
        (hops(n='"é" = "1..2"'), ["not a name"]),
        (hops(n="\n".join(f"p{i} = 1" for i in range(21))), [":9: [instances]", "too many"]),
        # the rule
        (hops(vertices='vertices = "1..k"'), [":6: [graph] vertices: last value", '"k"', "n"]),
        (hops(vertices='vertices = "1.."'), [":6: [graph] vertices", "endless"]),
        (hops(vertices='vertices = { x = "1..n" }'), [":6: [graph] vertices", "one coordinate"]),
        (hops(vertices="vertices = {}"), [":6: [graph] vertices", "one coordinate"]),
        (hops(vertices='vertices = { x = "1..n", n = 3 }'), [":6: [graph] vertices", '"n"']),
        (hops(vertices='vertices = { x = "1..n", b = 3 }'), [":6: [graph] vertices", "another"]),
        (
            hops(vertices='vertices = { x = "1..n", y = "1.." }'),
            [":6: [graph] vertices", "endless"],
        ),
        (hops(vertices="vertices = [1, 2]"), [":6: [graph] vertices", "a range is needed"]),
        (hops(adjacent='adjacent = "abs(a - c) == 4"'), [":7: [graph] adjacent: column 9", '"c"']),
        (hops(adjacent='adjacent = "a - b"'), [":7: [graph] adjacent", "truth value"]),
        (hops(adjacent="adjacent = true"), [":7: [graph] adjacent", "text"]),
        (hops(adjacent='adjacent = "a<b"\nformat = "edges"'), [":8: [graph] format", "list"]),
        (hops(adjacent='adjacent = "a<b"\nwhere = "b < 3"'), [":8: [graph] where", "no vertex b"]),
        (hops(adjacent='adjacent = "a<b"\nlist = "x.g6"'), [":10: [instances]", "list"]),
        # answers
        (hops(exists='exists = "n"'), [":13: [answers] exists", "truth value"]),
        (hops(exists='exists = "a > 3"'), [":13: [answers] exists", "no vertex a"]),
        (hops(exists='exists = "9 // (n - 7) > 3"'), [":13:", "zero", "instance n=7"]),
        (hops(exists="exists = -1"), [":13: [answers] exists", "count"]),
        (hops(exists="exists = 1.0"), [":13: [answers] exists", "text"]),
        (hops(exists="exists = true\nimpossible = 3"), [":13: [answers] exists", "alone"]),
        (hops(exists='exists = 3\nimpossible = "n < 3"'), [":14: [answers] impossible", "alone"]),
        (hops(exists="exists = true\nimpossible = false"), ["alone"]),
        # vertices that are named
        (hops(title="ends = []"), [":1: ends", "one or two"]),
        (hops(title="ends = [1, 2, 3]"), [":1: ends", "one or two"]),
        (hops(title="ends = 1"), [":1: ends", "one or two"]),
        (hops(title="ends = [1, true]"), [":1: ends: vertex 2", "integer"]),
        (hops(title="ends = [[1]]"), [":1: ends: vertex 1", "integer"]),
        (hops(title="ends = [1.0]"), [":1: ends: vertex 1", "integer"]),
        (hops(title='ends = ["a"]'), [":1: ends: vertex 1", "no vertex a"]),
        (hops(title='ends = ["n < 3"]'), [":1: ends: vertex 1", "an integer"]),
        (hops(title="required = [1, 2]"), [":1: required: edge 1", "two vertices"]),
        (hops(title="required = [[1, 2], [3]]"), [":1: required: edge 2", "two vertices"]),
        (hops(title="forbidden = 3"), [":1: forbidden", "edges"]),
        (hops(title='forbidden = [[1, "q"]]'), [":1: forbidden: edge 1", '"q"']),
        (hops(title=f"ends = [{10**30}]"), [":1: ends: vertex 1", "2^53"]),
        (LEAPS.replace("[1, 1]", "[1, 1, 1]"), [":2: required: edge 1", "2 coordinates [x, y]"]),
        (LEAPS.replace("[1, 1]", "1"), [":2: required: edge 1", "2 coordinates"]),
        (LEAPS.replace("forbidden = []", "ends = [[1, 1]]"), [":3: ends", "hamiltonian-path"]),
        # lists
        (LIST + "[instances]\nn = 3\n", [":7: [instances]", "leave [instances] out"]),
        (LIST.replace("= 474", '= "true"'), [":5: [answers] exists"]),
        (
            LIST.replace("exists = 474\nimpossible = 35", 'exists = "true"'),
            ["count, true or false"],
        ),
        (LIST.replace("lists/", "../"), [":3: [graph] list", '".."']),
        (LIST.replace("lists/", "/"), [":3: [graph] list"]),
        (LIST.replace("lists/", "./"), [":3: [graph] list"]),
        (LIST.replace("lists/", "a//"), [":3: [graph] list"]),
        (LIST.replace("lists/", "a\\\\"), [":3: [graph] list"]),
        (LIST.replace("lists/", "a\\n"), [":3: [graph] list"]),
        (LIST.replace("lists/", "a\\u0000"), [":3: [graph] list"]),
        (LIST.replace("lists/cubic-14.g6", ""), [":3: [graph] list"]),
        (LIST.replace("lists/cubic-14.g6", "evidence.jsonl"), [":3: [graph] list", "kept"]),
        (LIST.replace("lists/cubic-14.g6", "evidence.jsonl.gz"), [":3: [graph] list", "kept"]),
        (LIST.replace("lists/", "clauses/"), [":3: [graph] list", "kept"]),
        (LIST.replace('"lists/cubic-14.g6"', "3"), [":3: [graph] list", "text"]),
        (LIST.replace(".g6", '.g6"\nformat = "grahp6'), [":4: [graph] format", "graph6"]),
        (LIST.replace(".g6", '.g6"\nwhere = "a < 3'), [":4: [graph] where", "choose one"]),
        ('required = [["u", 1.5]]\n' + LIST, [":1: required: edge 1", "name"]),
        ('required = [["u", ["v"]]]\n' + LIST, [":1: required: edge 1", "name"]),
        # TOML
        (HOPS + "n = \n", [":14: column", "not TOML"]),
        (HOPS + "title = 'x", ["not TOML"]),
        (HOPS + "[graph]\n", ["not TOML"]),
        ("title = 1\ntitle = 2\n", [":2:", "not TOML"]),
        ("title = " + "[" * 100_000, ["nested too deeply"]),
        ("title = " + "{a=" * 100_000, ["nested too deeply"]),
        ("a." * 300_000 + "a = 1", [":1: nested too deeply"]),
        ("x = {" + "a." * 300_000 + "a = 1}", [":1: nested too deeply"]),
        ("[" + "a." * 300_000 + "a]", [":1: nested too deeply"]),
        ("[" * 500_000, ["nested too deeply"]),
        ("title = " + "9" * 10_000, ["out of range"]),
        ('title = "' + '\\"' * 400_000, ["not TOML"]),
        ("'''" * 300_001, ["not TOML"]),
        (b"title = '\xff'\n", [":1: this line is not UTF-8"]),
        (b"\n\ntitle = '\xed\xa0\x80'\n", [":3: this line is not UTF-8"]),
        (b"\xef\xbb\xbf" + HOPS.encode(), [":1:", "byte order mark"]),
        (HOPS.encode("utf-16"), [":1:", "UTF-8"]),
        (b"title = '\0'\n", ["not TOML"]),
        (b"", ["structure is missing"]),
        (b"#" * (2**20 + 1), ["1 MiB"]),
    ],
)
def test_refused(tmp_path: Path, text: str | bytes, words: list[str]) -> None:
    message = refusal(tmp_path, text)
    for word in words:
        assert word in message, message


def test_line_of_a_key_in_odd_places(tmp_path: Path) -> None:
    text = (
        "title = '''\nadjacent = 1\n'''\n# [graph]\n"
        'required = [ # ]\n  ["1", 2],\n]\n'
        "\"structure\" = 'hamiltonian-path'\n"
        "graph.vertices = '1..5'\n"
        'graph . "adjacent" = "a <"\n'
    )
    assert refusal(tmp_path, text).startswith("claim.toml:10: [graph] adjacent")
    text = text.replace("'1..5'", "'1..k'")
    assert refusal(tmp_path, text).startswith("claim.toml:9: [graph] vertices")
    text = (
        'structure = "hamiltonian-path"\r\n\r\ngraph = { vertices = "1..3",\tadjacent = "a" }\r\n'
    )
    assert refusal(tmp_path, text).startswith("claim.toml:3: [graph] adjacent")


def test_a_rule_of_several_lines(tmp_path: Path) -> None:
    text = HOPS.replace(
        '"abs(a - b) in {4, 7}"', '"""\n  (abs(a - b) == 4\n   or abs(a - c) == 7)"""'
    )
    assert 'claim.toml:7: [graph] adjacent: line 2, column 15 at "c"' in refusal(tmp_path, text)
    assert read(tmp_path, text.replace("c)", "b)")).structure == "hamiltonian-path"


def test_what_is_no_file(tmp_path: Path) -> None:
    fifo = tmp_path / "fifo"
    os.mkfifo(fifo)
    for path in (tmp_path, tmp_path / "none.toml", Path("a\0b"), fifo, Path("/dev/zero")):
        with pytest.raises(ClaimError):
            read_claim(path)


def test_an_unreadable_integer_is_refused(tmp_path: Path) -> None:
    assert "2^53" in refusal(tmp_path, hops(title="ends = [" + "9" * 4000 + "]"))


@settings(deadline=None)
@given(st.binary(max_size=80), st.integers(0, len(HOPS)))
def test_any_bytes_are_read_or_refused(
    tmp_path_factory: pytest.TempPathFactory, noise: bytes, at: int
) -> None:
    raw = HOPS.encode()
    path = written(tmp_path_factory.getbasetemp(), raw[:at] + noise + raw[at:])
    try:
        found = read_claim(path).raw.decode()
    except ClaimError as error:
        found = str(error)
    assert HOPS[:at] in found or found.startswith(f"{path}:")
