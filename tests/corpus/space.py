"""The 230 types of space groups, from the symmetry operations in the PyPI package spglib (International Tables for Crystallography, vol. A).

A space group is an extension of its lattice T of translations by its point group P. If P = ⟨x | r⟩ and lifts of the x are chosen, the
group is presented by generators of T and the lifts with: T is abelian, the lifts act on T by their matrices, and every r, read in the lifts, is
the translation that it is (P. Hall's presentation of an extension). Everything is computed in exact rationals.
"""

from __future__ import annotations

from fractions import Fraction
from functools import cache

import numpy as np
import spglib
from flint import fmpz_mat

from lowindex.budget import Budget
from lowindex.cosets import CosetTable, SchreierTree, enumerate_cosets
from lowindex.words import Presentation, Word, inverse, power, product, reduced

Matrix = tuple[tuple[int, ...], ...]
Vector = tuple[Fraction, ...]
Operation = tuple[Matrix, Vector]


@cache
def hall_numbers() -> dict[int, int]:
    """Type 1..230 -> the first Hall number of that type."""
    found: dict[int, int] = {}
    for hall in range(1, 531):
        found.setdefault(spglib.get_spacegroup_type(hall).number, hall)
    return found


def _operations(number: int) -> list[Operation]:
    data = spglib.get_symmetry_from_database(hall_numbers()[number])
    return [
        (
            tuple(tuple(int(x) for x in row) for row in rotation),
            tuple(Fraction(float(x)).limit_denominator(24) % 1 for x in translation),
        )
        for rotation, translation in zip(data["rotations"], data["translations"], strict=True)
    ]


def _times(left: Operation, right: Operation) -> Operation:
    (r, u), (s, v) = left, right
    matrix = tuple(tuple(sum(r[i][k] * s[k][j] for k in range(3)) for j in range(3)) for i in range(3))
    return matrix, tuple(sum((r[i][k] * v[k] for k in range(3)), Fraction(0)) + u[i] for i in range(3))


def _inverse(operation: Operation) -> Operation:
    matrix, vector = operation
    array = np.array(matrix)
    back = np.rint(np.linalg.inv(array)).astype(int)
    assert np.array_equal(back @ array, np.eye(3, dtype=int))
    inverted = tuple(tuple(int(x) for x in row) for row in back)
    return inverted, tuple(-sum((inverted[i][k] * vector[k] for k in range(3)), Fraction(0)) for i in range(3))


