"""Run one method on one instance in a process of its own.

    python -m benchmark.child METHOD INSTANCE SECONDS GIBIBYTES

Prints the outcome as one JSON line. The limits begin after the imports and after
the question is built, and are kept by the operating system: a signal ends a
process that is deep inside a solver when it has used its processor time (or
WALL times as much on the wall), and memory beyond the limit is refused.
"""

from __future__ import annotations

import json
import resource
import signal
import sys
from collections.abc import Callable
from dataclasses import asdict
from importlib import import_module

from benchmark.outcome import Outcome
from benchmark.suite import build_suite
from certify.graph.question import Question

# Method letter: module and function. Imported on demand, so that one method runs
# where the packages of the other are missing.
METHODS = {
    "a": ("benchmark.ours", "run_certify"),
    "b": ("benchmark.rivals", "run_constraint_solver"),
    "c": ("benchmark.rivals", "run_textbook"),
}
# Seconds beyond the limit for a method that stops by itself to report.
GRACE = 2.0
# A process that sleeps, or gets less than a fifth of a processor, ends anyway.
WALL = 5.0


def main(method: str, name: str, seconds: float, gibibytes: float) -> None:
    """Run a method and print its outcome."""
    instance = next(i for i in build_suite() if i.name == name)
    question = instance.build()
    module, function = METHODS[method]
    run: Callable[[Question, float], Outcome] = getattr(import_module(module), function)
    size = int(gibibytes * 2**30)
    resource.setrlimit(resource.RLIMIT_AS, (size, size))
    signal.setitimer(signal.ITIMER_PROF, seconds + GRACE)
    signal.setitimer(signal.ITIMER_REAL, WALL * seconds + GRACE)
    outcome = run(question, seconds)
    print(json.dumps(asdict(outcome)))


if __name__ == "__main__":
    main(sys.argv[1], sys.argv[2], float(sys.argv[3]), float(sys.argv[4]))
