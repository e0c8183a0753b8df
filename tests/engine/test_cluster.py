"""A real scheduler and worker processes on the loopback address."""

from __future__ import annotations

import shutil
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

from certify.engine import cluster
from certify.engine.cluster import Cluster
from certify.engine.open import open_workers
from certify.engine.ordered import CAPACITY, Failure, Task, run_in_order
from certify.errors import InputError
from tests.engine import work
from tests.engine.clusters import ROOT, Site

pytest.importorskip("distributed")


@pytest.fixture
def site(tmp_path: Path) -> Iterator[Site]:
    opened = Site(tmp_path)
    yield opened
    opened.close()


def results(workers: Cluster, call: Any, items: Any, weight: int = 1) -> Iterator[Any]:
    return run_in_order(workers, (Task(call, item, weight) for item in items))


def test_the_same_work_runs_on_a_cluster(site: Site) -> None:
    site.open(2)
    with open_workers(1, site.address) as workers:
        assert workers.foreign
        assert isinstance(workers, Cluster)
        assert list(results(workers, work.double, range(500))) == [2 * i for i in range(500)]
        assert list(results(workers, work.double, range(20), CAPACITY)) == list(range(0, 40, 2))
        found = list(results(workers, work.fail_at_seven, range(9)))
        assert found[7] == Failure("ValueError: seven is refused")


@pytest.mark.parametrize("weight", [1, CAPACITY])
def test_a_worker_killed_half_way_loses_nothing(weight: int, site: Site) -> None:
    site.open(2)
    with Cluster(site.address) as workers:
        run = results(workers, work.double, range(400), weight)
        found = [next(run) for _ in range(100)]
        site.started[1].kill()
        assert [*found, *run] == [2 * i for i in range(400)]


def test_a_task_that_always_kills_its_worker_fails_and_no_other(site: Site) -> None:
    site.open(2, nanny=True, DASK_DISTRIBUTED__SCHEDULER__ALLOWED_FAILURES="0")
    with Cluster(site.address) as workers:
        items = ((i, frozenset({20})) for i in range(40))
        found = list(results(workers, work.die_at, items))
    assert isinstance(found[20], Failure)
    assert "worker was lost" in found[20].text
    assert [*found[:20], *found[21:]] == [2 * i for i in range(40) if i != 20]


def test_a_scheduler_that_is_gone_ends_the_run(site: Site, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(cluster, "PATIENCE", 2)
    site.open(1)
    with Cluster(site.address) as workers:
        run = results(workers, work.double, range(5_000), CAPACITY)
        assert next(run) == 0
        site.started[0].kill()
        with pytest.raises(InputError, match="no scheduler can be reached"):
            list(run)


def test_workers_that_cannot_be_had_are_said(site: Site, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(cluster, "PATIENCE", 1)
    with pytest.raises(InputError, match=r"no scheduler can be reached there(.|\n)*next: "):
        Cluster("tcp://127.0.0.1:9")
    with pytest.raises(InputError, match="no scheduler can be reached there"):
        Cluster("no address at all")
    site.open(0)
    with pytest.raises(InputError, match=r"no workers(.|\n)*next: dask worker"):
        Cluster(site.address)


def test_the_missing_extra_is_said(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "distributed", None)
    with pytest.raises(InputError, match=r"pip install 'certify\[cluster\]'"):
        Cluster("tcp://127.0.0.1:8786")


def other_program(folder: Path) -> Path:
    """Make a copy of the program with one line more, and return where it is imported from."""
    shutil.copytree(
        ROOT / "certify", folder / "certify", ignore=shutil.ignore_patterns("__pycache__")
    )
    with (folder / "certify" / "search" / "budget.py").open("a") as file:
        file.write("# another version\n")
    return folder


def test_workers_with_other_code_are_refused(site: Site, tmp_path: Path) -> None:
    site.open(0)
    site.add_worker(root=other_program(tmp_path / "other"))
    with pytest.raises(InputError, match=r"runs other code: certify .*and here") as error:
        Cluster(site.address)
    assert "python" not in str(error.value)  # that is the same


def test_a_worker_with_other_code_that_comes_later_is_refused_too(
    site: Site, tmp_path: Path
) -> None:
    site.open(1)
    with Cluster(site.address) as workers:
        run = results(workers, work.double, iter(lambda: 1, 2), CAPACITY)  # without end
        next(run)
        site.add_worker(root=other_program(tmp_path / "other"))
        with pytest.raises(InputError, match="a worker runs other code"):
            list(run)


def test_workers_without_the_program_are_refused(site: Site, tmp_path: Path) -> None:
    empty = tmp_path / "empty"
    (empty / "certify").mkdir(parents=True)
    (empty / "certify" / "__init__.py").touch()
    site.open(0)
    site.add_worker(root=empty)
    with pytest.raises(InputError, match="cannot load this program"):
        Cluster(site.address)
