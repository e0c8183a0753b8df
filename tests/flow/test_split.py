"""An instance that the search leaves open is settled in parts, by several workers."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import networkx
import pytest

from certify.checker import check_folder
from certify.engine.executors import Here
from certify.flow import Outcome, prove, split, work
from certify.flow.split import PARTS
from certify.search.ladder import Limits

LIST = 'structure = "hamiltonian-cycle"\n[graph]\nlist = "graphs.g6"\n'


class Several(Here):
    """This process, in the place of several workers."""

    jobs = 2
    batches = True


@pytest.fixture
def run(
    write_claim: Callable[..., Path], monkeypatch: pytest.MonkeyPatch
) -> Callable[..., list[Outcome]]:
    """Return a function that proves a list of graphs without any search but that in parts."""

    def run(*graphs: networkx.Graph, **options: Any) -> list[Outcome]:
        claim = write_claim(LIST)
        texts = [networkx.to_graph6_bytes(graph, header=False) for graph in graphs]
        (claim.parent / "graphs.g6").write_bytes(b"".join(texts))
        monkeypatch.setattr(work, "settle", lambda question, limits: None)
        monkeypatch.setattr("certify.flow.proof.open_workers", lambda *_: Several())
        outcomes = list(prove(claim, **options).outcomes)
        check = check_folder(claim.parent)
        verdicts = list(check.verdicts())
        assert [v.answer for v in verdicts] == [o.record.answer for o in outcomes]
        assert not check.rejected
        return outcomes

    return run


def test_parts_settle_what_the_search_left_open(run: Callable[..., list[Outcome]]) -> None:
    """Petersen's graph has no Hamiltonian cycle; the dodecahedron and Heawood's graph have one;
    from memory.
    """
    heawood = networkx.heawood_graph()
    outcomes = run(
        networkx.petersen_graph(),
        networkx.dodecahedral_graph(),
        heawood,
        networkx.complete_bipartite_graph(5, 6),
    )
    found = [(o.record.answer, o.record.kind, o.error) for o in outcomes]
    assert found[0] == ("impossible", "clauses", None)
    assert found[1] == found[2] == ("exists", "witness", None)
    assert found[3][0] == "impossible"


def test_a_part_left_open_leaves_the_instance_open(
    run: Callable[..., list[Outcome]], monkeypatch: pytest.MonkeyPatch
) -> None:
    tried = []

    def settle_most(question: Any, part: Any, limits: Limits) -> Any:
        tried.append(limits.seconds)
        return None if len(tried) == 3 else good(question, part, limits)

    good = split.settle_part
    monkeypatch.setattr(split, "settle_part", settle_most)
    (outcome,) = run(networkx.petersen_graph(), limits=Limits(8))
    assert (outcome.record.answer, outcome.error) == ("open", None)
    # Together the parts have the budget once more, on each worker.
    assert set(tried) == {8 * Several.jobs / len(tried)}
    assert 2 <= len(tried) <= PARTS


def test_other_kinds_are_not_asked_for_in_parts(run: Callable[..., list[Outcome]]) -> None:
    limits = Limits(kinds=frozenset({"witness", "obstruction"}))
    (outcome,) = run(networkx.petersen_graph(), limits=limits)
    assert outcome.record.answer == "open"
