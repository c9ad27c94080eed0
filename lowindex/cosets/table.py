"""Coset tables: transitive actions of a finitely generated group on the points 0..n-1, from the right.

Row i lists the images of point i under x1, x1^-1, x2, x2^-1, ...; the subgroup that a table stands for is the stabiliser of
point 0, of index n. A table is *standard* when, read row by row, new points appear in increasing order.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from lowindex.errors import InputError
from lowindex.words import Word


def column(letter: int) -> int:
    """The column of a letter.

    >>> [column(letter) for letter in (1, -1, 2, -2)]
    [0, 1, 2, 3]
    """
    return 2 * abs(letter) - 2 + (letter < 0)


@dataclass(frozen=True, eq=False)
class CosetTable:
    """`rows`: int32 array of shape (index, 2 * rank), read-only. Make tables of unchecked data by `from_permutations`."""

    rows: NDArray[np.int32]

    def __post_init__(self) -> None:
        self.rows.flags.writeable = False

    @classmethod
    def from_permutations(cls, permutations: Sequence[Sequence[int]]) -> CosetTable:
        """The table in which the k-th generator acts by the k-th permutation of 0..n-1. InputError when one is not a
        permutation or the action is not transitive; without generators the group is trivial and n = 1."""
        degree = len(permutations[0]) if permutations else 1
        rows = np.zeros((degree, 2 * len(permutations)), dtype=np.int32)
        for k, images in enumerate(permutations):
            if sorted(images) != list(range(degree)):
                raise InputError(f"permutations[{k}] must list each of 0..{degree - 1} once")
            rows[:, 2 * k] = images
            rows[rows[:, 2 * k], 2 * k + 1] = np.arange(degree)
        table = cls(rows)
        if len(breadth_first(table.rows)) != degree:
            raise InputError("permutations must act transitively: some point cannot be reached from point 0")
        return table

    @property
    def index(self) -> int:
        """Number of points: the index of the stabiliser of point 0."""
        return int(self.rows.shape[0])

    @property
    def rank(self) -> int:
        """Number of generators."""
        return int(self.rows.shape[1]) // 2

    @cached_property
    def lists(self) -> list[list[int]]:
        """The rows as plain lists, for loops in Python."""
        return [[int(j) for j in row] for row in self.rows]

    def image(self, point: int, word: Word) -> int:
        """point · word."""
        lists = self.lists
        for letter in word:
            point = lists[point][column(letter)]
        return point

    def permutation(self, k: int) -> tuple[int, ...]:
        """The images of the points under the k-th generator, k from 1."""
        return tuple(int(j) for j in self.rows[:, 2 * k - 2])

    @property
    def permutations(self) -> list[tuple[int, ...]]:
        """The permutations of all generators."""
        return [self.permutation(k) for k in range(1, self.rank + 1)]

    def satisfies(self, relators: Iterable[Word]) -> bool:
        """Whether every relator fixes every point."""
        points = np.arange(self.index)
        for word in relators:
            here = points
            for letter in word:
                here = self.rows[here, column(letter)]
            if not np.array_equal(here, points):
                return False
        return True

    @property
    def is_standard(self) -> bool:
        """Whether new points appear in increasing order when the table is read row by row."""
        return list(breadth_first(self.rows)) == list(range(self.index))

    def __eq__(self, other: object) -> bool:
        return isinstance(other, CosetTable) and np.array_equal(self.rows, other.rows)

    def __hash__(self) -> int:
        return hash((self.rows.shape, self.rows.tobytes()))

    def _repr_svg_(self) -> str | None:
        """The Schreier graph in a notebook, when it is small enough for a picture."""
        from lowindex.cosets.graph import LARGEST_PICTURE, graph_text

        return graph_text(self, [f"x{k}" for k in range(1, self.rank + 1)], "svg") if self.index <= LARGEST_PICTURE else None

    def __repr__(self) -> str:
        return f"CosetTable(index={self.index}, rank={self.rank})"


def breadth_first(rows: NDArray[np.int32], base: int = 0) -> list[int]:
    """The points in the order in which reading the table row by row from `base` meets them."""
    order, seen = [base], {base}
    lists = rows.tolist()
    for point in order:
        for image in lists[point]:
            if image not in seen:
                seen.add(image)
                order.append(image)
    return order
