"""Normal subgroups of index at most N, by layers of chief factors.

Every normal subgroup L of finite index is reached from G by a chain of normal subgroups with chief factors K/L. An abelian one is
elementary, K/L a simple quotient of the F_p[G/K]-module K / K'K^p: a minimal submodule of the dual, spun from a vector. A non-abelian
one is T^k for a simple group T; for N < 3600 it is simple, and L is the kernel of a map of K onto T that all of G respects. (D. Firth
and D. F. Holt's scheme of elementary layers.)
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from heapq import heappop, heappush
from itertools import product

import numpy as np
from numpy.typing import NDArray

from lowindex.algebra import relation_matrix
from lowindex.budget import Budget
from lowindex.cosets import CosetTable, SubgroupPresentation, compose, standard_form, subgroup_presentation, vector_table
from lowindex.errors import InputError
from lowindex.quotients.characters import is_prime
from lowindex.quotients.images import SIMPLE_ORDERS
from lowindex.quotients.layers import cokernel, is_regular
from lowindex.quotients.onto import kernel_tables
from lowindex.words import Presentation, Word

Matrix = NDArray[np.int64]

LARGEST_BOUND = 2999
"""Non-abelian chief factors of larger order are not looked for."""

MOST_VECTORS = 200_000


@dataclass
class NormalSubgroups:
    """An iterator over the regular tables of the normal subgroups of index at most `bound`, by increasing index.
    `complete_to`: all of at most this index were found."""

    presentation: Presentation
    bound: int
    budget: Budget
    complete_to: int = 0

    def __post_init__(self) -> None:
        if not 1 <= self.bound <= LARGEST_BOUND:
            raise InputError(f"index must be between 1 and {LARGEST_BOUND} for normal subgroups, not {self.bound}")

    def __iter__(self) -> Iterator[CosetTable]:
        limit = self.bound
        whole = CosetTable.from_permutations([[0]] * self.presentation.rank)
        pending: list[tuple[int, list[list[int]], CosetTable]] = [(1, whole.lists, whole)]
        seen = {whole}
        while pending:
            table = heappop(pending)[2]
            self.complete_to = min(limit, table.index - 1)
            yield table
            if self.budget.exhausted:
                return
            kernel = subgroup_presentation(self.presentation, table)
            self.budget.spend(table.index * self.presentation.rank + sum(map(len, kernel.relators)))
            below, gap = self._below(kernel, self.bound // table.index)
            if gap is not None:
                limit = min(limit, gap * table.index - 1)
            for found in below:
                if found not in seen:
                    seen.add(found)
                    heappush(pending, (found.index, found.lists, found))
        self.complete_to = limit

    def _below(self, kernel: SubgroupPresentation, room: int) -> tuple[list[CosetTable], int | None]:
        """The next normal subgroups below the kernel, of index at most `room` in it; and the least index that may have been missed."""
        found: list[CosetTable] = []
        gap: int | None = None
        for p in range(2, room + 1):
            if is_prime(p):
                tables = self._abelian(kernel, p, room)
                if tables is None:
                    gap = p if gap is None else gap
                else:
                    found += tables
        for order, name in SIMPLE_ORDERS.items():
            if order <= room:
                inner = Presentation.from_relators(kernel.rank, kernel.relators)
                for table in kernel_tables(inner, name, budget=self.budget):
                    below = standard_form(compose(table, kernel))
                    if is_regular(below):
                        found.append(below)
        return found, gap

    def _abelian(self, kernel: SubgroupPresentation, p: int, room: int) -> list[CosetTable] | None:
        """Below the kernel by a simple quotient of its first homology modulo p; None when there are too many vectors to look at."""
        rows = cokernel(relation_matrix(kernel.rank, kernel.relators), kernel.rank, p)
        if not rows or not rows[0]:
            return []
        coordinates = np.array(rows, dtype=np.int64)
        size = coordinates.shape[1]
        dimension = 0
        while p ** (dimension + 1) <= room:
            dimension += 1
        if p**size > MOST_VECTORS * (p - 1):
            return None
        action = self._dual_action(kernel, coordinates, p)
        self.budget.spend(p**size // (p - 1) * 10)
        tables = []
        for space in minimal_submodules(action, p, size, dimension):
            table = self._cut(kernel, coordinates, space, p)
            self.budget.spend(20 * table.index * table.rank)
            if self.budget.exhausted:
                return None
            tables.append(table)
        return tables

    def _dual_action(self, kernel: SubgroupPresentation, coordinates: Matrix, p: int) -> list[Matrix]:
        """For every generator x of G the matrix on functionals f (columns): (x f)(v) = f(x^-1 v x)."""
        size = coordinates.shape[1]
        basis = [next(j for j in range(len(coordinates)) if _is_unit(coordinates[j], k)) for k in range(size)]
        matrices = []
        for x in range(1, self.presentation.rank + 1):
            rows = []
            for j in basis:
                word: Word = (-x, *kernel.generators[j], x)
                value = np.zeros(size, np.int64)
                for letter in kernel.tree.rewrite(0, word):
                    value += coordinates[abs(letter) - 1] if letter > 0 else -coordinates[abs(letter) - 1]
                rows.append(value % p)
            matrices.append(np.array(rows, dtype=np.int64))
        return matrices

    def _cut(self, kernel: SubgroupPresentation, coordinates: Matrix, functionals: Matrix, p: int) -> CosetTable:
        """The common kernel of functionals (rows), as a table over G."""
        values = coordinates @ functionals.T % p
        inner = abelian_action(values, p)
        return standard_form(compose(inner, kernel))


def _is_unit(row: Matrix, k: int) -> bool:
    return bool(row[k] == 1 and np.count_nonzero(row) == 1)


def abelian_action(values: Matrix, p: int) -> CosetTable:
    """The regular action of the vector space that the rows of `values` span over F_p."""
    size = values.shape[1]
    identity = np.eye(size + 1, dtype=np.int64)
    moves = []
    for value in values:
        move = identity.copy()
        move[size, :size] = value
        moves.append(move)
    start = np.zeros((1, size + 1), np.int64)
    start[0, size] = 1
    table = vector_table(start, moves, p, p**size + 1)
    assert table is not None
    return table


def minimal_submodules(action: list[Matrix], p: int, size: int, most: int) -> list[Matrix]:
    """The minimal submodules of dimension at most `most` of F_p^size under the matrices (acting on column vectors), each as the rows of
    a reduced basis."""
    spaces: dict[bytes, Matrix] = {}
    for vector in _projective_points(p, size):
        space = _spun(vector, action, p, most)
        if space is not None:
            spaces.setdefault(space.tobytes(), space)
    found = list(spaces.values())
    return [space for space in found if not any(len(other) < len(space) and _contains(space, other, p) for other in found)]


def _projective_points(p: int, size: int) -> Iterator[Matrix]:
    for lead in range(size):
        for rest in product(range(p), repeat=size - lead - 1):
            yield np.array([0] * lead + [1, *rest], dtype=np.int64)


def _spun(vector: Matrix, action: list[Matrix], p: int, most: int) -> Matrix | None:
    """The submodule that a vector generates, in reduced form; None when its dimension is above `most`."""
    basis = np.zeros((0, len(vector)), np.int64)
    queue = [vector]
    for here in queue:
        rest = _residue(here, basis, p)
        if not rest.any():
            continue
        if len(basis) == most:
            return None
        lead = int(np.flatnonzero(rest)[0])
        rest = rest * pow(int(rest[lead]), -1, p) % p
        basis = (basis - np.outer(basis[:, lead], rest)) % p if len(basis) else basis
        basis = np.vstack([basis, rest])
        queue += [matrix @ here % p for matrix in action]
    order = np.argsort([int(np.flatnonzero(row)[0]) for row in basis])
    return basis[order]


def _residue(vector: Matrix, basis: Matrix, p: int) -> Matrix:
    for row in basis:
        lead = int(np.flatnonzero(row)[0])
        if vector[lead]:
            vector = (vector - vector[lead] * row) % p
    return vector


def _contains(space: Matrix, other: Matrix, p: int) -> bool:
    return all(not _residue(row, space, p).any() for row in other)
