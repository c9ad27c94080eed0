"""Schreier trees: transversals and Schreier generators of the stabiliser of a point.

O. Schreier, Die Untergruppen der freien Gruppen, Abh. Math. Sem. Hamburg 5 (1927). The tree is the breadth-first one from point 0,
columns in the order of the table; the edge (i, x_k) outside the tree is the Schreier generator t_i x_k t_j^-1, j = i · x_k. They
are numbered 1, 2, ... by point, then by k: n(r-1)+1 of them.
"""

from __future__ import annotations

from functools import cached_property

from lowindex.cosets.table import CosetTable, column
from lowindex.words import Word, inverse, product, reduced


class SchreierTree:
    """The breadth-first tree of a table. `parent[i]` and `letter[i]`: the point before i and the letter from it to i (0 at the root)."""

    def __init__(self, table: CosetTable) -> None:
        self.table = table
        self.parent = [-1] * table.index
        self.letter = [0] * table.index
        self.order = [0]
        self._number = [[0] * (2 * table.rank) for _ in range(table.index)]
        self._grow()
        self.edges: tuple[tuple[int, int], ...] = tuple(self._count_edges())

    def _grow(self) -> None:
        rows, seen = self.table.lists, [False] * self.table.index
        seen[0] = True
        self._tree = [[False] * (2 * self.table.rank) for _ in rows]
        letters = [s * k for k in range(1, self.table.rank + 1) for s in (1, -1)]
        for point in self.order:
            for place, letter in enumerate(letters):
                image = rows[point][place]
                if not seen[image]:
                    seen[image] = True
                    self.parent[image], self.letter[image] = point, letter
                    self._tree[point][place] = self._tree[image][place ^ 1] = True
                    self.order.append(image)

    def _count_edges(self) -> list[tuple[int, int]]:
        edges: list[tuple[int, int]] = []
        rows = self.table.lists
        for point, row in enumerate(rows):
            for k in range(1, self.table.rank + 1):
                if not self._tree[point][2 * k - 2]:
                    edges.append((point, k))
                    self._number[point][2 * k - 2] = len(edges)
                    self._number[row[2 * k - 2]][2 * k - 1] = -len(edges)
        return edges

    def symbol(self, point: int, letter: int) -> int:
        """The Schreier generator (or inverse, negative) read when `letter` is applied at `point`; 0 on the tree."""
        return self._number[point][column(letter)]

    @cached_property
    def transversal(self) -> tuple[Word, ...]:
        """t_i: the word along the tree from point 0 to point i."""
        words: list[Word] = [()] * self.table.index
        for point in self.order[1:]:
            words[point] = (*words[self.parent[point]], self.letter[point])
        return tuple(words)

    @cached_property
    def generators(self) -> tuple[Word, ...]:
        """The Schreier generators as words in the generators of the group."""
        t, rows = self.transversal, self.table.lists
        return tuple(product(t[i], (k,), inverse(t[rows[i][2 * k - 2]])) for i, k in self.edges)

    def rewrite(self, point: int, word: Word) -> Word:
        """The word read from `point`, in Schreier generators, reduced: t_point word t_end^-1."""
        rows, number = self.table.lists, self._number
        out: list[int] = []
        for letter in word:
            place = column(letter)
            if symbol := number[point][place]:
                out.append(symbol)
            point = rows[point][place]
        return reduced(out)
