"""Alexander polynomials of maps onto Z, in exact integer polynomials (python-flint)."""

from __future__ import annotations

import random
from collections.abc import Sequence

from flint import fmpz_poly, nmod_mat

from lowindex.algebra import fox_terms, jacobian_mod
from lowindex.budget import Budget
from lowindex.words import Word

LARGE_PRIME = 2_147_483_647


def generic_rank(rank: int, relators: Sequence[Word], phi: Sequence[int]) -> int:
    """The rank of the Jacobian over Q(t), from two values of t modulo a large prime (a value may only lower it). `phi`: the value of the
    map on every generator."""
    best = 0
    for t in (1_234_567, 7_654_321):
        rows = jacobian_mod(relators, [pow(t, n, LARGE_PRIME) for n in phi], LARGE_PRIME)
        if rows:
            best = max(best, nmod_mat(len(rows), rank, [x for row in rows for x in row], LARGE_PRIME).rank())
    return best


def alexander_polynomial(rank: int, relators: Sequence[Word], phi: Sequence[int], *, budget: Budget) -> fmpz_poly | None:
    """The gcd of the maximal minors of the Jacobian without one column, divided by (t^n - 1) / (t - 1) where n = |phi| of that column: the
    Alexander polynomial of phi up to a unit, if phi is onto Z. Combinations of rows stand for the minors, so it may come out as a
    multiple of it. None when the budget is spent."""
    column = min((k for k in range(rank) if phi[k]), key=lambda k: (abs(phi[k]), k))
    rows = [[p for k, p in enumerate(row) if k != column] for row in _laurent_jacobian(rank, relators, phi)]
    size = rank - 1
    if len(rows) < size:
        return fmpz_poly([0])
    chance = random.Random(1)
    delta = fmpz_poly([0])
    for _ in range(1 if len(rows) == size else 4):
        determinant = _determinant(rows if len(rows) == size else _combined(rows, size, chance), budget)
        if determinant is None:
            return None
        delta = delta.gcd(determinant)
    quotient, rest = divmod(delta, fmpz_poly([1] * abs(phi[column])))
    return delta if rest else quotient


def _laurent_jacobian(rank: int, relators: Sequence[Word], phi: Sequence[int]) -> list[list[fmpz_poly]]:
    """The Jacobian over Z[t, 1/t], every row multiplied by a power of t so that it has polynomials."""
    above = [(n,) for n in phi]
    result = []
    for word in relators:
        terms = fox_terms(word, above)
        lowest = min((height for _, (height,) in terms), default=0)
        entries: list[dict[int, int]] = [{} for _ in range(rank)]
        for (k, (height,)), value in terms.items():
            entries[k][height - lowest] = value
        result.append([fmpz_poly([entry.get(i, 0) for i in range(max(entry, default=-1) + 1)]) for entry in entries])
    return result


def _combined(rows: list[list[fmpz_poly]], size: int, chance: random.Random) -> list[list[fmpz_poly]]:
    """`size` random combinations of the rows with small coefficients."""
    combined = []
    for _ in range(size):
        weights = [chance.choice((-1, 0, 0, 1, 2)) for _ in rows]
        combined.append([sum((weight * row[k] for weight, row in zip(weights, rows, strict=True)), fmpz_poly([0])) for k in range(size)])
    return combined


def _determinant(rows: list[list[fmpz_poly]], budget: Budget) -> fmpz_poly | None:
    """Fraction-free elimination (E. H. Bareiss, Math. Comp. 22 (1968) 565-578); None when the budget is spent."""
    work = [list(row) for row in rows]
    size = len(work)
    previous = fmpz_poly([1])
    sign = 1
    for k in range(size - 1):
        candidates = [i for i in range(k, size) if work[i][k]]
        if not candidates:
            return fmpz_poly([0])
        pivot = min(candidates, key=lambda i: work[i][k].degree())
        if pivot != k:
            work[k], work[pivot], sign = work[pivot], work[k], -sign
        for i in range(k + 1, size):
            for j in range(k + 1, size):
                work[i][j] = (work[i][j] * work[k][k] - work[i][k] * work[k][j]) // previous
        previous = work[k][k]
        budget.spend((size - k) ** 2 * (2 + previous.degree() // 5))
        if budget.exhausted:
            return None
    return sign * work[-1][-1] if size else fmpz_poly([1])
