"""All elements of a finite permutation group, numbered, with products by their images of a base.

An element is known by what it does to the points of a base (C. C. Sims 1970), so the product of two numbered elements takes one look-up.
Arrays of numbers are multiplied at once.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from lowindex.errors import InputError

Permutation = tuple[int, ...]
Numbers = NDArray[np.int64]

LARGEST_ORDER = 50_000
LARGEST_LOOKUP = 40_000_000


class ElementTable:
    """`elements[k]`: the images of the points under element k; element 0 is the identity. InputError when the group is too large."""

    def __init__(self, generators: Sequence[Permutation], name: str) -> None:
        self.name = name
        self.degree = len(generators[0])
        self.elements: NDArray[np.int64] = np.array(self._all(generators), dtype=np.int64)
        self.order = len(self.elements)
        self.base = self._base()
        if self.degree ** len(self.base) > LARGEST_LOOKUP:
            raise InputError(f"target {name!r} needs too many base points; give it as permutations of fewer points")
        self.strides = self.degree ** np.arange(len(self.base), dtype=np.int64)
        self.lookup = np.full(self.degree ** len(self.base), -1, np.int64)
        self.lookup[self.elements[:, self.base] @ self.strides] = np.arange(self.order)

    def _all(self, generators: Sequence[Permutation]) -> list[Permutation]:
        start = tuple(range(self.degree))
        found = {start: None}
        queue = [start]
        for element in queue:
            for images in generators:
                image = tuple([images[i] for i in element])
                if image not in found:
                    if len(queue) >= LARGEST_ORDER:
                        raise InputError(f"target {self.name!r} has more than {LARGEST_ORDER} elements; choose a smaller group")
                    found[image] = None
                    queue.append(image)
        return queue

    def _base(self) -> list[int]:
        """Points that no element but the identity fixes: each the one that the elements left move most."""
        base: list[int] = []
        left = self.elements
        while len(left) > 1:
            moved = (left != np.arange(self.degree)).sum(axis=0)
            point = int(moved.argmax())
            base.append(point)
            left = left[left[:, point] == point]
        return base or [0]

    def product(self, left: Numbers | int, right: Numbers | int) -> Numbers:
        """First left, then right, of numbers or arrays of numbers that match."""
        images = self.elements[left][..., self.base]
        rows: Any = self.elements[right]
        moved = np.take_along_axis(np.broadcast_to(rows, (*images.shape[:-1], self.degree)), images, axis=-1)
        return np.asarray(self.lookup[moved @ self.strides])

    @cached_property
    def inverses(self) -> Numbers:
        """The number of the inverse of every element."""
        back = np.argsort(self.elements, axis=1)
        return np.asarray(self.lookup[back[:, self.base] @ self.strides])

    def conjugates(self, elements: Numbers, by: int) -> Numbers:
        """by^-1 · element · by for an array of elements."""
        return self.product(self.product(np.full(len(elements), self.inverses[by]), elements), by)

    def centralizer(self, element: int, within: Numbers) -> Numbers:
        """The elements of `within` that commute with an element."""
        commute = self.product(within, element) == self.product(np.full(len(within), element), within)
        return np.asarray(within[commute])

    def orbits(self, group: Numbers) -> list[tuple[int, int]]:
        """(least element, size) of the orbits of all elements under conjugation by a subgroup."""
        if len(group) == 1:
            return [(k, 1) for k in range(self.order)]
        least, sizes = np.unique(self._labels(group), return_counts=True)
        return [(int(k), int(size)) for k, size in zip(least, sizes, strict=True)]

    def _labels(self, group: Numbers) -> Numbers:
        """The least element of the orbit of every element."""
        label = everything = np.arange(self.order)
        images = [self.conjugates(everything, by) for by in self._generators_of(group)]
        while True:
            lower = label.copy()
            for image in images:
                lower = np.minimum(lower, lower[image])
                np.minimum.at(lower, image, lower.copy())
            if np.array_equal(lower, label):
                return label
            label = lower

    def _generators_of(self, group: Numbers) -> list[int]:
        """A few elements that generate a subgroup given by its elements."""
        inside = np.zeros(self.order, bool)
        inside[0] = True
        chosen: list[int] = []
        for element in group:
            if not inside[element]:
                chosen.append(int(element))
                inside = self._closure(chosen)
        return chosen

    def _closure(self, generators: list[int]) -> NDArray[np.bool_]:
        inside = np.zeros(self.order, bool)
        inside[0] = True
        frontier = np.array([0])
        while len(frontier):
            images = np.unique(np.concatenate([self.product(frontier, g) for g in generators]))
            frontier = images[~inside[images]]
            inside[frontier] = True
        return inside
