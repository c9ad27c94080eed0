"""Orders of finite groups and first homology against published values.

Marks: L seen in print, C computed independently of this project, M from memory.
"""

from __future__ import annotations

from math import factorial

import pytest
from corpus import coxeter, cyclic, nilpotent

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.cosets import enumerate_cosets
from lowindex.nilpotent import nilpotent_quotient
from lowindex.quotients import NormalSubgroups
from lowindex.words import Presentation


def order(text: str, cosets: int = 400_000) -> int | None:
    table = enumerate_cosets(Presentation.parse(text), budget=Budget(), max_cosets=cosets).table
    return None if table is None else table.index


def homology(text: str) -> str:
    group = Presentation.parse(text)
    return str(abelianization(group.rank, group.relators))


# H. S. M. Coxeter, Trans. Amer. Math. Soc. 45 (1939) 73-150 (M, C)
LMNK = {
    (2, 3, 7, 4): 168, (2, 3, 7, 5): 1, (2, 3, 7, 6): 1092, (2, 3, 7, 7): 1092, (2, 3, 8, 4): 336, (2, 3, 8, 5): 2160, (2, 3, 9, 4): 12,
    (2, 3, 9, 5): 10260, (2, 3, 10, 4): 2160, (2, 3, 11, 4): 6072, (2, 4, 5, 3): 120, (2, 4, 5, 4): 720, (2, 4, 7, 3): 2184, (2, 5, 5, 2): 80,
    (2, 5, 6, 2): 120, (2, 5, 8, 2): 720, (2, 5, 9, 2): 3420, (2, 6, 7, 2): 2184, (2, 3, 6, 2): 24, (2, 3, 6, 3): 54, (2, 3, 6, 4): 96,
}  # fmt: skip


@pytest.mark.parametrize("parameters", LMNK)
def test_lmnk(parameters: tuple[int, int, int, int]) -> None:
    p, q, r, k = parameters
    assert order(f"⟨a, b | a^{p}, b^{q}, (ab)^{r}, [a,b]^{k}⟩") == LMNK[parameters]


@pytest.mark.parametrize(("p", "q", "r", "size"), [(2, 3, 3, 24), (2, 3, 4, 48), (2, 3, 5, 120), (2, 2, 5, 20), (2, 2, 9, 36)])
def test_binary_polyhedral_groups(p: int, q: int, r: int, size: int) -> None:
    """⟨p, q, r⟩: H. S. M. Coxeter, W. O. J. Moser 1957, 6.5 (C)."""
    assert order(f"⟨x, y, z | x^{p} = y^{q} = z^{r} = x y z⟩") == size


# N. Bourbaki, Lie IV-VI; J. E. Humphreys 1990 (C)
COXETER = {
    "A3": (coxeter.coxeter(3, coxeter.path(3, 3)), factorial(4)),
    "A6": (coxeter.coxeter(6, coxeter.path(3, 3, 3, 3, 3)), factorial(7)),
    "B4": (coxeter.coxeter(4, coxeter.path(3, 3, 4)), 2**4 * factorial(4)),
    "B5": (coxeter.coxeter(5, coxeter.path(3, 3, 3, 4)), 2**5 * factorial(5)),
    "F4": (coxeter.coxeter(4, coxeter.path(3, 4, 3)), 1152),
    "H3": (coxeter.coxeter(3, coxeter.path(5, 3)), 120),
    "H4": (coxeter.coxeter(4, coxeter.path(5, 3, 3)), 14400),
    "I2(9)": (coxeter.coxeter(2, coxeter.path(9)), 18),
    "E6": (coxeter.coxeter(6, {**coxeter.path(3, 3, 3, 3), (2, 5): 3}), 51840),
}


@pytest.mark.parametrize("name", COXETER)
def test_finite_coxeter_groups(name: str) -> None:
    text, size = COXETER[name]
    assert order(text) == size


