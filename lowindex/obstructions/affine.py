"""Affine obstructions: H acts on a field by x -> m x + v with a multiplier of infinite order and a translation.

Let phi: H -> Z be onto and m(s) = t^phi(s). The translations v are the solutions of J v = 0, J the Fox Jacobian at m; the principal ones
(m(s) - 1) are useless, and another one makes rho(s) = [[m, v], [0, 1]] a group in which every subgroup of finite index has a translation
w and a multiplier m of infinite order, so that iterated commutators w (m^k - 1)^c never vanish: H is not virtually nilpotent
(J. Milnor, Growth of finitely generated solvable groups; J. Wolf, J. Diff. Geom. 2, 1968). Another solution exists

    over Q with t = 2, 3, ...      when J has rank < n - 1 over Q(t),
    over Q[t]/(f)                  for an irreducible factor f of the Alexander polynomial, neither t nor cyclotomic,
    over F_p(t)                    for a prime p that divides its content.
"""

from __future__ import annotations

import random
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise
from itertools import product as tuples

from flint import fmpz_poly, nmod_mat

from lowindex.algebra import Abelianization, jacobian_mod
from lowindex.budget import Budget
from lowindex.obstructions.fields import Element, Field, NumberField, RationalFunctions, Rationals, null_space
from lowindex.words import Word, inverse

LARGE_PRIME = 2_147_483_647
MOST_GENERATORS = 24
HIGHEST_DEGREE = 60
"""The checker's bound on the degree of a modulus."""

SMALL_CONTENT = 10_000


@dataclass(frozen=True)
class AffineObstruction:
    """`kind`: "Q", "Q[t]/(f)" or "F_p(t)"; `modulus`: coefficients of f; `prime`: p. Multipliers and translations of the Schreier
    generators as the witness writes them; `dilation` and `translation` are words in Schreier generators."""

    kind: str
    modulus: tuple[int, ...]
    prime: int
    multipliers: tuple[tuple[object, object], ...]
    translations: tuple[tuple[object, object], ...]
    dilation: Word
    translation: Word


def affine_obstruction(
    rank: int, relators: Sequence[Word], homology: Abelianization, images: Sequence[Word], *, budget: Budget
) -> AffineObstruction | None:
    """An affine obstruction of the group with `rank` generators, or None when the maps to Z that are tried show none. `images`: the
    Schreier generators as words in the generators."""
    if not homology.betti or rank > MOST_GENERATORS or rank < 2:
        return None
    letters = sum(map(len, relators))
    for phi in characters_to_z(homology):
        if budget.exhausted:
            return None
        budget.spend(100 + letters + rank * len(relators))
        for kind, field in _fields(rank, relators, phi, budget):
            found = _represented(rank, relators, phi, images, kind, field)
            budget.spend(20 * (letters + rank * rank * len(relators)))
            if found is not None:
                return found
    return None


def characters_to_z(homology: Abelianization) -> Iterator[tuple[int, ...]]:
    """Maps of H onto Z as values on the generators: primitive combinations of the free coordinates with entries -1, 0, 1 (b <= 4), or
    single coordinates and sums of two, up to sign."""
    torsion, betti = len(homology.torsion), homology.betti
    if betti <= 4:
        choices = [c for c in tuples((0, 1, -1), repeat=betti) if any(c) and next(x for x in c if x) == 1]
        choices.sort(key=lambda c: sum(map(abs, c)))
    else:
        unit = [tuple(int(i == k) for i in range(betti)) for k in range(min(betti, 12))]
        choices = unit + [tuple(a + b for a, b in zip(x, y, strict=True)) for x, y in pairwise(unit)]
    for coefficients in choices:
        yield tuple(sum(c * x for c, x in zip(coefficients, image[torsion:], strict=True)) for image in homology.images)


def _fields(rank: int, relators: Sequence[Word], phi: Sequence[int], budget: Budget) -> Iterator[tuple[str, Field]]:
    """The fields in which a solution beside the principal ones may exist."""
    if _generic_rank(rank, relators, phi) < rank - 1:
        yield from (("Q", Rationals(t)) for t in (2, 3, 5))
        return
    delta = alexander_polynomial(rank, relators, phi, budget=budget)
    if delta is None or not delta:
        return
    content, factors = delta.factor()
    for factor, _ in sorted(factors, key=lambda item: item[0].degree()):
        if 1 <= factor.degree() <= HIGHEST_DEGREE and factor[0] != 0 and not is_cyclotomic(factor):
            yield "Q[t]/(f)", NumberField(factor if factor[factor.degree()] > 0 else -factor)
    for p in _primes_of(abs(int(content))):
        yield "F_p(t)", RationalFunctions(p)


def _generic_rank(rank: int, relators: Sequence[Word], phi: Sequence[int]) -> int:
    """The rank of the Jacobian over Q(t), from a value of t modulo a large prime (a value may only lower it)."""
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
    chance = random.Random(1)
    delta = fmpz_poly([0])
    for _ in range(4):
        if len(rows) <= size:
            chosen = rows
        else:
            chosen = [
                [sum((weight * row[k] for weight, row in zip(weights, rows, strict=True)), fmpz_poly([0])) for k in range(size)]
                for weights in ([chance.choice((-1, 0, 0, 1, 2)) for _ in rows] for _ in range(size))
            ]
        if len(chosen) < size:
            return fmpz_poly([0])
        determinant = _determinant(chosen, budget)
        if determinant is None:
            return None
        delta = delta.gcd(determinant)
        if len(rows) <= size:
            break
    divisor = fmpz_poly([1] * abs(phi[column]))
    quotient, rest = divmod(delta, divisor)
    return delta if rest else quotient


