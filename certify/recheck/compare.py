"""The comparison: every row is searched, its evidence checked, and held against the table."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Any

from certify.claim.instances import Key
from certify.errors import ClaimError, InputError
from certify.evidence.disk import telling
from certify.flow import Outcome, prove
from certify.interface import render_outcome
from certify.recheck.parts import CLAIM, Part, Plan
from certify.recheck.table import Row
from certify.search.ladder import DEFAULTS, Limits

AGREES, DISAGREES, OPEN = "agrees", "disagrees", "open"


@dataclass(frozen=True)
class Finding:
    """What came out for one row.

    answer, kind, length: of the evidence, which the checker has accepted; open, none and 0
    without any. reason: the evidence in plain English where the table is contradicted, else "".
    part, stored: the folder of the evidence, and the instance's name in it.
    """

    row: Row
    answer: str
    kind: str
    length: int
    reason: str
    part: str
    stored: str

    @property
    def result(self) -> str:
        """Return agrees, disagrees or open."""
        if self.answer == "open":
            return OPEN
        return AGREES if self.answer == self.row.claimed else DISAGREES

    @property
    def key(self) -> Key:
        """Return the instance, as the table has it."""
        return self.row.key


def compare(
    plan: Plan, *, out: Path | None = None, limits: Limits = DEFAULTS, jobs: int = 1
) -> Iterator[Finding]:
    """Yield what comes out for each row, in the order of the instances.

    out: the folder for the evidence, or for its parts; None throws it away afterwards. A run
    that was cut short is taken up there. limits: for each row. jobs: how many rows at a time.
    Errors: InputError when a graph cannot be built, or the folder holds something else.
    """
    if out is not None:
        _check_folder(out, plan)
    with TemporaryDirectory() as work:
        for part in plan.parts:
            home = Path(work) / "claim" / part.name
            folder = Path(work) / "evidence" / part.name if out is None else out / part.name
            _write_part(home, part)
            run = prove(home / CLAIM, out=folder, limits=limits, jobs=jobs)
            yield from _judge(plan, part, home, run.outcomes)


def _judge(plan: Plan, part: Part, home: Path, outcomes: Iterator[Outcome]) -> Iterator[Finding]:
    rows = iter(part.rows)
    try:
        for position, (outcome, row) in enumerate(zip(outcomes, rows, strict=True), 1):
            # The graphs of the rows are in a list of their own.
            if outcome.record.key != (position if isinstance(row.key, int) else row.key):
                raise RuntimeError(f"{outcome.name} came out in the place of {row.name}")
            yield _find(part, row, outcome)
    except ClaimError as error:
        # The claim that was searched has no place that its author knows.
        text = str(error).replace(str(home / CLAIM), str(plan.claim_path))
        raise ClaimError(f"{text}\n  next: see the rows of {plan.table.shown}") from None


def _find(part: Part, row: Row, outcome: Outcome) -> Finding:
    record: Any = outcome.record
    # Only what the checker says counts; the claim has no answers to be against.
    answer = record.answer if outcome.verdict.accepted else "open"
    kind, length = (record.kind, record.length) if answer != "open" else ("none", 0)
    against = answer not in ("open", row.claimed)
    reason = render_outcome(outcome) if against else ""
    return Finding(row, answer, kind, length, reason, part.name, outcome.name)


def _write_part(home: Path, part: Part) -> None:
    with telling(home, "write here"):
        home.mkdir(parents=True, exist_ok=True)
        (home / CLAIM).write_text(part.text, encoding="utf-8", newline="\n")
        for name, data in part.files.items():
            (home / name).write_bytes(data)


def _check_folder(out: Path, plan: Plan) -> None:
    """Refuse a folder that holds a claim other than those that belong there now."""
    wanted = {out / part.name / CLAIM: part.text.encode() for part in plan.parts}
    for path in [out / CLAIM, *sorted(out.glob(f"part-*/{CLAIM}"))]:
        with telling(path, "be read"):
            if path.exists() and path.read_bytes() != wanted.get(path):
                raise InputError(
                    f"{path}: this is another claim, or one of a table with other rows; "
                    "give a new folder with --out"
                )
