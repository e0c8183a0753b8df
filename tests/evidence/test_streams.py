"""Lists that are read once, through a pipe too, and never held in memory."""

from __future__ import annotations

import gzip
import hashlib
import io
import json
import os
import subprocess
import sys
import threading
from pathlib import Path

import pytest

from certify.checker import check_folder
from certify.checker import claims as checker_claims
from certify.claim.claim import read_claim
from certify.errors import GraphFileError, InputError
from certify.evidence.source import ListSource
from certify.evidence.store import Store
from certify.flow import prove
from certify.graph import files as graph_files
from certify.graph.build import instances, list_sources, read_instance
from tests.checker.folders import LIST, LIST_CLAIM, check, read_files

CLAIM = LIST_CLAIM.replace("exists = 3", "")


def accepted(folder: Path) -> bool:
    return check(folder)[0]


def write_claim(folder: Path, text: str = CLAIM) -> Path:
    folder.mkdir(parents=True, exist_ok=True)
    (folder / "claim.toml").write_text(text)
    return folder / "claim.toml"


def run(claim: Path, graphs: Path | bytes | None = None, out: Path | None = None) -> list[bool]:
    source = io.BytesIO(graphs) if isinstance(graphs, bytes) else graphs
    return [outcome.stored for outcome in prove(claim, out=out, graphs=source).outcomes]


@pytest.mark.parametrize("end", [b"", b"\r\n", b">>graph6<<"])
def test_a_list_from_elsewhere_is_copied_as_it_is(tmp_path: Path, end: bytes) -> None:
    text = LIST.replace(b"\n", end) if end == b"\r\n" else end + LIST
    claim = write_claim(tmp_path / "pipe")
    run(claim, text)
    assert (tmp_path / "pipe" / "graphs.g6").read_bytes() == text
    manifest = json.loads((tmp_path / "pipe" / "manifest.json").read_text())
    assert manifest["sha256"]["graphs.g6"] == hashlib.sha256(text).hexdigest()
    assert accepted(tmp_path / "pipe")
    # The same from a file elsewhere, from a file in its place, and through --out.
    other = tmp_path / "other.g6"
    other.write_bytes(text)
    run(write_claim(tmp_path / "file"), other)
    claim = write_claim(tmp_path / "beside")
    (tmp_path / "beside" / "graphs.g6").write_bytes(text)
    run(claim)
    run(claim, None, tmp_path / "out")
    for name in ("file", "beside", "out"):
        assert read_files(tmp_path / name) == read_files(tmp_path / "pipe")


def test_a_pipe_is_read_as_it_comes(tmp_path: Path) -> None:
    if not hasattr(os, "mkfifo"):
        pytest.skip("there are no named pipes: NOT TESTED")
    pipe = tmp_path / "pipe"
    os.mkfifo(pipe)
    writer = threading.Thread(target=pipe.write_bytes, args=(LIST,))
    writer.start()
    run(write_claim(tmp_path / "f"), pipe)
    writer.join()
    assert accepted(tmp_path / "f")
    assert (tmp_path / "f" / "graphs.g6").read_bytes() == LIST


def test_a_second_run_takes_what_holds_for_the_graph_that_is_there_now(tmp_path: Path) -> None:
    claim = write_claim(tmp_path)
    out = tmp_path / "out"
    assert run(claim, LIST, out) == [False] * 4
    assert run(claim, LIST, out) == [True] * 4
    lines = LIST.splitlines(keepends=True)
    # Another first graph, which its old evidence does not fit; and one graph more.
    changed = b"".join([b"Dhc\n", *lines[1:], b"C~\n"])
    assert run(claim, changed, out) == [False, True, True, True, False]
    assert accepted(out)
    assert run(claim, b"".join(lines[:2]), out) == [False, True]
    assert accepted(out)


def test_a_list_that_breaks_off_can_be_taken_up(tmp_path: Path) -> None:
    """The graphs before the broken line are not searched again."""
    claim = write_claim(tmp_path)
    with pytest.raises(GraphFileError, match="standard input:3: the line is cut short"):
        run(claim, b"C~\nBw\nD\n")
    assert not (tmp_path / "manifest.json").exists()
    assert not (tmp_path / "graphs.g6").exists()
    stored = run(claim, LIST)
    assert stored[:1] == [True]
    assert stored[2:] == [False, False]
    assert accepted(tmp_path)


def test_a_list_that_changes_during_the_run_is_refused(tmp_path: Path) -> None:
    claim = write_claim(tmp_path)
    (tmp_path / "graphs.g6").write_bytes(LIST)
    outcomes = prove(claim).outcomes
    next(outcomes)
    (tmp_path / "graphs.g6").write_bytes(LIST + b"Bw\n")
    with pytest.raises(InputError, match=r"graphs\.g6"):
        list(outcomes)
    assert not (tmp_path / "manifest.json").exists()
    run(claim)
    assert accepted(tmp_path)


def test_a_list_that_was_not_read_to_its_end_is_not_finished(tmp_path: Path) -> None:
    claim_path = write_claim(tmp_path)
    claim = read_claim(claim_path)
    for read in (False, True):
        with Store(tmp_path, claim, claim_path, io.BytesIO(LIST)) as store:
            if read:
                next(list_sources(claim, tmp_path, store.open_list()))
            with pytest.raises(InputError, match="not read to its end"):
                store.finish()
    assert not (tmp_path / "manifest.json").exists()


