"""Folders: what is accepted, and what a hostile or careless hand can do to them.

A changed folder is rejected, or what is accepted is still true; never a traceback.
"""

from __future__ import annotations

import gzip
import hashlib
import json
import os
import re
import tempfile
from collections import Counter
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certify.checker import check_folder
from certify.checker.__main__ import main
from certify.checker.claims import Claim
from certify.graph.question import Question
from tests.brute import has_cycle
from tests.checker.folders import (
    CLAIM,
    LIST,
    LIST_CLAIM,
    Files,
    check,
    lines_of,
    make_folder,
    read_files,
    repack,
    with_lines,
    write_files,
)
from tests.corrupt import corrupt_bytes, corrupt_json


@pytest.fixture(scope="module")
def good(tmp_path_factory: pytest.TempPathFactory) -> Files:
    """The files of an accepted folder: witnesses, an obstruction, two clause proofs."""
    folder = make_folder(tmp_path_factory.mktemp("good"))
    assert check(folder) == (True, "")
    files = read_files(folder)
    assert {record["kind"] for record in lines_of(files)} == {"witness", "obstruction", "clauses"}
    return files


@pytest.fixture(scope="module")
def listed(tmp_path_factory: pytest.TempPathFactory) -> Files:
    """The files of an accepted folder with a list of graphs."""
    folder = make_folder(tmp_path_factory.mktemp("listed"), LIST_CLAIM, graphs_g6=LIST)
    assert check(folder) == (True, "")
    return read_files(folder)


def test_the_folders_are_accepted(good: Files, listed: Files, tmp_path: Path) -> None:
    folders = [write_files(tmp_path / "a", good), write_files(tmp_path / "b", listed)]
    assert main([str(folder) for folder in folders]) == 0


def truth_of(files: Files) -> bool:
    """Return whether what the claim says, if anything, is true, by exhaustion."""
    claim = Claim(files["claim.toml"])
    counts: Counter[str] = Counter()
    for key, graph in claim.instances(files.__getitem__):
        asked = claim.question(key, graph)
        question = Question(
            asked.n, tuple(sorted(asked.edges)), frozenset(asked.required),
            asked.n - 1 if asked.path else None, asked.absent,
        )  # fmt: skip
        exists = question.is_one_vertex_path or has_cycle(question)
        counts["exists" if exists else "impossible"] += 1
        if claim.claimed(key) not in (None, exists):
            return False
    return all(counts[answer] == count for answer, count in claim.counts.items())


def judge(files: Files, *, sign: bool) -> bool:
    """Check files; say whether they are accepted, which must be true."""
    with tempfile.TemporaryDirectory() as name:
        folder = write_files(Path(name), files, sign=sign)
        accepted, said = check(folder)
        assert main([name]) == (0 if accepted else 4 if main([name]) == 4 else 3)
    assert accepted or said
    if accepted:
        assert truth_of(files)
    return accepted


@pytest.mark.parametrize("sign", [False, True], ids=["same manifest", "fitting manifest"])
@pytest.mark.parametrize("which", ["good", "listed"])
def test_damaged_files_are_rejected_or_true(
    sign: bool, which: str, request: pytest.FixtureRequest, capsys: pytest.CaptureFixture[str]
) -> None:
    files: Files = request.getfixturevalue(which)
    seen: Counter[bool] = Counter()

    @settings(max_examples=80)
    @given(st.data())
    def run(data: st.DataObject) -> None:
        name = data.draw(st.sampled_from(sorted(files)))
        damaged = dict(files)
        match data.draw(st.sampled_from(["bytes", "bytes", "text", "swap", "drop", "add", "copy"])):
            case "bytes":
                damaged[name] = data.draw(corrupt_bytes(files[name]))
            case "text" if name.endswith(".gz"):
                text = data.draw(corrupt_bytes(gzip.decompress(files[name])))
                damaged[name] = gzip.compress(text, mtime=0)
            case "swap":
                other = data.draw(st.sampled_from(sorted(files)))
                damaged[name], damaged[other] = damaged[other], damaged[name]
            case "drop":
                del damaged[name]
            case "add":
                damaged["clauses/more.txt"] = b"x"
            case "copy":
                damaged[name] = files[data.draw(st.sampled_from(sorted(files)))]
        # Whatever else may be accepted: without a fitting manifest only what was there.
        accepted = judge(damaged, sign=sign)
        if accepted and not sign:
            assert {name: damaged[name] for name in files if name != "manifest.json"} == {
                name: files[name] for name in files if name != "manifest.json"
            }
        seen[accepted] += 1
        capsys.readouterr()

    run()
    assert seen[False] >= 40, seen


