"""The pytest plugin, in runs of pytest of its own."""

from __future__ import annotations

import tomllib
from importlib.metadata import entry_points
from pathlib import Path

import pytest

from certify.guard import check, items
from tests.checker.folders import lines_of, with_lines
from tests.guard.conftest import HOPS, Files, put

pytest_plugins = ["pytester"]
MODULE = "certify.guard.pytest_plugin"


def run(pytester: pytest.Pytester, *arguments: str) -> pytest.RunResult:
    """Run pytest with the plugin, whether the installed package brings it or not."""
    known = any(point.value == MODULE for point in entry_points(group="pytest11"))
    return pytester.runpytest_inprocess(*([] if known else ["-p", MODULE]), *arguments)


def test_the_package_brings_the_plugin() -> None:
    text = (Path(check.__file__).parents[2] / "pyproject.toml").read_text()
    points = tomllib.loads(text)["project"]["entry-points"]["pytest11"]
    assert points == {"certify": MODULE}


def test_one_test_an_instance(pytester: pytest.Pytester, hops: Files, listed: Files) -> None:
    put(pytester.path / "proofs" / "hops", hops)
    put(pytester.path / "proofs" / "list", listed)
    done = run(pytester, "proofs", "-v", "-W", "error")
    done.assert_outcomes(passed=19)
    done.stdout.fnmatch_lines(
        [
            "proofs/hops/claim.toml::n=1 PASSED*",
            "proofs/hops/claim.toml::n=14 PASSED*",
            "proofs/hops/claim.toml::whole claim PASSED*",
            "proofs/list/claim.toml::3 PASSED*",
        ]
    )


def test_it_takes_part_in_what_pytest_can_do(pytester: pytest.Pytester, hops: Files) -> None:
    put(pytester.path / "proofs", hops)
    run(pytester, "proofs/claim.toml::n=14").assert_outcomes(passed=1)
    run(pytester, "-k", "11").assert_outcomes(passed=1, deselected=14)
    listed = run(pytester, "--collect-only", "-q")
    listed.stdout.fnmatch_lines(["proofs/claim.toml::n=1", "*15 tests collected*"])


def test_failures_are_for_mathematicians(pytester: pytest.Pytester, hops: Files) -> None:
    records = lines_of(hops)
    records[10] = records[11] | {"instance": {"n": 11}}
    put(pytester.path / "proofs", with_lines(hops, records), sign=True)
    done = run(pytester)
    done.assert_outcomes(passed=14, failed=1)
    done.stdout.fnmatch_lines(
        [
            "n = 11: the stored evidence does not hold: *",
            "next: certify prove proofs/claim.toml --redo n=11",
            "FAILED proofs/claim.toml::n=11 - n = 11: the stored evidence*",
        ]
    )
    text = done.stdout.str()
    assert "Traceback" not in text
    assert ".py" not in text.split("FAILURES")[1]
    run(pytester, "-x").assert_outcomes(passed=10, failed=1)


def test_open_instances(pytester: pytest.Pytester, half_open: Files) -> None:
    put(pytester.path, half_open, guard_toml='open = ["n=2", "n=3", "n=4", "n=5", "n=6"]')
    done = run(pytester, "-rx")
    done.assert_outcomes(passed=9, failed=1, xfailed=5)
    done.stdout.fnmatch_lines(["n = 11: left open: neither a witness nor a reason *"])
    put(pytester.path, half_open, guard_toml='open = ["n=1"]')
    run(pytester, "-k", "whole").assert_outcomes(failed=1, deselected=14)


def test_the_whole_claim_is_a_test(pytester: pytest.Pytester, hops: Files, listed: Files) -> None:
    put(pytester.path / "a", hops | {"stray.txt": b""})
    wrong = listed["claim.toml"].replace(b"exists = 2", b"exists = 1")
    put(pytester.path / "b", listed | {"claim.toml": wrong}, sign=True)
    done = run(pytester)
    done.assert_outcomes(passed=17, failed=2)
    done.stdout.fnmatch_lines(["a/stray.txt: the manifest does not list this file*"])
    done.stdout.fnmatch_lines(["b: the claim says exists for 1 instances*"])


def test_a_claim_that_changed_fails_in_every_instance(
    pytester: pytest.Pytester, hops: Files
) -> None:
    put(pytester.path, hops | {"claim.toml": hops["claim.toml"] + b"\n"})
    done = run(pytester)
    done.assert_outcomes(failed=15)
    done.stdout.fnmatch_lines(["n=1: not checked, because:", "*the claim changed*"])


def test_claims_without_evidence_or_sense_fail(pytester: pytest.Pytester, hops: Files) -> None:
    put(pytester.path / "a", {"claim.toml": HOPS.encode()})
    put(pytester.path / "b", {"claim.toml": HOPS.replace("3, 5}", "3, 5").encode()})
    gone = dict(hops)
    del gone["claim.toml"]
    put(pytester.path / "c", gone)
    done = run(pytester)
    done.assert_outcomes(failed=17)
    done.stdout.fnmatch_lines(["*b/claim.toml:5:*"])
    done.stdout.fnmatch_lines(["c: claim.toml is missing"])


def test_the_evidence_may_lie_in_another_folder(pytester: pytest.Pytester, hops: Files) -> None:
    put(pytester.path / "claims", {"hops.toml": hops["claim.toml"]})
    put(pytester.path / "evidence", hops)
    run(pytester, "claims").assert_outcomes(passed=15)


def test_more_graphs_than_tests_do_not_go_unseen(
    pytester: pytest.Pytester, listed: Files, monkeypatch: pytest.MonkeyPatch
) -> None:
    """If the lines of a list were counted wrong, the test of the whole claim says so."""
    put(pytester.path, listed | {"some.g6": b"Bw\nC~\nDQc\nBw\n"}, sign=True)
    monkeypatch.setattr(items, "_count_graphs", lambda *_: 2)
    done = run(pytester)
    done.assert_outcomes(passed=2, failed=1)
    done.stdout.fnmatch_lines(["graph 4 of the list: there is no evidence*"])


def test_a_folder_is_checked_once(
    pytester: pytest.Pytester, hops: Files, monkeypatch: pytest.MonkeyPatch
) -> None:
    checked: list[Path] = []
    real = check.check_folder

    def count(folder: Path) -> object:
        checked.append(folder)
        return real(folder)

    monkeypatch.setattr(check, "check_folder", count)
    put(pytester.path, hops)
    run(pytester).assert_outcomes(passed=15)
    assert len(checked) == 1
    run(pytester, "--collect-only", "-q")
    assert len(checked) == 1


def test_other_runs_are_left_alone(pytester: pytest.Pytester) -> None:
    pytester.makepyfile("import sys\ndef test(): assert 'certify.claim.claim' not in sys.modules")
    pytester.makefile(".toml", pyproject='[tool.x]\nstructure = "x"\n', odd="[[[")
    put(pytester.path, {"manifest.json": b"{}", "guard.toml": b"x = 1"})
    known = any(point.value == MODULE for point in entry_points(group="pytest11"))
    extra = [] if known else ["-p", MODULE]
    pytester.runpytest_subprocess(*extra, "-W", "error").assert_outcomes(passed=1)


def test_it_can_be_turned_off(pytester: pytest.Pytester, hops: Files) -> None:
    put(pytester.path, hops)
    off = ["-p", "no:certify"] if entry_points(group="pytest11", name="certify") else []
    assert pytester.runpytest_inprocess(*off).ret == pytest.ExitCode.NO_TESTS_COLLECTED