def test_sources_are_what_instances_are_made_of(tmp_path: Path) -> None:
    claim = read_claim(write_claim(tmp_path))
    (tmp_path / "graphs.g6").write_bytes(b">>graph6<<" + LIST.replace(b"\n", b"\r\n"))
    whole = list(instances(claim, tmp_path))
    sources = list(list_sources(claim, tmp_path))
    assert [source for _, source in sources] == LIST.splitlines(keepends=True)
    assert [read_instance(claim, tmp_path, *source) for source in sources] == whole
    with (tmp_path / "graphs.g6").open("rb") as file:
        stream = ListSource(file, "here")
        assert list(list_sources(claim, tmp_path, stream)) == sources
    assert stream.digest == hashlib.sha256((tmp_path / "graphs.g6").read_bytes()).hexdigest()


@pytest.mark.parametrize(
    ("text", "where"),
    [
        (b"C~\nC\n", ":2: the line is cut short"),
        (b"C~\n\n", ":2: an empty line"),
        (b"C~\n:Fa@x^", ":2: the line has no end"),
        (b"", ": the file holds no graph"),
    ],
)
def test_who_reads_a_source_names_file_and_line(tmp_path: Path, text: bytes, where: str) -> None:
    claim = read_claim(write_claim(tmp_path))
    (tmp_path / "graphs.g6").write_bytes(text)
    with pytest.raises(GraphFileError, match="graphs.g6" + where):
        list(instances(claim, tmp_path))


def test_lists_have_a_limit_of_their_own(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """FORMAT.md, 3.2: ten million graphs, where a rule has a hundred thousand instances."""
    assert graph_files.MAX_GRAPHS == checker_claims.MOST_GRAPHS == 10_000_000
    run(write_claim(tmp_path), LIST)
    assert accepted(tmp_path)
    monkeypatch.setattr(checker_claims, "MOST_GRAPHS", 3)
    found = check_folder(tmp_path)
    assert len(list(found.verdicts())) == 3
    assert not found.accepted
    assert "more than 3 graphs" in found.complaints[0]
    monkeypatch.setattr(graph_files, "MAX_GRAPHS", 3)
    with pytest.raises(GraphFileError, match="more than 3 graphs"):
        list(list_sources(read_claim(tmp_path / "claim.toml"), tmp_path))


# Writes and checks a folder of so many triangles; the list comes through a pipe that makes it
# up. Prints by how many KiB the memory in use has grown at its highest.
GROW = """
import io, json, os, resource, sys
from pathlib import Path
from certify.checker import check_folder
from certify.claim.claim import read_claim
from certify.evidence.record import Record
from certify.evidence.store import Store
from certify.graph.build import list_sources
os.fsync = lambda handle: None
count, folder = int(sys.argv[1]), Path(sys.argv[2])

class Triangles(io.RawIOBase):
    left = count
    def readable(self):
        return True
    def readinto(self, buffer):
        now = min(self.left, len(buffer) // 3)
        self.left -= now
        buffer[: 3 * now] = b"Bw\\n" * now
        return 3 * now

def peak():
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss

claim = read_claim(folder / "claim.toml")
start = None
for _ in range(2):  # the second time with all lines stored
    graphs = io.BufferedReader(Triangles())
    with Store(folder, claim, folder / "claim.toml", graphs) as store:
        for position, _ in list_sources(claim, folder, store.open_list()):
            store.find_stored(position)
            content = {"answer": "exists", "edges": 3, "evidence": {"order": [0, 1, 2]},
                       "instance": position, "kind": "witness", "length": 3, "vertices": 3}
            line = json.dumps(content, separators=(",", ":")).encode() + b"\\n"
            store.add(Record(line, content, {}))
            start = start or peak()
        store.finish()
check = check_folder(folder)
assert sum(verdict.accepted for verdict in check.verdicts()) == count and check.accepted
print(peak() - start)
"""


def test_memory_does_not_grow_with_the_list(tmp_path: Path) -> None:
    grown = []
    for count in (1_000, 40_000):
        folder = tmp_path / str(count)
        write_claim(folder, CLAIM.replace('required = [["0", "1"]]\n', ""))
        done = subprocess.run(
            [sys.executable, "-c", GROW, str(count), str(folder)],
            capture_output=True, text=True, check=True, timeout=600,
        )  # fmt: skip
        grown.append(int(done.stdout))
    # The evidence of the larger one has 5 MB, its index 320 KB.
    text = gzip.decompress((tmp_path / "40000" / "evidence.jsonl.gz").read_bytes())
    assert len(text) > 4_500_000
    assert grown[1] - grown[0] < 3_000


def test_unfinished_work_of_a_stranger_cannot_reach_out_of_the_folder(tmp_path: Path) -> None:
    home, outside = tmp_path / "home", tmp_path / "outside"
    outside.write_bytes(b"mine\n")
    claim = write_claim(home)
    (home / "graphs.g6").write_bytes(LIST)
    unfinished = home / ".unfinished"
    (unfinished / "ready").mkdir(parents=True)
    (unfinished / "outside").write_bytes(b"theirs\n")
    names = ["../outside", str(outside), "..\\outside", "clauses/../../../outside", ""]
    manifest = {"claim": "claim.toml", "sha256": dict.fromkeys(names, "")}
    (unfinished / "ready" / "manifest.json").write_text(json.dumps(manifest))
    for name in ("evidence.jsonl", "earlier.jsonl", "list", "input", "input.new"):
        (unfinished / name).symlink_to(outside)
    run(claim)
    assert outside.read_bytes() == b"mine\n"
    assert accepted(home)
    assert sorted(read_files(home)) == [
        "claim.toml", "evidence.jsonl.gz", "graphs.g6", "manifest.json"
    ]  # fmt: skip
    unfinished.symlink_to(tmp_path)
    with pytest.raises(InputError, match="symbolic link"):
        run(claim)