def test_damaged_records_are_rejected_or_true(
    good: Files, capsys: pytest.CaptureFixture[str]
) -> None:
    records = lines_of(good)
    seen: Counter[bool] = Counter()

    @settings(max_examples=120)
    @given(st.data())
    def run(data: st.DataObject) -> None:
        changed = list(records)
        at = data.draw(st.integers(0, len(records) - 1))
        match data.draw(st.sampled_from(["part", "part", "part", "swap", "drop", "double"])):
            case "part":
                changed[at] = data.draw(corrupt_json(records[at]))
            case "swap":
                other = data.draw(st.integers(0, len(records) - 1))
                changed[at], changed[other] = changed[other], changed[at]
            case "drop":
                del changed[at]
            case "double":
                changed.insert(at, changed[at])
        files = with_lines(good, changed)
        seen[judge(files, sign=True)] += files != good
        capsys.readouterr()

    run()
    assert seen[False] >= 60, seen


Change = Callable[[Files], Files]


def edit(name: str, old: bytes, new: bytes) -> Change:
    def change(files: Files) -> Files:
        assert old in files[name]
        return files | {name: files[name].replace(old, new, 1)}

    return change


def record(at: int, **parts: Any) -> Change:
    def change(files: Files) -> Files:
        records = lines_of(files)
        records[at] = {**records[at], **parts}
        return with_lines(files, records)

    return change


def packed(change: Callable[[bytes], bytes], form: str = "lrat") -> Change:
    return lambda files: files | {f"clauses/n=7.{form}.gz": change(files[f"clauses/n=7.{form}.gz"])}


def manifest(**parts: Any) -> Change:
    return lambda files: (
        files | {"manifest.json": json.dumps(json.loads(files["manifest.json"]) | parts).encode()}
    )


def renamed(old: str, new: str) -> Change:
    return lambda files: {new if name == old else name: data for name, data in files.items()}


def without(name: str) -> Change:
    return lambda files: {key: data for key, data in files.items() if key != name}


