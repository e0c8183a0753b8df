"""A run that is stopped anywhere: the old state or the new one, and nothing is searched twice.

Stopped before every single file operation of a run, by SIGKILL and by Ctrl-C. Afterwards the
checker has to accept what is there, or the next run has to have all that it needs to
finish; and that run ends with the same bytes as one that was never stopped.
"""

from __future__ import annotations

import hashlib
import io
import json
import os
import shutil
import signal
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from pathlib import Path

import pytest

from certify.checker import check_folder
from certify.evidence.lines import read_evidence, read_lines
from certify.flow import prove
from certify.search.ladder import Limits
from tests.checker.folders import CLAIM, LIST, LIST_CLAIM, read_files
from tests.flow.faults import DONE, INTERRUPTED, Action, interrupt, kill, stop_before

pytestmark = pytest.mark.skipif(not hasattr(os, "fork"), reason="there is no fork: NOT TESTED")

Old = Callable[[Path], None]
BY_CLAUSES = ("witness", "clauses")
BY_SIGHT = ("witness", "obstruction", "cases")


@dataclass(frozen=True)
class Change:
    """From one state of a folder to another.

    graphs: a list that comes through a pipe. apart: the claim lies elsewhere, so that the
    list in the folder of the evidence may be replaced.
    """

    claim: str
    before: tuple[str, ...] = ()
    after: tuple[str, ...] = BY_SIGHT
    files: dict[str, bytes] = field(default_factory=dict)
    graphs: bytes | None = None
    unpacked: bool = False
    apart: bool = False

    def home(self, folder: Path) -> Path:
        """Return where the claim is."""
        return folder.parent / "home" if self.apart else folder

    def prepare(self, folder: Path) -> None:
        """Write the old state."""
        folder.mkdir()
        home = self.home(folder)
        home.mkdir(exist_ok=True)
        (home / "claim.toml").write_text(self.claim)
        for name, data in self.files.items():
            (home / name).write_bytes(data)
        if self.before:
            self.run(folder, self.before, None)
        if self.unpacked:
            unpack(folder)

    def run(self, folder: Path, kinds: tuple[str, ...], graphs: bytes | None) -> list[bool]:
        """Prove with these kinds; return of each instance whether it was stored before."""
        return self._prove(folder, kinds, graphs, [])

    def redo(self, folder: Path) -> None:
        """Search everything again, and store it."""
        self._prove(folder, self.after, self.graphs, ["all"])

    def _prove(
        self, folder: Path, kinds: tuple[str, ...], graphs: bytes | None, redo: list[str]
    ) -> list[bool]:
        run = prove(
            self.home(folder) / "claim.toml",
            out=folder,
            limits=Limits(kinds=frozenset(kinds)),
            graphs=None if graphs is None else io.BytesIO(graphs),
            redo=redo,
        )
        return [outcome.stored for outcome in run.outcomes]


def unpack(folder: Path) -> None:
    """Make the evidence of a folder a plain file, as a rule has it."""
    text = b"".join(read_evidence(folder))
    (folder / "evidence.jsonl.gz").unlink()
    (folder / "evidence.jsonl").write_bytes(text)
    manifest = json.loads((folder / "manifest.json").read_text())
    del manifest["sha256"]["evidence.jsonl.gz"]
    manifest["sha256"]["evidence.jsonl"] = hashlib.sha256(text).hexdigest()
    (folder / "manifest.json").write_text(json.dumps(manifest))
    assert check_folder_accepts(folder)


def check_folder_accepts(folder: Path) -> bool:
    found = check_folder(folder)
    for _ in found.verdicts():
        pass
    return found.accepted


SHORT = CLAIM.replace("5..9", "5..7")
OTHER_LIST = b"C~\nC~\nDhc\nBw\nD??\n"
CHANGES = {
    "the first evidence": Change(CLAIM),
    "clauses that come": Change(SHORT, before=BY_SIGHT, after=BY_CLAUSES),
    "clauses that go": Change(SHORT, before=BY_CLAUSES),
    "the first list": Change(LIST_CLAIM, files={"graphs.g6": LIST}),
    "a list through a pipe": Change(LIST_CLAIM, graphs=LIST),
    "another list through a pipe": Change(
        LIST_CLAIM.replace("exists = 3", ""), BY_SIGHT, files={"graphs.g6": LIST},
        graphs=OTHER_LIST, apart=True,
    ),
    "another name of the evidence": Change(
        LIST_CLAIM, before=BY_SIGHT, files={"graphs.g6": LIST}, unpacked=True
    ),
}  # fmt: skip


def stored_instances(folder: Path) -> set[str]:
    """Return the instances of which some line is stored, finished or not."""
    lines = list(read_evidence(folder)) if (folder / "manifest.json").exists() else []
    for name in ("earlier.jsonl", "evidence.jsonl"):
        path = folder / ".unfinished" / name
        if path.exists():
            with path.open("rb") as file:
                lines += read_lines(file)
    return {json.dumps(json.loads(line)["instance"]) for line in lines}


def every_stop(change: Change, top: Path, stop: Action) -> Iterator[tuple[int, Path, int]]:
    """Yield the folder after each stop, until the run is not stopped any more."""
    first = top / "first"
    change.prepare(first)
    for at in range(1, 500):
        folder = top / str(at)
        shutil.copytree(first, folder)
        code = stop_before(folder, at, stop, lambda f=folder: change.redo(f))
        yield at, folder, code
        shutil.rmtree(folder)
        if code == DONE:
            return
    raise AssertionError("the run has no end")


@pytest.mark.parametrize("how", ["kill", "interrupt"])
@pytest.mark.parametrize("change", CHANGES.values(), ids=CHANGES.keys())
def test_stopped_before_every_operation(
    change: Change, how: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    # Only a machine that stops loses what was not synchronised, and that takes long.
    monkeypatch.setattr("os.fsync", lambda handle: None)
    change.prepare(tmp_path / "whole")
    old = read_files(tmp_path / "whole")
    change.redo(tmp_path / "whole")
    new = read_files(tmp_path / "whole")
    assert check_folder_accepts(tmp_path / "whole")
    expected = {"kill": -signal.SIGKILL, "interrupt": INTERRUPTED}[how]
    stops = between = 0
    for at, folder, code in every_stop(
        change, tmp_path, {"kill": kill, "interrupt": interrupt}[how]
    ):
        if code == DONE:
            assert read_files(folder) == new
            break
        assert code == expected, at
        stops += 1
        finished = {
            name: data
            for name, data in read_files(folder).items()
            if not name.startswith(".unfinished/")
        }
        ready = folder / ".unfinished" / "ready" / "manifest.json"
        if change.before and not check_folder_accepts(folder):
            # Between two renames: what is missing is there, and the next run puts it in place.
            assert ready.exists(), at
            between += 1
        elif change.before:
            manifest = finished["manifest.json"]
            assert manifest in (old["manifest.json"], new["manifest.json"]), at
        known = stored_instances(folder)
        stored = change.run(folder, change.after, change.graphs)
        # Whatever had been found is taken up; and the end is what it would have been.
        assert sum(stored) >= min(len(known), len(stored)) - (change.graphs == OTHER_LIST) * 4, at
        assert not (folder / ".unfinished").exists(), at
        again = read_files(folder)
        assert check_folder_accepts(folder), at
        if not change.before:
            assert again == new, at
        else:
            # Stored evidence that holds is kept, so it may be the old one.
            assert set(again) <= set(old) | set(new), at
    else:
        raise AssertionError
    assert stops > 20
    assert between > 0 or not change.before or how == "interrupt" or change.unpacked
