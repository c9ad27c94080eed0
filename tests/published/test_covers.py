"""First homology of covers, and orders that need a large enumeration, against published values.

Marks: L seen in print, C computed independently of this project, M from memory.
"""

from __future__ import annotations

from collections import Counter

import pytest
from corpus import coxeter, cyclic

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.cosets import enumerate_cosets, subgroup_presentation
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation


def homologies(text: str, index: int) -> list[tuple[int, int]]:
    """(index, first Betti number) of every class up to an index."""
    group = Presentation.parse(text)
    found = []
    for item in SubgroupSearch(group, index, budget=Budget()):
        subgroup = subgroup_presentation(group, item.table)
        found.append((item.index, abelianization(subgroup.rank, subgroup.relators).betti))
    return found


def order(text: str, subgroup: str = "1", cosets: int = 5_000_000) -> int | None:
    group = Presentation.parse(text)
    table = enumerate_cosets(group, [group.word(subgroup)], budget=Budget(), max_cosets=cosets).table
    return None if table is None else table.index


def test_covers_of_a_surface_of_genus_two() -> None:
    """Every subgroup of index n is of genus n + 1, first Betti number 2n + 2 (Euler characteristic; C to n = 4)."""
    assert all(betti == 2 * n + 2 for n, betti in homologies("⟨a, b, c, d | [a,b][c,d]⟩", 3))


def test_covers_of_the_fibonacci_manifold_of_order_eight() -> None:
    """F(2,8): first b1 > 0 at index 9, in 4 of 5 classes (C)."""
    found = homologies(cyclic.fibonacci(2, 8), 9)
    assert all(betti == 0 for n, betti in found if n < 9)
    assert Counter(betti > 0 for n, betti in found if n == 9) == {True: 4, False: 1}


def test_sieradski_seven_has_no_infinite_homology_to_index_fifteen() -> None:
    """S(7) is perfect; its classes are those of (2,3,7), b1 = 0 (C)."""
    found = homologies(cyclic.sieradski(7), 9)
    assert Counter(n for n, _ in found) == {1: 1, 7: 2, 8: 1, 9: 1}
    assert all(betti == 0 for _, betti in found)


@pytest.mark.slow
def test_two_three_seven_first_betti_number() -> None:
    """b1 > 0 first at index 28: exactly 1 of 42 classes, b1 = 2 (C)."""
    found = homologies("⟨a, b | a^2, b^3, (ab)^7⟩", 28)
    assert all(betti == 0 for n, betti in found if n < 28)
    assert sorted(betti for n, betti in found if n == 28) == [0] * 41 + [2]


@pytest.mark.parametrize(("n", "size"), [(2, 16), (3, 6), (5, 110), (6, 9072)])
def test_one_relator_product_of_the_notebook(n: int, size: int) -> None:
    """⟨a, b | a^n, ab = b^3 a^3⟩ (Kourovka Notebook 8.10; L for 6 and 9072, C)."""
    assert order(f"⟨a, b | a^{n}, a b = b^3 a^3⟩") == size


@pytest.mark.slow
def test_burnside_group_of_rank_three() -> None:
    """B(3,3) has order 2187 (OEIS A079682; L, C); all words of length at most 4 cubed."""
    words = ["a", "b", "c", "ab", "ac", "bc", "ab^-1", "ac^-1", "bc^-1", "abc", "a^-1bc", "ab^-1c", "abc^-1", "acb", "a^-1cb", "ac^-1b", "acb^-1"]
    assert order(f"⟨a, b, c | {', '.join(f'({word})^3' for word in words)}⟩") == 2187


@pytest.mark.slow
def test_coxeter_group_of_type_e7() -> None:
    """|E7| = 2903040: index 1451520 over a reflection (J. E. Humphreys 1990; C)."""
    edges = {**coxeter.path(3, 3, 3, 3, 3), (2, 6): 3}
    assert order(coxeter.coxeter(7, edges), "a", 20_000_000) == 1_451_520


@pytest.mark.slow
def test_coxeter_1961() -> None:
    """(2,3,7;8) has order 10752 (J. Leech, J. L. Mennicke 1961; M, C)."""
    assert order("⟨a, b | a^2, b^3, (ab)^7, [a,b]^8⟩") == 10752
