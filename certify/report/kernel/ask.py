"""What the kernel's program says of the evidence of a folder, instance by instance.

The graphs that it is given are built here, in Python, from the claim; in the theorems
of `certify theorem` Coq builds them itself. That the file of the claim is the one meant,
that its answers are those of the evidence, and what the evidence says of itself (sizes,
lengths, digests) is for the checker to see.
"""

from __future__ import annotations

import contextlib
import gzip
import select
import subprocess
import zlib
from collections.abc import Iterable, Iterator
from itertools import zip_longest
from pathlib import Path
from types import TracebackType
from typing import Self

from certify.claim.claim import read_claim
from certify.evidence.lines import claim_name, read_evidence
from certify.graph.build import instances
from certify.report.kernel.proofs import Read
from certify.report.kernel.strict import NotTakenError, RefusedError, read_record
from certify.report.kernel.words import write_instance
from certify.report.referee import Opinion

SECONDS = 3600
MOST_BYTES = 1 << 28
_START = 'ulimit -s "$(ulimit -H -s)"; ulimit -v 8388608; exec "$0"'
"""How a shell starts the program. Its functions recurse along lists, and a stack of 8 MiB ends
at about 250,000 edges or clauses; and no sweep may take the memory of the whole machine."""


class Kernel:
    """The program, running: it is given one instance at a time, and says one word of each."""

    def __init__(self, program: Path) -> None:
        self._program = program
        self._run: subprocess.Popen[bytes] | None = None

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self._stop()

    def ask(self, words: Iterable[str]) -> str:
        """Return what the program says of an instance: `accepted`, `rejected`, or why nothing."""
        said = self._talk(piece.encode("ascii") for piece in words)
        if said in (b"accepted\n", b"rejected\n"):
            return said.decode().strip()
        if said == b"overflow\n":
            return "its stack is too small to tell; raise the limit (ulimit -H -s)"
        self._stop()
        return f"it gave no verdict: {SECONDS} seconds or 8 GiB were not enough"

    def _talk(self, words: Iterable[bytes]) -> bytes:
        """Write an instance to the program, started if it is not running; return its line."""
        if self._run is None:
            self._run = subprocess.Popen(
                ["/bin/sh", "-c", _START, str(self._program)],
                stdin=subprocess.PIPE,
                stdout=subprocess.PIPE,
                stderr=subprocess.DEVNULL,
            )
        write, read = self._run.stdin, self._run.stdout
        if write is None or read is None:
            return b""
        try:
            write.writelines(words)
            write.flush()
        except BrokenPipeError:
            return b""
        # What is said is one line for each instance, so nothing is left in the buffer.
        return read.readline() if select.select([read], [], [], SECONDS)[0] else b""

    def _stop(self) -> None:
        """End the program: it knows nothing that is still needed."""
        if self._run is None:
            return
        self._run.kill()
        with contextlib.suppress(BrokenPipeError):
            self._run.communicate()
        self._run = None


def ask_kernel(folder: Path, program: Path) -> Iterator[Opinion]:
    """Yield the kernel's opinion on each instance of a folder, in order.

    Cost: one instance in memory. Errors: CertifyError when the claim, its list or the evidence
    cannot be read.
    """
    claim = read_claim(folder / claim_name(folder))
    with Kernel(program) as kernel:
        for position, (instance, line) in enumerate(
            zip_longest(instances(claim, folder), read_evidence(folder)), 1
        ):
            if instance is None:
                yield Opinion(f"line {position}", False, "there is no such instance")
                return
            try:
                if line is None:
                    raise RefusedError("there is no evidence")
                files = _reader(folder, instance.name)
                words = list(write_instance(claim, instance, read_record(line), files))
            except NotTakenError as error:
                yield Opinion(
                    instance.name, False, f"the kernel does not take this: {error}", taken=False
                )
            except RefusedError as error:
                yield Opinion(instance.name, False, f"not given to the kernel: {error}")
            else:
                said = kernel.ask(words)
                # A limit that is reached is no verdict.
                told = said in ("accepted", "rejected")
                yield Opinion(instance.name, said == "accepted", f"the kernel: {said}", told)


def _reader(folder: Path, name: str) -> Read:
    """Return what reads the files of the clause proof of an instance, and no others."""

    def read(form: str, named: object) -> str:
        expected = f"clauses/{name}.{form}.gz"
        if named != expected:
            raise RefusedError(f"the file is not named {expected}")
        try:
            with gzip.open(folder / expected, "rb") as file:
                data = file.read(MOST_BYTES + 1)
        except (OSError, EOFError, zlib.error) as error:
            raise RefusedError(f"{expected} cannot be read: {error}") from None
        if len(data) > MOST_BYTES:
            raise RefusedError(f"{expected} has more than {MOST_BYTES} bytes")
        try:
            return data.decode("ascii")
        except UnicodeDecodeError:
            raise RefusedError(f"{expected} is not ASCII") from None

    return read