# With a manifest that fits: (what is done, why it is rejected).
SIGNED: dict[str, tuple[Change, str]] = {
    "claimed otherwise": (edit("claim.toml", b"n == 5", b"n <= 6"), "the claim says exists"),
    "more instances": (edit("claim.toml", b"5..9", b"5..10"), "no record"),
    "fewer instances": (edit("claim.toml", b"5..9", b"5..8"), "a line too many"),
    "another rule": (edit("claim.toml", b"{2, 3}", b"{2, 4}"), "the graph has"),
    "no evidence": (without("evidence.jsonl"), "does not list evidence.jsonl"),
    "no claim": (without("claim.toml"), "does not list claim.toml"),
    "no proof": (without("clauses/n=7.lrat.gz"), "does not list clauses/n=7.lrat.gz"),
    "one more file": (lambda files: files | {"notes.txt": b""}, "lists notes.txt"),
    "claim elsewhere": (manifest(claim="other.toml"), "does not list other.toml"),
    "claim is the evidence": (manifest(claim="evidence.jsonl"), "no claim file"),
    "claim in a folder": (manifest(claim="clauses/n=7.cnf.gz"), "no claim file"),
    "claim no text": (manifest(claim=["claim.toml"]), "not a string"),
    "format 2": (manifest(format=2), "of format 2"),
    "format true": (manifest(format=True), "not an integer"),
    "format 1.0": (manifest(format=1.0), "not an exact integer"),
    "a further key": (manifest(other=1), "unknown keys"),
    "no line end": (lambda f: f | {"evidence.jsonl": f["evidence.jsonl"][:-1]}, "cut short"),
    "an empty line": (lambda f: f | {"evidence.jsonl": f["evidence.jsonl"] + b"\n"}, "too many"),
    "no lines": (lambda f: f | {"evidence.jsonl": b""}, "no record"),
    "spaces": (edit("evidence.jsonl", b'"answer":', b'"answer": '), "canonical"),
    "crlf": (edit("evidence.jsonl", b"\n", b"\r\n"), "canonical"),
    "doubled key": (edit("evidence.jsonl", b'"length":5', b'"length":5,"length":5'), "doubled"),
    "a float": (edit("evidence.jsonl", b'"length":5', b'"length":5.0'), "not an exact integer"),
    "an exponent": (edit("evidence.jsonl", b'"length":5', b'"length":5e0'), "not an exact integer"),
    "minus nought": (edit("evidence.jsonl", b"[0,", b"[-0,"), "canonical"),
    "not a number": (edit("evidence.jsonl", b'"length":5', b'"length":NaN'), "exact integer"),
    "digits": (edit("evidence.jsonl", b'"length":5', b'"length":' + b"9" * 5000), "100 digits"),
    "deep": (edit("evidence.jsonl", b'"length":5', b'"length":' + b"[" * 10**5), "too deeply"),
    "not ASCII": (edit("evidence.jsonl", b"witness", "wïtness".encode()), "not ASCII"),
    "null byte": (edit("evidence.jsonl", b"witness", b"wit\x00ness"), "not JSON"),
    "byte order mark": (edit("evidence.jsonl", b"{", b"\xef\xbb\xbf{"), "not ASCII"),
    "a list": (lambda f: with_lines(f, [[]]), "not an object"),
    "instance of another": (record(0, instance={"n": 4}), "another instance"),
    "instance true": (record(0, instance={"n": True}), "another instance"),
    "instance position": (record(0, instance=1), "another instance"),
    "instance of two": (record(0, instance={"n": 5, "m": 1}), "another instance"),
    "instance escape": (record(0, instance="\x1b[31m\ud800"), "another instance"),
    "vertices": (record(0, vertices=6), "the graph has 5 vertices"),
    "edges": (record(0, edges=6), "the graph has 5 vertices and 5 edges"),
    "edges true": (record(0, edges=True), "not an integer"),
    "length": (record(0, length=6), "reading length is 5"),
    "length true": (record(0, length=True), "not an integer"),
    "unknown kind": (record(0, kind="magic"), "no evidence for 'exists'"),
    "kind none": (record(0, kind="none"), "no evidence for 'exists'"),
    "kind null": (record(0, kind=None), "kind is not a string"),
    "answer unknown": (record(0, answer="yes"), "no evidence for 'yes'"),
    "answer list": (record(0, answer=["exists"]), "answer is not a string"),
    "answer impossible": (record(0, answer="impossible"), "no kind of evidence"),
    "open": (record(0, answer="open", kind="none", evidence={}, length=0), "left open"),
    "open with evidence": (record(0, answer="open", kind="none"), "has no evidence"),
    "open of length true": (
        record(0, answer="open", kind="none", evidence={}, length=False), "not an integer"
    ),
    "evidence no object": (record(0, evidence=[]), "not an object"),
    "evidence empty": (record(0, evidence={}), "missing or unknown keys: 'order'"),
    "a surrogate key": (record(0, evidence={"\ud800": 1}), "unknown keys"),
    "truncated gzip": (packed(lambda data: data[:-9]), "cut short"),
    "no gzip trailer": (packed(lambda data: data[:-8]), "cut short"),
    "wrong checksum": (packed(lambda d: d[:-8] + b"\0\0\0\0" + d[-4:]), "not a gzip file"),
    "after gzip": (packed(lambda data: data + b"x"), "after its end"),
    "zeros after gzip": (packed(lambda data: data + b"\0" * 8), "after its end"),
    "two members": (packed(lambda data: data + gzip.compress(b"", mtime=0)), "after its end"),
    "not gzip": (packed(lambda data: b"x" + data), "not a gzip file"),
    "zlib": (packed(lambda data: b"\x78\x9c" + data[10:]), "not a gzip file"),
    "empty file": (packed(lambda data: b""), "cut short"),
    "not ASCII text": (packed(lambda d: repack(d, b" 0\n", b" 0\xff\n")), "not ASCII"),
    "proof cut short": (
        packed(lambda d: gzip.compress(gzip.decompress(d)[:-1], mtime=0)), "cut short"
    ),
    "another ID": (packed(lambda d: gzip.compress(b"9" + gzip.decompress(d))), "the ID is not"),
    "another drat": (packed(lambda d: repack(d, b"0\n", b"0\n0\n"), "drat"), "steps of the LRAT"),
    "another fact": (packed(lambda d: repack(d, b"degree 0", b"degree 9"), "cnf"), "not in the"),
    "proof of another": (
        lambda f: f | {"clauses/n=7.cnf.gz": f["clauses/n=9.cnf.gz"]}, "other ones|other variables"
    ),
    "proof under another name": (renamed("clauses/n=7.cnf.gz", "clauses/n=8.cnf.gz"), "not list"),
}  # fmt: skip


