"""A folder of evidence on disk.

While a run goes on, everything it writes is in the folder `.unfinished` inside the
evidence folder; until it ends, the last finished state stays as it was:

    lock              held while a run goes on
    input             the digests of the claim and its list, for which all of this is
    earlier.jsonl     lines that were stored before (spool.py)
    evidence.jsonl    the journal: the lines of this run, in the order of the instances
    clauses/          bulky files of these lines
    list              the graphs, when they come from elsewhere, as they are read
    ready/            the finished state, while it is put in place (ready.py)

A killed run is taken up by the next one: its journal joins the earlier lines.
"""

from __future__ import annotations

import contextlib
import hashlib
import json
import os
import stat
import tempfile
from collections.abc import Iterator
from pathlib import Path
from typing import IO, BinaryIO, Self, cast

from filelock import FileLock, Timeout

from certify.claim.claim import Claim
from certify.claim.instances import EndlessKey, Key
from certify.errors import DiskError, InputError
from certify.evidence.disk import (
    digest_of_file,
    refuse_links,
    remove,
    telling,
    write_all,
    write_atomically,
    written,
)
from certify.evidence.lines import (
    MANIFEST,
    MOST_BYTES,
    PACKED,
    PLAIN,
    read_evidence,
    read_lines,
    read_manifest,
)
from certify.evidence.lines import claim_name as claim_name
from certify.evidence.ready import CLAUSES, Ready
from certify.evidence.record import Record
from certify.evidence.source import ListSource
from certify.evidence.spool import Spool

UNFINISHED = ".unfinished"
MOST_BULK = 1 << 28
_HEAD, _EARLIER, _LIST, _READY = "input", "earlier.jsonl", "list", "ready"


