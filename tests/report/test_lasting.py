"""One reason for several graphs in a row."""

from __future__ import annotations

import json
from pathlib import Path

from certify.evidence.carry import carry_over
from certify.evidence.counting import Counting
from certify.evidence.obstruction import Obstruction
from certify.flow import find_outcome, prove
from certify.graph.graph import Graph
from certify.interface import render_outcome
from certify.report.lasting import find_lasting
from certify.search.ladder import Limits

CLAIM = """\
structure = "hamiltonian-path"
[graph]
vertices = "1..n"
adjacent = "square(a + b)"
[instances]
n = "2..24"
"""


def write(tmp_path: Path, text: str = CLAIM) -> Path:
    path = tmp_path / "claim.toml"
    path.write_text(text)
    return path


def test_a_reason_is_carried_over_by_the_names_of_vertices() -> None:
    small = Graph((2, 3, 5), ())
    large = Graph((1, 2, 3, 4, 5), ())
    body = Obstruction("separator", {"set": (0, 2, 3)}).body()  # 2, 5 and the apex
    carried = carry_over("obstruction", body, small, large)
    assert carried == Obstruction("separator", {"set": (1, 4, 5)})
    assert carry_over("obstruction", body, small, Graph((1, 2, 3), ())) is None
    weights = Counting(((0, 1), (3, -2)), (((1, 2), 1),), (((0,), ((0, 3),), 2),))
    assert carry_over("counting", weights.body(), small, large) == Counting(
        ((1, 1), (5, -2)), (((2, 4), 1),), (((1,), ((1, 5),), 2),)
    )
    assert carry_over("obstruction", {"form": "small"}, small, large) is None


def test_consecutive_instances_share_a_reason_where_one_holds(tmp_path: Path) -> None:
    outcomes = list(prove(write(tmp_path)).outcomes)
    runs = list(find_lasting(outcome.settled for outcome in outcomes))
    assert runs
    reasons = {o.name: (o.record.kind, o.graph, o.record.evidence) for o in outcomes}
    for run in runs:
        assert list(run.values) == list(range(run.values[0], run.values[-1] + 1))
        sets = set()
        for value in run.values:
            kind, graph, evidence = reasons[f"n={value}"]
            named = carry_over(kind, evidence, graph, Graph(tuple(range(1, 100)), ()))
            assert named is not None
            sets.add(json.dumps([kind, named.body()], sort_keys=True))
        assert len(sets) == 1, run


def test_a_kept_reason_is_never_longer_than_what_was_found(tmp_path: Path) -> None:
    kept = {o.name: o.record.length for o in prove(write(tmp_path)).outcomes}
    for n in (19, 20, 21):
        (tmp_path / str(n)).mkdir()
        alone = write(tmp_path / str(n), CLAIM.replace("2..24", f"{n}..{n}"))
        (outcome,) = prove(alone).outcomes
        assert kept[outcome.name] <= outcome.record.length


def test_the_run_is_told_with_the_reason(tmp_path: Path) -> None:
    outcomes = list(prove(write(tmp_path), limits=Limits(20)).outcomes)
    run = next(iter(find_lasting(outcome.settled for outcome in outcomes)))
    for value in run.values:
        _, found = find_outcome(tmp_path, f"n={value}")
        assert found == run
    text = run.render()
    assert text.startswith("n = ")
    assert str(run.values[-1]) in text


def test_what_is_said_of_the_others_is_true_of_them(tmp_path: Path) -> None:
    """The vertices that are removed are the same, and the pieces that are left are not."""
    outcomes = {o.name: o for o in prove(write(tmp_path), limits=Limits(20)).outcomes}
    runs = list(find_lasting(o.settled for o in outcomes.values()))
    seen = set()
    for run in runs:
        first = outcomes[f"n={run.values[0]}"]
        text = " ".join(render_outcome(first, run).split())
        if "is disconnected" in text:
            same = f"The reason is of the same kind for {run.render()}."
        elif first.record.kind == "obstruction":
            same = f"The same vertices give the reason for {run.render()}."
        elif "weight" in text.partition("This was read from")[0]:
            same = f"The same weights give the reason for {run.render()}."
        else:
            same = f"This was read from weights, which are the same for {run.render()}."
        assert same in text
        assert f"is about n = {run.values[0]}, and may be different for the others." in text
        seen.add(first.record.kind)
        pieces = [
            render_outcome(outcomes[f"n={value}"]).partition("left: ")[2].partition(".")[0]
            for value in run.values
        ]
        if "pieces are left" in text and len(set(pieces)) > 1:
            seen.add("pieces differ")
    assert {"obstruction", "pieces differ"} <= seen


def test_a_list_has_no_lasting_reasons(tmp_path: Path) -> None:
    (tmp_path / "two.g6").write_text("B?\nB?\n")
    claim = write(tmp_path, 'structure = "hamiltonian-cycle"\n[graph]\nlist = "two.g6"\n')
    assert not list(find_lasting(o.settled for o in prove(claim).outcomes))
