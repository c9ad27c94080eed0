"""The coset table: a transitive action in which every relator is trivial, its breadth-first tree, Schreier generators and relators."""

from __future__ import annotations

from typing import Any

from .parse import integer, listing
from .refused import require
from .words import Word, reduced


class Table:
    """Points 0..index-1; `step(i, x)` is i · x. The subgroup H is the stabiliser of 0, of index `index` (FORMAT.md, step 2)."""

    def __init__(self, value: Any, rank: int, relators: list[Word]) -> None:
        rows = listing(value, "table")
        require(len(rows) == rank, f"table has {len(rows)} permutations for {rank} generators")
        self.rank = rank
        self.index = len(listing(rows[0], "table[0]")) if rows else 1
        require(self.index >= 1, "table has no points")
        self.forward: list[list[int]] = []
        self.backward: list[list[int]] = []
        for k, row in enumerate(rows):
            self._add(listing(row, f"table[{k}]"), f"table[{k}]")
        for number, word in enumerate(relators):
            for point in range(self.index):
                require(self.end(point, word) == point, f"relator {number} moves point {point}")
        self._grow_tree()

    def _add(self, row: list[Any], where: str) -> None:
        require(len(row) == self.index, f"{where} has {len(row)} entries, not {self.index}")
        back = [-1] * self.index
        for point, image in enumerate(row):
            integer(image, f"{where}[{point}]", 0, self.index - 1)
            require(back[image] < 0, f"{where} takes two points to {image}")
            back[image] = point
        self.forward.append(row)
        self.backward.append(back)

    def step(self, point: int, letter: int) -> int:
        """point · letter."""
        return self.forward[letter - 1][point] if letter > 0 else self.backward[-letter - 1][point]

    def end(self, point: int, word: Word) -> int:
        """point · word."""
        for letter in word:
            point = self.step(point, letter)
        return point

    def _grow_tree(self) -> None:
        """Breadth first from 0, letters in the order 1, -1, 2, -2, ...; number the edges (i, k) outside the tree by i, then k."""
        seen = [False] * self.index
        seen[0] = True
        tree: set[tuple[int, int]] = set()
        queue = [0]
        for point in queue:
            for k in range(1, self.rank + 1):
                for letter in (k, -k):
                    image = self.step(point, letter)
                    if not seen[image]:
                        seen[image] = True
                        queue.append(image)
                        tree.add((point, k) if letter > 0 else (image, k))
        require(len(queue) == self.index, "the action is not transitive")
        self.number: dict[tuple[int, int], int] = {}
        for point in range(self.index):
            for k in range(1, self.rank + 1):
                if (point, k) not in tree:
                    self.number[point, k] = len(self.number) + 1

    @property
    def generators(self) -> int:
        """How many Schreier generators there are."""
        return len(self.number)

    def rewritten(self, point: int, word: Word) -> Word:
        """A word traced from a point, in Schreier generators, freely reduced."""
        out: list[int] = []
        for letter in word:
            following = self.step(point, letter)
            if letter > 0:
                symbol = self.number.get((point, letter), 0)
            else:
                symbol = -self.number.get((following, -letter), 0)
            if symbol:
                out.append(symbol)
            point = following
        return reduced(out)
