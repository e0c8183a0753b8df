"""The differences between a table and what was found, for readers and for programs."""

from __future__ import annotations

import csv
import io
from collections import Counter
from collections.abc import Callable, Mapping, Sequence
from pathlib import Path

from certify.errors import InputError
from certify.evidence.disk import telling, write_atomically
from certify.recheck.compare import AGREES, DISAGREES, OPEN, Finding
from certify.recheck.parts import Plan

_SAID = {"exists": "it exists", "impossible": "it is impossible"}


def render_line(plan: Plan, finding: Finding) -> str:
    """Return what is said of one row, with file and line."""
    row = finding.row
    where = f"{plan.table.shown}:{row.line}: {name_row(finding)}: {finding.result}"
    if finding.result == OPEN:
        return f"{where}: the table says {row.claimed}, and neither is known"
    if finding.result == AGREES:
        return f"{where}: {finding.answer} ({finding.kind})"
    return (
        f"{where}: the table says {row.claimed}, and {_SAID[finding.answer]} "
        f"({finding.kind} of length {finding.length})"
    )


def name_row(finding: Finding) -> str:
    """Return the instance of a row: `n=18`, or `graph 17`."""
    key = finding.key
    return f"graph {key}" if isinstance(key, int) else finding.row.name


def render_counts(findings: Sequence[Finding]) -> str:
    """Return how many rows agree, disagree and are open."""
    count = Counter(finding.result for finding in findings)
    noun = "row" if len(findings) == 1 else "rows"
    agree = "agrees" if count[AGREES] == 1 else "agree"
    disagree = "disagrees" if count[DISAGREES] == 1 else "disagree"
    return (
        f"{len(findings)} {noun}: {count[AGREES]} {agree}, {count[DISAGREES]} {disagree}, "
        f"{count[OPEN]} open"
    )


def write_report(path: Path, plan: Plan, findings: Sequence[Finding]) -> None:
    """Write the rows that do not agree, as Markdown or CSV by the ending of the file.

    Errors: InputError for another ending; DiskError.
    """
    render = find_form(path)
    text = render(plan, sorted(findings, key=lambda finding: finding.row.line))
    with telling(path, "write here"):
        write_atomically(path, text.encode())


def find_form(path: Path) -> Callable[[Plan, Sequence[Finding]], str]:
    """Return how a report is written. Errors: InputError when its ending does not say."""
    if path.suffix not in _FORMS:
        raise InputError(f"{path}: a report ends in {' or '.join(_FORMS)}")
    return _FORMS[path.suffix]


def _render_markdown(plan: Plan, findings: Sequence[Finding]) -> str:
    """Return the report; it holds the reason for each row that is contradicted."""
    lines = [
        f"# Recheck of `{Path(plan.table.shown).name}`",
        "",
        f"Against the rule of `{plan.claim_path.name}` ({plan.structure}). "
        f"{render_counts(findings)}.",
        "",
        "Every answer below has evidence that the checker accepted, of the stated rule "
        "and of these rows alone.",
        "",
    ]
    for finding in findings:
        if finding.result == DISAGREES:
            lines += [
                f"## Line {finding.row.line}: {name_row(finding)}",
                "",
                f"The table says {finding.row.claimed}; {_SAID[finding.answer]} ({finding.kind} of "
                f"length {finding.length}).",
                "",
                "```text",
                finding.reason.strip(),
                "```",
                "",
            ]
    left = [finding for finding in findings if finding.result == OPEN]
    if left:
        lines += ["## Left open", ""]
        lines += [
            f"* line {finding.row.line}: {name_row(finding)} (the table says {finding.row.claimed})"
            for finding in left
        ]
        lines += [""]
    return "\n".join(lines)


def _render_csv(plan: Plan, findings: Sequence[Finding]) -> str:
    """Return the rows that do not agree as a table of their own."""
    buffer = io.StringIO()
    writer = csv.writer(buffer, lineterminator="\n")
    names = plan.table.parameters
    writer.writerow(["line", *names, "result", "claimed", "found", "kind", "length", "reason"])
    for finding in findings:
        if finding.result != AGREES:
            key = finding.key
            values = [key] if isinstance(key, int) else [key[name] for name in names]
            said = [finding.result, finding.row.claimed, finding.answer, finding.kind]
            writer.writerow(
                [finding.row.line, *values, *said, finding.length, finding.reason.strip()]
            )
    return buffer.getvalue()


_FORMS: Mapping[str, Callable[[Plan, Sequence[Finding]], str]] = {
    ".md": _render_markdown,
    ".csv": _render_csv,
}
