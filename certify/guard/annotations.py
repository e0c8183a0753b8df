"""Failures as annotations: commands in the output of a hosted CI that shows them in place.

The form is that of GitHub Actions: `::error file=F,line=L,title=T::TEXT`. It is used
when the environment says GITHUB_ACTIONS=true. A step shows ten errors (common
practice), so a claim with many gets its first ones and a word on the rest.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from itertools import islice
from pathlib import Path

from certify.guard.find import EVIDENCE, Trouble
from certify.guard.report import Report, one_line

MOST = 5
"""How many annotations one claim gets."""


def is_wanted(environment: Mapping[str, str]) -> bool:
    """Return whether this runs where annotations are shown."""
    return environment.get("GITHUB_ACTIONS") == "true"


def render_annotations(report: Report, environment: Mapping[str, str]) -> Iterator[str]:
    """Yield a line for each of the first problems of a claim.

    environment: where GITHUB_WORKSPACE names the folder that file names are relative to.
    """
    base = Path(environment.get("GITHUB_WORKSPACE") or ".")
    problems = list(islice(report.problems(), MOST + 1))
    title = f"certify guard: {one_line(report.claim)}"
    for number, problem in enumerate(problems[:MOST], 1):
        text = problem.text
        if number == MOST < len(problems):
            text += "\n... and more; see the log of this step"
        yield _render(problem, base, title, text)


def _render(problem: Trouble, base: Path, title: str, text: str) -> str:
    path, line = problem.path, problem.line or 1
    if path.name == EVIDENCE[1]:
        line = 1  # it is compressed, and has no lines to show
    shown = path.resolve()
    name = shown.relative_to(base.resolve()) if shown.is_relative_to(base.resolve()) else path
    place = f"file={_property(str(name))},line={line},title={_property(title)}"
    return f"::error {place}::{_data(text)}"


def _data(text: str) -> str:
    """Escape a text so that it cannot end its command."""
    shown = "".join(c if c.isprintable() or c in "\r\n" else ascii(c)[1:-1] for c in text)
    return shown.replace("%", "%25").replace("\r", "%0D").replace("\n", "%0A")


def _property(text: str) -> str:
    """Escape a text so that it cannot end its property either."""
    return _data(text).replace(":", "%3A").replace(",", "%2C")
