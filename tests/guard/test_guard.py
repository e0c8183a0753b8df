"""The command guard: what passes, and everything that must not."""

from __future__ import annotations

import json
import os
from pathlib import Path

import pytest

from certify.guard.check import FolderGuard, check_evidence
from tests.checker.folders import lines_of, with_lines
from tests.guard.conftest import HOPS, Command, Files, Prove, put

OPEN = ["n=2", "n=3", "n=4", "n=5", "n=6", "n=11"]


def test_what_holds_passes(certify: Command, root: Path, hops: Files, listed: Files) -> None:
    put(root / "hops", hops)
    put(root / "deep" / "er" / "list", listed)
    done = certify("guard", root)
    assert done.code == 0, done.out
    assert done.out.splitlines() == [
        f"accepted: {root}/deep/er/list/claim.toml: 3 of 3 instances accepted",
        f"accepted: {root}/hops/claim.toml: 14 of 14 instances accepted",
        "2 claims: 2 accepted, 0 open, 0 failed",
    ]


def test_a_guard_with_nothing_to_guard_fails(certify: Command, root: Path) -> None:
    (root / "pyproject.toml").write_text('[project]\nname = "x"\n')
    (root / "manifest.json").write_text('{"name": "a web page", "icons": []}')
    done = certify("guard", root)
    assert done.code == 2
    assert "nothing is guarded" in done.err


def test_the_root_is_here_unless_told_otherwise(
    certify: Command, root: Path, hops: Files, monkeypatch: pytest.MonkeyPatch
) -> None:
    put(root / "hops", hops)
    monkeypatch.chdir(root)
    assert certify("guard").out.startswith("accepted: hops/claim.toml: 14 of 14")


def test_a_claim_without_evidence_fails(certify: Command, root: Path, hops: Files) -> None:
    put(root / "hops", hops)
    put(root / "new", {"claim.toml": HOPS.replace("Hops", "New hops").encode()})
    done = certify("guard", root)
    assert done.code == 3
    assert f"{root}/new/claim.toml:1: this claim has no evidence" in done.out
    assert f"next: certify prove {root}/new/claim.toml" in done.out


def test_a_claim_that_changed_alone_fails(certify: Command, root: Path, hops: Files) -> None:
    put(root / "hops", hops | {"claim.toml": hops["claim.toml"] + b"# a word more\n"})
    done = certify("guard", root)
    assert done.code == 3
    assert "the claim changed, and its evidence did not" in done.out
    assert done.out.count("next:") == 1


def test_a_list_that_changed_alone_fails(certify: Command, root: Path, listed: Files) -> None:
    put(root / "list", listed | {"some.g6": b"Bw\nC~\nDQc\nBw\n"})
    done = certify("guard", root)
    assert done.code == 3
    assert "some.g6 has changed" in done.out


def test_a_widened_claim_misses_instances(certify: Command, root: Path, hops: Files) -> None:
    wider = hops["claim.toml"].replace(b"1..14", b"1..16")
    put(root / "hops", hops | {"claim.toml": wider}, sign=True)
    done = certify("guard", root)
    assert done.code == 3
    assert "n = 15: there is no evidence for this instance" in done.out
    assert "14 of 16 instances accepted, 2 failed" in done.out


def test_a_false_answer_is_rejected(certify: Command, root: Path, hops: Files) -> None:
    records = lines_of(hops)
    records[10] = records[11] | {"instance": {"n": 11}}
    put(root / "hops", with_lines(hops, records), sign=True)
    done = certify("guard", root)
    assert done.code == 3
    assert f"{root}/hops/evidence.jsonl:11: n = 11: the stored evidence does not hold" in done.out
    assert f"certify prove {root}/hops/claim.toml --redo n=11" in done.out


def test_a_contradicted_claim_fails(certify: Command, root: Path, hops: Files) -> None:
    wrong = hops["claim.toml"].replace(b"n >= 12", b"n >= 11")
    put(root / "hops", hops | {"claim.toml": wrong}, sign=True)
    done = certify("guard", root)
    assert done.code == 3
    assert "n = 11: the claim says exists, and the evidence shows impossible" in done.out
    assert "correct the claim" in done.out


