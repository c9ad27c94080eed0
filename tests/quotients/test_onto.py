"""Homomorphisms onto finite groups against published counts and sympy's groups."""

from __future__ import annotations

import pickle
from itertools import pairwise, product
from math import factorial
from typing import Any

import pytest
from corpus import flat, plane
from sympy import divisor_sigma, factorint
from sympy.combinatorics import Permutation, PermutationGroup
from sympy.combinatorics.named_groups import AlternatingGroup, DihedralGroup, SymmetricGroup

from lowindex.budget import Budget
from lowindex.errors import InputError
from lowindex.quotients import (
    HomomorphismSearch,
    NormalSubgroups,
    count_homomorphisms,
    count_onto,
    cycle_type,
    describe_image,
    has_types,
    homomorphisms,
    is_even,
    is_primitive,
    kernel_tables,
    value,
    wanted_types,
)
from lowindex.quotients.targets import target_generators
from lowindex.search import count_classes
from lowindex.words import Presentation

FREE = "⟨a, b | ⟩"
HURWITZ = "⟨a, b | a^2, b^3, (ab)^7⟩"


def onto(text: str, target: str) -> tuple[int, int, int]:
    found = count_onto(Presentation.parse(text), target, budget=Budget())
    assert found.complete
    return found.homomorphisms, found.epimorphisms, found.kernels


# P. Hall, The Eulerian functions of a group, 1936: generating pairs, and normal subgroups of F2 with that quotient (C; 19 and 57 M)
HALL = {"S3": (18, 3), "A4": (96, 4), "S4": (216, 9), "A5": (2280, 19), "PSL(2,7)": (19152, 57)}


@pytest.mark.parametrize("target", HALL)
def test_generating_pairs(target: str) -> None:
    order = PermutationGroup([Permutation(list(p)) for p in target_generators(target)]).order()
    assert onto(FREE, target) == (order**2, *HALL[target])


@pytest.mark.parametrize(("target", "kernels"), [("PSL(2,7)", 1), ("PSL(2,8)", 1), ("PSL(2,13)", 3), ("PSL(2,11)", 0), ("PSL(2,29)", 3)])
def test_hurwitz_groups(target: str, kernels: int) -> None:
    """(2,3,7): A. M. Macbeath, Generators of the linear fractional groups, 1969 (M)."""
    assert onto(HURWITZ, target)[2] == kernels


# name: order (common practice)
ORDERS = {
    "C6": 6, "C1": 1, "D5": 10, "D2": 4, "D1": 2, "S5": 120, "A5": 60, "A3": 3, "Q8": 8, "PSL(2,4)": 60, "PSL(2,9)": 360, "PSL(2,11)": 660,
    "PGL(2,5)": 120, "PGL(2,7)": 336, "PGL(2,8)": 504, "SL(2,3)": 24, "SL(2,4)": 60, "SL(2,5)": 120, "SL(2,9)": 720, "AGL(1,7)": 42,
    "AGL(1,8)": 56, "AGL(1,9)": 72, "A5 x C2": 120, "C2 x C2 x C3": 12, "S3×S3": 36, "(1 2 3)(4 5), (1 2)": 12, "(1 2)(3 4), (1 3)(2 4)": 4,
}  # fmt: skip


@pytest.mark.parametrize("name", ORDERS)
def test_orders_of_targets(name: str) -> None:
    assert PermutationGroup([Permutation(list(p)) for p in target_generators(name)]).order() == ORDERS[name]


def test_quaternions_are_not_dihedral() -> None:
    group = PermutationGroup([Permutation(list(p)) for p in target_generators("Q8")])
    assert sorted(x.order() for x in group.generate()) == [1, 2, 4, 4, 4, 4, 4, 4]


