"""The coset table: a transitive action in which every relator is trivial, its breadth-first tree, Schreier generators and relators."""

from __future__ import annotations

from typing import Any

from .parse import integers, listing
from .refused import require
from .words import Word, reduced

MOST_TRACED = 20_000_000


class Table:
    """Points 0..index-1; `step(i, x)` is i · x. The subgroup H is the stabiliser of 0, of index `index`; it has the generators
    1..`generators` and the relators `relators`, in this order (FORMAT.md, step 2)."""

    def __init__(self, value: Any, rank: int, relators: list[Word]) -> None:
        rows = listing(value, "table", rank)
        self.rank = rank
        self.index = len(listing(rows[0], "table[0]")) if rows else 1
        require(self.index >= 1, "table has no points")
        letters = sum(map(len, relators))
        require(self.index * letters <= MOST_TRACED, f"index times letters of relators is more than {MOST_TRACED}")
        self.forward: list[list[int]] = []
        self.backward: list[list[int]] = []
        for k, row in enumerate(rows):
            self._add(row, f"table[{k}]")
        self.number = self._numbered_edges()
        self.generators = len(self.number)
        self.relators = [self._rewritten(point, k, word) for point in range(self.index) for k, word in enumerate(relators)]

    def _add(self, row: Any, where: str) -> None:
        images = integers(listing(row, where, self.index), where, 0, self.index - 1)
        back = [-1] * self.index
        for point, image in enumerate(images):
            require(back[image] < 0, f"{where} takes two points to {image}")
            back[image] = point
        self.forward.append(images)
        self.backward.append(back)

    def step(self, point: int, letter: int) -> int:
        """point · letter."""
        return self.forward[letter - 1][point] if letter > 0 else self.backward[-letter - 1][point]

    def _numbered_edges(self) -> dict[tuple[int, int], int]:
        """Numbers 1, 2, ... for the edges (i, k), from i to i · k, outside the tree, by i, then k. The tree grows breadth first from 0,
        at each point by the letters 1, -1, 2, -2, ..."""
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
        edges = ((point, k) for point in range(self.index) for k in range(1, self.rank + 1))
        return {edge: number for number, edge in enumerate((edge for edge in edges if edge not in tree), 1)}

    def _rewritten(self, start: int, relator: int, word: Word) -> Word:
        """A relator traced from a point, in Schreier generators, freely reduced."""
        out: list[int] = []
        point = start
        for letter in word:
            following = self.step(point, letter)
            symbol = self.number.get((point, letter) if letter > 0 else (following, -letter), 0)
            if symbol:
                out.append(symbol if letter > 0 else -symbol)
            point = following
        require(point == start, f"relator {relator} moves point {start}")
        return reduced(out)