def test_wrong_counts_fail(certify: Command, root: Path, listed: Files) -> None:
    wrong = listed["claim.toml"].replace(b"exists = 2", b"exists = 3")
    put(root / "list", listed | {"claim.toml": wrong}, sign=True)
    done = certify("guard", root)
    assert done.code == 3
    assert "the claim says exists for 3 instances" in done.out


def test_open_instances_have_a_code_of_their_own(
    certify: Command, root: Path, hops: Files, half_open: Files
) -> None:
    put(root / "a", half_open)
    done = certify("guard", root)
    assert done.code == 4
    assert "n = 11: left open" in done.out
    assert 'open = ["n=11"]' in done.out
    put(root / "b", {"claim.toml": HOPS.replace("3, 5", "3, 4").encode()})
    assert certify("guard", root).code == 3


def test_open_instances_that_are_allowed_pass(
    certify: Command, root: Path, half_open: Files
) -> None:
    put(root / "a", half_open, guard_toml=f"open = {json.dumps(OPEN)}\n")
    done = certify("guard", root)
    assert done.code == 0, done.out
    assert "8 of 14 instances accepted, 6 open, as allowed" in done.out
    put(root / "a", half_open, guard_toml=f"open = {json.dumps(OPEN[1:])}\n")
    assert certify("guard", root).code == 4


def test_an_allowance_does_not_cover_counts_that_are_wrong_already(
    certify: Command, root: Path, prove_files: Prove
) -> None:
    """Eight instances are shown to exist, so whatever is open, two in all is false."""
    text = HOPS[: HOPS.index("exists = ")]
    half = frozenset({"witness"})
    left = 'open = ["n=2", "n=3", "n=4", "n=5", "n=6", "n=11"]'
    put(root / "false", prove_files(f"{text}exists = 2\n", half), guard_toml=left)
    put(root / "true", prove_files(f"{text}exists = 8\n", half), guard_toml=left)
    done = certify("guard", root)
    assert done.code == 3
    assert "next: correct the claim" in done.out
    assert f"failed: {root}/false/claim.toml" in done.out
    assert f"accepted: {root}/true/claim.toml" in done.out


def test_a_check_that_was_broken_off_accepts_nothing(root: Path, hops: Files) -> None:
    guard = FolderGuard(put(root, hops))
    next(guard.cases())
    assert guard.report().state == "failed"
    assert check_evidence(root).state == "accepted"


@pytest.mark.parametrize("name", ["n=7", "n=15", "7", "only"])
def test_an_allowance_that_is_not_needed_fails(
    name: str, certify: Command, root: Path, half_open: Files
) -> None:
    put(root / "a", half_open, guard_toml=f"\nopen = {json.dumps([*OPEN, name])}\n")
    done = certify("guard", root)
    assert done.code == 3
    assert f'{root}/a/guard.toml:2: "{name}" is allowed to be open, and is not' in done.out


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("opened = []", 'guard.toml:1: opened: there is no such key here; did you mean "open"?'),
        ('open = "n=2"', "guard.toml:1: open: a list is needed"),
        ("open = [2]", "each entry is a text in quotes, and one is 2"),
        ('open = [""]', "each entry is a text"),
        ('open = ["n=2", "n=2"]', "stands there twice"),
        ("open = [", "not TOML"),
        ("files = [[]]", "each entry is a text"),
    ],
)
def test_a_bad_guard_toml_allows_nothing(
    text: str, said: str, certify: Command, root: Path, half_open: Files
) -> None:
    put(root / "a", half_open, guard_toml=text)
    done = certify("guard", root)
    assert done.code == 3
    assert said in done.out.replace("\n", " ")


def test_an_allowance_does_not_cover_what_is_rejected(
    certify: Command, root: Path, hops: Files
) -> None:
    records = lines_of(hops)
    records[10] = records[11] | {"instance": {"n": 11}}
    put(root / "a", with_lines(hops, records), sign=True, guard_toml='open = ["n=11"]')
    assert certify("guard", root).code == 3


