"""What the guard says of one claim."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from certify.guard.find import Trouble

ACCEPTED, ALLOWED, OPEN, FAILED = "accepted", "open, as allowed", "open", "failed"
_MOST_SHOWN = 600


@dataclass(frozen=True, slots=True)
class Case:
    """One instance. state: a word from above. text: what is wrong, empty if nothing is.

    line: of the file of evidence, counted from 1; 0 when there is none.
    """

    name: str
    state: str
    text: str = ""
    line: int = 0


@dataclass(frozen=True)
class Report:
    """What was found for one claim.

    claim: the claim file, or what was found in its place. evidence: the file that the
    lines of the cases are of. notes: what is told and is no failure. remembered: the
    verdicts are those of an earlier run with the same bytes.
    """

    claim: Path
    evidence: Path
    cases: tuple[Case, ...] = ()
    troubles: tuple[Trouble, ...] = ()
    notes: tuple[str, ...] = ()
    remembered: bool = False

    @property
    def state(self) -> str:
        """Return accepted, open or failed."""
        states = self.count()
        if self.troubles or states[FAILED]:
            return FAILED
        return OPEN if states[OPEN] else ACCEPTED

    def count(self) -> Counter[str]:
        """Return how many cases there are in each state."""
        return Counter(case.state for case in self.cases)

    def problems(self) -> Iterator[Trouble]:
        """Yield the troubles, and then the cases that are not accepted as troubles."""
        yield from self.troubles
        for case in self.cases:
            if case.state in (FAILED, OPEN):
                yield Trouble(self.evidence, case.text, case.line)


def name_instance(key: Mapping[str, int | str] | int) -> str:
    """Return an instance as a sentence names it: "n = 18", "graph 17 of the list"."""
    if isinstance(key, int):
        return f"graph {key} of the list"
    return ", ".join(f"{name} = {value}" for name, value in key.items()) or "the only instance"


def one_line(text: object) -> str:
    """Return a text as one printable line, cut short; so no file name can write another."""
    line = str(text)
    if len(line) > _MOST_SHOWN:
        line = line[:_MOST_SHOWN] + "..."
    return "".join(c if c.isprintable() else ascii(c)[1:-1] for c in line)


def render_trouble(trouble: Trouble) -> str:
    """Return a trouble with its place in front, on a line for each line of its text."""
    place = one_line(trouble.path) + (f":{trouble.line}" if trouble.line else "")
    return "\n".join(map(one_line, f"{place}: {trouble.text}".split("\n")))
