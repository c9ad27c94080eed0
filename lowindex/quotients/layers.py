"""Layers: quotients H / K'K^q for the kernel K of H onto a p-group P, q another prime, by linear algebra modulo q.

V = K / K'K^q is a module for P. The Fitting subgroup of H / K'K^q is V C_P(V), so the cut is the preimage of C_P(V): the elements of H
that act trivially on V by conjugation. It is found as the stabiliser of a few vectors of V.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from flint import nmod_mat

from lowindex.algebra import mod_p_rank, relation_matrix
from lowindex.budget import Budget
from lowindex.cosets import (
    CosetTable,
    SchreierTree,
    SubgroupPresentation,
    abelian_table,
    compose,
    subgroup_presentation,
    vector_table,
)
from lowindex.quotients.cut import Cut
from lowindex.words import Presentation, Word, product

LARGEST_P_GROUP = 300
LARGEST_MODULE = 400
PRIMES = (2, 3, 5, 7)
LARGE_PRIME = 10_007


@dataclass(frozen=True)
class _Module:
    """V with its basis numbered 0..dimension-1, and the matrix of every generator of H, acting on row vectors."""

    q: int
    dimension: int
    matrices: list[list[list[int]]]


def layer_cuts(rank: int, relators: Sequence[Word], *, budget: Budget) -> Iterator[Cut]:
    """Cuts from elementary abelian P = H_1(H; F_p) first, then from the next step of the lower exponent-p series."""
    group = Presentation.from_relators(rank, relators)
    deeper: list[tuple[int, SubgroupPresentation]] = []
    for p in PRIMES:
        table = elementary_table(rank, relators, p)
        if table is None or budget.exhausted:
            continue
        kernel = subgroup_presentation(group, table)
        yield from _cuts(group, kernel, p, budget)
        deeper.append((p, kernel))
    for p, kernel in deeper:
        if budget.exhausted:
            return
        below = elementary_table(kernel.rank, kernel.relators, p, most=LARGEST_P_GROUP // kernel.table.index)
        if below is not None:
            yield from _cuts(group, subgroup_presentation(group, compose(below, kernel)), p, budget)


def elementary_table(rank: int, relators: Sequence[Word], p: int, *, most: int = LARGEST_P_GROUP) -> CosetTable | None:
    """The regular action of H_1(H; F_p); None when it is trivial or of more than `most` elements."""
    dimension = mod_p_rank(rank, relators, p)
    if not dimension or p**dimension > most:
        return None
    coordinates = cokernel(relation_matrix(rank, relators), rank, p)
    return abelian_table([tuple(row) for row in coordinates], [p] * dimension, most)


def cokernel(rows: list[list[int]], size: int, q: int) -> list[list[int]]:
    """The image of each of the `size` unit vectors in F_q^size modulo the rows, in coordinates of the columns without pivot."""
    pivots: dict[int, list[int]] = {}
    if rows:
        echelon, rank = nmod_mat(len(rows), size, [x % q for row in rows for x in row], q).rref()
        for i in range(rank):
            row = [int(echelon[i, j]) for j in range(size)]
            pivots[next(j for j, x in enumerate(row) if x)] = row
    free = [j for j in range(size) if j not in pivots]
    return [
        [-pivots[j][k] % q for k in free] if j in pivots else [int(j == k) for k in free]
        for j in range(size)
    ]


def _cuts(group: Presentation, kernel: SubgroupPresentation, p: int, budget: Budget) -> Iterator[Cut]:
    for q in (LARGE_PRIME, *PRIMES):
        if q == p or budget.exhausted:
            continue
        budget.spend(kernel.rank * len(kernel.relators) // 30 + sum(map(len, kernel.relators)) // 10)
        module = _module(group, kernel, q)
        if module is None:
            continue
        table = _acting(module, kernel.table.index)
        if table is not None and table.index > 1:
            yield Cut(table, "layer", f"a {p}-group of order {kernel.table.index} acting on F_{q}^{module.dimension}")


def _module(group: Presentation, kernel: SubgroupPresentation, q: int) -> _Module | None:
    """V for the kernel of a regular table; None when V is 0 or too large."""
    rank = kernel.rank
    coordinates = cokernel(relation_matrix(rank, kernel.relators), rank, q)
    dimension = len(coordinates[0]) if coordinates else 0
    if not 0 < dimension <= LARGEST_MODULE:
        return None
    basis = [j for j in range(rank) if sum(coordinates[j]) == 1 and max(coordinates[j]) == 1]
    chosen = {coordinates[j].index(1): j for j in reversed(basis)}
    matrices = []
    for x in range(1, group.rank + 1):
        rows = []
        for k in range(dimension):
            word = product((-x,), kernel.generators[chosen[k]], (x,))
            value = [0] * dimension
            for letter in kernel.tree.rewrite(0, word):
                sign = 1 if letter > 0 else -1
                for place, entry in enumerate(coordinates[abs(letter) - 1]):
                    if entry:
                        value[place] += sign * entry
            rows.append([entry % q for entry in value])
        matrices.append(rows)
    return _Module(q, dimension, matrices)


def _acting(module: _Module, most: int) -> CosetTable | None:
    """The group that acts on V, as a regular table: the orbit of a few vectors, with more of them until it is regular."""
    identity = [[int(i == j) for j in range(module.dimension)] for i in range(module.dimension)]
    if all(matrix == identity for matrix in module.matrices):
        return None
    q, d = module.q, module.dimension
    for count in (2, 6, d):
        vectors = [tuple((7 * (i + 1) ** (j % 5 + 1) + j * j + 3 * i) % q for j in range(d)) for i in range(min(count, d))]
        if count >= d:
            vectors = [tuple(row) for row in identity]
        table = vector_table(vectors, module.matrices, q, most)
        if table is not None and is_regular(table):
            return table
    return None


def is_regular(table: CosetTable) -> bool:
    """Whether a word that fixes point 0 fixes every point."""
    return all(table.satisfies([word]) for word in SchreierTree(table).generators)
