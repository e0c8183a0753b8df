"""An outside referee: drat-trim on the exported DIMACS and DRAT files.

The checker settles whether evidence is accepted. This asks a program of other
people for the clause proofs as well. It is believed only when it says exactly
`s VERIFIED`, and only on a formula whose header and clauses were found to agree
before: with a header that promises clauses that are not there it would verify
what is not so. (The other referee is in the folder `kernel`.)
"""

from __future__ import annotations

import gzip
import json
import re
import shutil
import subprocess
import tempfile
import zlib
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from certify.errors import InputError

PROGRAM = "drat-trim"
VERDICT_LINE = "s VERIFIED"
SECONDS = 3600
_NUMBERS = re.compile(r"-?[1-9][0-9]*( -?[1-9][0-9]*)* 0|0")


@dataclass(frozen=True)
class Opinion:
    """What a referee says of the evidence of one instance.

    taken: whether it takes such evidence at all; what it does not take it does not accept.
    """

    name: str
    accepted: bool
    reason: str
    taken: bool = True

    @property
    def verdict(self) -> str:
        """Return the verdict in words."""
        if not self.taken:
            return "not taken"
        return "accepted" if self.accepted else "rejected"


def find_referee() -> str:
    """Return where the referee is, or raise InputError if it is not on the PATH."""
    found = shutil.which(PROGRAM)
    if found is None:
        raise InputError(
            f"{PROGRAM} is not on the PATH: no clause proof was given to it\n"
            "  next: install it, or leave out --referee"
        )
    return found


def ask_referee(folder: Path, program: str) -> Iterator[Opinion]:
    """Yield the referee's opinion on every clause proof of a folder, in order of names."""
    for cnf in sorted((folder / "clauses").glob("*.cnf.gz")):
        name = cnf.name.removesuffix(".cnf.gz")
        try:
            formula = _unpack(cnf)
            proof = _unpack(cnf.with_name(name + ".drat.gz"))
            check_dimacs(formula)
        except (OSError, EOFError, ValueError, zlib.error) as error:
            yield Opinion(name, False, f"not given to {PROGRAM}: {error}")
            continue
        yield _ask(program, name, formula, proof)


def _unpack(path: Path) -> str:
    with gzip.open(path, "rt", encoding="ascii", newline="\n") as file:
        return file.read()


def check_dimacs(text: str) -> None:
    """Raise ValueError unless a DIMACS formula is exactly what its header says.

    Comments first, then one header, then as many clauses as it promises, one a
    line, with variables no larger than it says.
    """
    lines = text.split("\n")
    if lines.pop():
        raise ValueError("the formula is cut short")
    start = next((i for i, line in enumerate(lines) if not line.startswith("c ")), len(lines))
    header = re.fullmatch(r"p cnf (\d+) (\d+)", lines[start] if start < len(lines) else "")
    if header is None:
        raise ValueError("the formula has no header 'p cnf VARIABLES CLAUSES'")
    variables, promised = int(header[1]), int(header[2])
    clauses = lines[start + 1 :]
    if len(clauses) != promised:
        raise ValueError(f"the header promises {promised} clauses, and {len(clauses)} are there")
    for number, line in enumerate(clauses, start + 2):
        if not _NUMBERS.fullmatch(line):
            raise ValueError(f"line {number} is not a clause")
        if any(abs(int(word)) > variables for word in line.split()):
            raise ValueError(f"line {number} names a variable beyond {variables}")


def _ask(program: str, name: str, formula: str, proof: str) -> Opinion:
    with tempfile.TemporaryDirectory() as scratch:
        cnf, drat = Path(scratch) / "formula.cnf", Path(scratch) / "proof.drat"
        cnf.write_text(formula, encoding="ascii")
        drat.write_text(proof, encoding="ascii")
        try:
            run = subprocess.run(
                [program, str(cnf), str(drat), "-t", str(SECONDS)],
                capture_output=True,
                text=True,
                errors="replace",
                timeout=SECONDS,
                check=False,
            )
        except (OSError, subprocess.TimeoutExpired) as error:
            return Opinion(name, False, f"{PROGRAM} gave no verdict: {error}")
    said = [line for line in run.stdout.splitlines() if line.startswith("s ")]
    if said == [VERDICT_LINE]:
        return Opinion(name, True, f"{PROGRAM}: {VERDICT_LINE}")
    return Opinion(name, False, f"{PROGRAM} did not say {VERDICT_LINE!r} but {said or 'nothing'}")


def describe(opinion: Opinion, referee: str) -> str:
    """Return an opinion as the JSON object that the command line prints."""
    content = {"instance": opinion.name, "referee": referee, "verdict": opinion.verdict}
    return json.dumps(content | {"reason": opinion.reason}, sort_keys=True)