def test_burnside_groups() -> None:
    """B(2,3) = 27, B(2,4) = 4096 with nine fourth powers: OEIS A051576, A079682 (L, C)."""
    assert order(cyclic.BURNSIDE_2_3) == 27
    powers = ["a", "b", "ab", "a^-1b", "a^2b", "ab^2", "a^2b^2", "a^-1bab", "ab^-1ab"]
    assert order(f"⟨a, b | {', '.join(f'({word})^4' for word in powers)}⟩") == 4096


def test_three_generator_sixth_family() -> None:
    """x_i x_(i+1) x_(i+m-1) on 2m generators: Z3 and Z15 for m = 1, 2 (arXiv:2408.09903, Theorem A; L, C)."""
    assert order("⟨x, y | x y x, y x y⟩") == 3
    assert order("⟨a, b, c, d | a b b, b c c, c d d, d a a⟩") == 15


@pytest.mark.parametrize("n", range(3, 13))
def test_abelianized_fibonacci_groups(n: int) -> None:
    """|F(2,n)^ab| = L_n - 1 - (-1)^n, L_n the Lucas numbers (C)."""
    lucas = [2, 1]
    while len(lucas) <= n:
        lucas.append(lucas[-1] + lucas[-2])
    group = Presentation.parse(cyclic.fibonacci(2, n))
    assert abelianization(group.rank, group.relators).order == lucas[n] - 1 - (-1) ** n


# trace: H_1 of Z^2 x|_A Z is Z + coker(A - I): torsion of order |2 - trace| (J. A. Wolf 1968; C)
BUNDLES = [([[2, 1], [1, 1]], 1), ([[3, 2], [1, 1]], 2), ([[0, -1], [1, 0]], 2), ([[0, -1], [1, -1]], 3), ([[0, 1], [-1, 1]], 1)]


@pytest.mark.parametrize(("rows", "torsion"), BUNDLES)
def test_homology_of_torus_bundles(rows: list[list[int]], torsion: int) -> None:
    group = Presentation.parse(nilpotent.torus_bundle(rows))
    found = abelianization(group.rank, group.relators)
    total = 1
    for d in found.torsion:
        total *= d
    assert (found.betti, total) == (1, torsion)


# E. Witt: (1/k) sum of mu(d) r^(k/d) (C)
@pytest.mark.parametrize(("rank", "ranks"), [(2, [2, 1, 2, 3, 6, 9]), (3, [3, 3, 8, 18, 48]), (4, [4, 6, 20])])
def test_free_nilpotent_factors(rank: int, ranks: list[int]) -> None:
    found = nilpotent_quotient(rank, [], max_class=len(ranks), budget=Budget())
    assert [free for free, torsion in found.factors] == ranks
    assert found.growth_degree == sum(k * n for k, n in enumerate(ranks, 1))


# order of H_1 of the n-fold cyclic branched covers, n = 2..8: |product of Delta(zeta^k)| (R. H. Fox; C); 0 stands for infinite
BRANCHED = {
    "⟨a, b | a b a = b a b⟩": [3, 4, 3, 1, 0, 1, 3],
    "⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩": [5, 16, 45, 121, 320, 841, 2205],
}


@pytest.mark.parametrize("text", BRANCHED)
def test_branched_covers(text: str) -> None:
    """Trefoil and figure eight: the n-th power of a meridian dies in the kernel onto Z/n."""
    assert [_branched(text, n) for n in range(2, 9)] == BRANCHED[text]


def _branched(text: str, n: int) -> int:
    from lowindex.cosets import abelian_table, subgroup_presentation

    group = Presentation.parse(text)
    table = abelian_table([(1,)] * group.rank, [n])
    assert table is not None
    subgroup = subgroup_presentation(group, table)
    meridians = [subgroup.tree.rewrite(0, (1,) * n)]
    return abelianization(subgroup.rank, [*subgroup.relators, *meridians]).order or 0


def test_normal_indices_of_the_modular_group() -> None:
    """Normal subgroups of PSL(2,Z) to index 24 (C: to index 18 by the search for all subgroups)."""
    found = [table.index for table in NormalSubgroups(Presentation.parse("⟨a, b | a^2, b^3⟩"), 24, Budget())]
    assert found == [1, 2, 3, 6, 6, 12, 18, 24, 24]
