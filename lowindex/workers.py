"""Processes of our own as an executor: they leave Ctrl-C to the parent, keep to a memory cap, and end with what made them."""

from __future__ import annotations

import signal
from collections.abc import Iterator
from concurrent.futures import ProcessPoolExecutor
from contextlib import contextmanager
from multiprocessing import get_context

STOPPING = (signal.SIGINT, signal.SIGTERM)


@contextmanager
def processes(count: int, *, megabytes: int = 0) -> Iterator[ProcessPoolExecutor]:
    """An executor with `count` processes, each of at most so many megabytes of address space (0: no cap)."""
    pool = ProcessPoolExecutor(count, mp_context=get_context("spawn"), initializer=_prepare, initargs=(megabytes,))
    try:
        _start(pool, count)
        yield pool
    except BaseException:
        for process in list((pool._processes or {}).values()):
            process.terminate()
        raise
    finally:
        pool.shutdown(cancel_futures=True)  # waits: the threads of a pool left behind may complain when the interpreter ends


def _start(pool: ProcessPoolExecutor, count: int) -> None:
    """Start all processes; signals wait meanwhile, for a process whose parent is interrupted while it starts complains."""
    before = signal.pthread_sigmask(signal.SIG_BLOCK, STOPPING)
    try:
        for _ in range(count):
            pool.submit(_nothing)
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, before)


def _nothing() -> None:
    """A task that makes an executor start a process."""


def _prepare(megabytes: int) -> None:
    """In a new process, which inherits blocked signals."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    signal.pthread_sigmask(signal.SIG_UNBLOCK, STOPPING)
    if megabytes:
        import resource

        resource.setrlimit(resource.RLIMIT_AS, (megabytes << 20, megabytes << 20))
