"""Abelianization of a finitely presented group, with explicit maps, in exact integers (python-flint)."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import gcd

from flint import fmpz_mat, nmod_mat

from lowindex.words import Word


@dataclass(frozen=True)
class Abelianization:
    """H_1 = Z^betti × C_d1 × C_d2 × ..., d1 | d2 | ..., each > 1.

    `images[k]`: coordinates of generator k + 1: first those in the cyclic factors (0 <= x < d_i), then the free ones.

    >>> str(abelianization(2, [(1, 1), (2, 2, 2, 2), (1, 2, -1, -2)]))
    'C2 × C4'
    """

    betti: int
    torsion: tuple[int, ...]
    images: tuple[tuple[int, ...], ...]

    @property
    def order(self) -> int | None:
        """Number of elements, None when infinite."""
        if self.betti:
            return None
        product = 1
        for d in self.torsion:
            product *= d
        return product

    def __str__(self) -> str:
        free = [] if not self.betti else ["Z" if self.betti == 1 else f"Z^{self.betti}"]
        return " × ".join(free + [f"C{d}" for d in self.torsion]) or "1"


def exponent_sums(rank: int, word: Word) -> list[int]:
    """The exponent sum of every generator 1..rank in a word."""
    row = [0] * rank
    for letter in word:
        row[abs(letter) - 1] += 1 if letter > 0 else -1
    return row


def relation_matrix(rank: int, relators: Sequence[Word]) -> list[list[int]]:
    """Exponent sums: one row of length `rank` for every relator that is not 0 in the abelianization, without repeats."""
    rows: dict[tuple[int, ...], None] = {}
    for word in relators:
        row = exponent_sums(rank, word)
        if any(row):
            rows[tuple(row)] = None
    return [list(row) for row in rows]


def mod_p_rank(rank: int, relators: Sequence[Word], p: int) -> int:
    """dim H_1(H; F_p)."""
    rows = relation_matrix(rank, relators)
    return rank - (nmod_mat(fmpz_mat(rows), p).rank() if rows and rank else 0)


def abelianization(rank: int, relators: Sequence[Word]) -> Abelianization:
    """H_1 of the group with `rank` generators: Hermite form first, then the Smith form of what has no pivot 1."""
    rows = relation_matrix(rank, relators)
    if not rows:
        return Abelianization(rank, (), tuple(_unit(rank, k) for k in range(rank)))
    hermite = fmpz_mat(rows).hnf()
    solved: dict[int, list[int]] = {}
    rest: list[list[int]] = []
    for i in range(min(hermite.nrows(), rank)):
        row = [int(hermite[i, j]) for j in range(rank)]
        pivot = next((j for j, x in enumerate(row) if x), -1)
        if pivot < 0:
            break
        if row[pivot] == 1:
            solved[pivot] = row
        else:
            rest.append(row)
    kept = [j for j in range(rank) if j not in solved]
    diagonal, transform = _smith([[row[j] for j in kept] for row in rest], len(kept))
    order = [i for i, d in enumerate(diagonal) if d > 1] + [i for i, d in enumerate(diagonal) if d == 0]
    moduli = [diagonal[i] for i in order]
    images: list[list[int]] = [[0] * len(order) for _ in range(rank)]
    for place, j in enumerate(kept):
        images[j] = [transform[place][i] for i in order]
    for pivot in sorted(solved, reverse=True):
        # pivot = -(the other entries of its row), all of them already known
        row = solved[pivot]
        images[pivot] = [-sum(row[j] * images[j][i] for j in range(pivot + 1, rank) if row[j]) for i in range(len(order))]
    reduced = tuple(tuple(x % m if m else x for x, m in zip(image, moduli, strict=True)) for image in images)
    return Abelianization(moduli.count(0), tuple(m for m in moduli if m), reduced)


def _unit(size: int, k: int) -> tuple[int, ...]:
    return tuple(int(i == k) for i in range(size))


def _smith(rows: list[list[int]], columns: int) -> tuple[list[int], list[list[int]]]:
    """The invariants d1 | d2 | ... (0 for free ones, `columns` of them) and a unimodular matrix V, by columns operations, such that
    the lattice spanned by the rows, times V, is spanned by d_i e_i."""
    transform = [list(_unit(columns, k)) for k in range(columns)]
    work = [row[:] for row in rows]
    diagonal: list[int] = []
    for step in range(columns):
        entries = [(abs(x), i, j) for i, row in enumerate(work) for j, x in enumerate(row[step:], step) if x]
        if not entries:
            diagonal += [0] * (columns - step)
            break
        while True:
            _, i, j = min((abs(x), i, j) for i, row in enumerate(work) for j, x in enumerate(row[step:], step) if x)
            for matrix in (work, transform):
                for row in matrix:
                    row[step], row[j] = row[j], row[step]
            if not _clear(work, transform, i, step):
                continue
            pivot = work[i][step]
            bad = next((r for r, row in enumerate(work) if r != i and any(x % pivot for x in row[step + 1 :])), None)
            if bad is None:
                break
            work[i] = [x + y for x, y in zip(work[i], work[bad], strict=True)]
        diagonal.append(abs(work[i][step]))
        del work[i]
    return diagonal, transform


def _clear(work: list[list[int]], transform: list[list[int]], i: int, step: int) -> bool:
    """Subtract multiples of the pivot's row and column; whether everything else in them is now 0."""
    pivot = work[i][step]
    for r, row in enumerate(work):
        if r != i and (factor := row[step] // pivot):
            work[r] = [x - factor * y for x, y in zip(row, work[i], strict=True)]
    for j in range(step + 1, len(work[i])):
        if factor := work[i][j] // pivot:
            for matrix in (work, transform):
                for row in matrix:
                    row[j] -= factor * row[step]
    return not any(row[step] for r, row in enumerate(work) if r != i) and not any(work[i][step + 1 :])


def exponent(homology: Abelianization) -> int:
    """The exponent of the torsion part of H_1 (1 when there is none)."""
    value = 1
    for d in homology.torsion:
        value = value * d // gcd(value, d)
    return value
