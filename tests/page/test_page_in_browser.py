"""What the page of a claim does in a browser."""

from __future__ import annotations

import json
import re
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest

from certify.report.page.contents import Contents, read_contents
from certify.report.page.page import compose_page, write_site
from tests.checker.folders import Files, read_files, write_files
from tests.page.browser import MISSING, REASON, Visit, browser, visit
from tests.page.pages import EVIL, NAMES, corrupt, lines_of

pytestmark = pytest.mark.skipif(MISSING, reason=REASON)


@pytest.fixture(scope="module")
def program() -> Iterator[Any]:
    with browser() as found:
        yield found


def stays_inside(found: Visit) -> bool:
    """Whether the page asked for itself and for what it made, and no script failed."""
    own = all(url.startswith(("file:", "blob:", "data:")) for url in found.asked)
    return own and sum(url.startswith("file:") for url in found.asked) == 1 and not found.errors


def write_page(path: Path, contents: Contents, files: Files) -> Path:
    path.write_text(compose_page(contents, files, "not checked before"), encoding="utf-8")
    return path


@pytest.mark.parametrize("name", NAMES)
def test_demos_are_accepted_in_their_pages(program: Any, site: Path, name: str) -> None:
    with visit(program) as found:
        found.open(site / f"{name}.html")
        assert {state for state, _ in found.states()} == {"waiting"}
        assert {text for _, text in found.states()} == {"○ not yet checked here"}
        state, text = found.check()
        count = len(found.states())
        assert state == "accepted"
        assert f"✓ Accepted, the whole claim: {count} of {count} instances" in text
        assert found.states() == [("accepted", "✓ accepted")] * count
        assert stays_inside(found)


def test_a_corrupted_twin_is_rejected(program: Any, small: Path, tmp_path: Path) -> None:
    contents = read_contents(small)
    write_files(tmp_path / "twin", corrupt(read_files(small)))
    signed = read_files(tmp_path / "twin")
    with visit(program) as found:
        found.open(write_page(tmp_path / "signed.html", contents, signed))
        assert found.check() == (
            "rejected",
            "✗ Rejected: an instance is not accepted; 4 of 5 instances accepted. See n = 5.",
        )
        (first, reason), *others = found.states()
        assert first == "rejected"
        assert re.fullmatch(r"✗ rejected: .*\d.*", reason)
        assert others == [("accepted", "✓ accepted")] * 4
        assert stays_inside(found)
    with visit(program) as found:
        unsigned = corrupt(read_files(small))
        found.open(write_page(tmp_path / "unsigned.html", contents, unsigned))
        state, text = found.check()
        assert state == "rejected"
        assert "evidence.jsonl has changed since the manifest was written" in text
        assert {state for state, _ in found.states()} == {"rejected"}


def test_a_page_has_to_show_what_its_files_say(program: Any, small: Path, tmp_path: Path) -> None:
    """Evidence that is fine does not vouch for a table that says something else."""
    contents = read_contents(small)
    files = read_files(small)
    first, *rest = contents.rows
    lie = replace(first, record={**first.record, "answer": "impossible"})
    for name, rows in {
        "other": (lie, *rest),
        "less": tuple(rest),
        "fewer": contents.rows[:-1],
        "more": (*contents.rows, first),
    }.items():
        with visit(program) as found:
            shown = replace(contents, rows=rows)
            found.open(write_page(tmp_path / f"{name}.html", shown, files))
            state, text = found.check()
            assert (state, "something else than its files" in text) == ("rejected", True), name


def test_without_workers_it_checks_in_small_steps(
    program: Any, site: Path, small: Path, tmp_path: Path
) -> None:
    scripts = [
        "delete window.Worker;",
        "window.Worker = class { constructor() { throw 1; } };",
        "window.Worker = class { terminate() {} };",
    ]
    for script in scripts:
        with visit(program, script) as found:
            found.open(site / f"{NAMES[0]}.html")
            assert found.check()[0] == "accepted"
            assert {state for state, _ in found.states()} == {"accepted"}
            found.page.evaluate("document.querySelector('#status').removeAttribute('data-state')")
            assert found.check()[0] == "accepted"
            assert stays_inside(found)
    write_files(tmp_path / "twin", corrupt(read_files(small)))
    with visit(program, "delete window.Worker;") as found:
        files = read_files(tmp_path / "twin")
        found.open(write_page(tmp_path / "twin.html", read_contents(small), files))
        assert found.check()[0] == "rejected"


