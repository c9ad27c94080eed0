"""Nilpotent groups given by exponent vectors, built up one cyclic extension at a time (FORMAT.md, step 6)."""

from __future__ import annotations

from .refused import Refused, require
from .words import Word

Vector = tuple[int, ...]

MOST_STEPS = 30_000_000


class Nilpotent:
    """Elements a_0^v0 a_1^v1 ...; a_j^orders[j] = powers[j] for finite orders (0: infinite), a_j^(a_i) = conjugates[j, i] for j > i (absent: the
    two commute). powers[j] and conjugates[j, i] / a_j use generators behind j only."""

    def __init__(self, orders: list[int], powers: dict[int, Vector], conjugates: dict[tuple[int, int], Vector]) -> None:
        self.size = len(orders)
        self.orders = orders
        self.one = (0,) * self.size
        self.powers = powers
        self.conjugates = conjugates
        self.moved = [[j for j in range(i + 1, self.size) if (j, i) in conjugates] for i in range(self.size)]
        self.inverses: dict[tuple[int, int], Vector] = {}
        self.steps = 0

    def unit(self, k: int) -> Vector:
        """The vector of a_k."""
        return self.one[:k] + (1,) + self.one[k + 1 :]

    def under(self, j: int, i: int) -> Vector:
        """a_j^(a_i), j > i."""
        return self.conjugates.get((j, i)) or self.unit(j)

    def product(self, left: Vector, right: Vector) -> Vector:
        """left · right."""
        for k in range(self.size):
            if right[k]:
                left = self._times_power(left, k, right[k])
        return left

    def _times_power(self, vector: Vector, k: int, exponent: int) -> Vector:
        """vector · a_k^exponent: the part behind k is conjugated by a_k^exponent."""
        self.steps += 1
        if self.steps > MOST_STEPS:
            raise Refused(f"multiplying in the nilpotent group takes more than {MOST_STEPS} steps")
        behind = self.one[: k + 1] + vector[k + 1 :]
        if any(behind[j] for j in self.moved[k]):
            behind = self._moved_far(behind, k, exponent)
        total = vector[k] + exponent
        if self.orders[k]:
            times, total = divmod(total, self.orders[k])
            if times and k in self.powers:
                behind = self.product(self.power(self.powers[k], times), behind)
        return vector[:k] + (total,) + behind[k + 1 :]

    def _moved_far(self, vector: Vector, k: int, exponent: int) -> Vector:
        """vector^(a_k^exponent) for a vector behind k, by squaring the map a_j -> a_j^(a_k)."""
        images = {j: self.under(j, k) if exponent > 0 else self.inverse_image(j, k) for j in range(k + 1, self.size)}
        times = abs(exponent)
        while True:
            if times & 1:
                vector = self.mapped(vector, images)
            times >>= 1
            if not times:
                return vector
            images = {j: self.mapped(image, images) for j, image in images.items()}

    def mapped(self, vector: Vector, images: dict[int, Vector]) -> Vector:
        """The image of a vector under the endomorphism that takes a_j to images[j]."""
        out = self.one
        for j, exponent in enumerate(vector):
            if exponent:
                out = self.product(out, self.power(images[j], exponent))
        return out

    def inverse_image(self, j: int, k: int) -> Vector:
        """a_j conjugated by the inverse of a_k: from a_j^(a_k) = a_j u follows a_j (u^(1/a_k))^-1."""
        if (j, k) not in self.inverses:
            image = self.under(j, k)
            rest = self.one[: j + 1] + image[j + 1 :]
            images = {i: self.inverse_image(i, k) for i in range(j + 1, self.size) if rest[i]}
            self.inverses[j, k] = self.product(self.unit(j), self.inverted(self.mapped(rest, images)))
        return self.inverses[j, k]

    def inverted(self, vector: Vector) -> Vector:
        """The inverse."""
        out: list[int] = []
        for k in range(self.size):
            exponent = -vector[k] % self.orders[k] if self.orders[k] else -vector[k]
            out.append(exponent)
            if exponent:
                vector = self._times_power(vector, k, exponent)
        return tuple(out)

    def power(self, vector: Vector, exponent: int) -> Vector:
        """vector^exponent."""
        if exponent < 0:
            vector, exponent = self.inverted(vector), -exponent
        out = self.one
        while exponent:
            if exponent & 1:
                out = self.product(out, vector)
            exponent >>= 1
            if exponent:
                vector = self.product(vector, vector)
        return out

    def value(self, word: Word, images: list[Vector], inverses: list[Vector]) -> Vector:
        """The value of a word when symbol s is images[s - 1], its inverse inverses[s - 1]."""
        out = self.one
        for letter in word:
            out = self.product(out, images[letter - 1] if letter > 0 else inverses[-letter - 1])
        return out

    def require_consistent(self) -> None:
        """From the last generator to the first: conjugation by a_i respects the relations behind i, and for a finite order the power of
        a_i is fixed by a_i and acts as that power of the conjugation. So each step is a cyclic extension of a group by a group."""
        for i in range(self.size - 1, -1, -1):
            where = f"the nilpotent presentation is inconsistent at generator {i}"
            images = {j: self.under(j, i) for j in range(i + 1, self.size)}
            for j in range(i + 1, self.size):
                if self.orders[j]:
                    left = self.power(images[j], self.orders[j])
                    require(left == self.mapped(self.powers.get(j, self.one), images), f"{where} (power of {j})")
                for k in range(j + 1, self.size):
                    left = self.product(images[k], images[j])
                    right = self.product(images[j], self.mapped(self.under(k, j), images))
                    require(left == right, f"{where} (conjugate of {k} by {j})")
            if self.orders[i]:
                power = self.powers.get(i, self.one)
                require(self.mapped(power, images) == power, f"{where} (its own power)")
                for j in range(i + 1, self.size):
                    moved = self._moved_far(self.unit(j), i, self.orders[i])
                    require(self.product(self.unit(j), power) == self.product(power, moved), f"{where} (power acting on {j})")


def abelian_invariants(rows: list[list[int]], size: int) -> tuple[int, list[int]]:
    """(rank, torsion d1 | d2 | ...) of Z^size modulo the rows: Smith form by row and column operations."""
    rows = [row[:] for row in rows if any(row)]
    torsion: list[int] = []
    rank = size
    while rows:
        i, j = min(((r, c) for r in range(len(rows)) for c in range(size) if rows[r][c]), key=lambda p: abs(rows[p[0]][p[1]]))
        pivot = rows[i][j]
        for r in range(len(rows)):
            if r != i and rows[r][j]:
                factor = rows[r][j] // pivot
                rows[r] = [x - factor * y for x, y in zip(rows[r], rows[i])]
        for c in range(size):
            if c != j and rows[i][c]:
                factor = rows[i][c] // pivot
                for row in rows:
                    row[c] -= factor * row[j]
        if any(rows[r][j] for r in range(len(rows)) if r != i) or any(rows[i][c] for c in range(size) if c != j):
            continue
        bad = next((row for row in rows if any(x % pivot for x in row)), None)
        if bad is not None:
            rows[i] = [x + y for x, y in zip(rows[i], bad)]
            continue
        rank -= 1
        if abs(pivot) > 1:
            torsion.append(abs(pivot))
        del rows[i]
        rows = [row for row in rows if any(row)]
    return rank, torsion
