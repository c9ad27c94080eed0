"""Running a scan on an executor: results are stored as they come, errors of a worker too, and a second run goes on where the first one
stopped."""

from __future__ import annotations

import signal
from collections.abc import Callable, Iterator, Sequence
from concurrent.futures import FIRST_COMPLETED, BrokenExecutor, Executor, Future, wait
from concurrent.futures.process import BrokenProcessPool
from contextlib import contextmanager, nullcontext
from dataclasses import dataclass
from typing import Any

import lowindex
from lowindex.scan.betti import Pool
from lowindex.scan.store import Item, Result, Store
from lowindex.scan.tasks import run_task
from lowindex.workers import processes

AHEAD = 3
"""Tasks a worker that wait in the executor's queue: few, so that an interrupt loses little and memory stays flat."""

Report = Callable[[Item, Result], None]


@dataclass(frozen=True)
class Job:
    """What is run on every member. `megabytes`: address space a worker may use (0: no cap). `split`: one member at a time, its search
    being shared by all workers."""

    task: str
    effort: int
    seconds: float | None = None
    megabytes: int = 0
    split: bool = False


def run_scan(store: Store, items: Sequence[Item], job: Job, *, jobs: int, report: Report, executor: Executor | None = None) -> None:
    """Run a job on all items and record every result. `executor`: one to use instead of processes of our own. KeyboardInterrupt passes
    through after what was finished has been stored."""
    left = list(items)
    if job.split:
        _one_by_one(store, left, job, jobs, report, executor)
        return
    if executor is not None:
        _drain(store, left, job, executor, 4 * AHEAD, report)
        return
    while left:
        # a worker that dies breaks the pool: what was in flight is tried again, each alone, to find the group that kills its worker
        in_flight = _with_pool(store, left, job, jobs, report)
        for item in in_flight:
            if _with_pool(store, [item], job, 1, report):
                _finish(store, left, item, _died(job), report)
            else:
                left.remove(item)


def _one_by_one(store: Store, items: list[Item], job: Job, jobs: int, report: Report, executor: Executor | None) -> None:
    """The search of each member is shared by all workers; a member that kills a worker is recorded as such."""
    while items:
        with nullcontext(executor) if executor is not None else processes(jobs, megabytes=job.megabytes) as pool:
            shared = Pool(pool, jobs if executor is None else 4 * AHEAD)
            try:
                while items:
                    checkpoint = store.checkpoint(items[0].digest, job.task)
                    result = run_task(items[0].text, job.task, job.effort, job.seconds, checkpoint=checkpoint, pool=shared)
                    _finish(store, items, items[0], result, report)
            except BrokenExecutor:
                _finish(store, items, items[0], _died(job), report)


def _finish(store: Store, left: list[Item], item: Item, result: Result, report: Report) -> None:
    """Store a result and take its member out of `left`."""
    store.record(item.digest, result)
    report(item, result)
    left.remove(item)


def _died(job: Job) -> Result:
    return Result(job.task, job.effort, lowindex.__version__, "error", {"reason": "the worker died (memory or a crash)"}, 0.0)


def _with_pool(store: Store, left: list[Item], job: Job, jobs: int, report: Report) -> list[Item]:
    """Drain `left` with processes; the items in flight when a worker died."""
    with processes(jobs, megabytes=job.megabytes) as pool:
        return _drain(store, left, job, pool, AHEAD * jobs, report)


def _drain(store: Store, left: list[Item], job: Job, executor: Executor, window: int, report: Report) -> list[Item]:
    """Submit with a window, store what comes back and take it out of `left`."""
    waiting: dict[Future[Result], Item] = {}
    queue: Iterator[Item] = iter(list(left))
    broken: list[Item] = []
    while not broken:
        try:
            while len(waiting) < window and (item := next(queue, None)) is not None:
                waiting[executor.submit(guarded_task, item.text, job, store.checkpoint(item.digest, job.task))] = item
        except BrokenProcessPool:
            broken = list(waiting.values())
            break
        if not waiting:
            return []
        done, _ = wait(waiting, return_when=FIRST_COMPLETED)
        for future in done:
            item = waiting.pop(future)
            try:
                result = future.result()
            except BrokenProcessPool:
                broken.append(item)
                continue
            except Exception as error:
                reason = f"the worker failed: {type(error).__name__}: {str(error)[:200]}"
                result = Result(job.task, job.effort, lowindex.__version__, "error", {"reason": reason}, 0.0)
            _finish(store, left, item, result, report)
    return [*broken, *(item for item in waiting.values() if item not in broken)]


def guarded_task(text: str, job: Job, checkpoint: str | None) -> Result:
    """A task under an alarm: code that does not look at its budget is stopped a while after the time given."""
    with _alarm(job.seconds):
        return run_task(text, job.task, job.effort, job.seconds, checkpoint=checkpoint)


@contextmanager
def _alarm(seconds: float | None) -> Iterator[None]:
    if seconds is None:
        yield
        return

    def stop(*_: Any) -> None:
        raise TimeoutError

    try:
        before = signal.signal(signal.SIGALRM, stop)
    except ValueError:  # not in the main thread, as on some clusters: the budget alone must do
        yield
        return
    signal.setitimer(signal.ITIMER_REAL, 1.5 * seconds + 2)
    try:
        yield
    finally:
        signal.setitimer(signal.ITIMER_REAL, 0)
        signal.signal(signal.SIGALRM, before)
