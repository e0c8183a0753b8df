"""python -m certify.checker [--json] FOLDER ...: check folders of evidence.

Exit code: 0 every claim is accepted; 2 wrong usage; 3 something is rejected;
4 nothing is rejected, and something is left open.
"""

from __future__ import annotations

import json
import sys
from pathlib import Path

from .folder import FolderCheck, complain, describe


def main(arguments: list[str]) -> int:
    """Check the folders and print what is not accepted, and one line a folder."""
    as_json = "--json" in arguments
    folders = [item for item in arguments if item != "--json"]
    wrong = [item for item in folders if item.startswith("-") or not Path(item).is_dir()]
    if not folders or wrong:
        for item in wrong:
            print(f"{item}: not a folder", file=sys.stderr)
        print("usage: python -m certify.checker [--json] FOLDER ...", file=sys.stderr)
        return 2
    codes = [check_and_print(FolderCheck(Path(item)), as_json=as_json) for item in folders]
    return 3 if 3 in codes else max(codes)


def check_and_print(check: FolderCheck, *, as_json: bool) -> int:
    """Check one folder, print the verdicts, and return its exit code."""
    count = 0
    for verdict in check.verdicts():
        count += 1
        if as_json:
            print(json.dumps(describe(check, verdict), sort_keys=True))
        elif not verdict.accepted:
            print(complain(check, verdict))
    for complaint in check.complaints:
        print(f"{check.folder}: rejected: {complaint}", file=sys.stderr if as_json else sys.stdout)
    if not as_json:
        fine = check.answers.total()
        state = "accepted" if check.accepted else "open" if check.only_open else "rejected"
        print(
            f"{check.folder}: {state}: {fine} of {count} instances accepted "
            f"({check.answers['exists']} exist, {check.answers['impossible']} impossible)"
        )
    return 0 if check.accepted else 4 if check.only_open else 3


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
