"""The growth of a group: from a table, from a witness, from an automaton, else bounds."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from lowindex.budget import Budget
from lowindex.cosets import CosetTable, core, enumerate_cosets
from lowindex.growth.automaton import Automaton, rational_series, rewriting_automaton
from lowindex.growth.models import moves_of_table, moves_of_witness
from lowindex.growth.spheres import balls, sphere_sizes
from lowindex.quotients import NormalSubgroups
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation

BOUNDED, POLYNOMIAL, EXPONENTIAL, UNKNOWN = "bounded", "polynomial", "exponential", "unknown"

MOST_COSETS = 200_000


@dataclass(frozen=True)
class Growth:
    """`spheres`: exact sizes from radius 0 (possibly fewer than asked). `lower`, `upper`: certified bounds of the balls beyond. `degree`:
    of polynomial growth, from a witness. `series`: numerator and denominator of the generating function of the spheres, a theorem when
    `series_proved`, else it fits the spheres computed. `source`: where the numbers come from."""

    kind: str
    source: str
    spheres: tuple[int, ...]
    degree: int | None = None
    lower: tuple[int, ...] = ()
    upper: tuple[int, ...] = ()
    series: tuple[tuple[int, ...], tuple[int, ...]] | None = None
    series_proved: bool = False
    finished: bool = False

    @property
    def balls(self) -> tuple[int, ...]:
        """Exact sizes of balls."""
        return tuple(balls(self.spheres))


def growth(presentation: Presentation, radius: int, *, witness: dict[str, Any] | None, budget: Budget) -> Growth:
    """Spheres up to a radius. `witness`: the content of a witness of the group that the checker accepted, if there is one."""
    claim = None if witness is None else witness["claim"]
    if witness is not None and claim == "virtually nilpotent" and witness["summary"]["hirsch_length"] is not None:
        start, moves = moves_of_witness(presentation, witness)
        sizes = sphere_sizes(start, moves, radius, budget=budget)
        order = witness["summary"]["finite_order"]
        finished = order is not None and sum(sizes) == order
        kind = POLYNOMIAL if order is None else BOUNDED
        degree = witness["summary"]["growth_degree"] if order is None else 0
        source = "collection in the nilpotent subgroup of the witness"
        series = _fitted(sizes, finished)
        return Growth(kind, source, tuple(sizes), degree, series=series, series_proved=finished, finished=finished)
    table = enumerate_cosets(presentation, budget=budget.part(budget.left // 5), max_cosets=MOST_COSETS).table
    if table is not None:
        sizes = sphere_sizes(*moves_of_table(table), radius, budget=budget)
        finished = sum(sizes) == table.index
        source = f"a regular table of {table.index} points"
        series = _fitted(sizes, finished)
        return Growth(BOUNDED, source, tuple(sizes), 0, series=series, series_proved=finished, finished=finished)
    refuted = claim == "not virtually nilpotent"
    automaton = rewriting_automaton(presentation, budget=budget.part(budget.left // 2))
    if automaton is not None and automaton.complete:
        numerator, denominator = automaton.series()
        kind = EXPONENTIAL if automaton.exponential else POLYNOMIAL
        source = f"a complete rewriting system of {len(automaton.rules)} rules, {len(automaton.moves)} states"
        series = tuple(numerator), tuple(denominator)
        return Growth(kind, source, tuple(automaton.counts(radius)), series=series, series_proved=True)
    return _bounded(presentation, radius, automaton, refuted, budget)


def _fitted(sizes: list[int], finished: bool) -> tuple[tuple[int, ...], tuple[int, ...]] | None:
    """A rational function of low degree that agrees with all sizes, when there are enough of them to say so."""
    if finished:
        return tuple(sizes), (1,)
    numerator, denominator = rational_series(sizes, len(sizes) - 1)
    recurrent = max(len(numerator), len(denominator) - 1)
    return (tuple(numerator), tuple(denominator)) if recurrent + len(denominator) + 1 < len(sizes) else None


def _bounded(presentation: Presentation, radius: int, automaton: Automaton | None, refuted: bool, budget: Budget) -> Growth:
    """Balls of a large finite quotient from below, words without a left side of a rule from above."""
    table = _largest_quotient(presentation, budget.part(budget.left // 2))
    lower = balls(sphere_sizes(*moves_of_table(table), radius, budget=budget))
    lower += [lower[-1]] * (radius + 1 - len(lower))
    upper = balls(automaton.counts(radius)) if automaton is not None else _free_balls(presentation.rank, radius)
    exact = 0
    while exact < radius and lower[exact + 1] == upper[exact + 1]:
        exact += 1
    spheres = [b - a for a, b in zip([0, *lower], lower[: exact + 1], strict=False)]
    kind = EXPONENTIAL if refuted else UNKNOWN
    source = f"a quotient of order {table.index} from below, rewriting from above"
    return Growth(kind, source, tuple(spheres), lower=tuple(lower), upper=tuple(upper))


def _free_balls(rank: int, radius: int) -> list[int]:
    return balls([1, *(2 * rank * (2 * rank - 1) ** n for n in range(radius))]) if rank else [1] * (radius + 1)


def _largest_quotient(presentation: Presentation, budget: Budget) -> CosetTable:
    """The regular table of the largest quotient met among normal subgroups and cores of subgroups of low index."""
    best = CosetTable.from_permutations([[0]] * presentation.rank)
    for table in NormalSubgroups(presentation, 120, budget.part(budget.left // 2)):
        best = max(best, table, key=lambda t: t.index)
    for found in SubgroupSearch(presentation, 9, budget=budget):
        kernel = core(found.table, max_index=50_000)
        if kernel is not None:
            budget.spend(10 * kernel.index)
            best = max(best, kernel, key=lambda t: t.index)
    return best
