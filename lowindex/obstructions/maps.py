"""Maps of H onto Z that are worth a try.

A map onto Z whose multiplier t has more than the principal crossed homomorphisms for *every* t kills whatever commutes with all of H
modulo the third term of the lower central series, rationally (think of Z x F, where it kills Z). So the maps that vanish on the radical
of the cup product come first: the radical is the set of z in H_1(H; Q) with [z, x] = 0 in gamma_2 / gamma_3 over Q for all x, and that
quotient is the exterior square of H_1 modulo the quadratic parts of the relators (D. Sullivan, Topology 14 (1975) 275-277).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import chain, combinations, product
from math import gcd

from flint import fmpz_mat

from lowindex.algebra import Abelianization, exponent_sums
from lowindex.words import Word

Vector = tuple[int, ...]

MOST_COORDINATES = 12
MOST_MAPS = 400


def heights(homology: Abelianization) -> list[Vector]:
    """The image of every generator in H_1 modulo torsion = Z^b."""
    return [image[len(homology.torsion) :] for image in homology.images]


def maps_to_z(rank: int, relators: Sequence[Word], homology: Abelianization) -> list[Vector]:
    """At most 400 functionals on Z^b, no two of them opposite: small combinations of those that vanish on the radical, then of
    all coordinates."""
    betti = homology.betti
    special = _vanishing_on(_radical(_quadratic_parts(rank, relators, homology), betti), betti)
    everything = [tuple(int(i == k) for i in range(betti)) for k in range(betti)]
    found: dict[Vector, None] = {}
    for basis in (special, everything):
        for functional in _small_combinations(basis):
            found[_primitive(functional)] = None
            if len(found) == MOST_MAPS:
                return list(found)
    return list(found)


def _small_combinations(basis: Sequence[Vector]) -> Iterator[Vector]:
    """With coefficients -1, 0, 1 for a basis of up to five; else the basis, sums and differences of two."""
    size = len(basis)
    if size <= 5:
        coefficients = sorted((c for c in product((0, 1, -1), repeat=size) if any(c)), key=lambda c: sum(map(abs, c)))
        for c in coefficients:
            yield tuple(sum(x * vector[i] for x, vector in zip(c, basis, strict=True)) for i in range(len(basis[0])))
        return
    kept = basis[:MOST_COORDINATES]
    pairs = (tuple(x + sign * y for x, y in zip(u, v, strict=True)) for u, v in combinations(kept, 2) for sign in (1, -1))
    yield from chain(kept, pairs)


def _quadratic_parts(rank: int, relators: Sequence[Word], homology: Abelianization) -> list[Vector]:
    """Vectors that span the relations of gamma_2 / gamma_3 over Q, in the basis e_i ∧ e_j, i < j, of the exterior square of Q^b.

    A relator is the sum of the letters before ∧ the letter, up to a factor; a combination of relators whose exponent sums cancel is
    a relation between commutators."""
    above = heights(homology)
    pairs = list(combinations(range(homology.betti), 2))
    squares: list[list[int]] = []
    for word in relators:
        before = [0] * homology.betti
        square = dict.fromkeys(pairs, 0)
        for letter in word:
            step = above[abs(letter) - 1]
            sign = 1 if letter > 0 else -1
            for i, j in pairs:
                square[i, j] += sign * (before[i] * step[j] - before[j] * step[i])
            before = [x + sign * y for x, y in zip(before, step, strict=True)]
        squares.append(list(square.values()))
    if not relators or not pairs:
        return []
    exponents = fmpz_mat([exponent_sums(rank, word) for word in relators])
    return [_combination(c, squares) for c in kernel(exponents.transpose())]


def _combination(coefficients: Vector, rows: Sequence[Sequence[int]]) -> Vector:
    return tuple(sum(c * row[k] for c, row in zip(coefficients, rows, strict=True)) for k in range(len(rows[0])))


def _radical(relations: Sequence[Vector], betti: int) -> list[Vector]:
    """A basis of the z with z ∧ e_j in the span of the relations for every j."""
    pairs = list(combinations(range(betti), 2))
    number = {pair: k for k, pair in enumerate(pairs)}
    functionals = kernel(fmpz_mat([list(row) for row in relations])) if relations else [
        tuple(int(i == k) for i in range(len(pairs))) for k in range(len(pairs))
    ]
    rows = []
    for functional in functionals:
        for j in range(betti):
            row = [0] * betti
            for i in range(betti):
                if i != j:
                    row[i] = functional[number[min(i, j), max(i, j)]] * (1 if i < j else -1)
            if any(row):
                rows.append(row)
    if not rows:
        return [tuple(int(i == k) for i in range(betti)) for k in range(betti)]
    return kernel(fmpz_mat(rows))


def _vanishing_on(vectors: Sequence[Vector], betti: int) -> list[Vector]:
    """A reduced basis of the functionals on Z^b that vanish on these vectors; nothing when all or none of them do."""
    return kernel(fmpz_mat([list(vector) for vector in vectors])) if 0 < len(vectors) < betti else []


def kernel(matrix: fmpz_mat) -> list[Vector]:
    """A short basis (by lattice reduction) of the column vectors that the matrix kills, over Q; entries are integers."""
    basis, nullity = matrix.nullspace()
    if not nullity:
        return []
    columns = fmpz_mat([[int(basis[i, j]) for i in range(basis.nrows())] for j in range(nullity)])
    return [_primitive(tuple(int(x) for x in row)) for row in columns.lll().tolist()]


def _primitive(vector: Vector) -> Vector:
    """Divided by the common divisor of its entries, the first entry that is not 0 positive."""
    divisor = gcd(*vector)
    if next(x for x in vector if x) < 0:
        divisor = -divisor
    return tuple(x // divisor for x in vector)
