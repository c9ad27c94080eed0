"""Facts of the catalog computed anew."""

from __future__ import annotations

from functools import lru_cache
from typing import Any

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.decision import Verdict, hunt
from lowindex.growth import growth
from lowindex.known.entries import Entry, Fact
from lowindex.obstructions import alexander_polynomial
from lowindex.quotients import NormalSubgroups
from lowindex.search import count_classes
from lowindex.words import Presentation

HUNTED = {
    "verdict": "verdict",
    "index": "index",
    "class": "nilpotency_class",
    "hirsch_length": "hirsch_length",
    "growth_degree": "growth_degree",
    "finite_order": "finite_order",
}


@lru_cache(maxsize=4)
def _hunted(group: Presentation, seconds: float) -> Verdict:
    return hunt(group, effort=5, seconds=seconds)


def recomputed(item: Entry, fact: Fact, *, seconds: float) -> Any:
    """The value of a fact as this program finds it; None when it does not within the time."""
    group = item.presentation
    budget = Budget(seconds=seconds)
    if fact.what in HUNTED:
        return getattr(_hunted(group, seconds), HUNTED[fact.what])
    if fact.what == "H1":
        return str(abelianization(group.rank, group.relators))
    if fact.what in ("subgroups", "classes"):
        counts = count_classes(group, len(fact.value), budget=budget)
        return list(getattr(counts, fact.what)) if counts.complete_to == len(fact.value) else None
    if fact.what == "spheres":
        witness = _hunted(group, seconds).witness
        found = growth(group, len(fact.value) - 1, witness=None if witness is None else witness.content, budget=budget)
        return list(found.spheres) if len(found.spheres) == len(fact.value) else None
    if fact.what == "normal indices":
        search = NormalSubgroups(group, fact.value[-1], budget)
        indices = [table.index for table in search]
        return indices if search.complete_to >= fact.value[-1] else None
    if fact.what == "alexander":
        return _alexander(group, budget)
    raise ValueError(f"no way to recompute {fact.what!r}")


def _alexander(group: Presentation, budget: Budget) -> list[int] | None:
    """Coefficients up to sign, for H_1 = Z with all generators meridians."""
    found = alexander_polynomial(group.rank, group.relators, [1] * group.rank, budget=budget)
    if found is None:
        return None
    coefficients = [int(c) for c in found.coeffs()]
    while coefficients and coefficients[0] == 0:
        coefficients.pop(0)
    return [c if coefficients[0] > 0 else -c for c in coefficients]
