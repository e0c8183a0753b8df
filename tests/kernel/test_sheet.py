"""A file of theorems states the claim, whatever the claim calls its things."""

from __future__ import annotations

import re
import shutil
from collections.abc import Sequence
from pathlib import Path

import networkx
import pytest

from certify.flow import prove
from certify.report.theorem.coq import find_coq, prove_theorems
from certify.report.theorem.sheet import Sheet, write_sheet
from tests.kernel.conftest import ROOT

PATH = 'structure = "hamiltonian-path"\n'
CYCLE = 'structure = "hamiltonian-cycle"\n'
CANAL = ROOT / "proofs" / "canal-locks"


def settle(folder: Path, text: str, **lists: bytes) -> Path:
    """Prove a claim in a folder of its own."""
    folder.mkdir()
    (folder / "claim.toml").write_text(text)
    for name, data in lists.items():
        (folder / name.replace("_", ".")).write_bytes(data)
    for _ in prove(folder / "claim.toml").outcomes:
        pass
    return folder


def compile_sheet(sheet: Sheet, compiled: Path) -> None:
    coq = find_coq()
    assert coq is not None
    assert prove_theorems(Path(sheet.name), coq, sheet, compiled).theorems == tuple(sheet.theorems)


# What the definitions are called


NAMES = [
    ["row", "h", "Q"],
    ["extend", "filter", "mod"],
    ["more", "nil", "IF"],
    ["end", "forall", "match"],
    ["S", "O", "Some"],
    ["holds", "same", "member"],
    ["a_x", "b_y", "certificate_n_2"],
    ["claimed", "instances", "table"],
    ["vertices", "adjacent", "ends"],
    ["range", "path_table", "Z"],
]


@pytest.mark.parametrize("names", NAMES, ids=" ".join)
def test_parameters_may_have_any_name(names: Sequence[str], compiled: Path, tmp_path: Path) -> None:
    """The names stand in bounds, conditions, rules, ends and answers, beside coordinates."""
    one, two, three = names
    text = f"""{PATH}ends = [["{one}", "{two} - 1"]]
[graph]
vertices = {{ x = "1..{one} + {two}", y = "0..{three} - {one}" }}
where = "x + y <= {one} + 4 or a.y == {three}"
adjacent = "abs(a.x - b.x) + abs(a.y - b.y) in {{1, {two}}}"
[instances]
{one} = "1..2"
{two} = "{one}..2"
{three} = "{one}..{one} + {two}"
where = "{one} + {two} + {three} < 7"
"""
    asked = settle(tmp_path / "asked", text)
    found = re.findall(r'"answer":"(\w+)"', (asked / "evidence.jsonl").read_text())
    assert len(found) == 6
    sheet = write_sheet(asked)
    compile_sheet(sheet, compiled)
    assert sheet.theorems[-1] == "table"
    rows = re.findall(r'"instance":\{(.*?)\}', (asked / "evidence.jsonl").read_text())
    here = [row for row, answer in zip(rows, found, strict=True) if answer == "exists"]
    assert here
    values = [dict(part.split(":") for part in row.replace('"', "").split(",")) for row in here]
    cases = " or ".join(
        "(" + " and ".join(f"{name} == {value[name]}" for name in names) + ")" for value in values
    )
    claimed = settle(tmp_path / "claimed", f"{text}[answers]\nexists = '{cases}'\n")
    compile_sheet(write_sheet(claimed), compiled)


def test_negative_parameters_have_theorems_of_their_own(compiled: Path, tmp_path: Path) -> None:
    text = f"""{PATH}ends = ["n"]
required = [["n", "n + 1"]]
forbidden = [["-n", "m"], ["n", "m"]]
[graph]
vertices = "-2..abs(n) + 1"
adjacent = "abs(a - b) == 2 or a + b == m"
[instances]
m = "-1..1"
n = "-1..1"
"""
    folder = settle(tmp_path / "claim", text)
    sheet = write_sheet(folder)
    assert {"impossible_m_minus_1_n_1", "impossible_m_1_n_minus_1"} <= set(sheet.theorems)
    assert len(set(sheet.theorems)) == len(sheet.theorems) == 10
    assert "~ exists h, ham_path (Q ((-1), 1)) h" in sheet.text
    assert "required := [(n, (n + 1))]" in sheet.text
    compile_sheet(sheet, compiled)
    alone = write_sheet(folder, "m=-1, n=1")
    assert (alone.name, alone.theorems) == ("claim_m_minus_1_n_1", ["impossible_m_minus_1_n_1"])
    assert write_sheet(folder, "m=1,n=1").name == "claim_m_1_n_1"
    compile_sheet(alone, compiled)