@pytest.mark.parametrize("name", ["notes.txt", "clauses/n=2.cnf.gz", "more/notes.txt", "x.jsonl"])
def test_a_file_that_the_manifest_does_not_list_fails(
    name: str, certify: Command, root: Path, hops: Files
) -> None:
    put(root / "a", hops | {name: b"x"})
    done = certify("guard", root)
    assert done.code == 3
    assert f"{root}/a/{name}: the manifest does not list this file" in done.out


def test_second_evidence_beside_the_listed_one_fails(
    certify: Command, root: Path, hops: Files
) -> None:
    put(root / "a", hops | {"evidence.jsonl.gz": b"x"})
    assert certify("guard", root).code == 3


def test_files_may_be_allowed_by_pattern(certify: Command, root: Path, hops: Files) -> None:
    more = {"README.md": b"", ".gitignore": b"", "fig/one/a.svg": b"", "b.tex": b""}
    put(root / "a", hops | more, guard_toml='files = ["fig/**", "*.tex"]')
    assert certify("guard", root).code == 0
    put(root / "a", hops | more, guard_toml='files = ["fig/*", "*.tex"]')
    assert certify("guard", root).code == 3
    put(root / "a", hops | more, guard_toml='files = ["fig/**", "*.tex", "*.pdf"]')
    done = certify("guard", root)
    assert done.code == 3
    assert 'no file needs the pattern "*.pdf"' in done.out


def test_a_folder_below_with_evidence_of_its_own_is_no_stray(
    certify: Command, root: Path, hops: Files, listed: Files
) -> None:
    put(root, hops)
    put(root / "below", listed)
    assert certify("guard", root).code == 0
    (root / "below" / "x").write_text("")
    assert f"{root}/below/x: the manifest" in certify("guard", root).out


def test_a_claim_inside_the_folder_of_proofs_does_not_hide_strays(
    certify: Command, root: Path, hops: Files
) -> None:
    """A claim file put into clauses/ must not make the guard pass over that folder."""
    files = hops | {"clauses/claim.toml": hops["claim.toml"], "clauses/odd.gz": b"x"}
    put(root / "a", files)
    done = certify("guard", root)
    assert done.code == 3


def test_two_claims_in_one_folder(certify: Command, root: Path, hops: Files) -> None:
    put(root / "a", hops | {"other.toml": HOPS.replace("3, 5", "3, 4").encode()})
    done = certify("guard", root)
    assert done.code == 3
    assert "the folder holds that of claim.toml, and each claim needs a folder" in done.out


def test_the_evidence_may_lie_in_another_folder(
    certify: Command, root: Path, listed: Files
) -> None:
    put(root / "evidence" / "cubic", listed)
    claim = {"cubic.toml": listed["claim.toml"], "some.g6": listed["some.g6"]}
    put(root / "claims", claim)
    done = certify("guard", root)
    assert done.code == 0, done.out
    assert f"note: its evidence is in {root}/evidence/cubic" in done.out
    # Another list, or another claim, is no copy.
    put(root / "claims", {"some.g6": b"Bw\n"})
    assert certify("guard", root).code == 3
    put(root / "claims", claim | {"cubic.toml": listed["claim.toml"] + b"\n"})
    assert certify("guard", root).code == 3


def test_evidence_whose_claim_is_gone_fails(certify: Command, root: Path, hops: Files) -> None:
    files = dict(hops)
    del files["claim.toml"]
    put(root / "a", files)
    done = certify("guard", root)
    assert done.code == 3
    assert "claim.toml is missing" in done.out


@pytest.mark.parametrize("name", ["manifest.json", "evidence.jsonl"])
def test_evidence_that_lost_a_file_fails(
    name: str, certify: Command, root: Path, hops: Files
) -> None:
    files = dict(hops)
    del files[name]
    put(root / "a", files)
    assert certify("guard", root).code == 3


@pytest.mark.parametrize("text", [b"", b"{", b'{"claim": "claim.toml", "sha256": {}', b"[]"])
def test_a_damaged_manifest_fails(text: bytes, certify: Command, root: Path, hops: Files) -> None:
    put(root / "a", hops | {"manifest.json": text})
    assert certify("guard", root).code == 3
    put(root / "b", {"manifest.json": text})  # and nothing else: it may be anybody's
    assert certify("guard", root / "a").code == 3


