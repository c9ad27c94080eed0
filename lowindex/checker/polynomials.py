"""Polynomials as lists of integer coefficients, lowest degree first, no zero at the end; the empty list is 0."""

from __future__ import annotations

from math import gcd, isqrt

from .refused import require

Polynomial = list[int]

MOST_STEPS = 20_000_000


class Ring:
    """Z[x]/(modulus) with a monic modulus, or F_p[x]; a counter bounds the work."""

    def __init__(self, modulus: Polynomial | None, prime: int | None) -> None:
        self.modulus = modulus
        self.prime = prime
        self.steps = 0

    def product(self, left: Polynomial, right: Polynomial) -> Polynomial:
        """left · right."""
        if not left or not right:
            return []
        if left == [1] or right == [1]:
            return right if left == [1] else left
        long = max(map(bits, (left, right, self.modulus or [])))
        self.steps += (len(left) * len(right) + len(left) + len(right)) * (1 + long // 200)
        require(self.steps <= MOST_STEPS, f"the arithmetic with polynomials takes more than {MOST_STEPS} steps")
        out = [0] * (len(left) + len(right) - 1)
        for i, x in enumerate(left):
            if x:
                for j, y in enumerate(right, i):
                    out[j] += x * y
        if self.modulus:
            reduce(out, self.modulus)
        return self._trimmed(out)

    def difference(self, left: Polynomial, right: Polynomial) -> Polynomial:
        """left - right."""
        out = left + [0] * (len(right) - len(left))
        for i, y in enumerate(right):
            out[i] -= y
        return self._trimmed(out)

    def _trimmed(self, out: Polynomial) -> Polynomial:
        return trimmed([x % self.prime for x in out] if self.prime else out)


def bits(polynomial: Polynomial) -> int:
    """The length of the longest coefficient."""
    return max(map(int.bit_length, polynomial), default=0)


def trimmed(out: Polynomial) -> Polynomial:
    """The list itself without zeros at the end."""
    while out and not out[-1]:
        out.pop()
    return out


def reduce(out: Polynomial, modulus: Polynomial) -> None:
    """Replace a list by its remainder modulo a monic polynomial."""
    degree = len(modulus) - 1
    while len(out) > degree:
        top = out.pop()
        if top:
            start = len(out) - degree
            for i in range(degree):
                out[start + i] -= top * modulus[i]


def primitive(*parts: Polynomial) -> list[Polynomial]:
    """The polynomials divided by the greatest common divisor of all their coefficients."""
    content = gcd(*(x for part in parts for x in part))
    return [[x // content for x in part] for part in parts] if content > 1 else list(parts)


def coprime(left: Polynomial, right: Polynomial, p: int) -> bool:
    """Whether two polynomials have no common factor of positive degree modulo the prime p; 0 is divisible by everything."""
    left, right = (trimmed([x % p for x in part]) for part in (left, right))
    while right:
        scale = pow(right[-1], -1, p)
        monic = [x * scale % p for x in right]
        reduce(left, monic)
        left, right = right, trimmed([x % p for x in left])
    return len(left) == 1


def is_prime(p: int) -> bool:
    """Whether p is a prime, by trial division."""
    return p >= 2 and all(p % d for d in range(2, isqrt(p) + 1))
