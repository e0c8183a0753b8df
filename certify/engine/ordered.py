"""Tasks in, results out in the same order, with a bounded number under way.

What is held in memory does not grow with the number of tasks: so many batches are
read ahead of the oldest one whose results are still to come, and no more.

A batch whose worker was lost is sent again. Who was to blame is not known then, for
several batches were under way; so what was lost twice is sent once more by single tasks,
each with nothing beside it. A task that loses its worker even so is a failure.
"""

from __future__ import annotations

from collections import deque
from collections.abc import Callable, Iterable, Iterator, Sequence
from concurrent.futures import FIRST_COMPLETED, BrokenExecutor, Future, wait
from dataclasses import dataclass, field
from itertools import islice
from typing import Any

from certify.engine.code import check_code
from certify.engine.executors import ALONE, Workers
from certify.errors import InputError

CAPACITY = 1024
"""The weight that a batch may have, if it has more than one task."""
MOST = 32
"""Tasks in a batch."""
DEPTH = 2
"""Batches with the executor, for each job: the one that runs, and the next."""
AHEAD = 32
"""Batches read ahead, for each job, so that one long task does not stop the others."""

LOOK = 2.0
"""Seconds without a result after which it is asked whether the workers are still there."""


@dataclass(frozen=True)
class Task:
    """A call: a function of a module and its one argument, both of which can be pickled.

    weight: how much work it is, in a measure of the caller's. Tasks are batched up to
    CAPACITY; one of that weight goes alone.
    """

    call: Callable[[Any], Any]
    item: Any
    weight: int = CAPACITY


@dataclass(frozen=True)
class Failure:
    """Why there is no result: the error of the call, or that its workers were lost."""

    text: str


@dataclass(frozen=True)
class Parts:
    """A task cut into parts: their tasks, and what makes one task of the parts' results.

    join: gets the results (or failures) in the order of the parts.
    """

    tasks: Sequence[Task]
    join: Callable[[list[Any]], Task]


Cut = Callable[[Task, Any], Parts | None]
"""Says whether a result is to be worked on in parts; gets the task and its result."""


@dataclass(eq=False)
class _Cell:
    """A place for one result. above: the cell that this one is a part of."""

    task: Task
    above: _Cell | None = None
    parts: list[_Cell] = field(default_factory=list)
    join: Callable[[list[Any]], Task] | None = None
    may_be_cut: bool = True
    ends_batch: bool = False
    done: bool = False
    result: Any = None


@dataclass(eq=False)
class _Batch:
    cells: list[_Cell]
    suspicion: int = 0

    @property
    def alone(self) -> bool:
        return self.suspicion >= ALONE


def run_in_order(
    workers: Workers, tasks: Iterable[Task], *, cut: Cut | None = None
) -> Iterator[Any]:
    """Yield the result of each task, or a Failure, in the order of the tasks.

    cut: asked once for every result, as soon as it is there; if it gives parts, these
    run while later tasks go on, and the result of the joined task takes the place.
    Errors: those of `tasks`, in their place; InputError when the workers cannot be had
    any more, or run other code.
    """
    return _Run(workers, iter(tasks), cut).results()


