"""Numbers of subgroups and classes, and of homomorphisms to symmetric groups, against published sequences and formulas.

Marks: L seen in print, C computed independently of this project, M from memory.
"""

from __future__ import annotations

from math import factorial

import pytest
from corpus import flat, plane
from sympy import divisor_count, divisor_sigma, partition

from lowindex.budget import Budget
from lowindex.quotients import count_homomorphisms
from lowindex.search import SubgroupCounts, count_classes
from lowindex.words import Presentation


def counts(text: str, index: int) -> SubgroupCounts:
    found = count_classes(Presentation.parse(text), index, budget=Budget())
    assert found.complete_to == index
    return found


HEISENBERG = "⟨a, b | [a,b,a], [a,b,b]⟩"
TREFOIL = "⟨a, b | a^2 = b^3⟩"
FIGURE_EIGHT = "⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩"
BRAIDS_4 = "⟨a, b, c | aba = bab, bcb = cbc, ac = ca⟩"

# text: (source, subgroups, classes)
SEQUENCES: dict[str, tuple[str, list[int] | None, list[int] | None]] = {
    "⟨a, b | ⟩": ("M. Hall 1949, OEIS A003319; A057005 (L, C)", [1, 3, 13, 71, 461, 3447, 29093], [1, 3, 7, 26, 97, 624, 4163]),
    "⟨a, b, c | ⟩": ("OEIS A027837; A057009-11 (L, C)", [1, 7, 97, 2143], [1, 7, 41, 604]),
    "⟨a, b | a^2, b^3⟩": (
        "OEIS A005133, A121350 (L, C)",
        [1, 1, 4, 8, 5, 22, 42, 40, 120, 265, 286, 764, 1729, 2198, 5168, 12144, 17034, 37702],
        [1, 1, 2, 2, 1, 8, 6, 7, 14, 27, 26, 80, 133, 170, 348, 765, 1002, 2176],
    ),
    "⟨a, b, c | a^2, b^2, c^2⟩": ("C, by formula and by tables", [1, 7, 21, 107, 425, 2143, 9849], [1, 7, 7, 44, 85, 436, 1407]),
    "⟨a, b | a^3, b^3⟩": ("C, both ways", [1, 0, 4, 8, 5, 36, 98, 112, 490], [1, 0, 4, 2, 1, 7, 14, 15, 62]),
    "⟨a, b | a^2, b^4⟩": ("C, by formula", [1, 3, 3, 15, 25, 67, 105, 371, 729, 2071], None),
    "⟨a, b | a^4, a^2 = b^3⟩": ("SL(2,Z), C", [1, 1, 4, 9, 5, 22, 42, 48, 120, 265], [1, 1, 2, 3, 1, 8, 6, 9, 14, 27]),
    HEISENBERG: (
        "Grunewald, Segal, Smith 1988 (M formula, C)",
        [1, 3, 4, 19, 6, 12, 8, 43, 49, 18, 12, 76, 14, 24],
        [1, 3, 4, 13, 6, 12, 8, 31, 25, 18, 12, 52, 14, 24],
    ),
    "⟨a, t | t a t^-1 = a^2⟩": ("Gelman 2005 (M, C)", [1, 1, 4, 1, 6, 4, 8, 1, 13, 6, 12, 4], None),
    "⟨a, t | t a^2 t^-1 = a^3⟩": ("Gelman 2005 (M, C)", [1, 1, 1, 1, 6, 1, 8, 1, 1, 6, 12, 1], None),
    "⟨a, t | t a^2 t^-1 = a^4⟩": ("C", [1, 3, 10, 23, 76, 276], [1, 3, 4, 10, 16, 62]),
    "⟨a, b, c, d | [a,b][c,d]⟩": ("genus 2: Mednykh's formula (L, C)", [1, 15, 220, 5275], [1, 15, 100, 1615]),
    "⟨a, b, c | a^2 b^2 c^2⟩": ("non-orientable genus 3 (C)", [1, 7, 34, 227, 1296], [1, 7, 14, 89, 264]),
    "⟨a, b | a^2, b^3, (ab)^7⟩": (
        "Stothers 1977 (M), C",
        [1, 0, 0, 0, 0, 0, 14, 8, 9, 0, 0, 0, 0, 84, 45, 0],
        [1, 0, 0, 0, 0, 0, 2, 1, 1, 0, 0, 0, 0, 9, 3, 0],
    ),
    TREFOIL: ("C", [1, 1, 4, 9, 6, 22, 43, 49, 130, 266, 287, 786], [1, 1, 2, 3, 2, 8, 7, 10, 18, 28, 27, 88]),
    FIGURE_EIGHT: ("C", [1, 1, 1, 5, 16, 55, 57, 61, 91], [1, 1, 1, 2, 4, 11, 9, 10, 11]),
    BRAIDS_4: ("C", None, [1, 1, 2, 5, 2, 12, 7, 17]),

}


@pytest.mark.parametrize("text", SEQUENCES)
def test_sequences(text: str) -> None:
    source, subgroups, classes = SEQUENCES[text]
    length = len(subgroups or classes or [])
    found = counts(text, length)
    assert subgroups is None or list(found.subgroups) == subgroups, source
    assert classes is None or list(found.classes) == classes, source


@pytest.mark.parametrize("name", plane.PLANE_GROUPS)
def test_plane_groups(name: str) -> None:
    _, _, subgroups, classes = plane.PLANE_GROUPS[name]
    found = counts(plane.plane_group(name), 12)
    assert (list(found.subgroups), list(found.classes)) == (subgroups, classes)


