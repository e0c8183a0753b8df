"""Run the methods side by side and compare what they say."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from benchmark.child import GRACE, WALL
from benchmark.instance import Instance
from benchmark.outcome import Outcome

# Where the child finds this package, and certify when it is not installed.
PACKAGES = [str(folder) for folder in Path(__file__).resolve().parents[1:3]]
# Time for a child's start, its imports and building the question; not counted.
START_SECONDS = 120.0
MEMORY_SIGNS = ("memoryerror", "bad_alloc", "out of memory", "cannot allocate memory")


@dataclass(frozen=True)
class Limits:
    """What one run may take: seconds of processor time, gibibytes of address space."""

    seconds: float
    gibibytes: float


@dataclass(frozen=True)
class Row:
    """The outcomes of the methods on one instance; n and m of its question."""

    instance: Instance
    n: int
    m: int
    outcomes: dict[str, Outcome]

    def decided(self, *methods: str) -> bool:
        """Return whether all these methods answered."""
        return all(m in self.outcomes and self.outcomes[m].is_decided for m in methods)

    def complaint(self) -> str | None:
        """Return what is wrong with the answers, or None if they agree.

        Every answer is compared with the known one and with the others; a method
        that crashed is a complaint too, one that reached a limit is not.
        """
        said = {m: o.answer for m, o in self.outcomes.items() if o.is_decided}
        answers = set(said.values()) | ({self.instance.answer} - {None})
        texts = [f"{m} says {answer}" for m, answer in said.items()]
        crashes = [f"{m}: {o.kind}" for m, o in self.outcomes.items() if o.kind.startswith("crash")]
        if len(answers) > 1:
            known = f"known: {self.instance.answer} ({self.instance.source})"
            return f"{self.instance.name}: " + "; ".join([*texts, known, *crashes])
        return f"{self.instance.name}: " + "; ".join(crashes) if crashes else None


def run_method(method: str, instance: Instance, limits: Limits) -> Outcome:
    """Run a method in a child process and end everything it started.

    The outcome is `open` with the kind `time` or `memory` when a limit was
    reached, `crash: ...` when the child failed otherwise.
    """
    words = [method, instance.name, str(limits.seconds), str(limits.gibibytes)]
    path = os.pathsep.join([*PACKAGES, *filter(None, [os.environ.get("PYTHONPATH")])])
    child = subprocess.Popen(
        [sys.executable, "-m", "benchmark.child", *words],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
        env={**os.environ, "PYTHONPATH": path},
        start_new_session=True,
    )
    try:
        out, errors = child.communicate(timeout=START_SECONDS + WALL * limits.seconds + GRACE)
    except subprocess.TimeoutExpired:
        return Outcome("open", limits.seconds, kind="time")
    finally:
        end_group(child)
    return read_outcome(child.returncode, out, errors, limits)


def end_group(child: subprocess.Popen[str]) -> None:
    """Kill the child and whatever it started; it leads a session of its own."""
    try:
        os.killpg(child.pid, signal.SIGKILL)
    except ProcessLookupError:
        return
    child.wait()


def read_outcome(code: int, out: str, errors: str, limits: Limits) -> Outcome:
    """Turn the end of a child process into an outcome."""
    if code in (-signal.SIGPROF, -signal.SIGALRM):
        return Outcome("open", limits.seconds, kind="time")
    if code != 0:
        if any(sign in errors.lower() for sign in MEMORY_SIGNS):
            return Outcome("open", limits.seconds, kind="memory")
        last = (errors.strip().splitlines() or ["no message"])[-1]
        return Outcome("open", limits.seconds, kind=f"crash: exit {code}: {last}")
    outcome = Outcome(**json.loads(out.strip().splitlines()[-1]))
    if outcome.is_decided and outcome.seconds > limits.seconds:
        return Outcome("open", limits.seconds, kind="time")
    return outcome


def measure(instance: Instance, methods: Sequence[str], limits: Limits) -> Row:
    """Run the methods on one instance, one after the other."""
    question = instance.build()
    outcomes = {method: run_method(method, instance, limits) for method in methods}
    return Row(instance, question.n, question.m, outcomes)
