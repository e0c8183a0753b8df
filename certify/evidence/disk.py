"""Files on disk: written whole or not at all, and errors that say what to do next."""

from __future__ import annotations

import contextlib
import errno
import hashlib
import os
import shutil
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import IO, BinaryIO

from certify.errors import DiskError, InputError

PIECE = 1 << 20
_FULL = {errno.ENOSPC, errno.EFBIG, getattr(errno, "EDQUOT", errno.ENOSPC)}
_FORBIDDEN = {errno.EACCES, errno.EPERM, errno.EROFS}


@contextlib.contextmanager
def telling(where: Path, doing: str, *, next_step: str = "") -> Iterator[None]:
    """Turn an OSError into a DiskError: where, what, what next.

    doing: `write here` or `be read`, as in "cannot write here". next_step: for what is neither
    a full disk nor a missing permission; "" if there is nothing to advise.
    """
    try:
        yield
    except OSError as error:
        raise DiskError(_tell(where, doing, error, next_step)) from None


def _tell(where: Path, doing: str, error: OSError, next_step: str) -> str:
    problem = error.strerror or str(error)
    if error.errno in _FULL:
        next_step = "make room and run it again: it takes up what it has stored so far"
    elif error.errno in _FORBIDDEN:
        next_step = next_step or "change the permissions, or choose another place"
    return f"{where}: cannot {doing}: {problem}" + (f"\n  next: {next_step}" if next_step else "")


def digest_of_file(path: Path) -> str:
    """Return the SHA-256 of a file in hexadecimal. Errors: OSError."""
    with path.open("rb") as file:
        return hashlib.file_digest(file, "sha256").hexdigest()


def digest_or_none(path: Path) -> str | None:
    """Return the SHA-256 of a regular file, None if it is none (such as a link) or unreadable."""
    try:
        return digest_of_file(path) if path.is_file() and not path.is_symlink() else None
    except OSError:
        return None


def remove(path: Path) -> None:
    """Remove a file or a folder with all that is in it, if it is there."""
    if path.is_dir() and not path.is_symlink():
        shutil.rmtree(path)
    else:
        path.unlink(missing_ok=True)


def refuse_links(folder: Path, names: Iterable[str]) -> None:
    """Refuse a symbolic link on the way from a folder to files that evidence needs in it.

    No checker follows one, and what is written or removed behind it lies elsewhere.
    Errors: InputError.
    """
    for name in names:
        path = folder
        for part in name.split("/"):
            path /= part
            if path.is_symlink():
                raise InputError(
                    f"{path}: is a symbolic link, and the checker follows none in a folder of "
                    "evidence\n  next: put the file itself there, or give another folder with --out"
                )


def write_all(file: IO[bytes], data: bytes) -> None:
    """Write all of some bytes to a file without a buffer, which may take fewer at a time."""
    rest = memoryview(data)
    while rest:
        rest = rest[file.write(rest) :]


@contextlib.contextmanager
def written(path: Path) -> Iterator[BinaryIO]:
    """Give a file to write; it is at its path when all of it has been, and not before.

    Whatever ends the writing early leaves what was at the path as it was. Errors: OSError.
    """
    fresh = path.with_name(path.name + ".new")
    try:
        with fresh.open("wb") as file:
            yield file
            file.flush()
            os.fsync(file.fileno())
        fresh.replace(path)
    except BaseException:
        with contextlib.suppress(OSError):
            fresh.unlink(missing_ok=True)
        raise


def write_atomically(path: Path, data: bytes) -> None:
    """Write a file, and the folder it is in, so that it is there whole or not at all.

    Errors: OSError.
    """
    path.parent.mkdir(parents=True, exist_ok=True)
    with written(path) as file:
        file.write(data)


def write_given(path: Path, data: bytes) -> None:
    """Write a file that the user named, whole or not at all; its folder has to be there.

    Where a link leads, the file is written there; what is no file, such as a terminal, is
    written to as it is. Errors: DiskError.
    """
    with telling(path, "write here"):
        target = path.resolve()
        if target.exists() and not target.is_file():
            target.write_bytes(data)
            return
        with written(target) as file:
            file.write(data)


def sync_folder(folder: Path) -> None:
    """Have the names in a folder written to the disk, where the system can do that."""
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)
