"""Lanes over all classes of subgroups by increasing index.

Breadth tries to prove them nilpotent: it finds witnesses of smaller index that are not normal. Covers looks for obstructions on them and
on regular covers below them: on the core of every subgroup (the kernel of a homomorphism into a symmetric group; among them are the
kernels of maps onto small simple groups, which open perfect groups), and, when H_1(H) is finite, on the kernels of H -> H_1(H; F_p).
"""

from __future__ import annotations

from collections.abc import Iterator

from lowindex.algebra import Abelianization
from lowindex.budget import Budget
from lowindex.cosets import CosetTable, abelian_table, core, pull_back
from lowindex.decision.descent import REFUTATION
from lowindex.decision.visit import Trial, Visit
from lowindex.quotients import NormalSubgroups
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation

LARGEST_CORE = 2500
LARGEST_ABELIAN_COVER = 130
LARGEST_NORMAL = 500
PRIMES = (2, 3, 5, 7, 11)


class Classes:
    """One subgroup of every class of index 2, 3, ..., reach. `complete_to`: all classes of at most this index were handed out."""

    def __init__(self, start: Visit, *, reach: int, budget: Budget) -> None:
        self.start = start
        self.reach = reach
        self.budget = budget
        self.complete_to = 1
        self.classes = 1
        self.nodes = 0

    def __iter__(self) -> Iterator[Visit]:
        start = self.start
        group = Presentation.from_relators(start.rank, start.relators)
        for index in range(2, self.reach + 1):
            search = SubgroupSearch(group, index, budget=self.budget)
            for found in search:
                if found.index == index:
                    self.classes += 1
                    table = pull_back(found.table, start.images)
                    how = f"class {self.classes} of the subgroups by index"
                    yield Visit(start.presentation, table, max_class=start.max_class, budget=self.budget, how=how)
            self.nodes += search.nodes
            if not search.finished:
                return
            self.complete_to = index


def breadth(classes: Classes) -> Iterator[Trial]:
    """Subgroups with a stable nilpotent quotient are tried for a proof."""
    budget = classes.budget
    for visit in classes:
        quotient = visit.quotient(visit.max_class)
        if quotient.stable and quotient.nilpotency_class:
            yield Trial(visit, budget.part(budget.left // 12), proof=True)


def covers(classes: Classes) -> Iterator[Trial]:
    """The whole group's covers, then every class with its covers, each cover once."""
    budget = classes.budget
    seen: set[CosetTable] = set()
    for cover in _modular_covers(classes.start):
        yield _refutation(cover, budget)
    for visit in classes:
        yield _refutation(visit, budget)
        for cover in _covers(visit, budget):
            if cover.table not in seen:
                seen.add(cover.table)
                yield _refutation(cover, budget)
    for cover in _by_layers(classes.start, budget):
        if cover.table not in seen:
            yield _refutation(cover, budget)


def _by_layers(start: Visit, budget: Budget) -> Iterator[Visit]:
    """Normal subgroups by layers of chief factors: those that are no core of a subgroup of low index."""
    group = Presentation.from_relators(start.rank, start.relators)
    for table in NormalSubgroups(group, LARGEST_NORMAL, budget):
        if table.index > 1:
            whole = pull_back(table, start.images)
            how = f"a normal subgroup of index {table.index}"
            yield Visit(start.presentation, whole, max_class=start.max_class, budget=budget, how=how)


def _refutation(visit: Visit, budget: Budget) -> Trial:
    return Trial(visit, budget.part(min(REFUTATION, budget.left // 10)), proof=False)


def _covers(visit: Visit, budget: Budget) -> Iterator[Visit]:
    budget.spend(visit.index * visit.table.rank)
    kernel = core(visit.table, max_index=LARGEST_CORE)
    if kernel is not None and kernel.index > visit.index:
        budget.spend(kernel.index * visit.index // 10)
        how = f"kernel of a map onto a group of order {kernel.index} and degree {visit.index}"
        yield Visit(visit.presentation, kernel, max_class=visit.max_class, budget=budget, how=how)
    yield from _modular_covers(visit)


def _modular_covers(visit: Visit) -> Iterator[Visit]:
    """The kernels of H -> H_1(H; F_p) for a finite H_1(H)."""
    if visit.homology.betti == 0:
        for p in PRIMES:
            table = _modular_table(visit.homology, p)
            if table is not None:
                yield visit.below(table, how=f"kernel of the map onto H_1 modulo {p} of a subgroup of index {visit.index}")


def _modular_table(homology: Abelianization, p: int) -> CosetTable | None:
    """Over the generators of H; None when the kernel is H or has a large index."""
    places = [k for k, d in enumerate(homology.torsion) if d % p == 0]
    if not 1 < p ** len(places) <= LARGEST_ABELIAN_COVER:
        return None
    return abelian_table([[image[k] % p for k in places] for image in homology.images], [p] * len(places))
