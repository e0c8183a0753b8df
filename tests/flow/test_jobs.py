"""Several workers: the same evidence, whatever their number and whatever becomes of them."""

from __future__ import annotations

import gc
import io
import json
import os
import signal
import subprocess
import sys
import time
from collections.abc import Callable, Iterator
from concurrent.futures import Future
from dataclasses import replace
from functools import partial
from pathlib import Path
from typing import Any

import networkx
import pytest

from certify.checker import check_folder
from certify.claim.claim import build_claim
from certify.claim.toml import parse_document
from certify.engine.executors import Here
from certify.errors import InputError
from certify.evidence.witness import Witness
from certify.flow import decide_file, prove
from certify.flow.outcome import Origin
from certify.flow.settle import settle_all
from certify.flow.work import ClaimFile, Finding, make_job
from certify.graph.graph import Graph
from certify.search.ladder import Limits
from tests.engine.clusters import Site
from tests.flow import poison
from tests.flow.conftest import HOPS, Command, folder_bytes

LIST = 'structure = "hamiltonian-cycle"\n[graph]\nlist = "graphs.g6"\n'
RUN = [sys.executable, "-c", "from certify.commands import main; main()"]


def random_graphs(count: int) -> bytes:
    """Return graphs of 9 vertices, about half of them with a Hamiltonian cycle."""
    graphs = (networkx.gnp_random_graph(9, 0.42, seed=seed) for seed in range(count))
    return b"".join(networkx.to_graph6_bytes(graph, header=False) for graph in graphs)


@pytest.fixture
def listed(write_claim: Callable[..., Path]) -> Path:
    """Write a claim about a list of 300 graphs."""
    claim = write_claim(LIST)
    (claim.parent / "graphs.g6").write_bytes(random_graphs(300))
    return claim


def answers(claim: Path, out: Path, **options: Any) -> list[str]:
    return [outcome.record.answer for outcome in prove(claim, out=out, **options).outcomes]


def test_the_number_of_jobs_changes_no_byte(
    listed: Path, write_claim: Callable[..., Path], tmp_path: Path
) -> None:
    """The reasons of consecutive instances are shared (`_keep_reason`), which asks for order."""
    rule = write_claim(
        'structure = "hamiltonian-path"\n[graph]\nvertices = "1..n"\n'
        'adjacent = "square(a + b)"\n[instances]\nn = "2..24"\n',
        "squares.toml",
    )
    for claim in (listed, rule):
        found = [answers(claim, tmp_path / f"{claim.stem}-{jobs}", jobs=jobs) for jobs in (1, 2, 3)]
        assert found[0] == found[1] == found[2]
        assert len(set(found[0])) == 2
        one, *others = (folder_bytes(tmp_path / f"{claim.stem}-{jobs}") for jobs in (1, 2, 3))
        assert all(other == one for other in others)
        check = check_folder(tmp_path / f"{claim.stem}-1")
        assert len(list(check.verdicts())) == len(found[0])
        assert check.accepted