@pytest.mark.parametrize("name", flat.FLAT_MANIFOLDS)
def test_flat_manifolds(name: str) -> None:
    text, _, _, subgroups, classes = flat.FLAT_MANIFOLDS[name]
    found = counts(text, 8)
    assert (list(found.subgroups), list(found.classes)) == (subgroups, classes)


def test_equal_counts_are_no_proof() -> None:
    """Z^3 and G2, G3 and G5, B1 and B3, B2 and B4 have equally many subgroups of every small index (C): classes tell them apart."""
    for one, two in (("G1", "G2"), ("G3", "G5"), ("B1", "B3"), ("B2", "B4")):
        first, second = (counts(flat.FLAT_MANIFOLDS[name][0], 8) for name in (one, two))
        assert first.subgroups == second.subgroups
        assert first.classes != second.classes


def test_lattices_by_divisor_sums() -> None:
    """Z^2: sigma(n); Z^3: sum over d | n of d sigma(d) (du Sautoy, Grunewald 2000; L, C)."""
    found = counts("⟨a, b | [a,b]⟩", 30)
    assert list(found.subgroups) == list(found.normal) == [int(divisor_sigma(n)) for n in range(1, 31)]
    found = counts("⟨a, b, c | [a,b], [a,c], [b,c]⟩", 12)
    assert list(found.subgroups) == [sum(d * int(divisor_sigma(d)) for d in range(1, n + 1) if n % d == 0) for n in range(1, 13)]
    assert counts("⟨a, b, c | [a,b], [a,c], [b,c]⟩", 6).classes[5] == 91


def test_klein_bottle_by_mednykh() -> None:
    """OEIS A046524; Mednykh 1988 (L, C): classes d(n) for odd n, [3 d(n) + sigma(n/2) - d(n/2)] / 2 for even n."""
    found = counts("⟨a, b | a b a^-1 b⟩", 24)
    for n in range(1, 25):
        expected = int(divisor_count(n))
        if n % 2 == 0:
            expected = (3 * expected + int(divisor_sigma(n // 2)) - int(divisor_count(n // 2))) // 2
        assert found.classes[n - 1] == expected
        assert found.subgroups[n - 1] == divisor_sigma(n)


def test_heisenberg_normal_subgroups() -> None:
    """Grunewald, Segal, Smith 1988 (M formula, C)."""
    assert list(counts(HEISENBERG, 12).normal) == [1, 3, 4, 7, 6, 12, 8, 19, 13, 18, 12, 28]


def _hook_degrees(n: int) -> list[int]:
    """Degrees of the irreducible characters of S_n by the hook length formula (Frame, Robinson, Thrall 1954)."""
    from sympy.utilities.iterables import partitions

    degrees = []
    for shape in partitions(n):
        rows = sorted((part for part, times in shape.items() for _ in range(times)), reverse=True)
        columns = [sum(1 for row in rows if row > j) for j in range(rows[0])]
        hooks = 1
        for i, row in enumerate(rows):
            for j in range(row):
                hooks *= row - j + columns[j] - i - 1
        degrees.append(factorial(n) // hooks)
    return degrees


@pytest.mark.parametrize("genus", [1, 2])
def test_homomorphisms_of_surface_groups(genus: int) -> None:
    """Frobenius, Mednykh: |Hom(pi_1, S_n)| = n! sum over characters of (n!/f)^(2g-2) (L, C)."""
    names = "abcd"[: 2 * genus]
    relator = "".join(f"[{names[2 * k]},{names[2 * k + 1]}]" for k in range(genus))
    found = count_homomorphisms(Presentation.parse(f"⟨{', '.join(names)} | {relator}⟩"), 4, budget=Budget())
    expected = [factorial(n) * sum((factorial(n) // f) ** (2 * genus - 2) for f in _hook_degrees(n)) for n in range(1, 5)]
    assert list(found) == [1, *expected]


def test_homomorphisms_by_product_rule_and_partitions() -> None:
    """Dey 1965: multiplicative over free products (M); |Hom(Z^2, S_n)| = n! p(n) (C); OEIS A000085 for C2 (L)."""
    two = count_homomorphisms(Presentation.parse("⟨a | a^2⟩"), 7, budget=Budget())
    three = count_homomorphisms(Presentation.parse("⟨a | a^3⟩"), 7, budget=Budget())
    assert two == (1, 1, 2, 4, 10, 26, 76, 232)
    assert three == (1, 1, 1, 3, 9, 21, 81, 351)
    both = count_homomorphisms(Presentation.parse("⟨a, b | a^2, b^3⟩"), 7, budget=Budget())
    assert both == tuple(x * y for x, y in zip(two, three, strict=True))
    lattice = count_homomorphisms(Presentation.parse("⟨a, b | [a,b]⟩"), 7, budget=Budget())
    assert lattice == tuple(factorial(n) * int(partition(n)) for n in range(8))


@pytest.mark.slow
def test_modular_group_to_index_22() -> None:
    """OEIS A005133, A121350 and, beyond them, |Hom| in centralisers (C)."""
    found = counts("⟨a, b | a^2, b^3⟩", 22)
    assert found.classes[18:] == (4682, 6931, 13740, 31085)
    assert found.subgroups[18:] == (88958, 136584, 288270, 682572)


@pytest.mark.slow
def test_two_three_seven_to_index_60() -> None:
    """|Hom(G, S_n)| by the characters of S_n to index 50 (C)."""
    found = counts("⟨a, b | a^2, b^3, (ab)^7⟩", 60)
    assert found.classes[49:60] == (696, 333, 103, 1, 0, 0, 0, 2006, 909, 350, 0)
    assert found.subgroups[20:30] == (189, 286, 0, 8, 0, 0, 0, 1092, 406, 225)
