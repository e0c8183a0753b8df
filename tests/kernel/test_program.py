"""Folders of evidence before the kernel's program: what it accepts, and their corrupted twins.

What it is shown of a record is all but `length`, and of a sweep not `states` and `digest`; of a
clause proof the facts and the LRAT file (it makes the clauses from the facts). Of the rest of
what is changed here it says what the checker says.
"""

from __future__ import annotations

import gzip
import json
import re
import shutil
import tempfile
from collections import Counter
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.checker import check_folder
from certify.checker.records import measure
from certify.claim.claim import read_claim
from certify.evidence.sweep import Sweep
from certify.graph.build import build_question, instances
from certify.report.kernel.ask import ask_kernel
from certify.search.sweep import sweep_along
from tests.checker.folders import (
    CLAIM,
    LIST,
    LIST_CLAIM,
    Files,
    lines_of,
    make_folder,
    read_files,
    with_lines,
    write_files,
)
from tests.checker.test_truth import AMPLE
from tests.corrupt import corrupt_bytes, corrupt_json
from tests.kernel.asking import write_example
from tests.kernel.conftest import ROOT

FOLDERS = [path for path in sorted((ROOT / "proofs").iterdir()) if not path.name.startswith(".")]
KINDS = ["witness", "obstruction", "counting", "cases", "sweep", "clauses"]


def ask(folder: Path, program: Path) -> dict[str, str]:
    return {opinion.name: opinion.verdict for opinion in ask_kernel(folder, program)}


def judge(folder: Path) -> dict[str, str]:
    """Return what the checker says of the evidence, whatever the claim says."""
    return {
        str(verdict.instance): "accepted" if verdict.holds else "rejected"
        for verdict in check_folder(folder).verdicts()
    }


@pytest.mark.parametrize("folder", FOLDERS, ids=lambda path: path.name)
def test_all_evidence_for_finite_claims_is_accepted(folder: Path, program: Path) -> None:
    verdicts = Counter(ask(folder, program).values())
    endless = '.."' in (folder / "claim.toml").read_text().split("[instances]")[-1]
    assert set(verdicts) == ({"not taken"} if endless else {"accepted"})
    assert verdicts.total() == len(list(check_folder(folder).verdicts()))


@pytest.mark.parametrize("kind", KINDS)
def test_worked_examples_are_accepted(kind: str, program: Path, tmp_path: Path) -> None:
    assert list(ask(write_example(tmp_path / "folder", kind), program).values()) == ["accepted"]


def genuine() -> Iterator[tuple[str, Files]]:
    with tempfile.TemporaryDirectory() as scratch:
        for kind in KINDS:
            yield kind, read_files(write_example(Path(scratch) / kind, kind))
        yield "a tree", read_files(write_example(Path(scratch) / "tree", "cases", 1))
        yield "a rule", read_files(make_folder(Path(scratch) / "rule", CLAIM))
        yield "a list", read_files(make_folder(Path(scratch) / "list", LIST_CLAIM, graphs_g6=LIST))
        for name in ("canal-locks", "product-plus-one"):
            shutil.copytree(ROOT / "proofs" / name, Path(scratch) / name)
            yield name, read_files(Path(scratch) / name)


GENUINE = dict(genuine())


def both(files: Files, program: Path) -> tuple[list[str], list[str]]:
    """Return what kernel and checker say, instance by instance."""
    with tempfile.TemporaryDirectory() as scratch:
        folder = write_files(Path(scratch), files)
        return list(ask(folder, program).values()), list(judge(folder).values())


def restate(files: Files, record: Any) -> Any:
    """Return a record with the numbers put right that the kernel does not look at."""
    body = record["evidence"]
    if record["kind"] == "sweep":
        with tempfile.TemporaryDirectory() as scratch:
            folder = write_files(Path(scratch), files)
            claim = read_claim(folder / "claim.toml")
            (question,) = (
                build_question(claim, instance.key, instance.graph)
                for instance in instances(claim, folder)
                if instance.key == record["instance"]
            )
        found = sweep_along(question, body["order"], budget=AMPLE)
        assert isinstance(found, Sweep)
        body = found.body()
    return record | {"evidence": body, "length": measure(record["kind"], body)}


@pytest.mark.parametrize("name", GENUINE)
def test_corrupted_records_are_judged_alike(name: str, program: Path) -> None:
    files = GENUINE[name]
    records = lines_of(files)
    assert both(files, program) == (["accepted"] * len(records),) * 2
    seen: Counter[str] = Counter()

    @settings(max_examples=60)
    @given(st.data())
    def run(data: st.DataObject) -> None:
        at = data.draw(st.integers(0, len(records) - 1))
        twin = data.draw(corrupt_json(records[at]))
        told, judged = both(with_lines(files, [*records[:at], twin, *records[at + 1 :]]), program)
        seen[told[at]] += 1
        if told != judged:
            # Only the kernel accepts; so does the checker when the rest is put right.
            assert told[at] == "accepted"
            twin = restate(files, twin)
            again = with_lines(files, [*records[:at], twin, *records[at + 1 :]])
            assert both(again, program) == (told, told)
            seen["restated"] += 1

    run()
    assert seen["rejected"] >= 25, seen


