"""The tool against published tables and theorems.

Each value stands in a test with its source beside it. OEIS is the On-Line
Encyclopedia of Integer Sequences, oeis.org, and A090461 the number of an entry.
"From memory" marks a source that was not at hand when the test was written.

Nothing here counts as an answer that the checker has not accepted: `prove_claim`
goes from a claim file to a folder of evidence and has the whole folder checked.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from pathlib import Path
from typing import Any

import pytest

from certify.checker import check_folder
from certify.flow import Outcome, prove
from certify.search.ladder import Limits
from tests.published.geng import MISSING, find_geng

BUDGET = 120.0
LIMITS = Limits(seconds=BUDGET)
"""For one instance, of which none here needs more than a second or so."""

MOST_LEAVES = 12
"""So many cases a reader follows by hand."""

ProveClaim = Callable[..., dict[str, Outcome]]


@pytest.fixture
def prove_claim(tmp_path: Path) -> ProveClaim:
    """Return a function: the text of a claim (and list files by name) to outcomes by instance.

    It fails unless every instance is answered as claimed and the folder accepted.
    """
    made = 0

    def run(text: str, lists: dict[str, bytes] | None = None) -> dict[str, Outcome]:
        nonlocal made
        made += 1
        folder = tmp_path / f"claim-{made}"
        folder.mkdir()
        claim = folder / "claim.toml"
        claim.write_text(text)
        for name, data in (lists or {}).items():
            (folder / name).write_bytes(data)
        outcomes = {o.name: o for o in prove(claim, limits=LIMITS).outcomes}
        against = [name for name, outcome in outcomes.items() if outcome.contradicts]
        assert not against, f"against the published answer: {against[:10]}"
        left = [name for name, o in outcomes.items() if o.record.answer == "open"]
        assert not left, f"left open: {left[:10]}"
        check = check_folder(folder)
        verdicts = list(check.verdicts())
        assert check.accepted, [*check.complaints, *(v.reason for v in verdicts if v.reason)]
        assert len(verdicts) == len(outcomes)
        return outcomes

    return run


def answers(outcomes: Iterable[Outcome]) -> list[str]:
    """Return the answers of accepted outcomes, in order."""
    found = list(outcomes)
    assert all(outcome.verdict.accepted for outcome in found)
    return [outcome.record.answer for outcome in found]


def unreadable(outcomes: Iterable[Outcome]) -> list[str]:
    """Return the impossible instances whose reason is not for reading."""
    return [
        f"{outcome.name}: {outcome.record.kind}"
        for outcome in outcomes
        if outcome.record.answer == "impossible"
        and not is_readable(outcome.record.kind, outcome.record.evidence)
    ]


def is_readable(kind: str, evidence: dict[str, Any]) -> bool:
    """Return whether evidence is for reading: an obstruction, counting, or a few cases."""
    if kind == "cases":
        leaves = [node for node in evidence["nodes"] if node[0] not in ("edge", "vertex")]
        return len(leaves) <= MOST_LEAVES
    return kind in ("obstruction", "counting")


def pytest_terminal_summary(terminalreporter: pytest.TerminalReporter) -> None:
    """Say it at the end too when counts over all graphs were left out."""
    if find_geng() is None:
        terminalreporter.write_line(f"tests/published: {MISSING}", red=True)
