"""The fields of affine witnesses: Q, Q[t]/(f), F_p(t), all as quotients of polynomials with integer coefficients (FORMAT.md, "Fields").

Q[t]/(f) with leading coefficient l of f is written in x = l t, which is a root of a monic integer polynomial; Q is Q[t]/(t).
"""

from __future__ import annotations

from typing import Any

from .parse import fields, integer, integers, listing
from .polynomials import Polynomial, Ring, bits, coprime, is_prime, primitive, trimmed
from .refused import require

HUGE = 10**40
LARGEST_PRIME = 10**12
HIGHEST_DEGREE = 60
MOST_BITS = 4_000
WITNESS_PRIME = 2**61 - 1
"""Polynomials over Z whose images modulo this prime have no common factor have none over Q, when one of them is monic."""

Quotient = tuple[Polynomial, Polynomial]


class Field:
    """`ring`: where numerators and denominators are; `element` reads one."""

    def __init__(self, value: Any) -> None:
        kind = value.get("kind") if type(value) is dict else None
        self.lead = 1
        modulus: Polynomial | None = [0, 1]
        self.prime: int | None = None
        if kind == "Q[t]/(f)":
            modulus = self._modulus(fields(value, ("kind", "modulus"), "field")[1])
        elif kind == "F_p(t)":
            self.prime = integer(fields(value, ("kind", "prime"), "field")[1], "field.prime", 2, LARGEST_PRIME)
            require(is_prime(self.prime), f"field.prime: {self.prime} is not a prime")
            modulus = None
        else:
            require(kind == "Q", f"field: unknown kind {str(kind)[:40]!r}")
            fields(value, ("kind",), "field")
        self.kind = str(kind)
        self.modulus = modulus
        self.ring = Ring(modulus, self.prime)

    def _modulus(self, value: Any) -> Polynomial:
        f = self._polynomial(value, "field.modulus", HIGHEST_DEGREE + 1)
        degree = len(f) - 1
        require(degree >= 1 and f[-1] > 0, "field.modulus is constant or has a negative leading coefficient")
        self.lead = f[-1]
        monic = [c * self.lead ** (degree - 1 - i) for i, c in enumerate(f[:-1])] + [1]
        require(bits(monic) <= MOST_BITS, f"field.modulus, made monic, has coefficients of more than {MOST_BITS} bits")
        derivative = [i * c for i, c in enumerate(monic)][1:]
        require(coprime(derivative, monic, WITNESS_PRIME), "field.modulus is not squarefree modulo 2^61 - 1")
        return monic

    def _polynomial(self, value: Any, where: str, length: int) -> Polynomial:
        low, high = (0, self.prime - 1) if self.prime else (-HUGE, HUGE)
        found = integers(value, where, low, high)
        require(len(found) <= length, f"{where} has more than {length} coefficients")
        require(not found or found[-1], f"{where} ends with the coefficient 0")
        return found

    def element(self, value: Any, where: str) -> Quotient:
        """An element of the field: numerator and denominator."""
        above, below = listing(value, where, 2)
        if self.prime:
            bottom = self._polynomial(below, f"the denominator of {where}", HIGHEST_DEGREE + 1)
            require(bottom, f"the denominator of {where} is 0")
            return self._polynomial(above, f"the numerator of {where}", HIGHEST_DEGREE + 1), bottom
        scale = integer(below, f"the denominator of {where}", 1, HUGE)
        if self.kind == "Q":
            return trimmed([integer(above, f"the numerator of {where}", -HUGE, HUGE)]), [scale]
        assert self.modulus
        top = self._polynomial(above, f"the numerator of {where}", len(self.modulus) - 1)
        powers = [self.lead ** (len(top) - i) for i in range(len(top) + 1)]
        top, bottom = primitive([c * n for c, n in zip(top, powers[1:])], [scale * powers[1]] if top else [1])
        return top, bottom

    def is_unit(self, numerator: Polynomial) -> bool:
        """Whether the element is invertible (over Q[t]/(f): in every factor)."""
        return bool(numerator) if self.modulus is None else coprime(numerator, self.modulus, WITNESS_PRIME)

    def is_infinite(self, top: Polynomial, bottom: Polynomial) -> bool:
        """Whether top / bottom, an invertible element, is not a root of unity (over Q[t]/(f): in no factor)."""
        if self.modulus is None:
            left = self.ring.product(top, bottom[-1:])
            return left != self.ring.product(bottom, top[-1:])
        ring = Ring(self.modulus, WITNESS_PRIME)
        orders = _orders(len(self.modulus) - 1)
        power = [1], [1]
        for n in range(1, max(orders) + 1):
            power = ring.product(power[0], top), ring.product(power[1], bottom)
            if n in orders and not coprime(ring.difference(*power), self.modulus, WITNESS_PRIME):
                return False
        return True


def _orders(degree: int) -> set[int]:
    """All n with euler_phi(n) <= degree: the orders that roots of unity can have in a number field of that degree. phi(n)^2 >= n/2."""
    phi = list(range(2 * degree * degree + 1))
    for n in range(2, len(phi)):
        if phi[n] == n:
            for multiple in range(n, len(phi), n):
                phi[multiple] -= phi[multiple] // n
    return {n for n in range(1, len(phi)) if phi[n] <= degree}
