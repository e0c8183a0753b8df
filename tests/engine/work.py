"""Calls for the tests of the engine: workers import them from here."""

from __future__ import annotations

import os
import signal
import threading
from pathlib import Path
from typing import Any


def double(item: int) -> int:
    return 2 * item


def who(item: int) -> int:
    return os.getpid()


def fail_at_seven(item: int) -> int:
    if item == 7:
        raise ValueError("seven is refused")
    return 2 * item


def leave(item: int) -> int:
    """Raise what is no Exception, for 7."""
    if item == 7:
        raise SystemExit(5)
    return 2 * item


def die_once(item: tuple[int, int, str]) -> int:
    """Kill the worker at one number, but only where no worker has been killed before."""
    number, fatal, mark = item
    if number == fatal:
        try:
            os.close(os.open(mark, os.O_CREAT | os.O_EXCL))
        except FileExistsError:
            pass
        else:
            os.kill(os.getpid(), signal.SIGKILL)
    return 2 * number


def die_at(item: tuple[int, frozenset[int]]) -> int:
    """Kill the worker at some numbers, always."""
    number, fatal = item
    if number in fatal:
        os.kill(os.getpid(), signal.SIGKILL)
    return 2 * number


def bring_what_cannot_be_sent(item: int) -> Any:
    return threading.Lock() if item == 7 else 2 * item


def tell_and_wait(item: tuple[int, str]) -> int:
    """Write down which process this is, and never come back."""
    number, folder = item
    Path(folder, str(os.getpid())).write_text(str(number))
    threading.Event().wait()
    return number


def add(items: list[int]) -> int:
    return sum(items)


def add_and_kill_once(item: tuple[list[int], str]) -> int:
    numbers, mark = item
    return die_once((sum(numbers), sum(numbers), mark)) // 2