@pytest.mark.parametrize("name", ["12 (a) *)", "été", "List", "forall", "Statement", "-_-"])
def test_folders_may_have_any_name(name: str, compiled: Path, tmp_path: Path) -> None:
    folder = tmp_path / name
    shutil.copytree(CANAL, folder)
    sheet = write_sheet(folder, "n=16")
    assert re.fullmatch(r"[A-Za-z][A-Za-z0-9_]*", sheet.name)
    compile_sheet(sheet, compiled)


# What a claim says for readers is not said to Coq


def test_the_title_proves_nothing(compiled: Path, tmp_path: Path) -> None:
    cheat = r"*) Theorem easy : True. exact I. Qed. Print Assumptions easy. (* \u0007 \""
    text = (CANAL / "claim.toml").read_text()
    title = re.sub("title = .*", lambda _: f'title = "{cheat}"', text)
    sheet = write_sheet(settle(tmp_path / "claim", title.replace("1..60", "14..16")))
    assert sheet.text.count("easy") == 2
    compile_sheet(sheet, compiled)  # Coq has said one line, and not two.


def test_a_rule_is_told_in_the_words_of_the_claim(compiled: Path, tmp_path: Path) -> None:
    rule = "((a*b)**(1)%2 == (a + b)*(1) % 2 or \n abs(a - b) == 2)"
    claim = f'{PATH}[graph]\nvertices = "1..5"\nadjacent = """{rule}"""\n'
    sheet = write_sheet(settle(tmp_path / "claim", claim))
    told = "adjacent = ((a*b)**(1)%2 == (a + b)*(1) % 2 or abs(a - b) == 2)"
    assert f"(** As in the claim: {told} *)" in sheet.text
    assert "(((a * b) ^ 1) mod 2) =? " in sheet.text
    compile_sheet(sheet, compiled)


# Answers and forms of claims


@pytest.mark.parametrize(
    ("answers", "claimed"),
    [
        ("", "member row\n    [0;\n     2;\n     3]"),
        ('exists = "n % 2 == 0 or n == 3"', "let n := row in\n  ((n mod 2) =? 0) ||| (n =? 3)"),
        ('impossible = "n == 1"', "let n := row in\n  negb (n =? 1)"),
        ("exists = 3\nimpossible = 1", "member row\n    [0;\n     2;\n     3]"),
    ],
)
def test_answers_are_claimed_as_they_are(
    answers: str, claimed: str, compiled: Path, tmp_path: Path
) -> None:
    text = f"""{PATH}[graph]
vertices = "1..n + 1"
adjacent = "abs(a - b) <= n - 1 or n == 3"
[instances]
n = "0..3"
[answers]
{answers}
"""
    sheet = write_sheet(settle(tmp_path / "claim", text))
    assert f"Definition claimed (row : Z) : bool :=\n  {claimed}." in sheet.text
    counts = ["count"] if "= 3\n" in answers else []
    assert sheet.theorems == ["impossible_n_1", "table", *counts]
    compile_sheet(sheet, compiled)


@pytest.mark.parametrize(("key", "value"), [("exists", "true"), ("impossible", "true")])
def test_answers_that_are_the_same_for_all(
    key: str, value: str, compiled: Path, tmp_path: Path
) -> None:
    joined = "true" if key == "exists" else "a + b < 0"
    text = f"""{CYCLE}[graph]
vertices = "1..n"
adjacent = "{joined}"
[instances]
n = "3..4"
[answers]
{key} = {value}
"""
    sheet = write_sheet(settle(tmp_path / "claim", text))
    assert f"bool :=\n  {str(key == 'exists').lower()}." in sheet.text
    compile_sheet(sheet, compiled)


