"""Homomorphisms into symmetric groups up to conjugacy.

The transitive ones are the classes of subgroups; the others are disjoint unions of transitive ones, each union once.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations_with_replacement

from lowindex.budget import Budget
from lowindex.cosets import CosetTable
from lowindex.search import subgroups_by_index
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


def homomorphisms(presentation: Presentation, *, degree: int, budget: Budget | None = None) -> Iterator[Homomorphism]:
    """The homomorphisms into S_degree, one of each class under conjugation in S_degree. They come once all subgroups of index at most
    `degree` are known; nothing comes when the budget is spent before."""
    budget = budget or Budget()
    tables = [found.table for found in subgroups_by_index(presentation, degree, budget=budget)]
    if budget.exhausted:
        return
    by_index: dict[int, list[CosetTable]] = {}
    for table in tables:
        by_index.setdefault(table.index, []).append(table)
    for shape in _partitions(degree, degree):
        for orbits in _unions(shape, by_index):
            yield Homomorphism(_joined(orbits, presentation.rank), orbits)


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
