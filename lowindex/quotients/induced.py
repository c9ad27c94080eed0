"""Induced characters: quotients W . P with P a small monomial group, found from subgroups of low index.

Let S have low index d in H and chi: S -> F_q^* be a character with a crossed homomorphism that is not principal. By Shapiro's lemma the
induced module V = F_q^d of H has one, too. Let P be the group that acts on V (its order is prime to q) and K the kernel of H -> P. Crossed
homomorphisms H -> V restrict to homomorphisms K -> V; their images span a submodule W. In the quotient of H with kernel the common
kernel of those homomorphisms, Fit lies in the elements that act trivially on W (they are the q'-elements and W itself), and those
are the cut.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import islice

import numpy as np
from flint import nmod_mat
from numpy.typing import NDArray

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.cosets import CosetTable, SchreierTree, SubgroupPresentation, subgroup_presentation, vector_table
from lowindex.quotients.characters import characters, has_crossed, large_prime, root_of_unity
from lowindex.quotients.cut import Cut
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation, Word

Matrix = NDArray[np.int64]

HIGHEST_INDEX = 8
ORDERS = (2, 3, 4, 6)
CHARACTERS = 40
LARGEST_GROUP = 3000


def induced_cuts(rank: int, relators: Sequence[Word], *, budget: Budget) -> Iterator[Cut]:
    """Cuts from characters of subgroups of index 2 to 8, by increasing index."""
    group = Presentation.from_relators(rank, relators)
    for index in range(2, HIGHEST_INDEX + 1):
        search = SubgroupSearch(group, index, budget=budget.part(max(1, budget.left // 4)))
        for found in search:
            if budget.exhausted:
                return
            if found.index == index:
                yield from _cuts(group, subgroup_presentation(group, found.table), budget)
        if not search.finished:
            return


def _cuts(group: Presentation, subgroup: SubgroupPresentation, budget: Budget) -> Iterator[Cut]:
    homology = abelianization(subgroup.rank, subgroup.relators)
    letters = sum(map(len, subgroup.relators))
    budget.spend(200 + letters // 4 + subgroup.rank * len(subgroup.relators) // 10)
    for m in ORDERS:
        q = large_prime(m)
        for values in islice(characters(homology, m), CHARACTERS):
            if budget.exhausted:
                return
            budget.spend(20 + letters // 4 + subgroup.rank * len(subgroup.relators) // 20)
            if has_crossed(subgroup.rank, subgroup.relators, values, m, q):
                root = root_of_unity(m, q)
                matrices = _induced(subgroup.tree, [pow(root, v, q) for v in values], q)
                table = _acting(group, matrices, q)
                if table is not None and table.index > 1:
                    yield Cut(table, "induced", f"a character of order {m} of a subgroup of index {subgroup.table.index}")


def _induced(tree: SchreierTree, values: Sequence[int], q: int) -> list[Matrix]:
    """The matrices of the generators of H on row vectors: e_i x = chi(s) e_(i x), s the Schreier generator of the edge."""
    degree = tree.table.index
    matrices = []
    for k in range(1, tree.table.rank + 1):
        matrix = np.zeros((degree, degree), np.int64)
        for i, j in enumerate(tree.table.permutation(k)):
            symbol = tree.symbol(i, k)
            value = 1 if not symbol else values[symbol - 1] if symbol > 0 else pow(values[-symbol - 1], -1, q)
            matrix[i, j] = value
        matrices.append(matrix)
    return matrices


def _acting(group: Presentation, matrices: list[Matrix], q: int) -> CosetTable | None:
    """The group that acts on W, as a regular table; None when P is too large or W is 0."""
    degree = matrices[0].shape[0]
    identity = np.eye(degree, dtype=np.int64)
    whole = vector_table(identity, matrices, q, LARGEST_GROUP)
    if whole is None:
        return None
    inverses = [_inverted(matrix, q) for matrix in matrices]
    cocycles = _crossed(group.relators, matrices, inverses, q)
    span = _values_on_kernel(SchreierTree(whole), cocycles, matrices, inverses, q)
    span = _closed(span, matrices, q)
    return vector_table(span, matrices, q, LARGEST_GROUP) if len(span) else None


def _inverted(matrix: Matrix, q: int) -> Matrix:
    """The inverse of a monomial matrix."""
    result = np.zeros_like(matrix)
    for i, j in zip(*np.nonzero(matrix), strict=True):
        result[j, i] = pow(int(matrix[i, j]), -1, q)
    return result


def _crossed(relators: Sequence[Word], matrices: list[Matrix], inverses: list[Matrix], q: int) -> Matrix:
    """A basis of the crossed homomorphisms, c(uv) = c(u) v + c(v): array (number, generators, degree)."""
    rank, degree = len(matrices), matrices[0].shape[0]
    blocks = []
    for word in relators:
        block = np.zeros((rank, degree, degree), np.int64)
        suffix = np.eye(degree, dtype=np.int64)
        for letter in reversed(word):
            if letter > 0:
                block[letter - 1] = (block[letter - 1] + suffix) % q
                suffix = matrices[letter - 1] @ suffix % q
            else:
                suffix = inverses[-letter - 1] @ suffix % q
                block[-letter - 1] = (block[-letter - 1] - suffix) % q
        blocks.append(block.reshape(rank * degree, degree))
    size = rank * degree
    if not blocks:
        return np.eye(size, dtype=np.int64).reshape(size, rank, degree)
    equations = np.hstack(blocks).T
    matrix = nmod_mat(equations.shape[0], size, [int(x) for x in equations.ravel()], q)
    kernel, nullity = matrix.nullspace()
    basis = [[int(kernel[i, j]) for i in range(size)] for j in range(nullity)]
    return np.array(basis, dtype=np.int64).reshape(nullity, rank, degree)


def _values_on_kernel(
    tree: SchreierTree, cocycles: Matrix, matrices: list[Matrix], inverses: list[Matrix], q: int
) -> Matrix:
    """The values of all crossed homomorphisms on the Schreier generators of the kernel, each up to the action of the group."""
    values: list[Matrix] = [np.zeros((0, 0), np.int64)] * tree.table.index
    values[0] = np.zeros((cocycles.shape[0], cocycles.shape[2]), np.int64)
    for point in tree.order[1:]:
        letter = tree.letter[point]
        before = values[tree.parent[point]]
        if letter > 0:
            values[point] = (before @ matrices[letter - 1] + cocycles[:, letter - 1]) % q
        else:
            values[point] = (before - cocycles[:, -letter - 1]) @ inverses[-letter - 1] % q
    rows = [
        (values[i] @ matrices[k - 1] + cocycles[:, k - 1] - values[tree.table.lists[i][2 * k - 2]]) % q for i, k in tree.edges
    ]
    return _basis(np.vstack(rows), q)


def _basis(rows: Matrix, q: int) -> Matrix:
    """The row space in echelon form."""
    rows = np.unique(rows, axis=0)
    matrix = nmod_mat(rows.shape[0], rows.shape[1], [int(x) for x in rows.ravel()], q)
    echelon, rank = matrix.rref()
    return np.array([[int(echelon[i, j]) for j in range(rows.shape[1])] for i in range(rank)], dtype=np.int64).reshape(
        rank, rows.shape[1]
    )


def _closed(span: Matrix, matrices: list[Matrix], q: int) -> Matrix:
    """The submodule that the rows span."""
    while len(span):
        larger = _basis(np.vstack([span, *(span @ matrix % q for matrix in matrices)]), q)
        if len(larger) == len(span):
            return larger
        span = larger
    return span
