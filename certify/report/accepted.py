"""The gate before anything is published: only what the checker accepts goes out."""

from __future__ import annotations

from pathlib import Path

from certify.checker import FolderCheck, check_folder
from certify.errors import ContradictionError, OpenError
from certify.evidence.lines import claim_name


def need_accepted(folder: Path, *, may_be_open: bool) -> FolderCheck:
    """Return the finished check of a folder that the checker accepts.

    may_be_open: instances that are left open are no reason to refuse.
    Errors: InputError when there is no evidence; ContradictionError when something is
    rejected; OpenError when something is left open and may not be.
    Cost: that of the check.
    """
    claim_name(folder)
    check = check_folder(folder)
    complaints, left = [], ""
    for verdict in check.verdicts():
        said = f"instance {verdict.instance}: {verdict.reason}"
        if verdict.is_open:
            left = left or said
        elif not verdict.accepted:
            complaints.append(said)
    complaints += check.complaints
    if check.accepted or (check.only_open and may_be_open):
        return check
    if check.only_open:
        raise OpenError(
            f"{folder}: left open, so nothing is written: {left}\n"
            f"  next: certify prove {folder / check.claim_name} --budget SECONDS"
        )
    raise ContradictionError(
        f"{folder}: the evidence is rejected, so nothing is written: {complaints[0]}\n"
        f"  next: certify check {folder}"
    )
