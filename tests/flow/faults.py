"""Runs that are stopped at a chosen file operation, in a process of their own.

Python reports every file that is opened, renamed, made or removed to an audit hook.
A child process counts those inside one folder and stops itself before one of them.
"""

from __future__ import annotations

import os
import signal
import sys
from collections.abc import Callable
from pathlib import Path

Action = Callable[[], object]
EVENTS = ("open", "os.rename", "os.remove", "os.mkdir", "os.rmdir", "shutil.rmtree")
DONE, INTERRUPTED = 0, 9


def in_child(action: Action) -> int:
    """Run something in a child process; return what `os.waitpid` says, as an exit code."""
    child = os.fork()
    if child == 0:
        code = 1
        try:
            action()
            code = DONE
        except KeyboardInterrupt:
            code = INTERRUPTED
        except SystemExit as stop:
            code = int(stop.code or 0)
        finally:
            os._exit(code)
    return os.waitstatus_to_exitcode(os.waitpid(child, 0)[1])


def stop_before(folder: Path, at: int, stop: Action, action: Action) -> int:
    """Run something in a child that stops before the `at`-th operation inside a folder.

    Returns the exit code: negative for a signal, DONE if there were fewer operations.
    """
    inside, seen = str(folder), 0

    def watch(event: str, arguments: tuple[object, ...]) -> None:
        nonlocal seen
        if event in EVENTS and any(inside in str(item) for item in arguments[:2]):
            seen += 1
            if seen == at:
                stop()

    def run() -> None:
        sys.addaudithook(watch)
        action()

    return in_child(run)


def kill() -> None:
    """End this process as `kill -9` does."""
    os.kill(os.getpid(), signal.SIGKILL)


def interrupt() -> None:
    """Do what Ctrl-C does."""
    raise KeyboardInterrupt