@pytest.mark.parametrize("form", ["cnf", "lrat", "drat"])
def test_corrupted_clause_proofs_are_judged_alike(form: str, program: Path) -> None:
    files = GENUINE["a rule"]
    seen: Counter[str] = Counter()
    name = f"clauses/n=7.{form}.gz"
    content = gzip.decompress(files[name])

    @settings(max_examples=150)
    @given(corrupt_bytes(content))
    def run(twin: bytes) -> None:
        told = both(files | {name: gzip.compress(twin, mtime=0)}, program)
        if told[0] == told[1]:
            seen["rejected" if "rejected" in told[0] else "accepted"] += 1
            return
        assert told[0] == ["accepted"] * 5
        assert form != "lrat"
        if form == "cnf":
            kept = [line for line in twin.split(b"\n") if line.startswith(b"c ")]
            assert kept == [line for line in content.split(b"\n") if line.startswith(b"c ")]
        seen["hidden"] += 1

    run()
    assert seen["rejected"] >= (30 if form != "drat" else 0), seen
    assert bool(seen["hidden"]) == (form != "lrat"), seen


DEMANDS = """
ends = [1]|ends = [2]|ends = [1, "n"]|ends = ["n", 1]|ends = [3, 3]|ends = [0]|ends = [1, "n - 1"]
required = [[1, 2]]|required = [[2, 1], ["n", "n - 2"]]|required = [[1, 1]]|required = [[1, 4]]
forbidden = [[1, 2]]|forbidden = [["n", "n - 1"], [3, 1]]|forbidden = [[1, 1], [9, 9]]
ends = [1]; required = [[1, 2]]|required = [[1, 2]]; forbidden = [[2, 1]]
ends = [2]; forbidden = [[2, 1], [2, 3]]|ends = [1, "n"]; required = [[1, 3]]; forbidden = [[2, 4]]
"""
STRIP = """structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "abs(a - b) in {1, 2}"
[instances]
n = "1..6"
"""


def test_what_is_asked_is_what_is_judged(program: Path) -> None:
    """Evidence for a question with some demands is given for a question with others."""
    texts = [STRIP, STRIP.replace("path", "cycle")]
    for demand in re.split(r"[|\n]", DEMANDS.strip()):
        head = "".join(f"{line}\n" for line in demand.split("; "))
        texts.append(head + STRIP)
        if "ends" not in demand:
            texts.append(head + STRIP.replace("path", "cycle"))
    with tempfile.TemporaryDirectory() as scratch:
        made = [
            read_files(make_folder(Path(scratch) / f"{i}", text)) for i, text in enumerate(texts)
        ]
    told: Counter[str] = Counter()
    for files, text in zip(made, texts, strict=True):
        assert both(files, program) == (["accepted"] * 6, ["accepted"] * 6), text
        for other in texts[:: 1 + len(texts) // 9]:
            verdicts, judged = both(files | {"claim.toml": other.encode()}, program)
            assert verdicts == judged, (text, other)
            told.update(verdicts)
    assert min(told["accepted"], told["rejected"]) >= 100, told


def test_lines_that_are_missing_swapped_or_too_many(program: Path) -> None:
    files = GENUINE["a rule"]
    records = lines_of(files)
    for twin in (records[:-1], records[1:], [*records, records[-1]], records[::-1], []):
        told, judged = both(with_lines(files, twin), program)
        assert "rejected" in told
        assert told[: len(records)] == judged[: len(records)]
    swapped = [record | {"evidence": records[-1]["evidence"]} for record in records]
    assert both(with_lines(files, swapped), program)[0].count("accepted") == 1


def test_an_open_instance_is_not_taken(program: Path) -> None:
    files = GENUINE["a rule"]
    records = lines_of(files)
    records[0] |= {"answer": "open", "kind": "none", "evidence": {}, "length": 0}
    assert both(with_lines(files, records), program)[0][0] == "not taken"


def test_files_are_read_only_where_they_belong(program: Path, tmp_path: Path) -> None:
    files = GENUINE["a rule"]
    records = lines_of(files)
    records[2]["evidence"]["lrat"] = "../outside.lrat.gz"
    (tmp_path / "outside.lrat.gz").write_bytes(files["clauses/n=7.lrat.gz"])
    folder = write_files(tmp_path / "folder", with_lines(files, records), sign=False)
    assert ask(folder, program)["n=7"] == "rejected"


def test_numbers_of_any_size_are_numbers(program: Path) -> None:
    """No machine word overflows: what is right stays right for weights of 90 digits."""
    files = GENUINE["counting"]
    (record,) = lines_of(files)
    for factor, verdict in ((10**90, "accepted"), (2**62, "accepted"), (10**101, "rejected")):
        vertex = [[v, y * factor] for v, y in record["evidence"]["vertex"]]
        twin = json.loads(json.dumps(record))
        twin["evidence"]["vertex"] = vertex
        assert both(with_lines(files, [twin]), program) == ([verdict], [verdict])
        vertex[0][1] *= 2
        twin["evidence"]["vertex"] = vertex
        assert both(with_lines(files, [twin]), program) == (["rejected"], ["rejected"])
