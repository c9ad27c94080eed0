"""Affine obstructions over Q[t]/(f) as actions by rational matrices, in a basis in which a dilation moves a cone of vectors up.

If A - I has no negative entry and no zero column, then (A^k - I) v is, for k > 0 and v without negative entries and not 0, again such
a vector. So iterated commutators of a translation by v with powers of the dilation are never trivial. The basis is found by trying
small matrices; there is none when the multiplier and its powers have no dominant positive eigenvalue.
"""

from __future__ import annotations

import random
from dataclasses import dataclass
from typing import Any

from flint import fmpq, fmpq_mat

from lowindex.cosets import SchreierTree
from lowindex.errors import InputError
from lowindex.export.reading import Reading
from lowindex.words import Presentation, Word, inverse, power, product

Map = tuple[Any, Any]
"""x -> A x + b as (A, b), a square matrix and a column of flint's."""

TRIES = 3_000
POWERS = (1, -1, 2, -2, 3, -3, 4, -4)
CONJUGATES = 12


def after(first: Map, second: Map) -> Map:
    """The second map after the first one."""
    return second[0] * first[0], second[0] * first[1] + second[1]


def inverted(f: Map) -> Map:
    """The inverse map."""
    back = f[0].inv()
    return back, fmpq(-1) * (back * f[1])


@dataclass(frozen=True)
class LinearCertificate:
    """`maps`: for every generator of the group and point the map of the edge, None for the identity (paths are read from left to right);
    `dilation` and `translation` as words of the group."""

    group: Presentation
    tree: SchreierTree
    dimension: int
    maps: list[list[Map | None]]
    dilation: Word
    translation: Word
    size: int = 0

    def along(self, point: int, word: Word) -> tuple[int, Map]:
        """Where a path ends, and its map."""
        found = unit(self.dimension)
        for x in word:
            end = self.tree.table.image(point, (x,))
            edge = self.maps[abs(x) - 1][point if x > 0 else end]
            if edge is not None:
                found = after(found, edge if x > 0 else inverted(edge))
            point = end
        return point, found

    def verify(self) -> None:
        """The checks of the soundness theorem."""
        trivial = unit(self.dimension)
        good = all(self.along(p, word) == (p, trivial) for word in self.group.relators for p in range(self.tree.table.index))
        end, (dilating, _) = self.along(0, self.dilation)
        good = good and end == 0 and moves_up(dilating)
        end, (linear, column) = self.along(0, self.translation)
        entries = column.entries()
        if not (good and end == 0 and linear == trivial[0] and min(entries) >= 0 and max(entries) > 0):
            raise InputError("the export does not pass its own check of the matrices; nothing was written, please report this witness")


def unit(dimension: int) -> Map:
    """The identity."""
    rows = [[int(i == j) for j in range(dimension)] for i in range(dimension)]
    return fmpq_mat(rows), fmpq_mat(dimension, 1)


def moves_up(a: Any) -> bool:
    """Whether A - I has no negative entry and no zero column."""
    size = a.nrows()
    moved = [[a[i, j] - int(i == j) for i in range(size)] for j in range(size)]
    return all(min(column) >= 0 and max(column) > 0 for column in moved)


def linear_certificate(reading: Reading) -> LinearCertificate:
    """The certificate of an affine obstruction over Q[t]/(f). InputError when no basis is found."""
    obstruction, tree = reading.content["obstruction"], reading.subgroup.tree
    modulus = obstruction["field"]["modulus"]
    dimension = len(modulus) - 1
    maps = []
    for multiplier, translation in zip(obstruction["multipliers"], obstruction["translations"], strict=True):
        linear = _multiplication(multiplier, modulus)
        column = _multiplication(translation, modulus) * fmpq_mat([[int(i == 0)] for i in range(dimension)])
        maps.append(inverted((linear, column)))  # matrices act from the left, paths are read from the left: so the inverse
    dilation, translation = (_expanded(obstruction[name], tree.generators) for name in ("dilation", "translation"))
    plain = _certificate(reading, dimension, maps, dilation, translation)
    linear = plain.along(0, dilation)[1][0]
    column = plain.along(0, translation)[1][1]
    for exponent in POWERS:
        up = _power(linear, exponent)
        for basis in _bases(dimension):
            back = basis.inv()
            if moves_up(basis * up * back):
                word = power(dilation, exponent)
                by = _conjugate_inside(basis, up, column)
                if by is not None:
                    k, sign = by
                    moved = product(inverse(power(word, k)), translation if sign > 0 else inverse(translation), power(word, k))
                    changed = [(basis * a * back, basis * b) for a, b in maps]
                    return _certificate(reading, dimension, changed, word, moved)
    raise InputError("no basis was found in which the dilation of this obstruction moves a cone of vectors up; use --to latex")


def _certificate(reading: Reading, dimension: int, maps: list[Map], dilation: Word, translation: Word) -> LinearCertificate:
    tree = reading.subgroup.tree
    edges: list[list[Map | None]] = [[None] * tree.table.index for _ in range(tree.table.rank)]
    for (point, k), found in zip(tree.edges, maps, strict=True):
        edges[k - 1][point] = found
    return LinearCertificate(reading.group, tree, dimension, edges, dilation, translation)


def _expanded(word: list[int], values: Any) -> Word:
    return product(*(values[x - 1] if x > 0 else inverse(values[-x - 1]) for x in word))


def _multiplication(element: list[Any], modulus: list[int]) -> Any:
    """The matrix of the multiplication by an element on 1, t, t^2, ..."""
    coefficients, denominator = element
    size = len(modulus) - 1
    last = [fmpq(-c, modulus[-1]) for c in modulus[:-1]]
    shift = fmpq_mat([[last[i] if j == size - 1 else fmpq(int(i == j + 1)) for j in range(size)] for i in range(size)])
    found, step = fmpq_mat(size, size), unit(size)[0]
    for coefficient in coefficients:
        found += fmpq(coefficient, denominator) * step
        step *= shift
    return found


def _power(a: Any, exponent: int) -> Any:
    base = a if exponent > 0 else a.inv()
    found = base
    for _ in range(abs(exponent) - 1):
        found *= base
    return found


def _bases(dimension: int) -> list[Any]:
    """Small invertible matrices, the identity first."""
    coin = random.Random(dimension)
    found = [unit(dimension)[0]]
    while len(found) < TRIES:
        basis = fmpq_mat([[coin.randint(-2, 2) for _ in range(dimension)] for _ in range(dimension)])
        if basis.det() != 0:
            found.append(basis)
    return found


def _conjugate_inside(basis: Any, up: Any, column: Any) -> tuple[int, int] | None:
    """k and a sign such that the translation, conjugated by the k-th power of the dilation, lies in the cone."""
    for k in range(CONJUGATES):
        for sign in (1, -1):
            entries = (fmpq(sign) * (basis * column)).entries()
            if min(entries) >= 0 and max(entries) > 0:
                return k, sign
        column = up * column
    return None
