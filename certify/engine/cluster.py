"""Workers of a Dask cluster, through its executor (the extra `cluster`)."""

from __future__ import annotations

import contextlib
import socket
from collections.abc import Callable
from concurrent.futures import BrokenExecutor, CancelledError, Future
from typing import Any
from urllib.parse import urlsplit

from certify.engine.code import compare_code, describe_code
from certify.engine.executors import ALONE, Workers
from certify.errors import InputError

PATIENCE = 10
"""Seconds to wait for the scheduler, and for a first worker."""
BETWEEN_COUNTS = 64
"""Batches that are submitted before workers are counted anew."""


class Cluster(Workers):
    """The workers of a scheduler that runs already.

    Dask sends a task of a lost worker to another one by itself; here arrives what
    even that did not save.
    """

    foreign = True

    def __init__(self, address: str) -> None:
        """Connect. Errors: InputError, saying what is missing."""
        try:
            import distributed
        except ImportError:
            raise InputError(
                "--cluster needs the package distributed\n  next: pip install 'certify[cluster]'"
            ) from None
        self._distributed: Any = distributed
        self._address = address
        self.code = describe_code()
        self._client: Any = None
        self._executor: Any = None
        self._submitted = 0
        self.renew()

    def submit(self, call: Callable[..., Any], *arguments: Any) -> Future[Any]:
        self._submitted += 1
        if self._submitted % BETWEEN_COUNTS == 0:
            self._count_workers()
        future: Future[Any] = self._executor.submit(call, *arguments)
        return future

    def blame(self, error: BaseException) -> int:
        if isinstance(error, self._distributed.KilledWorker):
            return ALONE
        return int(self.is_broken(error))

    def are_gone(self) -> bool:
        # What was under way when the connection broke may never be told of again.
        return str(self._client.status) not in ("running", "newly-created")

    def is_broken(self, error: BaseException) -> bool:
        # Nobody cancels here: a cancelled task is one that the scheduler forgot. What the
        # task itself raised has been caught in the worker and is no error of the future.
        return isinstance(error, CancelledError | OSError | BrokenExecutor)

    def renew(self) -> None:
        self.close()
        try:
            _knock(self._address)
            self._client = self._distributed.Client(
                self._address, timeout=PATIENCE, set_as_default=False
            )
        except (OSError, TimeoutError, ValueError) as error:
            raise InputError(
                f"{self._address}: no scheduler can be reached there: {_first_line(error)}\n"
                "  next: give the address that dask scheduler prints, such as tcp://HOST:8786"
            ) from None
        self._meet_workers()
        self._executor = self._client.get_executor(pure=False)

    def _meet_workers(self) -> None:
        try:
            self._client.wait_for_workers(1, timeout=PATIENCE)
        except TimeoutError:
            self.close()
            raise InputError(
                f"{self._address}: the scheduler has no workers\n"
                f"  next: dask worker {self._address} --nthreads 1"
            ) from None
        try:
            found = self._client.run(describe_code)
        except Exception as error:
            self.close()
            raise InputError(
                f"{self._address}: a worker cannot load this program: {_first_line(error)}\n"
                "  next: install the same certify there"
            ) from None
        for worker, code in found.items():
            if code != self.code:
                self.close()
                raise InputError(compare_code(self.code or "", code, f"the worker {worker}"))
        self._count_workers()

    def _count_workers(self) -> None:
        """Take note of how many tasks the workers run at a time: some come, some go."""
        self.jobs = max(1, sum(self._client.nthreads().values()))

    def close(self) -> None:
        if self._executor is not None:
            with contextlib.suppress(Exception):  # whatever goes wrong, it is to be left
                self._executor.shutdown(wait=False)
        if self._client is not None:
            with contextlib.suppress(Exception):
                self._client.close(timeout=PATIENCE)
        self._client = self._executor = None


def _knock(address: str) -> None:
    """Connect to where the scheduler should be, and hang up: a client that cannot leaves a thread.

    Errors: OSError, ValueError.
    """
    parts = urlsplit(address if "://" in address else f"tcp://{address}")
    if parts.scheme in ("tcp", "tls"):
        if not parts.hostname or parts.port is None:
            raise ValueError("this is no address with a port")
        socket.create_connection((parts.hostname, parts.port), timeout=PATIENCE).close()


def _first_line(error: BaseException) -> str:
    return (str(error) or type(error).__name__).splitlines()[0]
