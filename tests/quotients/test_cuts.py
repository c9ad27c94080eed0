"""Cuts contain the Fitting subgroup: in crystallographic groups every step of the descent keeps the translations, and ends at them."""

from __future__ import annotations

import pytest
from corpus import coxeter, flat, nilpotent, plane

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.cosets import CosetTable
from lowindex.decision.descent import first_permutation_cut
from lowindex.decision.visit import Visit
from lowindex.quotients import elementary_table, induced_cuts, layer_cuts, permutation_cut, twisted_characters
from lowindex.words import Presentation

CRYSTALS = {
    **{name: (plane.plane_group(name), row[1]) for name, row in plane.PLANE_GROUPS.items()},
    **{name: (row[0], row[1]) for name, row in flat.FLAT_MANIFOLDS.items()},
    **{name: (row[0], row[2]) for name, row in coxeter.AFFINE.items()},
    "C5 on Z^4": (nilpotent.torus_bundle([[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [-1, -1, -1, -1]]), 5),
    "-unipotent": ("⟨x, y, t | [x,y], t x t^-1 = x^-1 y^-1, t y t^-1 = y^-1⟩", 2),
}


def start(text: str) -> Visit:
    group = Presentation.parse(text)
    return Visit(group, CosetTable.from_permutations([[0]] * group.rank), max_class=4, budget=Budget(30_000_000))


@pytest.mark.parametrize("name", CRYSTALS)
def test_descent_ends_at_the_fitting_subgroup(name: str) -> None:
    """Every cut keeps the largest nilpotent normal subgroup (index known), so the index reached divides it; iterated, they reach it."""
    text, index = CRYSTALS[name]
    visit = start(text)
    while visit.index < index:
        budget = visit.budget
        cut = twisted_characters(visit.rank, visit.relators, visit.homology, budget=budget)
        cut = cut or next(layer_cuts(visit.rank, visit.relators, budget=budget), None)
        cut = cut or next(induced_cuts(visit.rank, visit.relators, budget=budget), None)
        cut = cut or first_permutation_cut(visit, budget.part(budget.left // 3))
        assert cut is not None, f"stuck at index {visit.index}"
        assert cut.table.satisfies(visit.relators)
        visit = visit.below(cut.table, how=cut.detail)
        assert index % visit.index == 0
    assert visit.quotient(3).stable


NILPOTENT = ["⟨a, b | [a,b]⟩", nilpotent.HEISENBERG, "⟨a, b | a^2, b^2, (ab)^4⟩", "⟨a, b | a^3, b^3, (ab)^3, (a^-1b)^3⟩", "⟨a | a^12⟩"]


@pytest.mark.parametrize("text", NILPOTENT)
def test_nilpotent_groups_have_no_cuts(text: str) -> None:
    group = Presentation.parse(text)
    homology = abelianization(group.rank, group.relators)
    assert twisted_characters(group.rank, group.relators, homology, budget=Budget()) is None
    assert next(layer_cuts(group.rank, group.relators, budget=Budget(300_000)), None) is None
    assert next(induced_cuts(group.rank, group.relators, budget=Budget(300_000)), None) is None


# Fitting subgroups of small groups (common practice): S3: C3, S4: V4, A5: 1, AGL(1,5): C5
PERMUTATIONS = [
    ([(1, 0, 2), (1, 2, 0)], 2),
    ([(1, 0, 2, 3), (1, 2, 3, 0)], 6),
    ([(1, 2, 0, 3, 4), (1, 2, 3, 4, 0)], 60),
    ([(1, 2, 3, 4, 0), (0, 2, 4, 1, 3)], 4),
]


@pytest.mark.parametrize(("permutations", "index"), PERMUTATIONS)
def test_fitting_subgroups_of_permutation_groups(permutations: list[tuple[int, ...]], index: int) -> None:
    cut = permutation_cut(permutations)
    assert cut is not None
    assert cut.table.index == index


def test_nilpotent_permutation_groups_give_nothing() -> None:
    assert permutation_cut([(1, 2, 3, 0), (2, 1, 0, 3)]) is None  # dihedral of order 8


def test_elementary_quotient() -> None:
    table = elementary_table(3, [(1, 1, 1)], 2)
    assert table is not None
    assert table.index == 4
    assert elementary_table(1, [(1, 1, 1)], 2) is None
