"""Groups told apart by their subgroups of low index.

For every index the multiset of (length of the class, H_1 of a member) over all classes of subgroups is an invariant. A difference proves
that the groups are not isomorphic, given that both searches were complete; no difference proves nothing.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field

import lowindex
from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.checker import check
from lowindex.cosets import CosetTable, core, subgroup_presentation
from lowindex.search import SubgroupSearch
from lowindex.witness import Witness, different_groups
from lowindex.words import Presentation

LARGEST_CORE = 5000
MOST_TABLES = 2000
"""Longer lists are compared, but not written as a witness."""


@dataclass(frozen=True)
class ClassKind:
    """What is compared of a class: how many subgroups it has, H_1 of one, and the index of its core (None: above 5000)."""

    length: int
    homology: str
    core: int | None


@dataclass(frozen=True)
class Comparison:
    """`index`: the least one at which the groups differ, None when they do not up to `complete_to`. `what`: the invariant that differs,
    with both values."""

    index: int | None
    what: str
    complete_to: int
    kinds: tuple[Counter[ClassKind], ...] = ()
    witness: Witness | None = field(default=None, repr=False)


def compare(one: Presentation, two: Presentation, *, index: int, budget: Budget) -> Comparison:
    """Compare two groups for all indices up to a bound, or as far as the budget allows."""
    for n in range(1, index + 1):
        lists = [found for group in (one, two) if (found := _classes(group, n, budget)) is not None]
        if len(lists) < 2:
            return Comparison(None, "", n - 1)
        kinds = [Counter(_kind(group, table, length) for table, length in found) for group, found in zip((one, two), lists, strict=True)]
        if kinds[0] != kinds[1]:
            tables = [[table for table, _ in found] for found in lists]
            return Comparison(n, _difference(kinds), n, tuple(kinds), _witness(one, two, tables, kinds))
    return Comparison(None, "", index)


def _classes(group: Presentation, n: int, budget: Budget) -> list[tuple[CosetTable, int]] | None:
    search = SubgroupSearch(group, n, budget=budget)
    found = [(item.table, item.length) for item in search if item.index == n]
    return found if search.finished else None


def _kind(group: Presentation, table: CosetTable, length: int) -> ClassKind:
    subgroup = subgroup_presentation(group, table)
    normal_core = core(table, max_index=LARGEST_CORE)
    return ClassKind(length, str(abelianization(subgroup.rank, subgroup.relators)), None if normal_core is None else normal_core.index)


def _difference(kinds: Sequence[Counter[ClassKind]]) -> str:
    """The simplest invariant that differs."""
    counts = [sum(side.values()) for side in kinds]
    if counts[0] != counts[1]:
        return f"number of classes: {counts[0]} and {counts[1]}"
    views: tuple[tuple[str, Callable[[ClassKind], object]], ...] = (
        ("lengths of the classes", lambda kind: kind.length),
        ("first homology of the classes", lambda kind: kind.homology),
        ("length and first homology of the classes", lambda kind: (kind.length, kind.homology)),
        ("indices of the cores", lambda kind: kind.core),
    )
    for name, view in views:
        first, second = (Counter(map(view, side.elements())) for side in kinds)
        if first != second:
            return f"{name}: only in the first {_listed(first - second)}; only in the second {_listed(second - first)}"
    return "length, first homology and core index of the classes together"


def _listed(counts: Counter[object]) -> str:
    return ", ".join(f"{key} ({times}x)" for key, times in sorted(counts.items(), key=str)) or "nothing"


def _witness(
    one: Presentation, two: Presentation, tables: Sequence[Sequence[CosetTable]], kinds: Sequence[Counter[ClassKind]]
) -> Witness | None:
    """Both lists for the checker; None when only the cores differ, or there are too many tables."""
    plain = [Counter((kind.length, kind.homology) for kind in side.elements()) for side in kinds]
    if plain[0] == plain[1] or max(map(len, tables)) > MOST_TABLES:
        return None
    witness = different_groups(one, two, tables[0], tables[1], effort=0, version=lowindex.__version__)
    check(witness.text, presentation=(one.names, one.relators))
    return witness
