"""python -m certify.checker [--json] FOLDER ...: check folders of evidence.

A FOLDER that is none itself may hold such folders: then each of these is checked.

Exit code: 0 every claim is accepted; 2 wrong usage; 3 something is rejected;
4 nothing is rejected, and something is left open.
"""

from __future__ import annotations

import json
import os
import sys
from pathlib import Path
from typing import TextIO

from .files import KEPT
from .folder import FolderCheck, complain, describe


def main(arguments: list[str]) -> int:
    """Check the folders and print what is not accepted, and one line a folder."""
    as_json = "--json" in arguments
    folders = [item for item in arguments if item != "--json"]
    wrong = [item for item in folders if item.startswith("-") or not Path(item).is_dir()]
    if not folders or wrong:
        for item in wrong:
            say(f"{item}: not a folder", sys.stderr)
        say("usage: python -m certify.checker [--json] FOLDER ...", sys.stderr)
        return 2
    found = [folder for item in folders for folder in find_folders(Path(item))]
    codes = [check_and_print(FolderCheck(folder), as_json=as_json) for folder in found]
    return 3 if 3 in codes else max(codes)


def find_folders(folder: Path) -> list[Path]:
    """Return the folder itself, or, if it holds no evidence, those right below that do.

    One of the files is enough: a folder that has lost the others has to be
    rejected, not passed over. So has a folder in which there is nothing at all. Names with
    a point in front are those of unfinished work.
    """
    try:
        inside = sorted(item for item in folder.iterdir() if not item.name.startswith("."))
    except OSError:
        return [folder]
    inner = [item for item in inside if _holds_evidence(item)]
    return [folder] if _holds_evidence(folder) or not inner else inner


def _holds_evidence(folder: Path) -> bool:
    return any(os.path.lexists(folder / name) for name in KEPT)


def check_and_print(check: FolderCheck, *, as_json: bool) -> int:
    """Check one folder, print the verdicts, and return its exit code."""
    count = 0
    for verdict in check.verdicts():
        count += 1
        if as_json:
            say(json.dumps(describe(check, verdict), sort_keys=True), sys.stdout)
        elif not verdict.accepted:
            say(complain(check, verdict), sys.stdout)
    for complaint in check.complaints:
        say(f"{check.folder}: rejected: {complaint}", sys.stderr if as_json else sys.stdout)
    if not as_json:
        fine = check.answers.total()
        words = [("exists", "exist"), ("impossible", "impossible")]
        if check.answers["settled"]:
            words = [("settled", "settled without end")]
        state = "accepted" if check.accepted else "open" if check.only_open else "rejected"
        say(
            f"{check.folder}: {state}: {fine} of {count} instances accepted "
            f"({', '.join(f'{check.answers[name]} {text}' for name, text in words)})",
            sys.stdout,
        )
    return 0 if check.accepted else 4 if check.only_open else 3


def say(text: str, file: TextIO) -> None:
    """Print a text, escaping what the terminal has no letter for."""
    encoding = file.encoding or "utf-8"
    print(text.encode(encoding, "backslashreplace").decode(encoding), file=file)


def run() -> None:
    """Check the folders named on the command line, and leave with the exit code.

    This is what a zipapp has to call: it would drop what `main` returns.
    """
    try:
        code = main(sys.argv[1:])
        sys.stdout.flush()
    except BrokenPipeError:
        # Whoever read the output has seen enough of it; nothing was accepted.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        code = 3
    sys.exit(code)


if __name__ == "__main__":
    run()
