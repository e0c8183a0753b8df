"""How outcomes are shown as they come, and what the exit code has to say at the end."""

from __future__ import annotations

import contextlib
import json
import sys
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field

import click
from rich.console import Console
from rich.progress import (
    BarColumn,
    MofNCompleteColumn,
    Progress,
    ProgressColumn,
    Task,
    TextColumn,
    TimeRemainingColumn,
)
from rich.text import Text

from certify.errors import ContradictionError, OpenError
from certify.evidence.endless import exists_for
from certify.flow import Outcome

MOST_NAMED = 10
"""Instances named in a message about all of them."""

Say = Callable[[str], None]


@dataclass
class Verdicts:
    """What the exit code depends on, gathered as outcomes come; of each kind a few are named."""

    against: list[str] = field(default_factory=list)
    left: list[str] = field(default_factory=list)
    failed: list[str] = field(default_factory=list)
    left_count: int = 0

    def add(self, outcome: Outcome) -> None:
        """Take the next outcome."""
        if outcome.contradicts and len(self.against) < MOST_NAMED:
            self.against.append(f"instance {outcome.name}: {outcome.verdict.reason}")
        if outcome.error is not None and len(self.failed) < MOST_NAMED:
            self.failed.append(f"instance {outcome.name}: {outcome.error}")
        if outcome.record.answer == "open":
            self.left_count += 1
            if len(self.left) < MOST_NAMED:
                self.left.append(outcome.name)

    def raise_for(self, complaint: str | None) -> None:
        """Raise what the exit code has to say: a contradiction, or something left open.

        complaint: how the counts differ from those claimed, None if they do not.
        """
        if self.against:
            raise ContradictionError("the claim is contradicted:\n  " + "\n  ".join(self.against))
        if complaint is not None:
            raise ContradictionError(f"the claim is contradicted: {complaint}")
        if self.left_count:
            more = " ..." if self.left_count > len(self.left) else ""
            errors = "".join(f"\n  {text}" for text in self.failed)
            raise OpenError(
                f"left open: {', '.join(self.left)}{more}{errors}"
                "\n  next: give more time with --budget SECONDS"
            )


@contextlib.contextmanager
def showing(count: int | None, *, lines: str, as_json: bool) -> Iterator[Callable[[Outcome], None]]:
    """Give a function that shows an outcome: a bar on a terminal, and lines.

    count: of outcomes to come, None if unknown. lines: of which outcomes there is a
    line: `all`, `notable` (open, or not as claimed), or `off terminal` (all, but on a
    terminal the notable ones). as_json: one JSON object a line, and nothing else.
    """
    if as_json:
        yield lambda outcome: click.echo(json.dumps(_describe(outcome), sort_keys=True))
        return
    terminal = sys.stdout.isatty()
    every = lines == "all" or (lines == "off terminal" and not terminal)

    def say_line(outcome: Outcome, say: Say) -> None:
        if every or outcome.contradicts or outcome.record.answer == "open":
            say(line_of(outcome))

    # Every line on the terminal is as good as a bar, and a bar among them is not to be read.
    if not sys.stderr.isatty() or (terminal and every):
        yield lambda outcome: say_line(outcome, click.echo)
        return
    columns = (
        TextColumn("{task.description}"),
        BarColumn(),
        MofNCompleteColumn(),
        _RateColumn(),
        TimeRemainingColumn(),
    )
    with Progress(*columns, console=Console(stderr=True), transient=True) as progress:
        task = progress.add_task("searching", total=count)
        above = progress.console.out if terminal else click.echo

        def show(outcome: Outcome) -> None:
            say_line(outcome, above)
            progress.update(task, advance=1, description=outcome.name)

        yield show


class _RateColumn(ProgressColumn):
    """Instances a second, over the last of them."""

    def render(self, task: Task) -> Text:
        speed = task.finished_speed or task.speed
        return Text("" if speed is None else f"{speed:,.{0 if speed >= 10 else 1}f}/s")


def line_of(outcome: Outcome) -> str:
    """Return the line about an outcome."""
    record = outcome.record
    text = f"{outcome.name}: {record.answer}"
    if outcome.error is not None:
        text += f"; error: {outcome.error}"
    if record.answer != "open":
        text += f", {record.kind} of length {record.length}"
        exists = exists_for(record)
        text += "" if exists is None else f"; exists for {exists}"
    return text + (f" -- {outcome.verdict.reason}" if outcome.contradicts else "")


def row_of(outcome: Outcome) -> tuple[str, str]:
    """Return the name of a row of an endless claim, and for which values the object exists."""
    note = " (not as claimed)" if outcome.contradicts else ""
    return outcome.name, (exists_for(outcome.record) or "left open") + note


def _describe(outcome: Outcome) -> dict[str, object]:
    record, verdict = outcome.record, outcome.verdict
    exists = exists_for(record)
    return {
        **({} if exists is None else {"exists_for": exists}),
        **({} if outcome.error is None else {"error": outcome.error}),
        "instance": record.key,
        "answer": record.answer,
        "kind": record.kind,
        "length": record.length,
        "verdict": "accepted" if verdict.accepted else "rejected",
        "reason": verdict.reason,
    }
