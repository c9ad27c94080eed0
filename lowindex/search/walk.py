"""A search cut into parts that can be done anywhere: here, in other processes, on a cluster. Parts come in serial order, whoever did
them, and a part that is not done after a number of steps is split again.

    group = Presentation.parse("⟨a, b | a^2, b^3⟩")
    with ProcessPoolExecutor(2) as executor:
        for part, left in walk(Task.plain(group, 20, Conditions()), budget=Budget(), listing=False, executor=executor, workers=2):
            ...
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from concurrent.futures import FIRST_COMPLETED, Executor, Future, wait
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from lowindex.budget import Budget
from lowindex.search.search import Block, SubgroupClass, SubgroupSearch
from lowindex.search.task import ROOT, Place, Task

STEPS = 10_000_000
"""Steps of a part: some tenths of a second."""

FIRST_STEPS = 1_000_000
"""Steps of the first part, after which there is work for several."""

PIECES = 6
"""Places into which an unfinished part is split."""


@dataclass(frozen=True)
class Part:
    """What was found from a place on: `counts` as in a search, the nodes, trials and steps, the subgroups if they were listed, what was
    kept of them; `rest`: what the part left undone."""

    place: Place
    counts: NDArray[np.int64]
    nodes: int
    trials: int
    steps: int
    blocks: tuple[Block, ...]
    kept: tuple[Any, ...]
    rest: tuple[Place, ...]


Keep = Callable[[Task, SubgroupClass], Any]
"""A function of module level that says what is to be kept of a subgroup, None for nothing."""


def search_part(task: Task, place: Place, *, steps: int, pieces: int, listing: bool, keep: Keep | None = None) -> Part:
    """Search from a place on for about this many steps; what is left is cut into pieces. A function of picklable values, for executors.
    With `keep` the subgroups are looked at where they are found."""
    search = SubgroupSearch.at(task, place, budget=Budget(max(1, steps // 100)))
    blocks: list[Block] = []
    kept: list[Any] = []
    if not listing and keep is None:
        search.count()
    else:
        for block in search.blocks():
            blocks += [block] if listing else []
            kept += [value for found in block if (value := keep(task, found)) is not None] if keep is not None else []
    rest = tuple(search.places(pieces))
    return Part(place, search.counts, search.nodes, search.trials, search.steps, tuple(blocks), tuple(kept), rest)


def walk(
    task: Task,
    *,
    budget: Budget,
    listing: bool,
    places: Sequence[Place] = (ROOT,),
    executor: Executor | None = None,
    workers: int = 1,
    part_steps: int = STEPS,
    first_steps: int = FIRST_STEPS,
    keep: Keep | None = None,
) -> Iterator[tuple[Part, list[Place]]]:
    """The parts of a search with the places that are left after each, in serial order. Ends when nothing is left or the budget is
    spent. Without an executor the parts are done here, one after the other."""
    pieces = 1 if executor is None else PIECES
    order = [_Entry(place) for place in places]

    def submit(place: Place) -> Future[Part]:
        assert executor is not None
        return executor.submit(search_part, task, place, steps=part_steps, pieces=pieces, listing=listing, keep=keep)

    first, steps = True, first_steps
    try:
        while order and not budget.exhausted:
            if executor is None or first:
                here = min(steps, 100 * budget.left + 1000)
                _settle(order, order[0], search_part(task, order[0].place, steps=here, pieces=pieces, listing=listing, keep=keep))
                first, steps = False, part_steps
            else:
                _keep_busy(order, 2 * workers, submit)
                _settle_done(order)
            while order and (part := order[0].part) is not None and not budget.exhausted:
                order.pop(0).merged = True
                budget.spend(1 + part.steps // 100)
                yield part, [other.place for other in order if other.origin is None or other.origin.merged]
    finally:
        for entry in order:
            if entry.future is not None:
                entry.future.cancel()


class _Entry:
    """A place in serial order, what works on it, what came of it. What a part had left over stands after it as entries of their own, so
    that others can begin with them; `origin` is the part they came from."""

    def __init__(self, place: Place, origin: _Entry | None = None) -> None:
        self.place = place
        self.origin = origin
        self.future: Future[Part] | None = None
        self.part: Part | None = None
        self.merged = False


def _settle(order: list[_Entry], entry: _Entry, part: Part) -> None:
    entry.part = part
    entry.future = None
    after = order.index(entry) + 1
    order[after:after] = [_Entry(place, entry) for place in part.rest]


def _keep_busy(order: Sequence[_Entry], window: int, submit: Callable[[Place], Future[Part]]) -> None:
    """Hand out the first places that nobody works on."""
    running = sum(entry.future is not None for entry in order)
    for entry in order:
        if running >= window:
            break
        if entry.future is None and entry.part is None:
            entry.future = submit(entry.place)
            running += 1


def _settle_done(order: list[_Entry]) -> None:
    """Wait until something is done, and take it up."""
    running = {entry.future: entry for entry in order if entry.future is not None}
    done, _ = wait(running, return_when=FIRST_COMPLETED)
    for future in done:
        _settle(order, running[future], future.result())