@pytest.mark.parametrize("name", ["", "X5", "PSL(2,6)", "PSL(3,2)", "Q16", "A99999", "(1 2", "(1 2)(2 3)", "(0 1)", "(1 2) foo", "C0", "S12", "A5 x"])
def test_unusable_targets(name: str) -> None:
    with pytest.raises(InputError) as caught:
        count_onto(Presentation.parse("⟨a | a^2⟩"), name, budget=Budget())
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize("text", ["⟨a, b | a^2, b^3⟩", "⟨a, b | [a,b]⟩", "⟨a, b | a b a = b a b⟩", "⟨a, b | a^4, a^2 = b^3⟩", "⟨a, b, c | a b c, a^2⟩"])
@pytest.mark.parametrize("target", ["S3", "D4", "Q8", "A4", "C6"])
def test_against_brute_force(text: str, target: str) -> None:
    """All tuples of elements of sympy's group, relators multiplied out there."""
    group = Presentation.parse(text)
    found: Any = PermutationGroup([Permutation(list(p)) for p in target_generators(target)])
    elements = list(found.generate())
    homs = epis = 0
    for images in product(elements, repeat=group.rank):
        good = True
        for word in group.relators:
            total = Permutation(range(found.degree))
            for letter in word:
                total = total * (images[letter - 1] if letter > 0 else images[-letter - 1] ** -1)
            good &= total.is_Identity
        homs += good
        epis += good and PermutationGroup(list(images)).order() == len(elements)
    assert onto(text, target)[:2] == (homs, epis)


@pytest.mark.parametrize("n", [3, 4, 5])
def test_braid_groups_onto_symmetric_groups(n: int) -> None:
    """B_n -> S_n: E. Artin 1947, one kernel up to the automorphisms of S_n."""
    names = "abcd"[: n - 1]
    relators = [f"{x}{y}{x} = {y}{x}{y}" for x, y in pairwise(names)]
    relators += [f"[{names[i]},{names[j]}]" for i in range(n - 1) for j in range(i + 2, n - 1)]
    text = f"⟨{', '.join(names)} | {', '.join(relators)}⟩"
    _, epis, kernels = onto(text, f"S{n}")
    assert kernels >= 1
    assert epis == kernels * factorial(n)  # Aut S_n = S_n for n = 3, 4, 5


