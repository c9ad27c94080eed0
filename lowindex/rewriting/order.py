"""Reduction orderings on words: total, compatible with multiplication on both sides, the empty word least.

    shortlex            length, then letters (Epstein et al., Word Processing in Groups, 1992)
    weighted shortlex   sum of letter weights, then length, then letters
    recursive path      wreath product of one-letter orders: the count of the greatest letter, then the parts between its
                        occurrences from the left (C. C. Sims, Computation with Finitely Presented Groups, 1994, ch. 2)

`rank` lists the generators from least to greatest; an inverse stands next to its generator, just above it.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Protocol

from lowindex.rewriting.strings import inverted, letter_of


class Order(Protocol):
    """A reduction ordering. `split(rotation)` is the least n such that the first n letters are greater than the inverse of
    the rest: the relator read from there becomes the rule  first n letters -> inverse of the rest."""

    def greater(self, left: str, right: str) -> bool:
        """Whether left > right."""

    def split(self, rotation: str) -> int:
        """See above; between 1 and len(rotation)."""


def _codes(rank: Sequence[int]) -> dict[int, int]:
    """Translation of letters to code points in the order of `rank`."""
    table: dict[int, int] = {}
    for place, generator in enumerate(rank):
        table[ord(letter_of(generator))] = 2 * place
        table[ord(letter_of(-generator))] = 2 * place + 1
    return table


class Shortlex:
    """Length first, then the letters as `rank` has them."""

    def __init__(self, rank: Sequence[int]) -> None:
        self._table = _codes(rank)

    def greater(self, left: str, right: str) -> bool:
        """Whether left > right."""
        if len(left) != len(right):
            return len(left) > len(right)
        return left.translate(self._table) > right.translate(self._table)

    def split(self, rotation: str) -> int:
        """Half the length, or one letter more."""
        half, odd = divmod(len(rotation), 2)
        if odd or not self.greater(rotation[:half], inverted(rotation[half:])):
            return half + 1
        return half


class WeightedShortlex:
    """Sum of the weights of the letters first (positive; an inverse weighs what its generator does), then shortlex."""

    def __init__(self, rank: Sequence[int], weights: Mapping[int, int]) -> None:
        self._table = _codes(rank)
        self._weight = {letter_of(s * g): weights[g] for g in rank for s in (1, -1)}

    def greater(self, left: str, right: str) -> bool:
        """Whether left > right."""
        weight = self._weight
        difference = sum([weight[c] for c in left]) - sum([weight[c] for c in right])
        if difference or len(left) != len(right):
            return difference > 0 or (difference == 0 and len(left) > len(right))
        return left.translate(self._table) > right.translate(self._table)

    def split(self, rotation: str) -> int:
        """By the partial sums of the weights; the order of letters decides an exact half."""
        total = sum([self._weight[c] for c in rotation])
        first = 0
        for n, letter in enumerate(rotation, 1):
            first += self._weight[letter]
            if 2 * first > total or (2 * first == total and self.greater(rotation[:n], inverted(rotation[n:]))):
                return n
        return len(rotation)


class RecursivePath:
    """The count of the greatest letter first, then the parts between its occurrences from left to right, each by the letters
    below it."""

    def __init__(self, rank: Sequence[int]) -> None:
        self._table = _codes(rank)

    def greater(self, left: str, right: str) -> bool:
        """Whether left > right."""
        return _above(left.translate(self._table), right.translate(self._table))

    def split(self, rotation: str) -> int:
        """By bisection: once the first part is the greater one it stays so when letters move to it."""
        low, high = 1, len(rotation)
        while low < high:
            middle = (low + high) // 2
            if self.greater(rotation[:middle], inverted(rotation[middle:])):
                high = middle
            else:
                low = middle + 1
        return low


def _above(left: str, right: str) -> bool:
    """left > right in the recursive path ordering of code points; the depth is bounded by the number of different letters."""
    while left != right:
        top = max(left + right)
        counts = left.count(top), right.count(top)
        if counts[0] != counts[1]:
            return counts[0] > counts[1]
        left, right = next((u, v) for u, v in zip(left.split(top), right.split(top), strict=True) if u != v)
    return False