class Store:
    """The evidence folder of one claim, held by one run at a time.

    claim_path: where the claim was read; it and the list it names are copied into
    the folder when they lie elsewhere. list_source: a file, or an open one such as
    standard input, that holds the claim's list of graphs instead; it is copied into the
    folder while it is read through `open_list`.
    """

    def __init__(
        self,
        folder: Path,
        claim: Claim,
        claim_path: Path,
        list_source: Path | BinaryIO | None = None,
    ) -> None:
        self.folder = folder
        self.claim = claim
        self.evidence_name = PLAIN if claim.list_name is None else PACKED
        self._home = claim_path.parent
        self._list_source = list_source
        self._unfinished = folder / UNFINISHED
        self._state = Ready(folder, self._unfinished)
        self._lock = FileLock(self._unfinished / "lock")
        self._journal: IO[bytes] | None = None
        self._spool: Spool | None = None
        self._list: ListSource | None = None
        self._open = contextlib.ExitStack()
        self._digests: dict[str, str] = {}
        self._files: list[str] = []
        self._made: list[Path] = []
        self._keep = False

    # ---- the beginning

    def __enter__(self) -> Self:
        """Take the folder, or raise InputError saying why that cannot be."""
        self._refuse_other_claim()
        listed = self.claim.list_name
        refuse_links(self.folder, [self.claim.name, CLAUSES, *([listed] if listed else [])])
        with telling(self.folder, "write here", next_step="give another folder with --out"):
            self._acquire()
            try:
                self._begin()
            except BaseException:
                self.__exit__()
                raise
        return self

    def __exit__(self, *_: object) -> None:
        self._close()
        self._lock.release()

    def _close(self) -> None:
        with contextlib.suppress(OSError):  # a full disk; it was said where it was met
            self._open.close()
        if self._spool is not None:
            self._spool.close()
        self._spool = self._journal = None

    def _acquire(self) -> None:
        """Take the lock; its file may have been removed by a run that ended just now."""
        for _ in range(100):
            try:
                if self._unfinished.is_symlink():
                    raise InputError(f"{self._unfinished}: is a symbolic link; remove it")
                self._make(self._unfinished)
                self._lock.acquire(timeout=0)
            except Timeout:
                raise InputError(
                    f"{self.folder}: another run is writing here; wait for it to end, "
                    "or give another folder with --out"
                ) from None
            except (FileNotFoundError, FileExistsError):
                if self._unfinished.exists() and not self._unfinished.is_dir():
                    raise
                continue  # another run has removed the folder in between
            if (self._unfinished / "lock").exists():
                return
            self._lock.release()
        raise InputError(f"{self.folder}: other runs come and go here; try again")

    def _make(self, folder: Path) -> None:
        for missing in reversed([folder, *folder.parents]):
            if not missing.exists():
                missing.mkdir(exist_ok=True)
                self._made.append(missing)

    def _begin(self) -> None:
        for path in self._unfinished.iterdir():
            if path.is_symlink():
                path.unlink()  # We made none; a stranger's could lead out of the folder.
        self._state.put_in_place()
        self._refuse_other_claim()
        self._digests = {name: self._digest_of_given(name) for name in self._given()}
        if self._digests[self.claim.name] != hashlib.sha256(self.claim.raw).hexdigest():
            raise InputError(f"{self.claim.where}: has changed just now\n  next: run it again")
        head = json.dumps(self._digests, sort_keys=True).encode()
        if _read(self._unfinished / _HEAD) != head:
            for name in (PLAIN, CLAUSES, _EARLIER, _LIST, _READY):
                remove(self._unfinished / name)
            write_atomically(self._unfinished / _HEAD, head)
        self._gather()
        # Written through at once: what a killed run has added is there for the next one.
        journal = (self._unfinished / PLAIN).open("wb", buffering=0)
        self._journal = self._open.enter_context(journal)

    def _digest_of_given(self, name: str) -> str:
        path = self._home / name
        with telling(path, "be read"):
            found = path.stat()
            if not stat.S_ISREG(found.st_mode) or found.st_size > MOST_BYTES:
                raise InputError(f"{path}: is not a file, or has more than {MOST_BYTES >> 30} GiB")
            return digest_of_file(path)

    def _gather(self) -> None:
        """Gather what was stored before: the finished state, then runs that were cut short."""
        path = self._unfinished / _EARLIER
        if not path.exists():
            with written(path) as file:
                file.writelines(self._finished_lines())
        self._spool = self._open_spool(path)
        with contextlib.suppress(FileNotFoundError), (self._unfinished / PLAIN).open("rb") as old:
            self._spool.gather(read_lines(old))
        if self._spool.is_stale:
            with written(path) as file:
                file.writelines(self._spool.live_lines())
            self._spool.close()
            self._spool = self._open_spool(path)

    def _open_spool(self, path: Path) -> Spool:
        return Spool(path.open("r+b"), by_position=self.claim.list_name is not None)

    def _finished_lines(self) -> Iterator[bytes]:
        """Yield the lines of the finished state, if it is of the same input."""
        listed = read_manifest(self.folder).get("sha256")
        known = listed if isinstance(listed, dict) else {}
        if known and all(known.get(name) == digest for name, digest in self._digests.items()):
            with contextlib.suppress(FileNotFoundError):
                yield from read_evidence(self.folder)

    def _refuse_other_claim(self) -> None:
        if self.claim.name in (MANIFEST, PLAIN, PACKED, CLAUSES, UNFINISHED):
            raise InputError(f"{self.claim.where}: this name is kept for the evidence; rename it")
        name = read_manifest(self.folder).get("claim", self.claim.name)
        if name != self.claim.name:
            raise InputError(
                f"{self.folder}: holds the evidence of {name}; give another folder with --out"
            )

    def _given(self) -> list[str]:
        """Return the names of the files that are given, and can be read more than once."""
        listed = self.claim.list_name if self._list_source is None else None
        return [self.claim.name, *([listed] if listed else [])]

    def discard(self) -> None:
        """Undo what this run made, if it was the first to write here.

        What was found is kept when the disk was at fault, and when the list can be read only
        once: another run takes it up.
        """
        if self._unfinished in self._made and not self._keep and self._list_source is None:
            self._leave()
            for folder in reversed(self._made):
                with contextlib.suppress(OSError):
                    folder.rmdir()

    # ---- what was stored, and what is given

    def find_stored(self, key: Key | EndlessKey) -> bytes | None:
        """Return the line that is stored for an instance of the same input, if there is one.

        Lines of a run cut short come before those of the last finished one. They are not
        trusted: whoever uses one has it checked again. Without the folder being held, the
        lines are those of the finished state. Errors: DiskError.
        """
        with telling(self.folder, "read what is stored"):
            if self._spool is None:
                aside = cast(BinaryIO, tempfile.TemporaryFile("w+b"))  # noqa: SIM115 (closed with self)
                self._spool = Spool(aside, by_position=self.claim.list_name is not None)
                self._spool.gather(self._finished_lines())
            return self._spool.find(key)

    def read_files(self, names: list[str]) -> dict[str, bytes]:
        """Return those of the bulky files that are stored.

        names: as a stored line has them, so they may be anything; none is read outside
        of the folder, and none that is larger than a checker takes.
        """
        found: dict[str, bytes] = {}
        for name in names:
            if name.startswith(f"{CLAUSES}/") and "/" not in name[len(CLAUSES) + 1 :]:
                for root in (self._unfinished, self.folder):
                    data = _read(root / name)
                    if data is not None:
                        found[name] = data
                        break
        return found

    def open_list(self) -> ListSource:
        """Return the claim's list of graphs, to be read to its end, once.

        Errors: DiskError when it cannot be read or copied.
        """
        name = self.claim.list_name or ""
        given = self._list_source
        with telling(given if isinstance(given, Path) else self._home / name, "be read"):
            if given is None:
                file = self._open.enter_context((self._home / name).open("rb"))
                self._list = ListSource(file, str(self._home / name))
                return self._list
            shown = "standard input"
            if isinstance(given, Path):
                shown = str(given)
                given = self._open.enter_context(given.open("rb"))
        with self._keeping():
            copy = self._open.enter_context((self._unfinished / _LIST).open("wb"))

        def write(data: bytes) -> None:
            with self._keeping():
                copy.write(data)

        self._list = ListSource(given, shown, write)
        return self._list

    # ---- what is added

    def add(self, record: Record) -> None:
        """Add a record that the checker has accepted, in the order of the instances.

        Errors: DiskError; what was added before can be taken up.
        """
        if self._journal is None:
            raise ValueError(f"{self.folder}: records are added while the folder is held")
        with self._keeping():
            for name, data in record.files.items():
                if self.read_files([name]).get(name) != data:
                    write_atomically(self._unfinished / name, data)
            write_all(self._journal, record.line)
        self._files += record.files

    @contextlib.contextmanager
    def _keeping(self) -> Iterator[None]:
        """Keep what was found when the disk is at fault."""
        try:
            with telling(self.folder, "write here"):
                yield
        except DiskError:
            self._keep = True
            raise

    # ---- the end

    def finish(self) -> None:
        """Turn what was added into the finished state of the folder.

        Errors: DiskError; InputError when the claim or its list is not what it was at
        the start. The last finished state is left as it was then.
        """
        with self._keeping():
            self._open.close()
            self._state.clear()
            digests = self._take_given()
            journal = self._unfinished / PLAIN
            digests[self.evidence_name] = self._state.make_evidence(journal, self.evidence_name)
            for name in self._files:
                fresh = self._unfinished / name
                digests[name] = digest_of_file(fresh if fresh.exists() else self.folder / name)
            self._state.commit(self.claim.name, digests)
            self._state.put_in_place()
            self._remove_leftovers(set(digests))

    def _take_given(self) -> dict[str, str]:
        """Make ready what was given and lies elsewhere; return the digests."""
        found = dict(self._digests)
        for name, digest in found.items():
            source = self._home / name
            if self._digest_of_given(name) != digest:
                raise InputError(
                    f"{source}: has changed while the run went on, so nothing was finished\n"
                    "  next: run it again"
                )
            self._state.copy(source, name, digest)
        listed = self.claim.list_name
        if listed is not None and (self._list is not None or self._list_source is not None):
            read = self._list.digest if self._list is not None else None
            if read is None or found.get(listed, read) != read:
                raise InputError(f"{listed}: the list of graphs was not read to its end, as it is")
            found[listed] = read
            if self._list_source is not None:
                # Beside the claim it may be the list of the user, and not one that a run put there.
                elsewhere = not self.folder.samefile(self._home)
                self._state.move(self._unfinished / _LIST, listed, read, may_replace=elsewhere)
        return found

    def _remove_leftovers(self, kept: set[str]) -> None:
        """Remove what only an unfinished or an earlier state named."""
        for name in {PLAIN, PACKED} - kept:
            remove(self.folder / name)
        clauses = self.folder / CLAUSES
        if clauses.is_dir():
            for path in sorted(clauses.iterdir()):
                if f"{CLAUSES}/{path.name}" not in kept:
                    remove(path)
            with contextlib.suppress(OSError):
                clauses.rmdir()
        self._leave()

    def _leave(self) -> None:
        """Remove the folder of unfinished work, and let go of the lock."""
        self._close()
        lock = self._unfinished / "lock"
        for path in sorted(self._unfinished.iterdir()):
            if path != lock:
                remove(path)
        # The lock goes while it is held: who waits for it sees that it is gone (`_acquire`).
        # Where an open file cannot be removed, it goes afterwards.
        early = os.name != "nt"
        for now in (early, not early):
            if now:
                with contextlib.suppress(OSError):
                    lock.unlink(missing_ok=True)
                    self._unfinished.rmdir()
            self._lock.release()


def _read(path: Path) -> bytes | None:
    """Return a file that is no larger than a checker takes, None if it cannot be read."""
    try:
        if path.is_file() and path.stat().st_size <= MOST_BULK:
            return path.read_bytes()
    except OSError:
        pass
    return None