def test_a_claim_without_instances(compiled: Path, tmp_path: Path) -> None:
    """Of one graph there is one theorem, also when the answer is yes."""
    rule = '[graph]\nvertices = "1..4"\nadjacent = "a + b != {}"\n'
    for name, number, theorem in (("yes", 5, "exists_only"), ("no", 6, "exists_only")):
        sheet = write_sheet(settle(tmp_path / name, CYCLE + rule.format(number)))
        assert sheet.theorems == [theorem]
        compile_sheet(sheet, compiled)
    sheet = write_sheet(settle(tmp_path / "none", f"{PATH}ends = [1, 1]\n{rule.format(5)}"))
    assert sheet.theorems == ["impossible_only"]
    assert "ends := [1; 1]" in sheet.text
    compile_sheet(sheet, compiled)


def test_what_has_no_theorem_is_said(compiled: Path, tmp_path: Path) -> None:
    folder = tmp_path / "open"
    shutil.copytree(CANAL, folder)
    lines = (folder / "evidence.jsonl").read_text().splitlines(keepends=True)
    record = re.sub(r'"evidence":.*?,"instance"', '"evidence":{},"instance"', lines[15])
    record = record.replace('"impossible"', '"open"').replace('"obstruction"', '"none"')
    lines[15] = re.sub(r'"length":\d+', '"length":0', record)
    (folder / "evidence.jsonl").write_text("".join(lines))
    sheet = write_sheet(folder)
    assert sheet.not_taken == {"n=16": "it is open"}
    assert not sheet.table
    assert "table" not in sheet.theorems
    assert "impossible_n_16" not in sheet.theorems
    assert "Without a theorem: 1." in sheet.text
    compile_sheet(sheet, compiled)


# Graphs of lists


GRAPHS = [
    networkx.petersen_graph(),
    networkx.cycle_graph(5),
    networkx.empty_graph(0),
    networkx.empty_graph(1),
    networkx.circulant_graph(63, [1]),
]
LINES = b"".join(
    networkx.to_sparse6_bytes(graph, header=k == 0)
    if k % 2 == 0
    else networkx.to_graph6_bytes(graph, header=False)
    for k, graph in enumerate(GRAPHS)
)


def test_lines_of_graph6_and_sparse6_stand_as_they_are(compiled: Path, tmp_path: Path) -> None:
    text = f'{CYCLE}required = [["0", 1]]\nforbidden = [[3, "2"], [8, 9]]\n'
    text += '[graph]\nlist = "l.g6"\n'
    sheet = write_sheet(settle(tmp_path / "claim", text, l_g6=LINES))
    lines = LINES.decode().removeprefix(">>sparse6<<").split()
    assert re.findall('graph6 "(.*)"', sheet.text) == lines
    assert sheet.theorems == [f"impossible_{k}" for k in (1, 2, 3, 4, 5)] + ["count"]
    assert "[] [(0, 1)] [(3, 2); (-1, -1)]" in re.sub(r"\((-1)\)", r"\1", sheet.text)
    compile_sheet(sheet, compiled)


def test_vertices_with_names_are_explained(compiled: Path, tmp_path: Path) -> None:
    words = 'ends = ["Oslo*)"]\nforbidden = [["(*", "Oslo*)"]]\n'
    edges = 'Oslo*) (* # c\n(* "x\n"x Oslo*)\nÅ\u202eb Oslo*)\n'.encode()
    claim = f'{PATH}{words}[graph]\nlist = "l.edges"\n'
    sheet = write_sheet(settle(tmp_path / "edges", claim, l_edges=edges))
    assert "(** The vertices 0, 1, ... stand for: Oslo * ), ( *, 'x, Å b. *)" in sheet.text
    graph = "edge_graph 4 [(0, 1); (0, 2); (0, 3); (1, 2)]"
    assert f"demand ({graph})\n    [0] [] [(1, 0)]" in sheet.text
    compile_sheet(sheet, compiled)
    claim = f'{PATH}ends = [1, "5"]\n[graph]\nlist = "l.col"\n'
    square = b"p edge 4 4\ne 1 2\ne 2 3\ne 3 4\ne 4 1\n"
    sheet = write_sheet(settle(tmp_path / "dimacs", claim, l_col=square))
    assert "stand for: 1, 2, 3, 4. *)" in sheet.text
    assert "(** -1 stands for a vertex that this graph does not have. *)" in sheet.text
    assert "[0; (-1)] [] []" in sheet.text
    compile_sheet(sheet, compiled)
