"""Homomorphisms into symmetric groups up to conjugacy.

The transitive ones are the classes of subgroups; the others are disjoint unions of transitive ones, each union once.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations_with_replacement

from lowindex.budget import Budget
from lowindex.cosets import CosetTable
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation

Permutation = tuple[int, ...]


@dataclass(frozen=True)
class Homomorphism:
    """`images[k]`: the permutation of 0..degree-1 by which generator k + 1 acts; `orbits`: the tables of the actions on the orbits."""

    images: tuple[Permutation, ...]
    orbits: tuple[CosetTable, ...]

    @property
    def transitive(self) -> bool:
        """Whether there is one orbit."""
        return len(self.orbits) == 1


class HomomorphismStream:
    """An iterator over the homomorphisms into S_degree, one of each class under conjugation in S_degree. They come once all subgroups
    of index at most `degree` are known. It ends when all were given (`finished`) or the budget is spent; then a new budget may be set
    and the iteration goes on where it stopped."""

    def __init__(self, presentation: Presentation, degree: int, *, budget: Budget) -> None:
        self.presentation = presentation
        self.degree = degree
        self.budget = budget
        self.finished = False
        self._by_index: dict[int, list[CosetTable]] = {}
        self._search = SubgroupSearch(presentation, 1, budget=budget)
        self._listing: Iterator[Homomorphism] | None = None

    def __iter__(self) -> Iterator[Homomorphism]:
        return self

    def __next__(self) -> Homomorphism:
        if self._listing is None:
            if not self._searched():
                raise StopIteration
            self._listing = self._listed()
        found = next(self._listing, None)
        if found is None:
            self.finished = True
            raise StopIteration
        return found

    def _searched(self) -> bool:
        """Search one index after the other; whether all searches are over."""
        while True:
            search = self._search
            search.budget = self.budget
            found = self._by_index.setdefault(search.index, [])
            found += [item.table for item in search if item.index == search.index]
            if not search.finished or search.index >= self.degree:
                return search.finished
            self._search = SubgroupSearch(self.presentation, search.index + 1, budget=self.budget)

    def _listed(self) -> Iterator[Homomorphism]:
        for shape in _partitions(self.degree, self.degree):
            for orbits in _unions(shape, self._by_index):
                yield Homomorphism(_joined(orbits, self.presentation.rank), orbits)


def homomorphisms(presentation: Presentation, *, degree: int, budget: Budget | None = None) -> HomomorphismStream:
    """The homomorphisms into S_degree up to conjugacy, as an iterator with a budget (none: no limit)."""
    return HomomorphismStream(presentation, degree, budget=budget or Budget())


def _partitions(total: int, largest: int) -> Iterator[list[tuple[int, int]]]:
    """The partitions of `total` into parts of at most `largest`, as (part, how often), greatest part first."""
    if total == 0:
        yield []
        return
    for part in range(min(total, largest), 0, -1):
        for times in range(total // part, 0, -1):
            for rest in _partitions(total - part * times, part - 1):
                yield [(part, times), *rest]


def _unions(shape: list[tuple[int, int]], by_index: dict[int, list[CosetTable]]) -> Iterator[tuple[CosetTable, ...]]:
    if not shape:
        yield ()
        return
    (part, times), *rest = shape
    for chosen in combinations_with_replacement(by_index.get(part, []), times):
        for others in _unions(rest, by_index):
            yield chosen + others


def _joined(orbits: tuple[CosetTable, ...], rank: int) -> tuple[Permutation, ...]:
    images: list[list[int]] = [[] for _ in range(rank)]
    for table in orbits:
        start = len(images[0]) if images else 0
        for image, permutation in zip(images, table.permutations, strict=True):
            image += [start + point for point in permutation]
    return tuple(map(tuple, images))
