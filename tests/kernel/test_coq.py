"""The kernel compiles, assumes nothing, and proves nothing that is not so.

A file of theorems that is made from evidence compiles; made from a corrupted twin of the
evidence, or for another graph, it does not.
"""

from __future__ import annotations

import re
import shutil
import subprocess
from pathlib import Path

import pytest

from certify.report.theorem.sheet import write_sheet
from tests.checker.folders import (
    CLAIM,
    LIST,
    LIST_CLAIM,
    Files,
    lines_of,
    make_folder,
    read_files,
    repack,
    with_lines,
    write_files,
)
from tests.kernel.asking import write_example
from tests.kernel.conftest import ROOT

KERNEL = ROOT / "certify" / "kernel"
CLOSED = "Closed under the global context\n"


def test_the_order_names_every_file_after_those_it_needs() -> None:
    order = (KERNEL / "order.txt").read_text().split()
    files = {path.stem for path in KERNEL.glob("*.v")}
    assert sorted(order) == sorted(files - {"Extract"})
    for place, name in enumerate(order):
        text = (KERNEL / f"{name}.v").read_text()
        for words in re.findall(r"From Certify Require (?:Import |Export )?([\w\s]+)\.", text):
            assert set(words.split()) <= set(order[:place]), name


def test_the_kernel_compiles_and_assumes_nothing(compiled: Path) -> None:
    assert (compiled / "assumed").read_text() == CLOSED
    assert "* Axioms: <none>\n" in (compiled / "checked").read_text()
    theorems = re.findall(r"let _ := @Certify\.([\w.']+) in", (compiled / "all.v").read_text())
    sound = {"Certificate.path_answer", "Certificate.cycle_answer", "Table.path_table"}
    assert sound | {"Table.cycle_table", "Extract.shows_path_sound"} <= set(theorems)


CHEATS = {
    "Admitted": ("Theorem one : False.\nAdmitted.\n", "such words have no place"),
    "an axiom": ("Axiom cheat : False.\n", "such words have no place"),
    "a variable outside a section": (
        "Variable cheat : False.\nTheorem one : False.\nProof. exact cheat. Qed.\n",
        "a theorem assumes something",
    ),
    "one that no theorem uses": ("Variable cheat : False.\n", "coqchk finds something"),
    "a guard that is off": (
        "#[bypass_check(guard)] Fixpoint loop (n : nat) : False := loop n.\n",
        "such words have no place",
    ),
    "an untrue theorem": ("Theorem one : False.\nProof. exact I. Qed.\n", "Coq refuses it"),
    "another program": ('Require Import Extraction.\nExtraction "kernel.ml" app.\n', "kernel.ml"),
    "nothing": ("Theorem one : True.\nProof. exact I. Qed.\n", ""),
}


@pytest.mark.parametrize("name", CHEATS)
def test_the_script_finds_what_is_assumed(name: str, compiled: Path, tmp_path: Path) -> None:
    text, complaint = CHEATS[name]
    kernel = tmp_path / "certify" / "kernel"
    (kernel / "tests").mkdir(parents=True)
    (tmp_path / "scripts").mkdir()
    script = shutil.copy(ROOT / "scripts" / "kernel", tmp_path / "scripts" / "kernel")
    extract = 'Require Import Extraction.\nExtraction "kernel.ml" negb.\n'
    (kernel / "Extract.v").write_text(extract)
    subprocess.run(["coqc", "-q", "Extract.v"], cwd=kernel, check=True, capture_output=True)
    (kernel / ("Extract.v" if "program" in name else "One.v")).write_text(text)
    (kernel / "tests" / "Two.v").write_text("Example two : 1 = 1.\nProof. reflexivity. Qed.\n")
    done = subprocess.run([script], capture_output=True, text=True, check=False)
    assert complaint in done.stderr
    assert done.returncode == (3 if complaint else 0), done.stderr


