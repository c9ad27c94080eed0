"""Nilpotent groups given by exponent vectors, built up one cyclic extension at a time (FORMAT.md, step 6).

A function calls itself only for generators strictly behind the one it works on: at most five calls a generator of the chain.
"""

from __future__ import annotations

from collections.abc import Sequence

from .refused import require
from .words import Word

Vector = list[int]
Syllables = tuple[tuple[int, int], ...]

MOST_STEPS = 10_000_000


class Nilpotent:
    """Elements a_0^v0 a_1^v1 ..., with a_j^orders[j] = powers[j] for finite orders (0: infinite) and a_j^(a_i) = conjugates[j, i] for
    j > i; what is absent is trivial (power 1, commuting). Powers of a_j use generators behind j only, a conjugate is a_j times such."""

    def __init__(
        self, orders: list[int], powers: dict[int, Syllables], conjugates: dict[tuple[int, int], Syllables]
    ) -> None:
        self.size = len(orders)
        self.orders = orders
        self.powers = {j: self.vector(power) for j, power in powers.items()}
        self.conjugates = {pair: self.vector(image) for pair, image in conjugates.items()}
        self.moved = [[j for j in range(i + 1, self.size) if (j, i) in conjugates] for i in range(self.size)]
        self.maps: dict[tuple[int, bool], list[list[Vector]]] = {}
        self.steps = 0

    def vector(self, syllables: Syllables) -> Vector:
        """The dense vector."""
        entries = [0] * self.size
        for k, exponent in syllables:
            entries[k] = exponent
        return entries

    def syllables(self, vector: Vector) -> Syllables:
        """The sparse form of a vector."""
        return tuple((k, exponent) for k, exponent in enumerate(vector) if exponent)

    def unit(self, k: int) -> Vector:
        """The vector of a_k."""
        return self.vector(((k, 1),))

    def product(self, left: Vector, right: Vector) -> Vector:
        """left · right."""
        out = left[:]
        for k, exponent in enumerate(right):
            if exponent:
                self.append(out, k, exponent)
        return out

    def append(self, vector: Vector, k: int, exponent: int) -> None:
        """Multiply a vector by a_k^exponent: the part behind k is conjugated by it, then the exponents of a_k are added."""
        self.steps += 1
        require(self.steps <= MOST_STEPS, f"multiplying in the nilpotent group takes more than {MOST_STEPS} steps")
        for j in self.moved[k]:
            if vector[j]:
                vector[k + 1 :] = self._conjugated(vector, k, exponent)[k + 1 :]
                break
        total = vector[k] + exponent
        order = self.orders[k]
        if order and not 0 <= total < order:
            times, total = divmod(total, order)
            if k in self.powers:
                behind = [0] * (k + 1) + vector[k + 1 :]
                vector[k + 1 :] = self.product(self.power(self.powers[k], times), behind)[k + 1 :]
        vector[k] = total

    def _conjugated(self, vector: Vector, k: int, exponent: int) -> Vector:
        """The part of a vector behind k, conjugated by a_k^exponent: by the maps of a_k, a_k^2, a_k^4, ... or their inverses."""
        maps = self.maps.setdefault((k, exponent > 0), [])
        if not maps:
            images = [self.conjugates.get((j, k)) or self.unit(j) for j in range(self.size)]
            maps.append(images if exponent > 0 else self._inverse_map(k, images))
        vector = [0] * (k + 1) + vector[k + 1 :]
        times = abs(exponent)
        for bit in range(times.bit_length()):
            if bit == len(maps):
                last = maps[-1]
                maps.append([self.mapped(image, last) if j > k else image for j, image in enumerate(last)])
            if times >> bit & 1:
                vector = self.mapped(vector, maps[bit])
        return vector

    def _inverse_map(self, k: int, images: Sequence[Vector]) -> list[Vector]:
        """From the last generator on: a_j -> a_j u has the inverse a_j -> a_j (inverse map of u)^-1, u being behind j."""
        found = [self.unit(j) for j in range(self.size)]
        for j in range(self.size - 1, k, -1):
            rest = [0] * (j + 1) + images[j][j + 1 :]
            found[j] = self.product(found[j], self.inverted(self.mapped(rest, found)))
        return found

    def mapped(self, vector: Vector, images: Sequence[Vector]) -> Vector:
        """The image of a vector under the homomorphism that takes a_j to images[j]."""
        out = [0] * self.size
        for j, exponent in enumerate(vector):
            if exponent:
                out = self.product(out, images[j] if exponent == 1 else self.power(images[j], exponent))
        return out

    def inverted(self, vector: Vector) -> Vector:
        """The inverse: clear the vector from the left by multiplying on the right."""
        out: list[int] = []
        rest = vector[:]
        for k in range(self.size):
            out.append(-rest[k] % self.orders[k] if self.orders[k] else -rest[k])
            if out[k]:
                self.append(rest, k, out[k])
        return out

    def power(self, vector: Vector, exponent: int) -> Vector:
        """vector^exponent."""
        if exponent < 0:
            vector, exponent = self.inverted(vector), -exponent
        out = [0] * self.size
        while exponent:
            if exponent & 1:
                out = self.product(out, vector)
            exponent >>= 1
            if exponent:
                vector = self.product(vector, vector)
        return out

    def value(self, word: Word, images: Sequence[Syllables], inverses: Sequence[Syllables]) -> Vector:
        """The value of a word when symbol s is images[s - 1], its inverse inverses[s - 1]."""
        out = [0] * self.size
        for letter in word:
            for k, exponent in images[letter - 1] if letter > 0 else inverses[-letter - 1]:
                self.append(out, k, exponent)
        return out

    def require_consistent(self) -> None:
        """From the last generator to the first: conjugation by a_i respects the relations behind i, and for a finite order the power of
        a_i is fixed by a_i and acts as that power of the conjugation. So each step is a cyclic extension of a group by a group."""
        for i in range(self.size - 1, -1, -1):
            where = f"the nilpotent presentation is inconsistent at generator {i}"
            images = [self.conjugates.get((j, i)) or self.unit(j) for j in range(self.size)]
            for j in range(i + 1, self.size):
                if self.orders[j]:
                    power = self.powers.get(j, [0] * self.size)
                    same = self.power(images[j], self.orders[j]) == self.mapped(power, images)
                    require(same, f"{where} (power of {j})")
                for k in range(j + 1, self.size):
                    moved = self.conjugates.get((k, j)) or self.unit(k)
                    left = self.product(images[k], images[j])
                    same = left == self.product(images[j], self.mapped(moved, images))
                    require(same, f"{where} (conjugate of {k} by {j})")
            if self.orders[i]:
                power = self.powers.get(i, [0] * self.size)
                require(self.mapped(power, images) == power, f"{where} (its own power)")
                for j in range(i + 1, self.size):
                    moved = self._conjugated(self.unit(j), i, self.orders[i])
                    same = self.product(self.unit(j), power) == self.product(power, moved)
                    require(same, f"{where} (power acting on {j})")
