"""Reports as JUnit XML: a test suite for each claim, a test case for each instance.

There is no one standard; written is what the common readers take: `testsuites`,
`testsuite` with its counts, `testcase` with `classname`, `name` and `time`, and in it
`failure` or `skipped` with a `message`. The times are 0: the same folder gives the
same file.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from pathlib import Path
from xml.etree import ElementTree

from certify.evidence.disk import telling, write_atomically
from certify.guard.report import ALLOWED, FAILED, OPEN, Report, one_line, render_trouble

WHOLE = "whole claim"
_NO_XML = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")
"""What XML 1.0 has no place for, not even escaped (its production 2, Char)."""


def write_junit(path: Path, reports: Iterable[Report]) -> None:
    """Write the reports to a file, whole or not at all. Errors: DiskError."""
    with telling(path, "write here"):
        write_atomically(path, render_junit(reports))


def render_junit(reports: Iterable[Report]) -> bytes:
    """Return the reports as an XML document in UTF-8. Cost: linear, in memory too."""
    top = ElementTree.Element("testsuites", name="certify guard")
    total = {"tests": 0, "failures": 0, "errors": 0, "skipped": 0}
    for report in reports:
        suite, counts = _render_suite(report)
        top.append(suite)
        total = {name: count + counts[name] for name, count in total.items()}
    _set_counts(top, total)
    text = ElementTree.tostring(top, encoding="utf-8", xml_declaration=True)
    return bytes(text) + b"\n"


def _render_suite(report: Report) -> tuple[ElementTree.Element, dict[str, int]]:
    place = one_line(report.claim)
    suite = ElementTree.Element("testsuite", name=_clean(place))
    whole = _add_case(suite, place, WHOLE)
    if report.troubles:
        _fail(whole, "\n".join(map(render_trouble, report.troubles)))
    failures, skipped = int(bool(report.troubles)), 0
    for case in report.cases:
        element = _add_case(suite, place, case.name)
        if case.state in (FAILED, OPEN):
            _fail(element, case.text)
            failures += 1
        elif case.state == ALLOWED:
            ElementTree.SubElement(element, "skipped", message=_clean(case.text))
            skipped += 1
    tests = len(report.cases) + 1
    counts = {"tests": tests, "failures": failures, "errors": 0, "skipped": skipped}
    _set_counts(suite, counts)
    return suite, counts


def _set_counts(element: ElementTree.Element, counts: dict[str, int]) -> None:
    for name, count in counts.items():
        element.set(name, str(count))
    element.set("time", "0")


def _add_case(suite: ElementTree.Element, place: str, name: str) -> ElementTree.Element:
    return ElementTree.SubElement(
        suite, "testcase", classname=_clean(place), name=_clean(name), time="0"
    )


def _fail(case: ElementTree.Element, text: str) -> None:
    failure = ElementTree.SubElement(
        case, "failure", message=_clean(text.split("\n")[0]), type="certify"
    )
    failure.text = _clean(text)


def _clean(text: str) -> str:
    return _NO_XML.sub(lambda match: ascii(match.group())[1:-1], text)