def _laurent_jacobian(rank: int, relators: Sequence[Word], phi: Sequence[int]) -> list[list[fmpz_poly]]:
    """The Jacobian over Z[t, 1/t], every row multiplied by a power of t so that it has polynomials."""
    result = []
    for word in relators:
        entries: list[dict[int, int]] = [{} for _ in range(rank)]
        height = lowest = 0
        for letter in word:
            k = abs(letter) - 1
            if letter < 0:
                height -= phi[k]
            entries[k][height] = entries[k].get(height, 0) + (1 if letter > 0 else -1)
            lowest = min(lowest, height)
            if letter > 0:
                height += phi[k]
        row = []
        for entry in entries:
            coefficients = [0] * (max(entry, default=lowest) - lowest + 1)
            for power, value in entry.items():
                coefficients[power - lowest] = value
            row.append(fmpz_poly(coefficients))
        result.append(row)
    return result


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


def is_cyclotomic(factor: fmpz_poly) -> bool:
    """Whether an irreducible polynomial is cyclotomic, up to sign. An n with euler_phi(n) = degree is at most 2 degree^2 + 2."""
    degree = factor.degree()
    if abs(int(factor[degree])) != 1 or abs(int(factor[0])) != 1:
        return False
    field = NumberField(factor)
    power = field.one
    for _ in range(2 * degree * degree + 2):
        power = field.multiply(power, field.power(1))
        if power == field.one:
            return True
    return False


def _primes_of(n: int) -> list[int]:
    """The prime divisors of n below 10,000."""
    found = []
    p = 2
    while p <= SMALL_CONTENT and n > 1:
        if n % p == 0:
            found.append(p)
            while n % p == 0:
                n //= p
        p += 1
    return found


def _represented(
    rank: int, relators: Sequence[Word], phi: Sequence[int], images: Sequence[Word], kind: str, field: Field
) -> AffineObstruction | None:
    """The representation over this field, when there is a solution beside the principal ones."""
    multipliers = [field.power(n) for n in phi]
    rows = [_fox_row(rank, word, phi, field) for word in relators]
    solutions = null_space(rows, rank, field)
    if len(solutions) < 2:
        return None
    anchor = next(k for k in range(rank) if phi[k])
    principal = [field.add(m, field.negative(field.one)) for m in multipliers]
    for solution in solutions:
        # subtract a principal solution so that the anchor does not translate
        times = field.multiply(solution[anchor], field.inverse(principal[anchor]))
        moved = [field.add(x, field.negative(field.multiply(times, y))) for x, y in zip(solution, principal, strict=True)]
        if any(x != field.zero for x in moved):
            return _on_generators(field.cleared(moved), phi, images, kind, field)
    return None


def _fox_row(rank: int, word: Word, phi: Sequence[int], field: Field) -> list[Element]:
    entries: list[dict[int, int]] = [{} for _ in range(rank)]
    height = 0
    for letter in word:
        k = abs(letter) - 1
        if letter < 0:
            height -= phi[k]
        entries[k][height] = entries[k].get(height, 0) + (1 if letter > 0 else -1)
        if letter > 0:
            height += phi[k]
    row = []
    for entry in entries:
        value = field.zero
        for power, times in entry.items():
            term = field.power(power)
            for _ in range(abs(times)):
                value = field.add(value, term if times > 0 else field.negative(term))
        row.append(value)
    return row


def _on_generators(
    translations: list[Element], phi: Sequence[int], images: Sequence[Word], kind: str, field: Field
) -> AffineObstruction | None:
    """Multipliers and translations of the Schreier generators, and the two words."""
    heights: list[int] = []
    values: list[Element] = []
    for word in images:
        height, value = 0, field.zero
        for letter in word:
            k = abs(letter) - 1
            if letter < 0:
                height -= phi[k]
            term = field.multiply(field.power(height), translations[k])
            value = field.add(value, term if letter > 0 else field.negative(term))
            if letter > 0:
                height += phi[k]
        heights.append(height)
        values.append(value)
    dilation = min((s for s, n in enumerate(heights, 1) if n), key=lambda s: (abs(heights[s - 1]), s), default=0)
    translation = _translation(heights, values, dilation, field) if dilation else ()
    if not translation:
        return None
    return AffineObstruction(
        kind=kind,
        modulus=tuple(int(c) for c in field.modulus.numer().coeffs()) if isinstance(field, NumberField) else (),
        prime=field.prime if isinstance(field, RationalFunctions) else 0,
        multipliers=tuple(field.written(field.power(n)) for n in heights),
        translations=tuple(field.written(value) for value in values),
        dilation=(dilation,),
        translation=translation,
    )


def _translation(heights: Sequence[int], values: Sequence[Element], dilation: int, field: Field) -> Word:
    """A Schreier generator that is a translation, else the commutator of two that do not commute."""
    for s, (height, value) in enumerate(zip(heights, values, strict=True), 1):
        if height == 0 and value != field.zero:
            return (s,)
    one = field.negative(field.one)
    a, v = field.add(field.power(heights[dilation - 1]), one), values[dilation - 1]
    for s, (height, value) in enumerate(zip(heights, values, strict=True), 1):
        b = field.add(field.power(height), one)
        if field.multiply(a, value) != field.multiply(b, v):
            return (*inverse((dilation,)), -s, dilation, s)
    return ()

