"""Where commands have their work done: here, in processes, on a cluster; and how they are told to stop."""

from __future__ import annotations

import signal
from collections.abc import Iterator
from concurrent.futures import Executor
from contextlib import contextmanager
from importlib import import_module
from typing import Any

from lowindex.errors import InputError
from lowindex.workers import processes

CLUSTER_TASKS = 16
"""Tasks handed to a cluster at a time: it does not say how many workers it will have."""


@contextmanager
def cluster(address: str | None) -> Iterator[Executor | None]:
    """The executor of the Dask scheduler at an address; None without one."""
    if address is None:
        yield None
        return
    try:
        distributed: Any = import_module("distributed")
    except ImportError:
        raise InputError("--cluster needs dask, which is not installed; install it with: pip install 'lowindex[cluster]'") from None
    try:
        client = distributed.Client(address, timeout="20s")
    except (OSError, ValueError) as error:
        raise InputError(f"no scheduler answers at {address!r}: {str(error)[:100]}; start one, or use --jobs") from None
    try:
        yield client.get_executor(pure=False, retries=2)
    finally:
        client.close()


@contextmanager
def executor(jobs: int, address: str | None) -> Iterator[tuple[Executor | None, int]]:
    """An executor and the number of tasks it works on at a time; None and 1 when the work is to be done here."""
    if address is None and jobs > 1:
        with processes(jobs) as pool:
            yield pool, jobs
        return
    with cluster(address) as found:
        yield found, 1 if found is None else CLUSTER_TASKS


@contextmanager
def terminated_like_interrupt() -> Iterator[None]:
    """SIGTERM ends the work as Ctrl-C does."""

    def stop(*_: object) -> None:
        raise KeyboardInterrupt

    before = signal.signal(signal.SIGTERM, stop)
    try:
        yield
    finally:
        signal.signal(signal.SIGTERM, before)