def prove(folder: Path, compiled: Path) -> bool:
    """Return whether Coq proves the theorems of a folder's evidence; all of it must be stated."""
    sheet = write_sheet(folder)
    assert not sheet.not_taken
    assert sheet.theorems
    scratch = folder.with_name(f"theorems-{folder.name}")
    scratch.mkdir()
    (scratch / "Theorems.v").write_text(sheet.text)
    done = subprocess.run(
        ["coqc", "-q", "-Q", compiled, "Certify", "Theorems.v"],
        cwd=scratch,
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode in (0, 1), done.stderr
    if done.returncode:
        # Refused for what it says, not for how it is written.
        assert re.search(r"has type|Unable to unify|Cannot", done.stderr), done.stderr
        return False
    assert done.stdout == CLOSED * done.stdout.count("\n")
    return True


def change(files: Files, old: bytes, new: bytes, name: str = "evidence.jsonl") -> Files:
    data = files[name]
    if name.endswith(".gz"):
        return files | {name: repack(data, old, new)}
    assert old in data
    return files | {name: data.replace(old, new, 1)}


TWINS = [
    ("obstruction", b'"set":[0,1]', b'"set":[0,2]'),
    ("counting", b"[1,-1]", b"[1,1]"),
    ("sweep", b'"order":[2,1,4,0,3]', b'"order":[2,1,4,0,4]'),
    ("cases", b'[["forced"]]', b'[["edge",0,2],["forced"]]'),
    ("clauses", b"11 0 7 5 4 9 0", b"11 0 7 5 4 8 0"),
]


@pytest.mark.parametrize(("kind", "old", "new"), TWINS, ids=[twin[0] for twin in TWINS])
def test_a_theorem_of_each_kind(
    kind: str, old: bytes, new: bytes, compiled: Path, tmp_path: Path
) -> None:
    """K(2, 3): its evidence proves it; a twin of it does not, nor does it prove it of others."""
    folder = write_example(tmp_path / "good", kind)
    assert prove(folder, compiled)
    files = read_files(write_example(tmp_path / "again", kind))
    name = "clauses/only.lrat.gz" if kind == "clauses" else "evidence.jsonl"
    twins = {"twin": change(files, old, new, name)}
    # With all edges between the two and the three, and two more among the three, it has a cycle.
    more = b"(a <= 2) != (b <= 2) or a + b == 7 or a + b == 8"
    rule = b"(a <= 2) != (b <= 2)"
    twins["another graph"] = change(files, rule, more, "claim.toml")
    for name, twin in twins.items():
        assert not prove(write_files(tmp_path / name, twin), compiled), name


def test_facts_that_are_untrue(compiled: Path, tmp_path: Path) -> None:
    files = read_files(write_example(tmp_path / "good", "clauses"))
    header = b"p cnf"
    for fact in (
        b"c fact mirror 12 1 2 0 3 4\n",
        b"c fact required 0 2\n",
        b"c fact cut 0 1 2 3 4\n",
    ):
        name = "clauses/only.cnf.gz"
        twin = change(files, header, fact + header, name)
        assert not prove(write_files(tmp_path / fact.split()[2].decode(), twin), compiled)


def test_instances_are_not_swapped(compiled: Path, tmp_path: Path) -> None:
    folder = make_folder(tmp_path / "good", CLAIM)
    files = read_files(folder)
    assert prove(folder, compiled)
    records = lines_of(files)
    records[1]["evidence"], records[3]["evidence"] = records[3]["evidence"], records[1]["evidence"]
    assert not prove(write_files(tmp_path / "swapped", with_lines(files, records)), compiled)
    # n = 5 has a Hamiltonian cycle: no certificate says that it has none.
    records = lines_of(files)
    records[0] |= {key: records[1][key] for key in ("answer", "kind", "evidence")}
    assert not prove(write_files(tmp_path / "untrue", with_lines(files, records)), compiled)


def test_a_table_says_what_is_so(compiled: Path, tmp_path: Path) -> None:
    files = read_files(make_folder(tmp_path / "good", CLAIM))
    twin = change(files, b"n == 5", b"n == 6", "claim.toml")
    assert not prove(write_files(tmp_path / "claimed", twin), compiled)
    folder = make_folder(tmp_path / "list", LIST_CLAIM, graphs_g6=LIST)
    assert prove(folder, compiled)
    files = read_files(folder)
    records = lines_of(files)
    order = records[2]["evidence"]["order"]  # of a ring
    order[0], order[2] = order[2], order[0]
    assert not prove(write_files(tmp_path / "witness", with_lines(files, records)), compiled)
    twin = change(files, b"C~\n", b"C]\n", "graphs.g6")
    assert not prove(write_files(tmp_path / "graph", twin), compiled)
