"""What a worker does for an instance, with one instance that goes wrong: for tests."""

from __future__ import annotations

import os
import signal
from pathlib import Path

from certify.flow.work import Finding, Job, Refusal, settle_job

KILLS, RAISES = 5, 6


def kill_at_five(job: Job) -> Finding | Refusal:
    """Kill the worker at instance 5, each time."""
    if job.key in (KILLS, {"n": KILLS}):
        os.kill(os.getpid(), signal.SIGKILL)
    return settle_job(job)


def raise_at_six(job: Job) -> Finding | Refusal:
    """Fail at instance 6."""
    if job.key in (RAISES, {"n": RAISES}):
        raise ArithmeticError("six is too much")
    return settle_job(job)


def kill_once(mark: str, job: Job) -> Finding | Refusal:
    """Kill the worker at instance 5, if there is no file `mark` yet."""
    if job.key in (KILLS, {"n": KILLS}):
        try:
            Path(mark).touch(exist_ok=False)
        except FileExistsError:
            pass
        else:
            os.kill(os.getpid(), signal.SIGKILL)
    return settle_job(job)