@pytest.mark.parametrize(("change", "reason"), SIGNED.values(), ids=SIGNED.keys())
def test_changes_with_a_fitting_manifest_are_rejected(
    change: Change, reason: str, good: Files, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    files = dict(good)
    files = change(files)
    folder = write_files(tmp_path, files)
    accepted, said = check(folder)
    assert not accepted
    assert re.search(reason, said), said
    assert said.isprintable() or "\n" in said
    assert main([str(folder)]) == (4 if reason == "left open" else 3)
    assert main(["--json", str(folder)]) == (4 if reason == "left open" else 3)
    printed = capsys.readouterr()
    printed.out.encode()


UNSIGNED: dict[str, tuple[Change, str]] = {
    "no manifest": (without("manifest.json"), "manifest.json is missing"),
    "empty manifest": (lambda f: f | {"manifest.json": b""}, "not JSON"),
    "manifest no object": (lambda f: f | {"manifest.json": b"[]"}, "not an object"),
    "manifest not UTF-8": (lambda f: f | {"manifest.json": b"\xff"}, "not UTF-8"),
    "manifest deep": (lambda f: f | {"manifest.json": b"[" * 10**6}, "too deeply"),
    "doubled key": (edit("manifest.json", b'"format"', b'"format":1,"format"'), "doubled"),
    "doubled digest": (
        edit("manifest.json", b'"claim.toml"', b'"claim.toml":"","claim.toml"'),
        "no",
    ),
    "digests no object": (manifest(sha256=[]), "not an object"),
    "digest no text": (manifest(sha256={"claim.toml": 1}), "has changed"),
    "no digests": (manifest(sha256={}), "does not list claim.toml"),
    "claim changed": (edit("claim.toml", b"structure", b"\nstructure"), "claim.toml has changed"),
    "evidence changed": (edit("evidence.jsonl", b"0,2", b"2,0"), "evidence.jsonl has changed"),
    "proof changed": (packed(lambda data: data + b"\0"), "has changed"),
    "file missing": (without("clauses/n=7.drat.gz"), "clauses/n=7.drat.gz is missing"),
}


@pytest.mark.parametrize(("change", "reason"), UNSIGNED.values(), ids=UNSIGNED.keys())
def test_changes_that_do_not_fit_the_manifest_are_rejected(
    change: Change, reason: str, good: Files, tmp_path: Path
) -> None:
    accepted, said = check(write_files(tmp_path, change(dict(good)), sign=False))
    assert not accepted
    assert reason in said


@pytest.mark.parametrize(
    "name",
    ["../x", "/etc/passwd", "a/../../x", "./claim.toml", "a//x", "", "clauses/", "a\\b", "C:x",
     "a\x00b", "a\nb", "\ud800", "\u2028", "clauses", "manifest.json", "x" * 5000, "." , ".."],
)  # fmt: skip
def test_names_that_lead_astray_are_rejected(name: str, good: Files, tmp_path: Path) -> None:
    files = dict(good)
    content = json.loads(files["manifest.json"])
    content["sha256"][name] = hashlib.sha256(b"").hexdigest()
    files["manifest.json"] = json.dumps(content).encode()
    accepted, said = check(write_files(tmp_path / "f", files, sign=False))
    assert not accepted
    assert said.isprintable()
    content["claim"] = name
    files["manifest.json"] = json.dumps(content).encode()
    assert not check(write_files(tmp_path / "g", files, sign=False))[0]


def test_links_pipes_and_folders_are_rejected(good: Files, tmp_path: Path) -> None:
    outside = write_files(tmp_path / "outside", good)
    for name in good:
        folder = write_files(tmp_path / f"link {name.replace('/', ' ')}", good)
        (folder / name).unlink()
        (folder / name).symlink_to(outside / name)
        assert "symbolic link" in check(folder)[1]
        (folder / name).unlink()
        (folder / name).mkdir()
        assert not check(folder)[0]
        (folder / name).rmdir()
        os.mkfifo(folder / name)
        assert "not a regular file" in check(folder)[1]
    folder = write_files(tmp_path / "folder", {k: v for k, v in good.items() if "/" not in k})
    (folder / "manifest.json").write_bytes(good["manifest.json"])
    (folder / "clauses").symlink_to(outside / "clauses")
    assert "symbolic link" in check(folder)[1]
    loop = write_files(tmp_path / "loop", good)
    (loop / "claim.toml").unlink()
    (loop / "claim.toml").symlink_to(loop / "claim.toml")
    assert "symbolic link" in check(loop)[1]


def test_a_file_that_changes_after_it_was_digested_is_rejected(good: Files, tmp_path: Path) -> None:
    for name in ("evidence.jsonl", "clauses/n=7.cnf.gz"):
        folder = write_files(tmp_path / name.replace("/", " "), good)
        found = check_folder(folder)
        verdicts = found.verdicts()
        assert next(verdicts).accepted
        with (folder / name).open("ab") as file:
            file.write(b"\n")
        said = [verdict.reason for verdict in verdicts]
        assert not found.accepted
        reasons = " ".join(said + found.complaints)
        assert "has changed" in reasons or "a line too many" in reasons


@pytest.mark.parametrize(
    ("change", "reason"),
    [
        (edit("graphs.g6", b"C~", b"C^"), "the graph has"),
        (edit("graphs.g6", b"Bw\n", b""), "the graph has"),
        (edit("graphs.g6", b"D??\n", b""), "a line too many"),
        (lambda f: f | {"graphs.g6": f["graphs.g6"] + b"C~\n"}, "no record"),
        (lambda f: f | {"graphs.g6": b""}, "no instances"),
        (without("graphs.g6"), "does not list graphs.g6"),
        (edit("claim.toml", b"exists = 3", b"exists = 4"), "the claim says exists for 4"),
        (edit("claim.toml", b"exists = 3", b"impossible = 2"), "the claim says impossible for 2"),
        (edit("claim.toml", b'["0", "1"]', b'["0", "3"]'), "witness|obstruction|order|is in|not"),
        (edit("claim.toml", b"graphs.g6", b"../graphs.g6"), "does not list"),
        (edit("claim.toml", b'"graphs.g6"', b'"evidence.jsonl"\nformat = "edges"'), "cannot be"),
        (edit("claim.toml", b'"graphs.g6"', b'"claim.toml"\nformat = "edges"'), "cannot be"),
        (record(0, instance=2), "another instance"),
        (record(0, instance=True), "another instance"),
        (record(0, instance="1"), "another instance"),
        (record(0, instance={}), "another instance"),
    ],
)
def test_changed_lists_are_rejected(
    change: Change, reason: str, listed: Files, tmp_path: Path
) -> None:
    accepted, said = check(write_files(tmp_path, change(dict(listed))))
    assert not accepted
    assert re.search(reason, said), said


def test_usage(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([]) == 2
    assert main([str(tmp_path / "nowhere")]) == 2
    assert main(["--help"]) == 2
    assert main(["--json"]) == 2
    assert "usage" in capsys.readouterr().err
    assert main([str(tmp_path)]) == 3
    assert "manifest.json is missing" in capsys.readouterr().out


def test_a_claim_without_anything_accepted_is_not_accepted(tmp_path: Path) -> None:
    """Before the check has run to its end, and when it has found nothing, nothing is accepted."""
    folder = make_folder(tmp_path / "f", CLAIM)
    found = check_folder(folder)
    assert not found.accepted
    verdicts = found.verdicts()
    for _ in range(5):
        next(verdicts)
        assert not found.accepted
    list(verdicts)
    assert found.accepted
