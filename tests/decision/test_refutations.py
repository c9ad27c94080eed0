"""Verdicts "not virtually nilpotent": every one carries a witness that the checker accepts, at the index expected."""

from __future__ import annotations

import random

import pytest
from corpus import coxeter, knots, nilpotent
from flint import fmpz_mat
from sympy import Matrix, Poly, cyclotomic_poly, factor_list, symbols

from lowindex.checker import check
from lowindex.decision import NO, UNDECIDED, YES, Verdict, hunt
from lowindex.words import Presentation

T = symbols("t")


def decided(group: str | Presentation, **options: object) -> Verdict:
    presentation = Presentation.parse(group) if isinstance(group, str) else group
    verdict = hunt(presentation, **options)  # type: ignore[arg-type]
    if verdict.verdict != UNDECIDED:
        assert verdict.witness is not None
        report = check(verdict.witness.text, presentation=(presentation.names, presentation.relators))
        assert (report.claim, report.summary["index"]) == (verdict.verdict, verdict.index)
    return verdict


# presentation -> the index at which it must fall, None: any
REFUTED = {
    "⟨a, t | t a t^-1 = a^2⟩": 1,
    "⟨a, t | t a t^-1 = a^3⟩": 1,
    "⟨a, t | t a^2 t^-1 = a^3⟩": 1,
    "⟨a, t | t a^2 t^-1 = a^4⟩": 1,
    "⟨a, b, c, d | [a,b][c,d]⟩": 1,
    "⟨a, b, c, d, e, f | [a,b][c,d][e,f]⟩": 1,
    "⟨a, b, c | a^2 b^2 c^2⟩": 1,
    "⟨a, b, c | [a,b], [b,c]⟩": 1,  # right-angled Artin group of a path
    "⟨a, b, c, d | [a,b], [b,c], [c,d]⟩": 1,
    "⟨a, b | a^2, b^3⟩": None,
    "⟨a, b, c | a^2, b^2, c^2⟩": None,
    "⟨a, b | a^2, b^4, (ab)^5⟩": None,
    "⟨a, b | a^3, b^3, (ab)^4⟩": None,
    "⟨a, b | a^2, b^3, (ab)^8⟩": None,
    "⟨a, t | a^2⟩": 1,
    "⟨a, t | t a^2 t^-1 = a^2⟩": 1,
    "⟨a, t | t a^2 t^-1 = a^-2⟩": 1,
    # Z^3 x| Z^2, units u and u - 1 of the totally real cubic field with u^3 = 3 u - 1
    nilpotent.abelian_by_abelian([[0, 1, 0], [0, 0, 1], [-1, 3, 0]], [[-1, 1, 0], [0, -1, 1], [-1, 3, -1]]): 1,
    "⟨a, s, t | [s,t], [a, a^t], a^s = a a^t⟩": 1,  # Baumslag's metabelian group
    coxeter.coxeter(3, coxeter.path(5, 4)): None,
    coxeter.coxeter(4, coxeter.path(3, 5, 3)): None,
}


@pytest.mark.parametrize("text", REFUTED)
def test_refuted(text: str) -> None:
    verdict = decided(text)
    assert verdict.verdict == NO
    assert REFUTED[text] in (None, verdict.index)


def test_two_three_seven() -> None:
    """b1 > 0 first at index 28; PSL(2,7) has index 168 (C): it falls by 168."""
    verdict = decided("⟨a, b | a^2, b^3, (ab)^7⟩")
    assert verdict.verdict == NO
    assert verdict.index is not None and verdict.index <= 168


@pytest.mark.parametrize("sign", [1, -1])
def test_flat_baumslag_solitar_groups(sign: int) -> None:
    assert decided(f"⟨a, t | t a t^-1 = a^{sign}⟩").verdict == YES


@pytest.mark.parametrize("knot", knots.prime_knots(8), ids=lambda knot: knot.name)
def test_knot_groups(knot: knots.Knot) -> None:
    """A knot group is virtually nilpotent only for the unknot (source of the groups: database-knotinfo)."""
    assert decided(knot.group).verdict == NO


def test_unknot() -> None:
    assert decided("⟨a, b | a b a^-1 b^-1, b a b^-1 b^-1⟩").verdict == YES


