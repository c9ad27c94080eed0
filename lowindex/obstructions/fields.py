"""The fields in which affine representations are looked for: Q, Q[t]/(f) and F_p(t), with exact arithmetic by python-flint.

Every field has a distinguished element t; elements are written for witnesses as the checker's grammar has them.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, Protocol, TypeAlias

from flint import fmpq, fmpq_poly, fmpz_poly, nmod_poly

Element: TypeAlias = Any


class Field(Protocol):
    """What linear algebra, words and witnesses need. `kind`: the name of the field in a witness."""

    kind: str
    zero: Element
    one: Element
    t: Element

    def add(self, left: Element, right: Element) -> Element:
        """left + right."""

    def multiply(self, left: Element, right: Element) -> Element:
        """left · right."""

    def negative(self, element: Element) -> Element:
        """-element."""

    def times(self, number: int, element: Element) -> Element:
        """An integer multiple."""

    def inverse(self, element: Element) -> Element:
        """1 / element."""

    def cleared(self, vector: Sequence[Element]) -> list[Element]:
        """A multiple of the vector without denominators."""

    def infinite_order(self, element: Element) -> bool:
        """Whether an element that is not 0 is no root of unity."""

    def written(self, element: Element) -> tuple[Any, Any]:
        """The element for the witness."""


class Rationals:
    """Q with a rational t, 2 unless told otherwise."""

    kind = "Q"

    def __init__(self, t: fmpq | int = 2) -> None:
        self.zero, self.one, self.t = fmpq(0), fmpq(1), fmpq(t)

    def add(self, left: Element, right: Element) -> Element:
        """left + right."""
        return left + right

    def multiply(self, left: Element, right: Element) -> Element:
        """left · right."""
        return left * right

    def negative(self, element: Element) -> Element:
        """-element."""
        return -element

    def times(self, number: int, element: Element) -> Element:
        """An integer multiple."""
        return element * number

    def inverse(self, element: Element) -> Element:
        """1 / element."""
        return 1 / element

    def cleared(self, vector: Sequence[Element]) -> list[Element]:
        """A multiple of the vector with integer entries."""
        scale = fmpq(1)
        for x in vector:
            scale *= (x * scale).q
        return [x * scale for x in vector]

    def infinite_order(self, element: Element) -> bool:
        """Whether it is neither 1 nor -1."""
        return bool(abs(element) != 1)

    def written(self, element: Element) -> tuple[int, int]:
        """(numerator, denominator)."""
        return int(element.p), int(element.q)


class NumberField:
    """Q[t]/(f), f an irreducible integer polynomial with f(0) != 0."""

    kind = "Q[t]/(f)"

    def __init__(self, modulus: fmpz_poly) -> None:
        self.modulus = fmpq_poly(modulus)
        self.zero, self.one = fmpq_poly([0]), fmpq_poly([1])
        self.t = fmpq_poly([0, 1]) % self.modulus

    def add(self, left: Element, right: Element) -> Element:
        """left + right."""
        return left + right

    def multiply(self, left: Element, right: Element) -> Element:
        """left · right."""
        return left * right % self.modulus

    def negative(self, element: Element) -> Element:
        """-element."""
        return -element

    def times(self, number: int, element: Element) -> Element:
        """An integer multiple."""
        return element * number

    def inverse(self, element: Element) -> Element:
        """1 / element, by the extended Euclidean algorithm."""
        unit, factor, _ = element.xgcd(self.modulus)
        return factor / unit[0]

    def cleared(self, vector: Sequence[Element]) -> list[Element]:
        """A multiple of the vector with integer coefficients."""
        scale = 1
        for x in vector:
            scale *= int((x * scale).denom())
        return [x * scale for x in vector]

    def infinite_order(self, element: Element) -> bool:
        """Whether no power is 1: a root of unity of order n has euler_phi(n) <= degree, and n <= 2 euler_phi(n)^2."""
        degree = self.modulus.degree()
        power = self.one
        for _ in range(2 * degree * degree):
            power = self.multiply(power, element)
            if power == self.one:
                return False
        return True

    def written(self, element: Element) -> tuple[tuple[int, ...], int]:
        """(coefficients, denominator)."""
        return tuple(int(c) for c in element.numer().coeffs()), int(element.denom())


class RationalFunctions:
    """F_p(t); elements are pairs (numerator, denominator) in lowest terms."""

    kind = "F_p(t)"

    def __init__(self, prime: int) -> None:
        self.prime = prime
        self.zero, self.one, self.t = ((nmod_poly(c, prime), nmod_poly([1], prime)) for c in ([0], [1], [0, 1]))

    def _lowest(self, above: nmod_poly, below: nmod_poly) -> Element:
        if not above:
            return self.zero
        common = above.gcd(below)
        above, below = above // common, below // common
        lead = nmod_poly([int(below[below.degree()])], self.prime)
        inverse = nmod_poly([pow(int(lead[0]), -1, self.prime)], self.prime)
        return above * inverse, below * inverse

    def add(self, left: Element, right: Element) -> Element:
        """left + right."""
        return self._lowest(left[0] * right[1] + right[0] * left[1], left[1] * right[1])

    def multiply(self, left: Element, right: Element) -> Element:
        """left · right."""
        return self._lowest(left[0] * right[0], left[1] * right[1])

    def negative(self, element: Element) -> Element:
        """-element."""
        return -element[0], element[1]

    def times(self, number: int, element: Element) -> Element:
        """An integer multiple."""
        return (element[0] * number, element[1]) if number % self.prime else self.zero

    def inverse(self, element: Element) -> Element:
        """1 / element."""
        return self._lowest(element[1], element[0])

    def cleared(self, vector: Sequence[Element]) -> list[Element]:
        """A multiple of the vector by polynomials only."""
        scale = self.one
        for x in vector:
            below = self.multiply(x, scale)[1]
            scale = self.multiply(scale, (below, self.one[0]))
        return [self.multiply(x, scale) for x in vector]

    def infinite_order(self, element: Element) -> bool:
        """Whether it is not a constant."""
        return bool(max(part.degree() for part in element) > 0)

    def written(self, element: Element) -> tuple[tuple[int, ...], tuple[int, ...]]:
        """(coefficients of the numerator, of the denominator)."""
        return tuple(int(c) for c in element[0].coeffs()), tuple(int(c) for c in element[1].coeffs())


def null_space(rows: list[list[Element]], size: int, field: Field) -> list[list[Element]]:
    """A basis of the column vectors v of length `size` with rows · v = 0."""
    reduced: dict[int, list[Element]] = {}
    for row in rows:
        work = list(row)
        for pivot, other in reduced.items():
            if work[pivot] != field.zero:
                work = _minus(work, work[pivot], other, field)
        lead = next((j for j, x in enumerate(work) if x != field.zero), None)
        if lead is None:
            continue
        scale = field.inverse(work[lead])
        work = [field.multiply(x, scale) for x in work]
        for pivot, other in reduced.items():
            if other[lead] != field.zero:
                reduced[pivot] = _minus(other, other[lead], work, field)
        reduced[lead] = work
    basis = []
    for free in range(size):
        if free not in reduced:
            vector = [field.zero] * size
            vector[free] = field.one
            for pivot, row in reduced.items():
                vector[pivot] = field.negative(row[free])
            basis.append(vector)
    return basis


def _minus(row: list[Element], times: Element, other: list[Element], field: Field) -> list[Element]:
    factor = field.negative(times)
    return [field.add(x, field.multiply(factor, y)) for x, y in zip(row, other, strict=True)]
