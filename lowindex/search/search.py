"""All subgroups of index at most N of a finitely presented group, up to conjugacy or under other conditions.

Backtrack over partial coset tables in standard form: branch at the first empty slot, follow every deduction through the rotations of the
relators, and give a branch up when another base point has a smaller table. C. C. Sims, Computation with Finitely Presented
Groups (1994), ch. 5.6; A. Dietze and M. Schaps, Determining subgroups of a given finite index in a finitely presented group,
Canad. J. Math. 26 (1974) 769-782.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from lowindex.budget import Budget
from lowindex.cosets import CosetTable
from lowindex.errors import InputError
from lowindex.search.encoding import encodings, rotations
from lowindex.search.task import ROOT, Conditions, Place, Task
from lowindex.words import Presentation

SLICE = 2_000_000
"""Steps of the kernel between two looks at the budget."""

PROBE = 200_000
"""Steps after which a search is worth a comparison of encodings, and the steps of a trial of one."""

BLOCK = 4_000_000
"""Entries of the tables in a block."""


@dataclass(frozen=True)
class SubgroupClass:
    """A conjugacy class of subgroups: the least standard table of its members, and how many members it has. (Under conditions that
    list every subgroup: its standard table, and the number of its conjugates; up to symmetry: the size of the orbit.)"""

    table: CosetTable
    length: int

    @property
    def index(self) -> int:
        """The index of the subgroups."""
        return self.table.index

    @property
    def normal(self) -> bool:
        """Whether the class is one normal subgroup."""
        return self.length == 1


@dataclass(frozen=True)
class Block:
    """Subgroups in compact form. `indices`, `lengths`: int64 (count,); `images`: int16 (count, N, 2 * rank), the tables, whose rows from
    the index on mean nothing."""

    indices: NDArray[np.int64]
    lengths: NDArray[np.int64]
    images: NDArray[np.int16]

    def __iter__(self) -> Iterator[SubgroupClass]:
        for index, length, rows in zip(self.indices.tolist(), self.lengths.tolist(), self.images, strict=True):
            yield SubgroupClass(CosetTable(rows[:index].astype(np.int32)), length)


class SubgroupSearch:
    """An iterator over the classes of subgroups of index <= `index`, in the order of the backtrack (not by index).

    It ends when the search is over (`finished`) or the budget is spent; then a new budget may be set and the iteration goes on where
    it stopped. `place` says where that is; a search pickles as its place.
    """

    def __init__(self, presentation: Presentation, index: int, *, budget: Budget, conditions: Conditions | None = None) -> None:
        self._begin(Task.plain(presentation, index, conditions or Conditions()), budget)

    @classmethod
    def at(cls, task: Task, place: Place, *, budget: Budget) -> SubgroupSearch:
        """A search that goes on from a place; `task` says how relators are written. InputError when there is no such place."""
        self = cls.__new__(cls)
        self._begin(task, budget)
        self._prepare()
        if place.path:
            self._go_to(place)
        return self

    def _begin(self, task: Task, budget: Budget) -> None:
        self.task = task
        self.index = task.index
        self.rank = task.presentation.rank
        self.budget = budget
        self.finished = False
        self.steps = 0
        self.counts = np.zeros((3, task.index + 1), np.int64)
        self._state = np.zeros(11, np.int64)
        self._state[[0, 4]] = 1
        self._ready = False

    def _prepare(self) -> None:
        """Arrays for the kernel."""
        encoding, index = self.task.encoding, self.index
        words, inverses = self.task.words
        symmetry = np.array(self.task.symmetry, np.uint32).reshape(len(self.task.symmetry), encoding.width)
        places = len(symmetry) * (index + 1)
        shift = len(inverses).bit_length()
        slots = index * len(inverses) + 1
        self._table = np.zeros((index + 1) << shift, np.uint32)
        self._table[(1 << shift) + len(inverses) - 1] = 1
        self._values = np.zeros(slots, np.uint32)
        self._marks = np.zeros((3, slots), np.uint32)
        self._moves = np.zeros((4, 20 * places), np.uint32)
        self._before_moves: tuple[Any, ...] = (
            *(self._table, np.zeros(slots, np.uint32), np.zeros(slots, np.uint32), self._values, self._marks),
            *rotations(words, inverses),
            *(np.array(inverses, np.uint32), np.uint32(len(inverses) - 1), symmetry),
            *(np.zeros(places * (index + 1), np.uint32) for _ in range(2)),
            *(np.zeros(places, np.uint32) for _ in range(3)),
        )
        self._after_sizes: tuple[Any, ...] = (self._state, np.uint32(index), self.task.conditions.mode, np.uint32(shift))
        self._ready = True

    def _go_to(self, place: Place) -> None:
        """Descend to a place by its path."""
        *before, last = place.path
        possible = all(1 <= value <= self.index for value in before) and 0 <= last <= self.index
        if not possible or not 0 <= place.floor < len(place.path) < len(self._values):
            raise InputError(f"there is no place of this kind in a search to index {self.index}")
        path = np.array(place.path, np.uint32)
        self._values[: len(path)] = [*(value - 1 for value in before), last]
        self._state[10] = len(path)
        self._slice(self._room(0), 2**60)
        if self._state[10] or self._state[7] != len(path) - 1 or not np.array_equal(self._values[: len(path)], path):
            raise InputError("the path does not lead to a node of this search; was it made for another presentation or index?")
        self._state[6:8] = 0
        self._state[9] = place.floor
        self.steps = 0

    @property
    def nodes(self) -> int:
        """Partial tables that survived the deductions and the first-in-class test."""
        return int(self._state[6])

    @property
    def trials(self) -> int:
        """Values put into branching slots."""
        return int(self._state[7])

    @property
    def complete_to(self) -> int:
        """The index up to which everything is known: `index` when the search is over, else 0."""
        return self.index if self.finished else 0

    @property
    def place(self) -> Place | None:
        """Where the search stands; None when it is over."""
        if self.finished:
            return None
        if not self._ready:
            return ROOT
        return Place(tuple(self._values[: int(self._state[1])].tolist()), int(self._state[9]))

    def places(self, pieces: int) -> list[Place]:
        """What is left, cut into at most so many places in serial order, near the root where values are left to be tried."""
        place = self.place
        if place is None:
            return []
        path, before = place.path, self._marks[0].tolist()
        open_levels = [d for d in range(place.floor + 1, len(path)) if path[d] <= before[d] < self.index]
        cuts = [place.floor, *open_levels[: pieces - 1]]
        ends = [*cuts[1:], len(path)]
        return [Place(path[:end], cut) for cut, end in reversed(list(zip(cuts, ends, strict=True)))]

    def __getstate__(self) -> dict[str, Any]:
        kept = ("task", "budget", "steps", "counts", "_ready")
        return {"place": self.place, "numbers": self._state[6:8].copy(), **{key: getattr(self, key) for key in kept}}

    def __setstate__(self, state: dict[str, Any]) -> None:
        self._begin(state["task"], state["budget"])
        self.finished = state["place"] is None
        self.counts = state["counts"]
        if state["_ready"]:
            self._prepare()
            if not self.finished and state["place"].path:
                self._go_to(state["place"])
        self._state[6:8] = state["numbers"]
        self.steps = state["steps"]

    def __iter__(self) -> Iterator[SubgroupClass]:
        return self

    def __next__(self) -> SubgroupClass:
        block = self._advance(1)
        if block is None:
            raise StopIteration
        return next(iter(block))

    def blocks(self) -> Iterator[Block]:
        """The same as blocks of many subgroups, far faster than one by one."""
        while (block := self._advance(max(1, BLOCK // (2 * self.index * max(1, self.rank))))) is not None:
            yield block

    def count(self) -> bool:
        """Go through all that is left without making tables; whether the search is over. Numbers are in `counts`: rows for classes,
        subgroups and normal subgroups, by index."""
        self._advance(0)
        return self.finished

    def _room(self, tables: int) -> tuple[NDArray[np.int16], NDArray[np.int64]]:
        return np.zeros((tables, self.index, self.task.encoding.width), np.int16), np.zeros((tables, 2), np.int64)

    def _advance(self, most: int) -> Block | None:
        """Run slices until so many subgroups are found, the search is over or the budget spent; what was found."""
        if not self._ready:
            self.task = written_best(self.task, self.budget)
            self._prepare()
        filled = 0
        room = self._room(most)
        while not self.finished and not self.budget.exhausted and filled == 0:
            before = self.steps
            status = self._slice(room, min(SLICE, 100 * self.budget.left + 1000))
            self.budget.spend(1 + (self.steps - before) // 100)
            self.finished = status == 2
            filled = int(self._state[8])
        return self._block(room[0][:filled], room[1][:filled]) if filled else None

    def _slice(self, room: tuple[NDArray[np.int16], NDArray[np.int64]], cap: int) -> int:
        from lowindex.search import search_kernel

        kernel: Any = search_kernel.search_slice
        status = int(kernel(*self._before_moves, self._moves, self.counts, *room, *self._after_sizes, cap))
        if status == 3:
            self._moves = np.hstack([self._moves, np.zeros_like(self._moves)])
        self.steps += int(self._state[5])
        return status

    def _block(self, tables: NDArray[np.int16], sizes: NDArray[np.int64]) -> Block:
        """What the kernel found, over the generators of the group and as the least standard tables."""
        from lowindex.search import search_kernel

        images = tables[:, :, list(self.task.encoding.columns)]
        if not self.task.encoding.natural:
            least_forms: Any = search_kernel.least_forms
            least_forms(images, sizes[:, 0], self.task.conditions.mode == 1)
        return Block(sizes[:, 0].copy(), sizes[:, 0] * len(self.task.symmetry) // sizes[:, 1], images)


def written_best(task: Task, budget: Budget) -> Task:
    """A long search, written in the way that gets a trial search farthest; a short one as it is. Symmetries need the generators as they
    are."""
    candidates = [task.encoding] if task.conditions.up_to_symmetry else list(encodings(task.encoding))
    if len(candidates) > 1 and _trial(task, budget) is not None:
        return task
    return task.encoded(candidates[0] if len(candidates) == 1 else max(candidates, key=lambda e: _reach(task.encoded(e), budget)))


def _reach(task: Task, budget: Budget) -> tuple[int, int]:
    """How far trial searches get: the index, and how cheaply."""
    best = (0, 0)
    for index in range(2, task.index + 1):
        steps = _trial(replace(task, index=index), budget)
        if steps is None:
            break
        best = (index, -steps)
    return best


def _trial(task: Task, budget: Budget) -> int | None:
    """The steps of a search that counts; None when there are too many for a trial."""
    purse = budget.part(PROBE // 100)
    search = SubgroupSearch.at(task, ROOT, budget=purse)
    return search.steps if search.count() else None


def subgroups_by_index(presentation: Presentation, index: int, *, budget: Budget) -> Iterator[SubgroupClass]:
    """The classes of subgroups by increasing index 1, 2, ..., `index`: one search per index, of which only the new tables are
    given. Ends early when the budget is spent."""
    for n in range(1, index + 1):
        search = SubgroupSearch(presentation, n, budget=budget)
        yield from (found for found in search if found.index == n)
        if not search.finished:
            return


@dataclass(frozen=True)
class SubgroupCounts:
    """Numbers by index 1, 2, ..., complete_to: classes of subgroups, subgroups, normal subgroups; and the nodes of the search."""

    classes: tuple[int, ...]
    subgroups: tuple[int, ...]
    normal: tuple[int, ...]
    complete_to: int
    nodes: int


def count_classes(presentation: Presentation, index: int, *, budget: Budget) -> SubgroupCounts:
    """Count without listing. When the budget is spent before the search for `index` is over, the counts are those of a search for a
    smaller index that was completed."""
    best = SubgroupCounts((), (), (), 0, 0)
    for n in dict.fromkeys([*(k for k in (2, 4, 8, 16, 32, 64, 128) if k < index), index]):
        search = SubgroupSearch(presentation, n, budget=budget)
        if not search.count():
            return best
        classes, subgroups, normal = (tuple(int(x) for x in row[1:]) for row in search.counts)
        best = SubgroupCounts(classes, subgroups, normal, n, search.nodes)
    return best


def subgroups(
    presentation: Presentation, *, index: int, budget: Budget | None = None, conditions: Conditions | None = None
) -> SubgroupSearch:
    """The classes of subgroups of index at most `index`, as an iterator with a budget (none: no limit), or what `conditions` ask for.

    >>> sorted(item.index for item in subgroups(Presentation.parse("⟨a, b | a^2, b^3⟩"), index=6, conditions=Conditions(normal=True)))
    [1, 2, 3, 6, 6]
    """
    return SubgroupSearch(presentation, index, budget=budget or Budget(), conditions=conditions)