class SpaceGroup:
    """`number`: type 1..230. `basis`: of the translations. `lifts`: operations whose matrices generate the point group."""

    def __init__(self, number: int) -> None:
        self.number = number
        operations = _operations(number)
        identity = tuple(tuple(int(i == j) for j in range(3)) for i in range(3))
        vectors = [v for m, v in operations if m == identity]
        self.basis = _lattice(vectors)
        by_matrix = {m: (m, v) for m, v in reversed(operations)}
        self.order = len(by_matrix)
        self.lifts = _generating(list(by_matrix.values()), self.order)
        self.point_relators = _point_relators([m for m, _ in self.lifts], self.order)

    def coordinates(self, vector: Vector) -> list[int]:
        """A translation in the basis; it must be a lattice vector."""
        base = [[Fraction(x) for x in row] for row in self.basis]
        rows = [[base[k][i] for k in range(3)] + [vector[i]] for i in range(3)]
        for i in range(3):
            pivot = next(r for r in range(i, 3) if rows[r][i])
            rows[i], rows[pivot] = rows[pivot], rows[i]
            rows[i] = [x / rows[i][i] for x in rows[i]]
            for r in range(3):
                if r != i:
                    rows[r] = [x - rows[r][i] * y for x, y in zip(rows[r], rows[i], strict=True)]
        solution = [row[3] for row in rows]
        assert all(x.denominator == 1 for x in solution), "not a lattice vector"
        return [int(x) for x in solution]

    def value(self, word: Word) -> Operation:
        """The operation of a word in the translations 1..3 and the lifts 4, 5, ..."""
        identity = tuple(tuple(int(i == j) for j in range(3)) for i in range(3))
        letters = [(identity, v) for v in self.basis] + list(self.lifts)
        result: Operation = (identity, (Fraction(0),) * 3)
        for letter in word:
            step = letters[abs(letter) - 1]
            result = _times(result, step if letter > 0 else _inverse(step))
        return result

    def _translation(self, vector: Vector) -> Word:
        return product(*(power((k,), n) for k, n in enumerate(self.coordinates(vector), 1)))

    def with_translations(self) -> Presentation:
        """Generators: three translations and the lifts."""
        relators = [(-i, -j, i, j) for i in range(1, 4) for j in range(i + 1, 4)]
        for k in range(len(self.lifts)):
            x = 4 + k
            for i in range(1, 4):
                relators.append(product((-x, i, x), inverse(self._translation(self.value((-x, i, x))[1]))))
        for word in self.point_relators:
            lifted = tuple(letter + 3 if letter > 0 else letter - 3 for letter in word)
            relators.append(product(lifted, inverse(self._translation(self.value(lifted)[1]))))
        return Presentation.from_relators(3 + len(self.lifts), relators, name=f"space group {self.number}")

    def without_translations(self) -> Presentation:
        """Generators: the lifts and, for the first lift x, the three products y_k = x t_k; the translations are the words x^-1 y_k (a Tietze
        move). Type 1 has only translations."""
        if not self.lifts:
            return self.with_translations()
        given = self.with_translations()
        count = len(self.lifts)
        images: list[Word] = [(-1, count + k) for k in (1, 2, 3)] + [(k,) for k in range(1, count + 1)]
        relators = [
            reduced(y for x in word for y in (images[x - 1] if x > 0 else inverse(images[-x - 1]))) for word in given.relators
        ]
        return Presentation.from_relators(count + 3, relators, name=f"space group {self.number}, no translations")


def _lattice(vectors: list[Vector]) -> list[Vector]:
    """A basis of the lattice spanned by the unit vectors and these."""
    rows = [[24 * int(i == j) for j in range(3)] for i in range(3)] + [[int(24 * x) for x in v] for v in vectors]
    hermite = fmpz_mat(rows).hnf()
    return [tuple(Fraction(int(hermite[i, j]), 24) for j in range(3)) for i in range(3)]


def _generating(operations: list[Operation], order: int) -> list[Operation]:
    """At most a few operations whose matrices generate the point group, chosen greedily."""
    chosen: list[Operation] = []
    size = 1
    while size < order:
        best = max(operations, key=lambda operation: len(_closure([m for m, _ in [*chosen, operation]])))
        chosen.append(best)
        size = len(_closure([m for m, _ in chosen]))
    return chosen


def _closure(matrices: list[Matrix]) -> list[Matrix]:
    identity = tuple(tuple(int(i == j) for j in range(3)) for i in range(3))
    zero = (Fraction(0),) * 3
    found = [identity]
    seen = {identity}
    for matrix in found:
        for step in matrices:
            image = _times((matrix, zero), (step, zero))[0]
            if image not in seen:
                seen.add(image)
                found.append(image)
    return found


def _point_relators(matrices: list[Matrix], order: int) -> list[Word]:
    """Relators of the point group: Schreier generators of the trivial subgroup present it; the shortest of them that already give the
    right order (by coset enumeration) are kept."""
    if not matrices:
        return []
    elements = _closure(matrices)
    zero = (Fraction(0),) * 3
    place = {matrix: k for k, matrix in enumerate(elements)}
    table = CosetTable.from_permutations([[place[_times((m, zero), (x, zero))[0]] for m in elements] for x in matrices])
    words = sorted(set(SchreierTree(table).generators), key=lambda word: (len(word), word))
    kept: list[Word] = []
    for word in words:
        kept.append(word)
        group = Presentation.from_relators(len(matrices), kept)
        found = enumerate_cosets(group, budget=Budget(20_000), max_cosets=2000, strategy="felsch").table
        if found is not None and found.index == order:
            return kept
    return kept
