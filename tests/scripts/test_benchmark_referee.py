"""The benchmark's referee is strict, its figures are right, and its rivals answer rightly."""

from __future__ import annotations

import json
import signal
from dataclasses import replace
from pathlib import Path

import pytest
from benchmark import __main__ as command
from benchmark import measure, suite, table
from benchmark.instance import build_question
from benchmark.measure import Limits, Row, read_outcome
from benchmark.outcome import Answer, Outcome, WrongCycleError, check_cycle
from hypothesis import given, settings

from certify.graph.question import Question
from tests.brute import has_cycle, questions

SUITE = suite.build_suite()
LIMITS = Limits(seconds=10.0, gibibytes=6.0)


def square() -> Question:
    return build_question(4, [(0, 1), (1, 2), (2, 3), (0, 3), (0, 2)])


def test_a_cycle_is_accepted() -> None:
    check_cycle(square(), [0, 1, 2, 3])


@pytest.mark.parametrize("order", [[0, 1, 2], [0, 1, 2, 2], [0, 2, 1, 3], [0, 1, 3, 2], []])
def test_what_is_no_cycle_is_rejected(order: list[int]) -> None:
    with pytest.raises(WrongCycleError):
        check_cycle(square(), order)


def test_a_cycle_that_misses_a_required_edge_is_rejected() -> None:
    with pytest.raises(WrongCycleError, match="required"):
        check_cycle(replace(square(), required=frozenset({(0, 2)})), [0, 1, 2, 3])


def row(**answers: Answer) -> Row:
    kinds = {"exists": "cycle", "impossible": "proof", "open": "time"}
    outcomes = {m: Outcome(a, 2.0, kind=kinds[a]) for m, a in answers.items()}
    instance = next(i for i in SUITE if i.name == "GP(5,2)")
    return Row(instance, 10, 15, outcomes)


def test_answers_that_agree_are_no_complaint() -> None:
    assert row(a="impossible", b="impossible", c="open").complaint() is None


def test_a_wrong_answer_is_a_complaint_even_if_all_agree() -> None:
    assert "known: impossible" in str(row(a="exists", b="exists").complaint())


def test_two_methods_that_differ_are_a_complaint_without_a_known_answer() -> None:
    differing = row(a="exists", b="impossible")
    unknown = replace(differing, instance=replace(differing.instance, answer=None))
    assert "a says exists; b says impossible" in str(unknown.complaint())


def test_a_crash_is_a_complaint() -> None:
    crashed = Row(SUITE[0], 16, 30, {"a": Outcome("open", 1.0, kind="crash: exit 1: why")})
    assert "why" in str(crashed.complaint())


def test_ends_of_a_child_are_told_apart() -> None:
    said = json.dumps({"answer": "exists", "search_seconds": 1.0})
    assert read_outcome(0, said, "", LIMITS) == Outcome("exists", 1.0)
    assert read_outcome(-signal.SIGPROF, "", "", LIMITS).kind == "time"
    assert read_outcome(-signal.SIGALRM, "", "", LIMITS).kind == "time"
    assert read_outcome(1, "", "MemoryError\n", LIMITS).kind == "memory"
    loader = "cannot allocate memory for thread-local data: ABORT\n"
    assert read_outcome(127, "", loader, LIMITS).kind == "memory"
    assert read_outcome(1, "", "WrongCycleError: x\n", LIMITS).kind.startswith("crash")
    late = json.dumps({"answer": "exists", "search_seconds": 6.0, "check_seconds": 6.0})
    assert read_outcome(0, late, "", LIMITS).answer == "open"


def test_ratio_is_the_geometric_mean_over_what_both_decide() -> None:
    first, second = row(a="exists", b="exists"), row(a="exists", b="exists")
    first.outcomes["b"] = Outcome("exists", 16.0)
    second.outcomes["b"] = Outcome("exists", 4.0)
    rows = [first, second, row(a="exists", b="open"), row(a="open", b="exists")]
    assert table.ratio(rows, "b") == pytest.approx(4.0)
    assert table.ratio(rows, "c") is None
    assert table.undecided(rows, "b") == ["GP(5,2) (time)"]


def test_share_of_the_checker_is_over_the_search() -> None:
    checked = row(a="exists")
    checked.outcomes["a"] = Outcome("exists", 4.0, check_seconds=1.0)
    assert table.check_share([checked, row(a="open")]) == pytest.approx(0.25)
    assert table.check_share([row(b="exists")]) is None


def test_growth_table_takes_the_impossible_members_of_two_families() -> None:
    rows = [Row(i, 3, 3, {}) for i in SUITE]
    names = [r.instance.name for r in table.growth(rows)]
    assert "flower snark 201" in names
    assert "GP(197,2)" in names
    assert not {"flower snark 6", "GP(7,2)", "GP(11,5)"} & set(names)


def test_list_names_the_selected_instances(capsys: pytest.CaptureFixture[str]) -> None:
    assert command.main(["--list", "--family", "flower-snarks", "--tag", "issue-core"]) == 0
    out = capsys.readouterr().out
    assert "flower snark 5" in out
    assert "flower snark 201" not in out


def test_selecting_nothing_is_bad_usage() -> None:
    assert command.main(["--list", "--name", "no such instance"]) == 2


@pytest.mark.parametrize("words", [["--only", "d"], ["--limit", "0"], ["--jobs", "0"]])
def test_bad_options_are_refused(words: list[str]) -> None:
    with pytest.raises(SystemExit) as end:
        command.main(words)
    assert end.value.code == 2


# ---- the rivals, where their packages are installed


@settings(max_examples=60, deadline=None)
@given(question=questions())
def test_rivals_agree_with_exhaustion(question: Question) -> None:
    rivals = pytest.importorskip("benchmark.rivals", reason="needs the bench extra")
    expected = "exists" if has_cycle(question) else "impossible"
    assert rivals.run_constraint_solver(question, 60.0).answer == expected
    assert rivals.run_textbook(question, 60.0).answer == expected


def test_a_wrong_known_answer_ends_with_exit_code_one(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    pytest.importorskip("ortools", reason="needs the bench extra")
    words = ["--only", "b,c", "--name", "1-tough FCptO", "--json", str(tmp_path / "out.json")]
    assert command.main(words) == 0
    written = json.loads((tmp_path / "out.json").read_text(encoding="utf-8"))
    assert [r["outcomes"]["c"]["answer"] for r in written["rows"]] == ["impossible"]
    assert written["complaints"] == []
    wrong = [replace(i, answer="exists") for i in SUITE if i.name == "1-tough FCptO"]
    monkeypatch.setattr(command, "build_suite", lambda: tuple(wrong))
    assert command.main(words) == 1
    assert "WRONG" in capsys.readouterr().err


def test_a_run_beyond_its_limit_is_ended_and_left_open() -> None:
    pytest.importorskip("ortools", reason="needs the bench extra")
    tutte = next(i for i in SUITE if i.name == "Tutte cycle")
    outcome = measure.run_method("c", tutte, Limits(seconds=0.1, gibibytes=6.0))
    assert (outcome.answer, outcome.kind) == ("open", "time")


def test_a_run_beyond_its_memory_is_left_open() -> None:
    pytest.importorskip("ortools", reason="needs the bench extra")
    large = next(i for i in SUITE if i.name == "flower snark 201")
    outcome = measure.run_method("c", large, Limits(seconds=60.0, gibibytes=0.75))
    assert (outcome.answer, outcome.kind) == ("open", "memory")
