"""Order, look-ahead, failures and lost workers, with real processes."""

from __future__ import annotations

import os
import random
import signal
import subprocess
import sys
import time
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest

from certify.engine.executors import Here, Processes, Workers
from certify.engine.open import open_workers
from certify.engine.ordered import AHEAD, CAPACITY, MOST, Failure, Parts, Task, run_in_order
from certify.errors import InputError
from tests.engine import work

JOBS = 2


@pytest.fixture(params=["here", "processes"])
def workers(request: pytest.FixtureRequest) -> Iterator[Workers]:
    with Here() if request.param == "here" else Processes(JOBS) as opened:
        yield opened


@pytest.fixture
def processes() -> Iterator[Processes]:
    with Processes(JOBS) as opened:
        yield opened


def tasks(call: Callable[[Any], Any], items: Any, weight: int = 1) -> Iterator[Task]:
    return (Task(call, item, weight) for item in items)


class Numbers:
    """1, 2, ... without end; read: how many were taken."""

    read = 0

    def __iter__(self) -> Iterator[int]:
        return self

    def __next__(self) -> int:
        self.read += 1
        return self.read


def test_results_come_in_order_whatever_the_weights(workers: Workers) -> None:
    rng = random.Random(7)
    weights = [rng.choice((1, 20, 400, CAPACITY - 1, CAPACITY, 9 * CAPACITY)) for _ in range(500)]
    work_items = (Task(work.double, i, weight) for i, weight in enumerate(weights))
    assert list(run_in_order(workers, work_items)) == [2 * i for i in range(500)]


def test_nothing_to_do(workers: Workers) -> None:
    assert list(run_in_order(workers, iter(()))) == []


def test_work_is_done_by_other_processes(processes: Processes) -> None:
    found = set(run_in_order(processes, tasks(work.who, range(200), CAPACITY)))
    assert os.getpid() not in found
    assert len(found) <= JOBS


def test_the_input_is_read_ahead_by_so_much_and_no_more(workers: Workers) -> None:
    numbers = Numbers()
    most = AHEAD * JOBS * MOST if workers.batches else 1
    results = run_in_order(workers, tasks(work.double, numbers))
    for count in range(1, 5_000):
        assert next(results) == 2 * count
        assert numbers.read - count < most
    results.close()


def test_a_heavy_task_goes_alone(processes: Processes) -> None:
    """Else one hard instance would keep a batch of small ones from coming back."""
    numbers = Numbers()
    results = run_in_order(processes, tasks(work.double, numbers, CAPACITY))
    next(results)
    assert numbers.read <= AHEAD * JOBS


def test_an_error_of_a_task_is_its_result(workers: Workers) -> None:
    found = list(run_in_order(workers, tasks(work.fail_at_seven, range(100))))
    assert found[7] == Failure("ValueError: seven is refused")
    assert [*found[:7], *found[8:]] == [2 * i for i in range(100) if i != 7]


@pytest.mark.parametrize("call", [work.leave, work.bring_what_cannot_be_sent])
def test_a_task_that_spoils_its_batch_fails_alone(
    call: Callable[[int], Any], processes: Processes
) -> None:
    found = list(run_in_order(processes, tasks(call, range(100))))
    assert isinstance(found[7], Failure)
    assert [*found[:7], *found[8:]] == [2 * i for i in range(100) if i != 7]


def test_an_error_of_the_input_comes_in_its_place(workers: Workers) -> None:
    def items() -> Iterator[int]:
        yield from range(50)
        raise InputError("line 51 is no graph")

    results = run_in_order(workers, tasks(work.double, items()))
    assert [next(results) for _ in range(50)] == [2 * i for i in range(50)]
    with pytest.raises(InputError, match="line 51"):
        next(results)


@pytest.mark.parametrize("weight", [1, CAPACITY])
def test_a_worker_killed_half_way_loses_nothing(
    weight: int, processes: Processes, tmp_path: Path
) -> None:
    mark = tmp_path / "killed"
    items = ((i, 150, str(mark)) for i in range(300))
    found = list(run_in_order(processes, tasks(work.die_once, items, weight)))
    assert mark.exists()
    assert found == [2 * i for i in range(300)]