class _Run:
    def __init__(self, workers: Workers, tasks: Iterator[Task], cut: Cut | None) -> None:
        self.workers = workers
        self.tasks = _Reader(tasks)
        self.cut = cut
        self.cells: deque[_Cell] = deque()
        self.waiting: deque[_Batch] = deque()
        self.running: dict[Future[Any], _Batch] = {}
        self.ahead = 0

    def results(self) -> Iterator[Any]:
        while True:
            self._read_ahead()
            self._submit()
            while self.cells and self.cells[0].done:
                cell = self.cells.popleft()
                self.ahead -= cell.ends_batch
                yield cell.result
            if self.running:
                self._collect()
            elif not self.cells and not self.waiting:
                if self.tasks.error is not None:
                    raise self.tasks.error
                if self.tasks.ended:
                    return

    def _read_ahead(self) -> None:
        batches = self.workers.batches
        while (
            not self.tasks.ended
            and self.ahead < (AHEAD * self.workers.jobs if batches else 1)
            and len(self.waiting) + len(self.running) < DEPTH * self.workers.jobs
        ):
            cells = [_Cell(task) for task in self.tasks.batch(MOST if batches else 1)]
            if cells:
                cells[-1].ends_batch = True
                self.ahead += 1
                self.cells.extend(cells)
                self.waiting.append(_Batch(cells))

    def _submit(self) -> None:
        while self.waiting:
            batch = self.waiting[0]
            if any(other.alone for other in self.running.values()):
                return
            if len(self.running) >= (1 if batch.alone else DEPTH * self.workers.jobs):
                return
            self.waiting.popleft()
            work = [(cell.task.call, cell.task.item) for cell in batch.cells]
            try:
                future = self.workers.submit(_run_batch, self.workers.code, work)
            except Exception as error:
                if not self.workers.blame(error):
                    raise
                # The executor broke before it took this batch, which is above suspicion.
                future = Future()
                future.set_exception(error)
                batch.suspicion -= self.workers.blame(error)
            self.running[future] = batch

    def _collect(self) -> None:
        """Take the results that are there; after a loss, what was under way goes back."""
        done, _ = wait(self.running, timeout=LOOK, return_when=FIRST_COMPLETED)
        errors = [_error_of(future) for future in done]
        broken = any(error and self.workers.is_broken(error) for error in errors)
        broken = broken or (not done and self.workers.are_gone())
        lost: list[_Batch] = []
        for future in [future for future in self.running if broken or future in done]:
            batch = self.running.pop(future)
            error = _error_of(future) if future.done() else BrokenExecutor()
            if error is None:
                for cell, result in zip(batch.cells, future.result(), strict=True):
                    self._take(cell, result)
            elif isinstance(error, InputError):
                raise error
            else:
                lost += self._give_back(batch, error)
        self.waiting.extendleft(reversed(lost))
        if broken:
            self.workers.renew()

    def _give_back(self, batch: _Batch, error: BaseException) -> list[_Batch]:
        """Return what is to be sent again of a batch that brought an error and no results."""
        was_alone = batch.alone and len(batch.cells) == 1
        blame = self.workers.blame(error)
        batch.suspicion += blame
        if len(batch.cells) == 1 and (was_alone or not blame):
            text = f"{type(error).__name__}: {error}"
            if blame:
                text = "its worker was lost each time: killed, out of memory, or crashed"
            self._take(batch.cells[0], Failure(text))
            return []
        if blame and not batch.alone:
            return [batch]
        return [_Batch([cell], batch.suspicion) for cell in batch.cells]

    def _take(self, cell: _Cell, result: Any) -> None:
        if cell.may_be_cut and self.cut is not None and not isinstance(result, Failure):
            cell.may_be_cut = False
            parts = self.cut(cell.task, result)
            if parts is not None and parts.tasks:
                cell.join = parts.join
                cell.parts = [_Cell(task, above=cell, may_be_cut=False) for task in parts.tasks]
                # The parts come first: what waits behind their task waits for them.
                self.waiting.extendleft(_Batch([part]) for part in reversed(cell.parts))
                return
        cell.result, cell.done = result, True
        above = cell.above
        if above is not None and above.join is not None and all(p.done for p in above.parts):
            above.task = above.join([part.result for part in above.parts])
            above.parts, above.join = [], None
            self.waiting.appendleft(_Batch([above]))


class _Reader:
    """Reads tasks in batches; an error of the iterator is kept for its place in the order."""

    def __init__(self, tasks: Iterator[Task]) -> None:
        self._tasks = tasks
        self._next: list[Task] = []
        self.ended = False
        self.error: Exception | None = None

    def batch(self, most: int) -> list[Task]:
        """Return the next tasks, at most so many and of at most CAPACITY; empty at the end."""
        taken, weight = self._next, sum(task.weight for task in self._next)
        self._next = []
        while not self.ended and len(taken) < most and weight < CAPACITY:
            task = self._read()
            if task is None:
                break
            weight += task.weight
            if taken and weight > CAPACITY:
                self._next = [task]
            else:
                taken.append(task)
        return taken

    def _read(self) -> Task | None:
        try:
            for task in islice(self._tasks, 1):
                return task
        except Exception as error:
            self.error = error
        self.ended = True
        return None


def _error_of(future: Future[Any]) -> BaseException | None:
    """Return the error of a finished future, which may have been cancelled."""
    try:
        return future.exception()
    except BaseException as error:
        return error


def _run_batch(code: str | None, work: list[tuple[Callable[[Any], Any], Any]]) -> list[Any]:
    """Run the calls of a batch, in a worker; an error of one is its result."""
    check_code(code)
    results: list[Any] = []
    for call, item in work:
        try:
            results.append(call(item))
        except Exception as error:
            results.append(Failure(f"{type(error).__name__}: {error}"))
    return results