def _random_matrix(size: int, kind: str, chance: random.Random) -> list[list[int]]:
    """A matrix in GL_n(Z): a product of elementary matrices, or a conjugate of blocks of finite order and unipotent ones."""
    matrix = fmpz_mat([[int(i == j) for j in range(size)] for i in range(size)])
    if kind == "blocks":
        blocks = {1: [[[1]], [[-1]]], 2: [[[0, -1], [1, 0]], [[0, 1], [-1, -1]], [[1, 1], [0, 1]], [[-1, 1], [0, -1]], [[0, 1], [1, 0]]]}
        rows = [[0] * size for _ in range(size)]
        at = 0
        while at < size:
            part = chance.choice([n for n in (1, 2) if at + n <= size])
            for i, row in enumerate(chance.choice(blocks[part])):
                rows[at + i][at : at + part] = row
            at += part
        matrix = fmpz_mat(rows)
    change = fmpz_mat([[int(i == j) for j in range(size)] for i in range(size)])
    for _ in range(2 if kind == "blocks" else 2 * size):
        i, j = chance.sample(range(size), 2)
        change = change * fmpz_mat([[int(a == b) + (chance.choice((1, -1)) if (a, b) == (i, j) else 0) for b in range(size)] for a in range(size)])
    if kind == "blocks":
        matrix = change * matrix * fmpz_mat([[int(x) for x in row] for row in change.inv().tolist()])
    else:
        matrix = change
    return [[int(matrix[i, j]) for j in range(size)] for i in range(size)]


def _truth(rows: list[list[int]]) -> int | None:
    """The growth degree of Z^n x|_A Z when the characteristic polynomial is a product of cyclotomic ones (Wolf 1968), else None: with U = A^k
    unipotent the lower central factors have rank n - rk(U-1) + 1 and rk (U-1)^(j-1) - rk (U-1)^j, j >= 2 (Bass 1972)."""
    size = len(rows)
    order = 1
    for factor, _ in factor_list(Matrix(rows).charpoly(T).as_expr())[1]:
        n = next((n for n in range(1, 61) if Poly(factor, T) == Poly(cyclotomic_poly(n, T), T)), None)
        if n is None:
            return None
        order = order * n
    unipotent = fmpz_mat(rows) ** order
    identity = fmpz_mat([[int(i == j) for j in range(size)] for i in range(size)])
    power, ranks = identity, [size]
    for _ in range(size):
        power = power * (unipotent - identity)
        ranks.append(power.rank())
    return 1 + sum((k + 1) * (ranks[k] - ranks[k + 1]) for k in range(size))


@pytest.mark.parametrize("seed", range(34))
@pytest.mark.parametrize("size", [2, 3, 4])
def test_torus_bundles(size: int, seed: int) -> None:
    """102 matrices, both kinds."""
    chance = random.Random(100 * size + seed)
    rows = _random_matrix(size, "blocks" if seed % 2 else "random", chance)
    truth = _truth(rows)
    verdict = decided(nilpotent.torus_bundle(rows))
    if truth is None:
        assert (verdict.verdict, verdict.index) == (NO, 1)
    else:
        assert verdict.verdict == YES, verdict.reason
        assert verdict.growth_degree == truth


def test_torus_bundles_are_of_both_kinds() -> None:
    kinds = [_truth(_random_matrix(size, "blocks" if seed % 2 else "random", random.Random(100 * size + seed))) for size in (2, 3, 4) for seed in range(34)]
    assert sum(kind is None for kind in kinds) >= 20
    assert sum(kind is not None for kind in kinds) >= 40


@pytest.mark.parametrize(
    "text",
    [
        "⟨a, b, c, d | a^-1ba=b^2, b^-1cb=c^2, c^-1dc=d^2, d^-1ad=a^2⟩",  # Higman 1951: no finite quotients
        "⟨a, b | [a b^-1, a^-1 b a], [a b^-1, a^-2 b a^2]⟩",  # Thompson's F
        "⟨a, b | a^(a^b) = a^2⟩",  # Baumslag 1969: all finite quotients cyclic
    ],
)
def test_undecided_with_what_was_searched(text: str) -> None:
    verdict = decided(text, effort=3)
    assert verdict.verdict == UNDECIDED
    assert verdict.searched["complete_to_index"] >= 4
