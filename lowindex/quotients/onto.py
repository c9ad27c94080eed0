"""Homomorphisms to a finite group, up to conjugacy; epimorphisms; kernels.

Images of the generators are chosen one by one, each from orbit representatives under the centralizer of those before; a relator is
tested as soon as all its letters have images, for all candidates at once. The class of (x_1, ..., x_k) has |Q| / |C(x_1, ..., x_k)|
members. Two epimorphisms have the same kernel exactly when the regular actions they give have the same standard table, so kernels are
counted without the automorphisms of Q; |Aut Q| = |Epi| / number of kernels (P. Hall, The Eulerian functions of a group, Quart. J. Math.
7, 1936).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from hashlib import sha256
from typing import Any

import numpy as np

from lowindex.budget import Budget
from lowindex.cosets import CosetTable, regular_action
from lowindex.quotients.element_table import ElementTable, Numbers
from lowindex.quotients.targets import target_generators
from lowindex.words import Presentation, Word

Permutation = tuple[int, ...]


@dataclass(frozen=True)
class HomomorphismClass:
    """Homomorphisms conjugate in the target. `images`: permutations of the generators' images; `size`: members of the class; `onto`:
    whether they are epimorphisms; `kernel`: the same text for the same kernel (epimorphisms only)."""

    images: tuple[Permutation, ...]
    size: int
    onto: bool
    kernel: str


@dataclass
class _Choice:
    """A node of the backtrack: images so far, the elements that centralize them, candidates for the next image, and how
    many were tried."""

    images: dict[int, int]
    stabilizer: Numbers
    candidates: Numbers
    tried: int = 0


class HomomorphismSearch:
    """An iterator over the classes of homomorphisms of a group to a target. It ends when all were found (`finished`) or the budget is
    spent; then a new budget may be set and the iteration goes on where it stopped. A search can be pickled between two items."""

    def __init__(self, presentation: Presentation, target: str, *, budget: Budget) -> None:
        self.presentation = presentation
        self.target = ElementTable(target_generators(target), target)
        self.budget = budget
        self.finished = False
        order = sorted(range(1, presentation.rank + 1), key=lambda k: -sum(abs(x) == k for word in presentation.relators for x in word))
        place = {k: i for i, k in enumerate(order)}
        self._order = order
        self._ready: list[list[Word]] = [[] for _ in order]
        for word in presentation.relators:
            self._ready[max(place[abs(x)] for x in word)].append(word)
        size = self.target.order
        self._arrays: Any = (
            np.zeros((size, presentation.rank), np.int64),
            np.zeros(size, np.int64),
            np.zeros(size, np.int64),
        )

        self._stack = [self._choice({}, np.arange(size))]

    def __iter__(self) -> Iterator[HomomorphismClass]:
        return self

    def __next__(self) -> HomomorphismClass:
        while self._stack and not self.budget.exhausted:
            choice = self._stack[-1]
            if choice.tried == len(choice.candidates):
                self._stack.pop()
                continue
            images, stabilizer = choice.images, choice.stabilizer
            element = int(choice.candidates[choice.tried])
            choice.tried += 1
            if self._order:
                images = images | {self._order[len(images)]: element}
                stabilizer = self.target.centralizer(element, stabilizer)
            if len(images) == len(self._order):
                return self._made(images, self.target.order // len(stabilizer))
            self._stack.append(self._choice(images, stabilizer))
        self.finished = not self._stack
        raise StopIteration

    def _choice(self, images: dict[int, int], stabilizer: Numbers) -> _Choice:
        """The candidates for the next generator that satisfy the relators whose letters are all known then; the identity when
        there are no generators."""
        if not self._order:
            return _Choice(images, stabilizer, np.zeros(1, np.int64))
        level = len(images)
        candidates = np.array([element for element, _ in self.target.orbits(stabilizer)])
        self.budget.spend(self.target.order // 20 + 10)
        for word in self._ready[level]:
            candidates = candidates[self._value(word, images, self._order[level], candidates) == 0]
            self.budget.spend(len(word) * (1 + len(candidates) // 50))
        return _Choice(images, stabilizer, candidates)

    def _value(self, word: Word, images: dict[int, int], k: int, candidates: Numbers) -> Numbers:
        """The value of a word for every candidate of the image of generator k."""
        inverses = self.target.inverses
        value: Numbers = np.zeros(len(candidates), np.int64)
        for letter in word:
            right: Numbers | int
            if abs(letter) == k:
                right = candidates if letter > 0 else inverses[candidates]
            else:
                right = images[abs(letter)] if letter > 0 else int(inverses[images[abs(letter)]])
            value = self.target.product(value, right)
        return value

    def _made(self, images: dict[int, int], size: int) -> HomomorphismClass:
        from lowindex.quotients.onto_kernel import standard_action

        target = self.target
        chosen = np.array([images[k] for k in sorted(images)], dtype=np.int64)
        table, number, queue = self._arrays
        kernel: Any = standard_action
        count = kernel(
            target.elements, np.array(target.base), target.strides, target.lookup, chosen, target.order, table, number, queue
        )
        self.budget.spend(1 + count * len(chosen) // 20)
        onto = count == target.order
        return HomomorphismClass(
            images=tuple(tuple(int(i) for i in target.elements[x]) for x in chosen),
            size=size,
            onto=onto,
            kernel=sha256(table.tobytes()).hexdigest() if onto else "",
        )


@dataclass(frozen=True)
class OntoCounts:
    """Numbers of homomorphisms to the target, of epimorphisms, and of kernels (normal subgroups with that quotient)."""

    target: str
    order: int
    homomorphisms: int
    epimorphisms: int
    kernels: int
    complete: bool


def count_onto(presentation: Presentation, target: str, *, budget: Budget) -> OntoCounts:
    """Count without keeping homomorphisms."""
    search = HomomorphismSearch(presentation, target, budget=budget)
    every = onto = 0
    kernels: set[str] = set()
    for found in search:
        every += found.size
        if found.onto:
            onto += found.size
            kernels.add(found.kernel)
    return OntoCounts(target, search.target.order, every, onto, len(kernels), search.finished)


def kernel_tables(presentation: Presentation, target: str, *, budget: Budget) -> Iterator[CosetTable]:
    """The regular coset tables of the normal subgroups with quotient isomorphic to the target, each once."""
    seen: set[str] = set()
    search = HomomorphismSearch(presentation, target, budget=budget)
    for found in search:
        if found.onto and found.kernel not in seen:
            seen.add(found.kernel)
            table = regular_action(found.images)
            assert table is not None
            yield table

