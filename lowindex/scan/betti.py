"""The least index of a subgroup with infinite first homology, by a search that can be left, taken up again and shared."""

from __future__ import annotations

import json
from concurrent.futures import Executor
from dataclasses import dataclass
from typing import Any

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.cosets import subgroup_presentation
from lowindex.errors import InputError
from lowindex.scan.store import UNDECIDED
from lowindex.search import Conditions, SearchProgress, SubgroupClass, Task, walk, written_best
from lowindex.words import Presentation


@dataclass(frozen=True)
class Finding:
    """What a task found, before it becomes a result."""

    verdict: str
    facts: dict[str, Any]
    witness: str | None = None
    checkpoint: str | None = None


@dataclass(frozen=True)
class Pool:
    """An executor on which a task may have parts of its search done."""

    executor: Executor
    workers: int


def first_betti(group: Presentation, bound: int, budget: Budget, checkpoint: str | None, pool: Pool | None) -> Finding:
    """Index 1, 2, ..., `bound`, one search each. A checkpoint holds the index and the state of its search."""
    start: int
    state: str | None
    start, state = (1, None) if checkpoint is None else _read(checkpoint, bound)
    for index in range(start, bound + 1):
        task = Task.plain(group, index, Conditions())
        if state is not None:
            progress = SearchProgress.read(state, task, listing=False, named="the checkpoint in the store")
            state = None
        else:
            progress = SearchProgress(written_best(task, budget), listing=False)
        executor, workers = (None, 1) if pool is None else (pool.executor, pool.workers)
        parts = walk(
            progress.task,
            budget=budget,
            listing=False,
            places=progress.places,
            executor=executor,
            workers=workers,
            keep=infinite_homology,
        )
        for part, left in parts:
            if part.kept:
                return Finding("infinite", {"index": index, "homology": part.kept[0]})
            progress.add(part, left)
        if not progress.finished:
            return Finding(UNDECIDED, {"complete_to": index - 1}, checkpoint=json.dumps([index, progress.text()]))
    return Finding("none", {"complete_to": bound})


def _read(checkpoint: str, bound: int) -> tuple[int, str]:
    """The index of the search that was left, and its state. InputError when it is no checkpoint."""
    try:
        index, state = json.loads(checkpoint)
        if isinstance(index, int) and 1 <= index <= bound and isinstance(state, str):
            return index, state
    except (ValueError, TypeError, RecursionError):
        pass
    raise InputError("the checkpoint in the store is damaged; scan into another store")


def infinite_homology(task: Task, found: SubgroupClass) -> str | None:
    """H_1 of a subgroup of the highest index of the search, when it is infinite."""
    if found.index != task.index:
        return None
    subgroup = subgroup_presentation(task.presentation, found.table)
    homology = abelianization(subgroup.rank, subgroup.relators)
    return str(homology) if homology.betti else None