def test_a_hostile_title_does_not_run(
    program: Any, evil: Path, small: Path, tmp_path: Path
) -> None:
    write_site([evil, small], tmp_path / "site")
    with visit(program) as found:
        found.open(tmp_path / "site" / "index.html")
        assert found.page.inner_text("li:first-child a") == " ".join(EVIL.split())
        found.asked.clear()
        found.page.click("li:first-child a")
        assert found.check()[0] == "accepted"
        assert found.page.evaluate("window.ran") is None
        assert found.page.title() == EVIL
        assert found.page.inner_text("h1") == EVIL
        assert stays_inside(found)


def test_open_instances_are_told(program: Any, small: Path, tmp_path: Path) -> None:
    files = read_files(small)
    lines = files["evidence.jsonl"].splitlines(keepends=True)
    record = json.loads(lines[1])
    record |= {"answer": "open", "kind": "none", "evidence": {}, "length": 0}
    lines[1] = json.dumps(record, sort_keys=True, separators=(",", ":")).encode() + b"\n"
    folder = write_files(tmp_path / "open", files | {"evidence.jsonl": b"".join(lines)})
    (path,), left_open = write_site([folder], tmp_path / "site")
    assert left_open == 1
    assert "Left open, and so not claimed: n = 6." in path.read_text(encoding="utf-8")
    with visit(program) as found:
        found.open(path)
        state, text = found.check()
        assert (state, text.startswith("◇ Left open, not rejected: 4 of 5")) == ("open", True)
        assert [state for state, _ in found.states()] == ["accepted", "open", *["accepted"] * 3]


def test_filters_keys_and_links(program: Any, small: Path, tmp_path: Path) -> None:
    (path,), _ = write_site([small], tmp_path / "site")
    with visit(program) as found:
        found.open(path)
        page = found.page
        rows = "#instances tbody tr:visible"
        page.select_option("#by-answer", "exists")
        assert page.locator(rows).count() == 1
        assert page.inner_text("#shown") == "1 of 5 shown"
        page.select_option("#by-answer", "")
        page.select_option("#by-kind", "clauses")
        kinds = [json.loads(line)["kind"] for line in lines_of(small)]
        assert page.locator(rows).count() == kinds.count("clauses") > 0
        assert page.locator("details.reason:visible").count() == kinds.count("clauses")
        page.select_option("#by-kind", "")
        page.fill("#by-text", "n =  7")
        assert page.locator(rows).all_inner_texts()[0].startswith("n = 7")
        page.click(f"{rows} a")
        assert page.evaluate("document.activeElement.parentElement.id") == "reason-2"
        assert page.evaluate("document.activeElement.parentElement.open") is True
        page.keyboard.press("Enter")
        assert page.evaluate("document.activeElement.parentElement.open") is False
        page.focus("body")
        page.evaluate("document.activeElement.blur()")
        page.focus("#check")
        page.keyboard.press("Enter")
        assert found.wait()[0] == "accepted"
        with page.expect_download() as saved:
            page.click("[data-save='claim.toml']")
        assert Path(saved.value.path()).read_bytes() == (small / "claim.toml").read_bytes()


def test_nothing_sticks_out_of_a_narrow_page(program: Any, site: Path) -> None:
    for name in ["index", *NAMES]:
        with visit(program, viewport={"width": 390, "height": 800}) as found:
            found.open(site / f"{name}.html")
            if name != "index":
                found.page.click("#open-all")
            assert found.page.evaluate("document.documentElement.scrollWidth") <= 390, name
