"""The descent through Fitting subgroups.

From H = G on: as long as H has a finite quotient Q that is not nilpotent, go to the preimage of Fit(Q). What is virtually nilpotent in G
and normal stays inside, so when an H turns out to be nilpotent it is exactly the Fitting subgroup of G. By K. A. Hirsch (1946) a
polycyclic-by-finite group all of whose finite quotients are nilpotent is nilpotent, so for virtually nilpotent G every H that
is not nilpotent has such a quotient.
"""

from __future__ import annotations

from collections.abc import Iterator

from lowindex.budget import Budget
from lowindex.decision.visit import Trial, Visit
from lowindex.quotients import Cut, induced_cuts, layer_cuts, permutation_cut, twisted_characters
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation

QUICK_PROOF = 400_000
"""Work of a first attempt at a proof; the last one, when no quotient says otherwise, may take everything."""

REFUTATION = 300_000
"""Work that looking for obstructions on one subgroup may take."""

QUICK_CLASS = 4
"""The class up to which the nilpotent quotient is computed before other quotients are looked for."""

LARGEST_DEGREE = 24

MOST_GENERATORS = 120
"""A subgroup that needs more generators after Tietze moves ends the descent: linear algebra on it would take too long."""


def descend(start: Visit, *, reach: int, budget: Budget) -> Iterator[Trial]:
    """The subgroups to look for obstructions on and to try proofs on. The caller stops when one of them decides."""
    visit = start
    while not budget.exhausted and visit.rank <= MOST_GENERATORS:
        yield Trial(visit, budget.part(min(REFUTATION, budget.left // 10)), proof=False)
        cut = twisted_characters(visit.rank, visit.relators, visit.homology, budget=budget)
        if cut is None and visit.quotient(QUICK_CLASS).stable:
            yield Trial(visit, budget.part(QUICK_PROOF), proof=True)
        cut = cut or next(layer_cuts(visit.rank, visit.relators, budget=budget.part(budget.left // 4)), None)
        cut = cut or next(induced_cuts(visit.rank, visit.relators, budget=budget.part(budget.left // 3)), None)
        cut = cut or first_permutation_cut(visit, budget.part(budget.left // 3))
        if cut is None:
            if visit.quotient(visit.max_class).stable:
                yield Trial(visit, budget, proof=True)
            return
        if visit.index * cut.table.index > reach:
            return
        visit = visit.below(cut.table, how=f"{cut.kind}: {cut.detail}")


def first_permutation_cut(visit: Visit, budget: Budget) -> Cut | None:
    """The cut of the first transitive image of small degree that is not nilpotent."""
    group = Presentation.from_relators(visit.rank, visit.relators)
    seen: set[int] = set()
    for degree in (4, 6, 8, 12, LARGEST_DEGREE):
        search = SubgroupSearch(group, degree, budget=budget.part(max(1, budget.left // 2)))
        for found in search:
            key = hash(found.table)
            if found.index > 2 and key not in seen:
                seen.add(key)
                budget.spend(3000)
                if cut := permutation_cut(found.table.permutations):
                    return cut
            if budget.exhausted:
                return None
    return None