def test_a_run_that_has_not_ended_is_told(certify: Command, root: Path, hops: Files) -> None:
    put(root / "a", hops | {".unfinished/evidence.jsonl": b""})
    done = certify("guard", root)
    assert done.code == 0
    assert "note: a run of certify prove has begun here and not ended" in done.out
    put(root / "b", {"claim.toml": hops["claim.toml"], ".unfinished/input": b""})
    assert certify("guard", root / "b").code == 3


def test_links_are_not_followed_and_not_passed_over(
    certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(root / "a", hops)
    put(tmp_path / "elsewhere", hops)
    (root / "link").symlink_to(tmp_path / "elsewhere")
    done = certify("guard", root)
    assert done.code == 3
    assert "this symbolic link leads to a claim" in done.out
    (root / "link").unlink()
    (root / "loop").symlink_to(root)
    (root / "gone.toml").symlink_to(root / "nothing")
    done = certify("guard", root)
    assert done.code == 3
    assert f"{root}/gone.toml: the file cannot be read, and may be a claim" in done.out
    assert "loop" not in done.out
    (root / "gone.toml").unlink()
    assert certify("guard", root).code == 0


def test_links_inside_the_evidence_fail(
    certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(tmp_path / "elsewhere", hops)
    files = dict(hops)
    del files["evidence.jsonl"]
    put(root / "a", files)
    (root / "a" / "evidence.jsonl").symlink_to(tmp_path / "elsewhere" / "evidence.jsonl")
    assert certify("guard", root).code == 3


def test_hidden_folders_and_environments_are_skipped(
    certify: Command, root: Path, hops: Files
) -> None:
    put(root / "a", hops)
    for name in (".git", ".venv", "node_modules", "__pycache__", "env"):
        put(root / name / "x", {"claim.toml": HOPS.encode()})
    put(root / "env", {"pyvenv.cfg": b"", "bin/python": b""})
    assert certify("guard", root).code == 0
    assert certify("guard", root / ".venv").code == 3  # named, it is looked into


@pytest.mark.parametrize("lone", [False, True])
def test_a_stray_file_cannot_make_the_guard_skip_a_claim(
    lone: bool, certify: Command, root: Path, hops: Files
) -> None:
    put(root / "a", hops)
    other = {"claim.toml": HOPS.replace("Hops", "Other hops").encode()} if lone else hops
    put(root / "b", other | {"pyvenv.cfg": b"", "bin/x": b""})
    put(root / "c" / "d", {"claim.toml": b""})
    put(root / "c", {"pyvenv.cfg": b""})
    done = certify("guard", root)
    assert done.code == 3
    assert f"failed: {root}/b/claim.toml" in done.out
    assert f"failed: {root}/c/d/claim.toml" in done.out


def test_what_is_no_file_fails_and_is_not_waited_for(
    certify: Command, root: Path, hops: Files
) -> None:
    put(root / "a", hops)
    os.mkfifo(root / "b.toml")
    done = certify("guard", root)
    assert done.code == 3
    assert f"{root}/b.toml: the file cannot be read, and may be a claim" in done.out


def test_json_is_an_object_a_claim(
    certify: Command, root: Path, hops: Files, half_open: Files
) -> None:
    put(root / "a", hops)
    put(root / "b", half_open)
    done = certify("guard", root, "--json")
    assert [row["state"] for row in done.rows] == ["accepted", "open"]
    assert done.rows[1]["counts"] == {"accepted": 8, "open": 6}
    assert done.rows[1]["problems"][0]["line"] == 2
    assert done.rows[0]["instances"] == 14


def test_more_jobs_say_the_same(
    certify: Command, root: Path, hops: Files, listed: Files, half_open: Files
) -> None:
    for name, files in (("a", hops), ("b", listed), ("c", half_open)):
        put(root / name, files)
    alone = certify("guard", root)
    assert certify("guard", root, "--jobs", "2") == alone
    assert alone.code == 4


def test_names_cannot_write_lines_of_their_own(certify: Command, root: Path, hops: Files) -> None:
    put(root / "a", hops | {"x\n::error::y": b"", "\x1b[31m": b""})
    done = certify("guard", root)
    assert done.code == 3
    assert "\x1b" not in done.out
    assert not any(line.strip().startswith("::") for line in done.out.splitlines())
