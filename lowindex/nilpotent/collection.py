"""Nilpotent groups by polycyclic presentations, and collection in them.

Generators a_0, a_1, ... (numbered from 0) with weights; every element is a_0^v0 a_1^v1 ... for exactly one exponent vector v when
the presentation is consistent (0 <= v_k < order of a_k where that is finite). Products are collected from the left: a power of
a_k moves past the later generators by applying the automorphism "conjugation by a_k" to them, so large exponents cost
logarithmically many steps. M. R. Vaughan-Lee, Collection from the left, J. Symbolic Computation 9 (1990); C. C. Sims, Computation
with Finitely Presented Groups (1994), ch. 9.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import TypeAlias

from lowindex.words import Word

Vector: TypeAlias = tuple[int, ...]
Definition: TypeAlias = tuple[str, int] | tuple[str, int, int]


MOST_STEPS = 1_000_000
"""Collection gives up (OverflowError) when one group has needed more multiplications by a power of a generator."""


@dataclass(frozen=True)
class NilpotentPresentation:
    """`weights`: nondecreasing from 1. `orders`: 0 for infinite, else >= 2. `powers[j]`: the vector of a_j^orders[j]. `conjugates[j, i]`,
    j > i: the vector of a_j^(a_i) where the two do not commute. `definitions[k]`: ("generator", g) when a_k is the image of input
    generator g (from 1), ("commutator", j, i) when a_k = [a_j, a_i]. `unlimited`: collection never gives up.
    """

    weights: Vector
    orders: Vector
    powers: Mapping[int, Vector]
    conjugates: Mapping[tuple[int, int], Vector]
    definitions: tuple[Definition, ...] = ()
    unlimited: bool = False
    _images: dict[tuple[int, int, int], Vector] = field(default_factory=dict, compare=False, repr=False)
    _moves: dict[int, frozenset[int]] = field(default_factory=dict, compare=False, repr=False)
    _steps: list[int] = field(default_factory=lambda: [0], compare=False, repr=False)

    @property
    def steps(self) -> int:
        """Multiplications by powers of generators so far: what collection has cost."""
        return self._steps[0]

    @property
    def size(self) -> int:
        """Number of generators."""
        return len(self.weights)

    @property
    def identity(self) -> Vector:
        """The vector of 1."""
        return (0,) * len(self.weights)

    def generator(self, k: int, exponent: int = 1) -> Vector:
        """The vector of a_k^exponent, 0 <= exponent < order when that is finite."""
        return (0,) * k + (exponent,) + (0,) * (len(self.weights) - k - 1)

    def conjugate_image(self, j: int, i: int) -> Vector:
        """The vector of a_j^(a_i), j > i."""
        return self.conjugates.get((j, i)) or self.generator(j)

    def power_image(self, j: int) -> Vector:
        """The vector of a_j^orders[j], for finite orders."""
        return self.powers.get(j) or self.identity

    def multiply(self, left: Vector, right: Vector) -> Vector:
        """The product of two elements."""
        for k, exponent in enumerate(right):
            if exponent:
                left = self._append(left, k, exponent)
        return left

    def _append(self, vector: Vector, k: int, exponent: int) -> Vector:
        """vector · a_k^exponent."""
        self._steps[0] += 1
        if self._steps[0] > MOST_STEPS and not self.unlimited:
            raise OverflowError(f"collection needed more than {MOST_STEPS} steps")
        moved = self._moved_by(k)
        tail = vector[k + 1 :]
        if moved and any(vector[j] for j in moved):
            tail = self.conjugate_by(vector[: k + 1] + tail, k, exponent, start=k + 1)[k + 1 :]
        total, order = vector[k] + exponent, self.orders[k]
        if order and not 0 <= total < order:
            times, total = divmod(total, order)
            if power := self.powers.get(k):
                start = (0,) * (k + 1)
                tail = self.multiply(self.power(power, times), start + tail)[k + 1 :]
        return vector[:k] + (total,) + tail

    def _moved_by(self, k: int) -> frozenset[int]:
        if k not in self._moves:
            self._moves[k] = frozenset(j for j, i in self.conjugates if i == k)
        return self._moves[k]

    def conjugate_by(self, vector: Vector, k: int, exponent: int, *, start: int) -> Vector:
        """a_k^-exponent · (the part of vector from `start` > k on) · a_k^exponent."""
        result = self.identity
        moved = self._moved_by(k)
        for j in range(start, len(vector)):
            if not vector[j]:
                continue
            if j in moved:
                result = self.multiply(result, self.power(self.image(j, k, exponent), vector[j]))
            else:
                result = self._append(result, j, vector[j])
        return result

    def image(self, j: int, k: int, exponent: int) -> Vector:
        """a_j conjugated by a_k^exponent, j > k."""
        if exponent == 1:
            return self.conjugate_image(j, k)
        key = j, k, exponent
        if key not in self._images:
            if exponent == -1:
                # a_j^(a_k) = a_j u gives a_j = a_j^(1/a_k) u^(1/a_k)
                rest = self.conjugate_image(j, k)
                rest = (0,) * (j + 1) + rest[j + 1 :]
                moved = self.conjugate_by(rest, k, -1, start=j + 1)
                value = self.multiply(self.generator(j), self.inverse(moved))
            else:
                half = exponent // 2 if exponent > 0 else -(-exponent // 2)
                value = self.conjugate_by(self.image(j, k, exponent - half), k, half, start=k + 1) if half else self.generator(j)
            self._images[key] = value
        return self._images[key]

    def inverse(self, vector: Vector) -> Vector:
        """The inverse element."""
        exponents = []
        for k in range(len(vector)):
            order = self.orders[k]
            exponent = -vector[k] % order if order else -vector[k]
            exponents.append(exponent)
            if exponent:
                vector = self._append(vector, k, exponent)
        return tuple(exponents)

    def power(self, vector: Vector, exponent: int) -> Vector:
        """vector^exponent, by repeated squaring."""
        if exponent < 0:
            vector, exponent = self.inverse(vector), -exponent
        result = self.identity
        while exponent:
            if exponent & 1:
                result = self.multiply(result, vector)
            exponent >>= 1
            if exponent:
                vector = self.multiply(vector, vector)
        return result

    def commutator(self, left: Vector, right: Vector) -> Vector:
        """[left, right] = left^-1 right^-1 left right."""
        return self.multiply(self.inverse(self.multiply(right, left)), self.multiply(left, right))

    def evaluate(self, word: Word, images: Sequence[Vector]) -> Vector:
        """The element that a word takes when generator g has the value images[g - 1]."""
        inverses: dict[int, Vector] = {}
        result = self.identity
        for letter in word:
            if letter > 0:
                result = self.multiply(result, images[letter - 1])
            else:
                if letter not in inverses:
                    inverses[letter] = self.inverse(images[-letter - 1])
                result = self.multiply(result, inverses[letter])
        return result