@pytest.mark.parametrize("genus", [1, 2])
def test_surface_groups_by_characters(genus: int) -> None:
    """|Hom(pi_g, S_n)| = n! sum over characters of (n! / degree)^(2g-2) (Frobenius; A. D. Mednykh)."""
    from sympy.utilities.iterables import partitions

    def degree(shape: list[int]) -> int:
        columns = [sum(part > j for part in shape) for j in range(shape[0])]
        hooks = 1
        for i, part in enumerate(shape):
            for j in range(part):
                hooks *= part - j + columns[j] - i - 1
        return factorial(sum(shape)) // hooks

    text = "⟨a, b | [a,b]⟩" if genus == 1 else "⟨a, b, c, d | [a,b][c,d]⟩"
    top = 5 if genus == 1 else 4
    expected = [1]
    for n in range(1, top + 1):
        shapes = [[k for k, times in sorted(p.items(), reverse=True) for _ in range(times)] for p in partitions(n)]
        expected.append(factorial(n) * sum((factorial(n) // degree(shape)) ** (2 * genus - 2) for shape in shapes))
    assert count_homomorphisms(Presentation.parse(text), top, budget=Budget()) == tuple(expected)


def test_kernels_are_normal_of_the_right_index() -> None:
    for table in kernel_tables(Presentation.parse(FREE), "S3", budget=Budget()):
        assert table.index == 6
        assert describe_image(table.permutations).name == "D3"


def test_a_budget_stops_the_search() -> None:
    search = HomomorphismSearch(Presentation.parse("⟨a, b | ⟩"), "PSL(2,7)", budget=Budget(300))
    found = list(search)
    assert found
    assert not search.finished
    search = pickle.loads(pickle.dumps(search))
    search.budget = Budget()
    found += list(search)
    assert search.finished
    assert found == list(HomomorphismSearch(search.presentation, "PSL(2,7)", budget=Budget()))


# text: normal subgroups by index
def heisenberg_normal(n: int) -> int:
    """The coefficient of n^-s in zeta(s) zeta(s-1) zeta(3s-2) (F. J. Grunewald, D. Segal, G. C. Smith 1988; M)."""
    total = 0
    for c in range(1, n + 1):
        if c**3 <= n and n % c**3 == 0:
            total += c**2 * int(divisor_sigma(n // c**3))
    return total


def normal_counts(text: str, bound: int) -> list[int]:
    search = NormalSubgroups(Presentation.parse(text), bound, Budget())
    tables = list(search)
    assert search.complete_to == bound
    assert len(set(tables)) == len(tables)
    return [sum(table.index == n for table in tables) for n in range(1, bound + 1)]


def test_normal_subgroups_of_the_heisenberg_group() -> None:
    assert normal_counts("⟨a, b | [a,b,a], [a,b,b]⟩", 60) == [heisenberg_normal(n) for n in range(1, 61)]


def test_normal_subgroups_of_free_abelian_groups() -> None:
    assert normal_counts("⟨a, b | [a,b]⟩", 30) == [int(divisor_sigma(n)) for n in range(1, 31)]
    lattices = [sum(d * int(divisor_sigma(d)) for d in range(1, n + 1) if n % d == 0) for n in range(1, 13)]
    assert normal_counts("⟨a, b, c | [a,b], [a,c], [b,c]⟩", 12) == lattices


@pytest.mark.parametrize("name", plane.PLANE_GROUPS)
def test_normal_subgroups_of_plane_groups(name: str) -> None:
    """Against the search for all subgroups."""
    text = plane.plane_group(name)
    assert tuple(normal_counts(text, 10)) == count_classes(Presentation.parse(text), 10, budget=Budget()).normal


def test_normal_subgroups_of_the_hurwitz_group() -> None:
    """Smallest indices 168, 504, 1092 (three), 1344 (two): M. D. E. Conder 1980, as reported in arXiv:1001.5125 (M)."""
    search = NormalSubgroups(Presentation.parse(HURWITZ), 1344, Budget())
    assert [table.index for table in search] == [1, 168, 504, 1092, 1092, 1092, 1344, 1344]
    assert search.complete_to == 1344


@pytest.mark.parametrize("group", [SymmetricGroup(5), AlternatingGroup(5), AlternatingGroup(4), DihedralGroup(7), SymmetricGroup(3)])
def test_images_described(group: Any) -> None:
    image = describe_image([tuple(g.array_form) for g in group.generators])
    assert image.order == group.order()
    assert (image.soluble, image.nilpotent, image.transitive) == (group.is_solvable, group.is_nilpotent, group.is_transitive())
    assert image.name == {120: "S5", 60: "A5", 12: "A4", 14: "D7", 6: "S3"}[image.order]
    if image.factors is not None and image.soluble:
        assert len(image.factors) == sum(factorint(image.order).values())


def test_filters() -> None:
    group = Presentation.parse("⟨a, b | a^2, b^3⟩")
    every = list(homomorphisms(group, degree=6))
    primitive = [found for found in every if found.transitive and is_primitive(found.images)]
    for found in every:
        reference = PermutationGroup([Permutation(list(p)) for p in found.images])
        assert found.transitive == reference.is_transitive()
        if found.transitive:
            assert is_primitive(found.images) == reference.is_primitive()
        assert all(map(is_even, found.images)) == all(Permutation(list(p)).is_even for p in found.images)
    assert {cycle_type(value(found.images, group.word("a b"))) for found in primitive} == {(5, 1)}
    wanted = wanted_types(group, "a b: 5, a: 2 2")
    assert all(cycle_type(found.images[0]) == (2, 2, 1, 1) for found in every if has_types(found.images, wanted))
    with pytest.raises(InputError):
        wanted_types(group, "a b = 5")


def test_flat_manifold_groups_have_their_holonomy_as_quotient() -> None:
    for name, target in (("G2", "C2"), ("G3", "C3"), ("G4", "C4"), ("G5", "C6")):
        assert onto(flat.FLAT_MANIFOLDS[name][0], target)[2] >= 1