def test_a_lost_worker_changes_no_byte(
    listed: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    answers(listed, tmp_path / "whole")
    call = partial(poison.kill_once, str(tmp_path / "mark"))
    monkeypatch.setattr("certify.flow.settle.settle_job", call)
    answers(listed, tmp_path / "lost", jobs=2)
    assert (tmp_path / "mark").exists()
    assert folder_bytes(tmp_path / "lost") == folder_bytes(tmp_path / "whole")


@pytest.mark.parametrize(
    ("call", "jobs", "key", "said"),
    [
        (poison.kill_at_five, 2, 5, "its worker was lost"),
        (poison.raise_at_six, 1, 6, "ArithmeticError: six is too much"),
        (poison.raise_at_six, 2, 6, "ArithmeticError: six is too much"),
    ],
)
@pytest.mark.parametrize("is_list", [False, True])
def test_an_instance_that_goes_wrong_is_open_and_told(
    call: Callable[..., Any],
    jobs: int,
    key: int,
    said: str,
    is_list: bool,
    listed: Path,
    write_claim: Callable[..., Path],
    certify: Command,
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    claim = listed if is_list else write_claim(HOPS, "hops.toml")
    whole = certify("prove", claim, "--out", claim.parent / "whole", "--jobs", 1, "--json").rows
    monkeypatch.setattr("certify.flow.settle.settle_job", call)
    options = ("prove", claim, "--out", claim.parent / "out", "--jobs", jobs)
    result = certify(*options, "--json")
    assert result.code == 4
    assert said in result.err
    assert len(result.rows) == len(whole)
    for row, good in zip(result.rows, whole, strict=True):
        if row["instance"] in (key, {"n": key}):
            assert row["answer"] == "open"
            assert said in row["error"]
        else:
            assert row == good
    # The folder says that the instance is open, and nothing of an error; the next run takes it up.
    assert certify("check", claim.parent / "out").code == 4
    told = certify(*options)
    assert f"{'' if is_list else 'n='}{key}: open; error: " in told.out
    monkeypatch.undo()
    assert certify("prove", claim, "--out", claim.parent / "out", "--jobs", 2).code == 0
    assert folder_bytes(claim.parent / "out") == folder_bytes(claim.parent / "whole")


def test_what_the_checker_rejects_is_never_stored(
    write_claim: Callable[..., Path], certify: Command, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A fault of the program in one instance: it is open and told, and the rest goes on."""
    claim = write_claim(HOPS)
    from certify.flow import work

    good = work.settle
    wrong = Witness(tuple(range(8)))
    monkeypatch.setattr(work, "settle", lambda q, limits: wrong if q.n == 9 else good(q, limits))
    result = certify("prove", claim, "--jobs", 1, "--json")
    assert result.code == 4
    assert "a fault of the program" in result.err
    (row,) = [row for row in result.rows if "error" in row]
    assert (row["instance"], row["answer"]) == ({"n": 8}, "open")
    assert "the checker rejects it" in row["error"]
    assert b"[0,1,2,3,4,5,6,7]" not in (claim.parent / "evidence.jsonl").read_bytes()
    assert certify("check", claim.parent).code == 4
    monkeypatch.undo()
    assert certify("prove", claim).code == 0


class Liars(Here):
    """Workers of another machine that change what they send."""

    foreign = True

    def __init__(self, change: Callable[[Finding], Any]) -> None:
        self._change = change

    def submit(self, call: Callable[..., Any], *arguments: Any) -> Future[Any]:
        future: Future[Any] = Future()
        future.set_result([self._change(found) for found in call(*arguments)])
        return future


def forged(found: Finding) -> Finding:
    """Say of a graph that has a cycle that it has none, with an accepting verdict."""
    content = json.loads(found.line)
    content |= {"answer": "impossible", "kind": "obstruction", "length": 1}
    content["evidence"] = {"form": "leaf", "vertex": 0}
    line = json.dumps(content, sort_keys=True, separators=(",", ":")).encode() + b"\n"
    return replace(found, line=line, verdict=replace(found.verdict, answer="impossible"))


@pytest.mark.parametrize(
    ("change", "said"),
    [
        (forged, "rejected here: "),
        (lambda found: replace(found, line=found.line.replace(b'"instance":1', b'"instance":2')),
         "rejected here: "),
        (lambda found: replace(found, line=found.line[:-9]), "no record"),
        (lambda found: replace(found, line=b"[]\n"), "no record"),
        (lambda found: None, "no finding"),
        (lambda found: "accepted", "no finding"),
    ],
)  # fmt: skip
def test_what_a_cluster_sends_is_not_believed(change: Callable[[Finding], Any], said: str) -> None:
    claim = build_claim(parse_document(LIST.encode(), "claim.toml"), "claim.toml")
    origin = Origin(claim, 1, b"Dhc\n", "graphs.g6")  # the cycle on five vertices
    job = make_job(ClaimFile.of(claim), origin, Limits())
    (honest,) = settle_all(Liars(lambda found: found), [(origin, job)])
    assert (honest.record.answer, honest.error) == ("exists", None)
    (outcome,) = settle_all(Liars(change), [(origin, job)])
    assert outcome.record.answer == "open"
    assert said in str(outcome.error)


def test_no_file_is_taken_from_a_cluster_that_the_record_does_not_name() -> None:
    """It would be written under the name that was sent, wherever that leads."""
    claim = build_claim(parse_document(LIST.encode(), "claim.toml"), "claim.toml")
    origin = Origin(claim, 1, b"Dhc\n", "graphs.g6")
    job = make_job(ClaimFile.of(claim), origin, Limits())
    more = {"../../stray": b"x", "clauses/stray": b"x"}
    liars = Liars(lambda found: replace(found, files={**found.files, **more}))
    (outcome,) = settle_all(liars, [(origin, job)])
    assert (outcome.record.answer, outcome.record.files) == ("exists", {})

    def named(found: Finding) -> Finding:
        content = json.loads(found.line)
        content["evidence"]["cnf"] = "../../stray"
        line = json.dumps(content, sort_keys=True, separators=(",", ":")).encode() + b"\n"
        return replace(found, line=line, files=more)

    (outcome,) = settle_all(Liars(named), [(origin, job)])
    assert (outcome.record.answer, outcome.record.files) == ("open", {})


def test_a_cluster_gives_the_same_folder_although_a_worker_is_killed(
    listed: Path, tmp_path: Path
) -> None:
    pytest.importorskip("distributed")
    answers(listed, tmp_path / "here")
    (tmp_path / "site").mkdir()
    site = Site(tmp_path / "site")
    try:
        site.open(2)
        run = prove(listed, out=tmp_path / "cluster", cluster=site.address)
        for done, outcome in enumerate(run.outcomes):
            assert outcome.error is None
            if done == 100:
                site.started[1].kill()
    finally:
        site.close()
    assert done == 299
    assert folder_bytes(tmp_path / "cluster") == folder_bytes(tmp_path / "here")


def test_a_list_comes_from_standard_input(listed: Path, tmp_path: Path) -> None:
    answers(listed, tmp_path / "file")
    graphs = listed.parent / "graphs.g6"
    alone = tmp_path / "alone.toml"
    alone.write_bytes(listed.read_bytes())
    command = [*RUN, "prove", alone, "--graphs", "-", "--out", tmp_path / "piped", "--jobs", "2"]
    with graphs.open("rb") as file:
        run = subprocess.run(command, stdin=file, capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stderr
    piped = folder_bytes(tmp_path / "piped")
    piped["claim.toml"] = piped.pop("alone.toml")
    whole = folder_bytes(tmp_path / "file")
    for found in (piped, whole):
        del found["manifest.json"]  # it has the name of the claim file
    assert piped == whole
    check = check_folder(tmp_path / "piped")
    assert len(list(check.verdicts())) == 300
    assert check.accepted
    command = [*RUN, "decide", "-", "--structure", "hamiltonian-cycle", "--format", "graph6"]
    with graphs.open("rb") as file:
        run = subprocess.run(command, stdin=file, capture_output=True, text=True, check=False)
    assert run.returncode == 0, run.stderr
    *lines, last = run.stdout.splitlines()
    assert [line.partition(",")[0] for line in lines] == [
        f"{o.name}: {o.record.answer}" for o in decide_file(graphs, "hamiltonian-cycle")
    ]
    assert last.startswith("300 graphs: ")


def test_standard_input_is_refused_where_it_makes_no_sense(
    certify: Command, write_claim: Callable[..., Path], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("sys.stdin", io.TextIOWrapper(io.BytesIO(b"Dhc\n")))
    rule = certify("prove", write_claim(HOPS), "--graphs", "-")
    assert rule.code == 2
    assert "a rule" in rule.err
    unknown = certify("decide", "-", "--structure", "hamiltonian-cycle")
    assert unknown.code == 2
    assert "--format" in unknown.err


def test_of_a_list_only_what_is_notable_is_printed(listed: Path, certify: Command) -> None:
    quiet = certify("prove", listed)
    assert quiet.code == 0
    assert len(quiet.out.splitlines()) == 2
    assert quiet.out.startswith("300 instances: ")
    assert len(certify("prove", listed, "--verbose").out.splitlines()) == 302
    limited = certify("prove", listed, "--kinds", "witness", "--redo", "all")
    assert limited.code == 4
    left = [line for line in limited.out.splitlines() if line.endswith(": open")]
    assert len(left) == len(limited.out.splitlines()) - 2 > 10
    assert " open\n" in limited.out


def test_stored_lines_are_checked_by_workers_too(
    listed: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    answers(listed, tmp_path / "out")
    monkeypatch.setattr("certify.flow.work._search", None)  # nothing is searched for here
    monkeypatch.setattr("certify.checker.check_record", None)  # nor checked
    run = prove(listed, out=tmp_path / "out", jobs=2)
    assert all(outcome.stored for outcome in run.outcomes)


def test_an_error_in_the_middle_of_a_list_has_its_line(listed: Path, certify: Command) -> None:
    graphs = listed.parent / "graphs.g6"
    lines = graphs.read_bytes().splitlines(keepends=True)
    graphs.write_bytes(b"".join([*lines[:200], b"D?\n", *lines[200:]]))
    for jobs in (1, 2):
        result = certify("prove", listed, "--out", listed.parent / "out", "--jobs", jobs)
        assert result.code == 2
        assert "graphs.g6:201: " in result.err
        assert not (listed.parent / "out").exists()


def test_outcomes_keep_no_graphs(listed: Path, tmp_path: Path) -> None:
    kept = list(prove(listed, out=tmp_path / "out", limits=Limits(20)).outcomes)
    gc.collect()
    assert len(kept) == 300
    assert sum(isinstance(found, Graph) for found in gc.get_objects()) < 20


def test_too_many_jobs_are_no_harm(write_claim: Callable[..., Path], certify: Command) -> None:
    claim = write_claim(HOPS)
    assert certify("prove", claim, "--jobs", "64").code == 0
    assert certify("prove", claim, "--jobs", "0").code == 2


def alive_in_session(session: int) -> Iterator[int]:
    """Yield the processes of a session that have not ended."""
    for path in Path("/proc").glob("[0-9]*/stat"):
        try:
            state, _, _, found = path.read_text().rpartition(")")[2].split()[:4]
        except (FileNotFoundError, ProcessLookupError):
            continue
        if int(found) == session and state != "Z":
            yield int(path.parent.name)


@pytest.mark.parametrize("sign", [signal.SIGINT, signal.SIGTERM, signal.SIGKILL])
def test_a_run_that_is_ended_leaves_no_process_and_goes_on_later(
    sign: signal.Signals, listed: Path, tmp_path: Path, certify: Command
) -> None:
    (listed.parent / "graphs.g6").write_bytes(random_graphs(2_000))
    assert certify("prove", listed, "--out", tmp_path / "whole").code == 0
    size = sum(map(len, (certify("prove", listed, "--out", tmp_path / "whole", "-v").out,)))
    command = [*RUN, "prove", listed, "--out", tmp_path / "out", "--jobs", "2"]
    run = subprocess.Popen(
        command, stdout=subprocess.DEVNULL, stderr=subprocess.PIPE, start_new_session=True
    )
    # Not at a time, but when so much of the journal is written.
    journal = tmp_path / "out" / ".unfinished" / "evidence.jsonl"
    while not (journal.exists() and journal.stat().st_size > size):
        assert run.poll() is None
        time.sleep(0.002)
    # As a terminal does: to the whole group, workers too.
    os.killpg(run.pid, sign) if sign == signal.SIGINT else run.send_signal(sign)
    _, said = run.communicate()
    assert run.returncode == (-sign if sign == signal.SIGKILL else 128 + sign)
    assert b"Traceback" not in said
    while list(alive_in_session(run.pid)):  # the test hangs if they stay
        time.sleep(0.01)
    assert journal.stat().st_size > size
    result = certify("prove", listed, "--out", tmp_path / "out", "--jobs", "2", "--json")
    assert result.code == 0, result.err
    assert folder_bytes(tmp_path / "out") == folder_bytes(tmp_path / "whole")


def test_graphs_from_elsewhere_do_not_replace_a_list_of_the_user(
    listed: Path, tmp_path: Path
) -> None:
    """But they do replace what an earlier run put into the folder."""
    kept = listed.with_name("graphs.g6").read_bytes()
    with pytest.raises(InputError, match=r"graphs\.g6: this list is there already"):
        prove(listed, graphs=io.BytesIO(random_graphs(3)))
    assert listed.with_name("graphs.g6").read_bytes() == kept
    # Nor after a run with that list, whose manifest names it.
    answers(listed, listed.parent)
    before = folder_bytes(listed.parent)
    with pytest.raises(InputError, match=r"graphs\.g6: holds other graphs"):
        answers(listed, listed.parent, graphs=io.BytesIO(random_graphs(3)))
    assert {name: folder_bytes(listed.parent)[name] for name in before} == before
    answers(listed, listed.parent, graphs=io.BytesIO(kept))
    assert folder_bytes(listed.parent) == before
    for count in (3, 5):
        out = tmp_path / "other"
        assert len(answers(listed, out, graphs=io.BytesIO(random_graphs(count)))) == count
        assert (out / "graphs.g6").read_bytes() == random_graphs(count)
