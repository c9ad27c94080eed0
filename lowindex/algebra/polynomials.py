"""Polynomials as text."""

from __future__ import annotations

from collections.abc import Sequence


def polynomial_text(coefficients: Sequence[int], variable: str = "t", *, ascending: bool = False, power: str = "^{}") -> str:
    """A polynomial from its coefficients, degree 0 first; terms by falling degree unless `ascending`; `power` writes an exponent.

    >>> polynomial_text([-1, 0, 2]), polynomial_text([1, -1], "z", ascending=True), polynomial_text([])
    ('2t^2 - 1', '1 - z', '0')
    """
    terms = ""
    degrees = range(len(coefficients))
    for degree in degrees if ascending else reversed(degrees):
        c = coefficients[degree]
        if c:
            size = "" if abs(c) == 1 and degree else str(abs(c))
            monomial = "" if not degree else variable if degree == 1 else variable + power.format(degree)
            terms += f" {'-' if c < 0 else '+'} {size}{monomial}"
    return "-" + terms[3:] if terms.startswith(" -") else terms[3:] or "0"
