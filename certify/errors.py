"""The exceptions of this program, one tree.

    CertifyError                    exit code 1 is left to crashes
    |-- InputError          2       bad input or bad usage
    |   |-- ClaimError              a claim file, with file, line and place
    |   |-- GraphFileError          a file of graphs, with file and line
    |   `-- DiskError               a file or folder that cannot be read or written
    |-- ContradictionError  3       a claim contradicted, or evidence rejected
    `-- OpenError           4       something was left open

Each class carries the exit code with which the command line ends.
"""

from __future__ import annotations

from typing import ClassVar


class CertifyError(Exception):
    """Anything this program says to its user instead of a traceback."""

    exit_code: ClassVar[int] = 1


class InputError(CertifyError):
    """The input or the way of calling is wrong; nothing was written."""

    exit_code: ClassVar[int] = 2


class ClaimError(InputError):
    """A claim file that cannot be read as a claim."""


class GraphFileError(InputError):
    """A file of graphs that cannot be read."""


class DiskError(InputError):
    """A file or folder that cannot be read or written; what was stored before is still there."""


class ContradictionError(CertifyError):
    """A claim is contradicted by what was found, or evidence was rejected."""

    exit_code: ClassVar[int] = 3


class OpenError(CertifyError):
    """Something is left open: the budget or a limit ended the search."""

    exit_code: ClassVar[int] = 4
