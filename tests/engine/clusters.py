"""A real scheduler and real workers on this machine, as processes of their own."""

from __future__ import annotations

import contextlib
import json
import os
import signal
import subprocess
import sys
import time
from dataclasses import dataclass, field
from pathlib import Path

ROOT = Path(__file__).parents[2]
SETTINGS = {"DASK_DISTRIBUTED__COMM__TIMEOUTS__CONNECT": "3s"}
"""A scheduler asks a worker that was killed for its results for so long."""


@dataclass
class Site:
    """A scheduler with workers. started: all of them, the scheduler first."""

    folder: Path
    started: list[subprocess.Popen[bytes]] = field(default_factory=list)
    address: str = ""

    def open(self, workers: int, *, nanny: bool = False, **environment: str) -> None:
        """Start a scheduler and so many workers, and wait for the scheduler's address."""
        note = self.folder / "scheduler.json"
        self._start(
            "dask_scheduler",
            *("--host", "127.0.0.1", "--port", "0", "--no-dashboard", "--no-show"),
            *("--scheduler-file", str(note)),
            **environment,
        )
        while not self.address:
            assert self.started[0].poll() is None, self.log()
            try:
                self.address = json.loads(note.read_text())["address"]
            except (FileNotFoundError, ValueError):
                time.sleep(0.05)
        for _ in range(workers):
            self.add_worker(nanny=nanny)

    def add_worker(self, *, nanny: bool = False, root: Path = ROOT) -> subprocess.Popen[bytes]:
        """Start one more worker; root: where it imports from first."""
        return self._start(
            "dask_worker",
            self.address,
            *("--host", "127.0.0.1", "--nthreads", "1", "--no-dashboard"),
            *("--nanny" if nanny else "--no-nanny", "--local-directory", str(self.folder)),
            root=root,
        )

    def _start(
        self, module: str, *arguments: str, root: Path = ROOT, **environment: str
    ) -> subprocess.Popen[bytes]:
        with (self.folder / "log").open("ab") as log:
            process = subprocess.Popen(
                [sys.executable, "-m", f"distributed.cli.{module}", *arguments],
                cwd=root,
                env={**os.environ, **SETTINGS, **environment},
                stdout=log,
                stderr=log,
                # Its nanny and whatever else it starts can be ended with it.
                start_new_session=True,
            )
        self.started.append(process)
        return process

    def log(self) -> str:
        """Return what all of them said."""
        return (self.folder / "log").read_text()

    def close(self) -> None:
        """End all of them, with whatever they have started."""
        for process in reversed(self.started):
            with contextlib.suppress(ProcessLookupError):
                os.killpg(process.pid, signal.SIGKILL)
            process.wait()
