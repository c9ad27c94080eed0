"""All subgroups of index at most N of a finitely presented group, up to conjugacy.

Backtrack over partial coset tables in standard form: branch at the first empty slot, follow every deduction through the rotations of the
relators, and give a branch up when another base point has a smaller table. C. C. Sims, Computation with Finitely Presented
Groups (1994), ch. 5.6; A. Dietze and M. Schaps, Determining subgroups of a given finite index in a finitely presented group,
Canad. J. Math. 26 (1974) 769-782.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from lowindex.budget import Budget
from lowindex.cosets import CosetTable
from lowindex.errors import InputError
from lowindex.words import Presentation, cyclic_form, inverse

SLICE = 1_000_000
"""Steps of the kernel between two looks at the budget."""

LARGEST_INDEX = 20_000


@dataclass(frozen=True)
class SubgroupClass:
    """A conjugacy class of subgroups: the standard table of its first member, and how many members it has."""

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


class SubgroupSearch:
    """An iterator over the classes of subgroups of index <= `index`, in the order of the backtrack (not by index).

    It ends when the search is over (`finished`) or the budget is spent; then a new budget may be set and the iteration goes on where
    it stopped. The whole state is in arrays, so a search can be pickled between two items.
    """

    def __init__(self, presentation: Presentation, index: int, *, budget: Budget) -> None:
        if not 1 <= index <= LARGEST_INDEX:
            raise InputError(f"index must be between 1 and {LARGEST_INDEX}, not {index}")
        self.index = index
        self.rank = presentation.rank
        self.budget = budget
        self.finished = False
        self._columns, inverses = _columns(presentation)
        width = len(inverses)
        words, starts, lengths, first = _rotations(presentation, self._columns, width)
        size = index * max(width, 1)
        self.counts = np.zeros((3, index + 1), np.int64)
        self._state = np.zeros(8, np.int64)
        self._state[0] = 1
        self._table = np.full(size, -1, np.int32)
        self._arrays: tuple[Any, ...] = (
            self._table,
            np.zeros(size + 2, np.int32),
            *(np.zeros(size + 1, np.int32) for _ in range(4)),
            words,
            starts,
            lengths,
            first,
            np.array(inverses, np.int32),
            np.zeros(index, np.int32),
            np.zeros(index, np.int32),
            self.counts,
            self._state,
        )

    @property
    def nodes(self) -> int:
        """Partial tables that survived the deductions and the first-in-class test."""
        return int(self._state[5])

    @property
    def trials(self) -> int:
        """Values put into branching slots."""
        return int(self._state[6])

    @property
    def complete_to(self) -> int:
        """The index up to which everything is known: `index` when the search is over, else 0."""
        return self.index if self.finished else 0

    def __iter__(self) -> Iterator[SubgroupClass]:
        return self

    def __next__(self) -> SubgroupClass:
        if not self._advance(listing=True):
            raise StopIteration
        width = self._arrays[10].shape[0]
        points = int(self._state[0])
        rows = self._table[: points * width].reshape(points, width)[:, self._columns]
        return SubgroupClass(CosetTable(rows.astype(np.int32)), points // int(self._state[7]))

    def count(self) -> bool:
        """Go through all that is left without making tables; whether the search is over. Numbers are in `counts`: rows for classes,
        subgroups and normal subgroups, by index."""
        self._advance(listing=False)
        return self.finished

    def _advance(self, *, listing: bool) -> bool:
        """Run slices up to the next table (True), the end, or the end of the budget (False)."""
        from lowindex.search.search_kernel import search_slice as kernel

        search_slice: Any = kernel

        while not self.finished and not self.budget.exhausted:
            cap = min(SLICE, 100 * self.budget.left + 1000)
            status = search_slice(*self._arrays, self.index, listing, cap)
            self.budget.spend(1 + int(self._state[4]) // 100)
            if status == 1:
                return True
            self.finished = status == 2
        return False


def _columns(presentation: Presentation) -> tuple[list[int], list[int]]:
    """Search column of every table column, and the inverse of every search column: an involution (x^2 is a relator) has only one."""
    involutions = {abs(word[0]) for word in presentation.relators if len(word) == 2 and word[0] == word[1]}
    columns: list[int] = []
    inverses: list[int] = []
    for k in range(1, presentation.rank + 1):
        here = len(inverses)
        if k in involutions:
            columns += [here, here]
            inverses.append(here)
        else:
            columns += [here, here + 1]
            inverses += [here + 1, here]
    return columns, inverses


def _rotations(presentation: Presentation, columns: Sequence[int], width: int) -> tuple[Any, Any, Any, Any]:
    """All rotations of relators and inverses in search columns, sorted by first column, then length."""
    found: set[tuple[int, ...]] = set()
    for word in dict.fromkeys(cyclic_form(word) for word in presentation.relators):
        for form in (word, inverse(word)):
            spelled = tuple(columns[2 * abs(x) - 2 + (x < 0)] for x in form)
            if len(spelled) == 2 and spelled[0] == spelled[1] and word[0] == word[-1]:
                continue  # x^2 is built into the single column of x
            found |= {spelled[i:] + spelled[:i] for i in range(len(spelled))}
    rotations = sorted(found, key=lambda word: (word[0], len(word), word))
    first = np.zeros(width + 1, np.int32)
    letters: list[int] = []
    starts: list[int] = []
    for word in rotations:
        first[word[0] + 1 :] += 1
        starts.append(len(letters))
        letters += word
    return (
        np.array(letters, np.int32),
        np.array(starts, np.int32),
        np.array([len(word) for word in rotations], np.int32),
        first,
    )


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


def subgroups(presentation: Presentation, *, index: int, budget: Budget | None = None) -> SubgroupSearch:
    """The classes of subgroups of index at most `index`, as an iterator with a budget (none: no limit)."""
    return SubgroupSearch(presentation, index, budget=budget or Budget())