@pytest.mark.parametrize("weight", [1, CAPACITY])
def test_tasks_that_always_kill_their_worker_fail_and_no_others(
    weight: int, processes: Processes
) -> None:
    fatal = frozenset({3, 4, 160, 299})
    items = ((i, fatal) for i in range(300))
    found = list(run_in_order(processes, tasks(work.die_at, items, weight)))
    for i, result in enumerate(found):
        if i in fatal:
            assert isinstance(result, Failure)
            assert "worker was lost" in result.text
        else:
            assert result == 2 * i


def thirds(task: Task, result: int) -> Parts | None:
    """Cut results that are divisible by 6 into parts that add up to them."""
    if result % 6 or not result:
        return None
    part = result // 6
    parts = [Task(work.double, part) for _ in range(3)]
    return Parts(parts, lambda found: Task(work.add, found))


def test_parts_take_the_place_of_their_task(workers: Workers) -> None:
    found = list(run_in_order(workers, tasks(work.double, range(100)), cut=thirds))
    assert found == [2 * i for i in range(100)]


def test_a_result_is_asked_for_parts_once(processes: Processes) -> None:
    asked: list[int] = []

    def cut(task: Task, result: int) -> Parts | None:
        asked.append(task.item)
        if task.item:
            return None
        parts = [Task(work.double, 1), Task(work.double, 2)]
        return Parts(parts, lambda found: Task(work.add, found))

    found = list(run_in_order(processes, tasks(work.double, range(60), CAPACITY), cut=cut))
    assert found == [6, *(2 * i for i in range(1, 60))]
    assert sorted(asked) == list(range(60))


def test_a_worker_lost_while_parts_are_joined(processes: Processes, tmp_path: Path) -> None:
    mark = str(tmp_path / "killed")

    def cut(task: Task, result: int) -> Parts | None:
        if task.item != 20:
            return None
        parts = [Task(work.double, i) for i in (1, 2, 3)]
        return Parts(parts, lambda found: Task(work.add_and_kill_once, (found, mark)))

    found = list(run_in_order(processes, tasks(work.double, range(40)), cut=cut))
    assert found == [12 if i == 20 else 2 * i for i in range(40)]


def test_a_part_that_fails_is_told_to_the_join(processes: Processes) -> None:
    def join(found: list[Any]) -> Task:
        return Task(work.add, [1 for part in found if isinstance(part, Failure)])

    def cut(task: Task, result: int) -> Parts | None:
        if task.item:
            return None
        return Parts([Task(work.fail_at_seven, i) for i in (6, 7, 8)], join)

    assert list(run_in_order(processes, tasks(work.double, range(2)), cut=cut)) == [1, 2]


def test_too_few_jobs_are_refused() -> None:
    with pytest.raises(InputError, match="--jobs"):
        open_workers(0)


PROGRAM = """\
import sys
from certify.engine.executors import Processes
from certify.engine.ordered import Task, run_in_order
from tests.engine import work
with Processes(2) as workers:
    tasks = (Task(work.tell_and_wait, (i, sys.argv[1])) for i in range(8))
    list(run_in_order(workers, tasks))
"""


@pytest.mark.parametrize("sign", [signal.SIGKILL, signal.SIGTERM, signal.SIGINT])
def test_workers_end_with_the_process_that_started_them(
    sign: signal.Signals, tmp_path: Path
) -> None:
    root = Path(__file__).parents[2]
    run = subprocess.Popen(
        [sys.executable, "-c", PROGRAM, tmp_path], cwd=root, stderr=subprocess.DEVNULL
    )
    while len(list(tmp_path.iterdir())) < 1:
        assert run.poll() is None
        time.sleep(0.01)
    found = [int(path.name) for path in tmp_path.iterdir()]
    run.send_signal(sign)
    run.wait()
    while any(is_alive(pid) for pid in found):  # the test hangs if they stay
        time.sleep(0.01)


def is_alive(pid: int) -> bool:
    try:
        return b") Z " not in Path(f"/proc/{pid}/stat").read_bytes()
    except (FileNotFoundError, ProcessLookupError):
        return False
