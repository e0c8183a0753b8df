"""Where tasks run: in this process, in processes of this machine, or on a cluster.

A `Workers` is an executor that can be opened anew when its workers are lost.
"""

from __future__ import annotations

import multiprocessing
import os
import signal
import threading
from abc import ABC, abstractmethod
from collections.abc import Callable, Sequence
from concurrent.futures import BrokenExecutor, Executor, Future, ProcessPoolExecutor
from multiprocessing.connection import Connection
from typing import Any, Self

ALONE = 2
"""A task that was under way when workers were lost so often runs by itself from then on."""


class Workers(ABC):
    """An executor, how many tasks it runs at a time, and what its errors mean.

    batches: small tasks are sent together, and tasks are read ahead.
    foreign: results come from elsewhere, over a network.
    code: what the workers' code has to be, None where it cannot be another.
    """

    jobs: int = 1
    batches: bool = True
    foreign: bool = False
    code: str | None = None

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()

    @abstractmethod
    def submit(self, call: Callable[..., Any], *arguments: Any) -> Future[Any]:
        """Start a call. Errors: those that `blame` knows."""

    @abstractmethod
    def blame(self, error: BaseException) -> int:
        """Return how far an error casts suspicion on the task that was under way.

        0: it is an error of the task itself. 1: a worker was lost. ALONE: workers were
        lost again and again.
        """

    @abstractmethod
    def is_broken(self, error: BaseException) -> bool:
        """Return whether after this error nothing runs before `renew`."""

    def are_gone(self) -> bool:
        """Return whether no result can come any more, although no error has said so."""
        return False

    @abstractmethod
    def renew(self) -> None:
        """Open the executor anew. Errors: InputError when that cannot be."""

    @abstractmethod
    def close(self) -> None:
        """End the workers at once; what they were doing is dropped."""


class Here(Workers):
    """No other process: a call runs when it is submitted."""

    batches = False

    def submit(self, call: Callable[..., Any], *arguments: Any) -> Future[Any]:
        future: Future[Any] = Future()
        try:
            future.set_result(call(*arguments))
        except Exception as error:
            future.set_exception(error)
        return future

    def blame(self, error: BaseException) -> int:
        return 0

    def is_broken(self, error: BaseException) -> bool:
        return False

    def renew(self) -> None:
        pass

    def close(self) -> None:
        pass


class Processes(Workers):
    """Processes of this machine.

    They come from a fork server, where the system has one: a process that imports the
    modules of the work once, before any thread runs in it, and is forked for each worker.
    So a worker starts in milliseconds, also after another was lost, and never inherits
    a lock that a thread of this process held, as it could by a plain fork. Elsewhere
    they are spawned.
    """

    def __init__(self, jobs: int, preload: Sequence[str] = ()) -> None:
        """Open so many processes. preload: the modules to be imported once for all."""
        self.jobs = jobs
        if "forkserver" in multiprocessing.get_all_start_methods():
            self._context: Any = multiprocessing.get_context("forkserver")
            # The main module too, or each worker would import it anew.
            self._context.set_forkserver_preload(["__main__", *preload])
        else:
            self._context = multiprocessing.get_context("spawn")
        self._open()

    def _open(self) -> None:
        # Nothing is ever sent on this line. Workers wait for its end, which comes when
        # it is closed here, or by the system when this process is killed.
        self._line: tuple[Connection, Connection] = self._context.Pipe(duplex=False)
        self._executor: Executor = ProcessPoolExecutor(
            self.jobs, self._context, initializer=_begin, initargs=(self._line[0],)
        )

    def submit(self, call: Callable[..., Any], *arguments: Any) -> Future[Any]:
        return self._executor.submit(call, *arguments)

    def blame(self, error: BaseException) -> int:
        return int(isinstance(error, BrokenExecutor))

    def is_broken(self, error: BaseException) -> bool:
        return isinstance(error, BrokenExecutor)

    def renew(self) -> None:
        self.close()
        self._open()

    def close(self) -> None:
        for end in self._line:
            end.close()
        self._executor.shutdown(wait=True, cancel_futures=True)


def _begin(line: Connection) -> None:
    """Make a worker end with the process that started it, and leave Ctrl-C to that one."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    signal.signal(signal.SIGTERM, signal.SIG_DFL)
    threading.Thread(target=_end_with, args=(line,), daemon=True).start()


def _end_with(line: Connection) -> None:
    try:
        line.poll(None)
    finally:
        os._exit(1)


def count_cores() -> int:
    """Return how many cores this process may use."""
    if hasattr(os, "sched_getaffinity"):
        return len(os.sched_getaffinity(0))
    return os.cpu_count() or 1
