"""The JUnit report, read back, and the annotations of a hosted CI.

What a reader needs (common practice, no source): `testsuites` above `testsuite` above
`testcase`; counts that are those of the cases; `classname` and `name`; a failure's `message`.
"""

from __future__ import annotations

from pathlib import Path
from xml.etree import ElementTree

import pytest

from certify.guard.find import Trouble
from certify.guard.junit import render_junit
from certify.guard.report import FAILED, Case, Report
from tests.guard.conftest import Command, Files, put


def read(path: Path) -> ElementTree.Element:
    """Read a report, and look at what every report has to have."""
    top = ElementTree.parse(path).getroot()
    assert top.tag == "testsuites"
    for suite in top:
        assert suite.tag == "testsuite"
        for case in suite:
            assert case.tag == "testcase"
            assert {"classname", "name", "time"} <= set(case.attrib)
            assert len(case) <= 1
            assert all(part.tag in ("failure", "skipped") and part.get("message") for part in case)
    for element in (top, *top):
        cases = list(element.iter("testcase"))
        assert element.get("tests") == str(len(cases))
        assert element.get("failures") == str(len(list(element.iter("failure"))))
        assert element.get("skipped") == str(len(list(element.iter("skipped"))))
        assert element.get("errors") == "0"
    assert len({(case.get("classname"), case.get("name")) for case in top.iter("testcase")}) == len(
        list(top.iter("testcase"))
    )
    return top


def test_one_case_an_instance(
    certify: Command, root: Path, tmp_path: Path, hops: Files, half_open: Files
) -> None:
    put(root / "a", hops)
    put(root / "b", half_open, guard_toml='open = ["n=2", "n=3", "n=4", "n=5", "n=6"]')
    assert certify("guard", root, "--junit", tmp_path / "report.xml").code == 4
    top = read(tmp_path / "report.xml")
    assert [suite.get("name") for suite in top] == [f"{root}/a/claim.toml", f"{root}/b/claim.toml"]
    names = [case.get("name") for case in top[0]]
    assert names == ["whole claim", *(f"n={n}" for n in range(1, 15))]
    assert [suite.get("skipped") for suite in top] == ["0", "5"]
    (failure,) = top.iter("failure")
    assert str(failure.get("message")).startswith("n = 11: left open")
    assert "next: certify prove" in str(failure.text)


def test_the_same_folder_gives_the_same_file(
    certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(root / "a", hops)
    for name in ("one", "two"):
        certify("guard", root, "--junit", tmp_path / name, "--cache", tmp_path / "cache")
    assert (tmp_path / "one").read_bytes() == (tmp_path / "two").read_bytes()
    assert not list(tmp_path.glob("*.new"))


def test_what_is_wrong_with_the_whole_is_a_case_too(
    certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(root / "a", hops | {"stray": b"", "claim.toml": hops["claim.toml"] + b"\n"})
    certify("guard", root, "--junit", tmp_path / "report.xml")
    top = read(tmp_path / "report.xml")
    (failure,) = top.iter("failure")
    assert "the claim changed" in str(failure.text)
    assert "stray" in str(failure.text)


@pytest.mark.parametrize("text", ["\x00\x08\x1b", "\ud800", "\uffff\ufffe", "<&>]]>\"'", "a\nb\tc"])
def test_any_text_makes_well_formed_xml(text: str) -> None:
    path = Path(f"x{text.replace(chr(0), '')}")
    report = Report(path, path, (Case(text, FAILED, text, 1),), (Trouble(path, text, 1),))
    top = ElementTree.fromstring(render_junit([report]))
    (suite,) = top
    assert suite[1].find("failure") is not None
    if text.isprintable():
        assert suite[1].get("name") == text


def test_a_place_that_cannot_be_written_is_bad_usage(
    certify: Command, root: Path, tmp_path: Path, hops: Files
) -> None:
    put(root / "a", hops)
    (tmp_path / "file").write_text("")
    done = certify("guard", root, "--junit", tmp_path / "file" / "report.xml")
    assert done.code == 2
    assert "report.xml" in done.err


@pytest.fixture
def hosted(monkeypatch: pytest.MonkeyPatch, root: Path) -> None:
    monkeypatch.setenv("GITHUB_ACTIONS", "true")
    monkeypatch.setenv("GITHUB_WORKSPACE", str(root))


@pytest.mark.usefixtures("hosted")
def test_annotations_name_file_and_line(certify: Command, root: Path, half_open: Files) -> None:
    put(root / "a", half_open)
    done = certify("guard", root)
    lines = [line for line in done.out.splitlines() if line.startswith("::")]
    assert len(lines) == 5
    assert lines[0].startswith("::error file=a/evidence.jsonl,line=2,title=certify guard%3A ")
    assert "::n = 2: left open" in lines[0]
    assert "%0Anext: certify prove" in lines[0]
    assert lines[-1].endswith("%0A... and more; see the log of this step")
    assert not any(line.startswith("::") for line in certify("guard", root, "--json").out.split())


@pytest.mark.usefixtures("hosted")
def test_annotations_cannot_be_broken_out_of(certify: Command, root: Path, hops: Files) -> None:
    put(root / "a,line=7::x%0A", hops | {"100%\r\n::warning::y": b""})
    done = certify("guard", root)
    (line,) = [line for line in done.out.splitlines() if line.startswith("::")]
    place, text = line.removeprefix("::error ").split("::", 1)
    assert place.startswith("file=a%2Cline=7%3A%3Ax%250A/100%25%0D%0A%3A%3Awarning%3A%3Ay,line=1,")
    assert text.startswith("the manifest does not list this file")
    assert "\r" not in done.out


def test_no_annotations_elsewhere(
    certify: Command, root: Path, half_open: Files, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("GITHUB_ACTIONS", raising=False)
    put(root / "a", half_open)
    assert "::error" not in certify("guard", root).out
