"""Isolated characters: multipliers in several variables t_1, ..., t_b, all of them in one number field.

Z^3 x| Z^2 with two independent units of a cubic field is not virtually nilpotent, but no map onto Z shows it. The characters at which
the Fox Jacobian J has more solutions than the principal ones form a variety; a Groebner basis in lexicographic order, with one more
variable h = t_1 + 3 t_2 + 5 t_3 ... that tells its points apart, gives the isolated ones as t_i = g_i(h), f(h) = 0. Where the variety
has dimension 1, its points with some t_i = 2 are taken. What is found here is only proposed; the null space of J decides.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from flint import Ordering, fmpq_poly, fmpz_mpoly_ctx, fmpz_mpoly_vec, fmpz_poly

from lowindex.algebra import fox_terms
from lowindex.budget import Budget
from lowindex.obstructions.character import Character
from lowindex.obstructions.fields import NumberField, Rationals
from lowindex.words import Word

Polynomial = Any
Height = tuple[int, ...]

LIMITS = 60, 80, 400
"""Of a Groebner basis: polynomials, terms of one, bits of a coefficient."""

COST = 1_500
"""Budget charged for one system: its Groebner bases take about a millisecond within these limits."""

MOST_GENERATORS = 8
MOST_VARIABLES = 4
MOST_TERMS = 300
HIGHEST_DEGREE = 24


def isolated_characters(rank: int, relators: Sequence[Word], heights: Sequence[Height], *, budget: Budget) -> Iterator[Character]:
    """Candidates of characters in 2 to 4 variables. `heights`: the image of every generator in Z^b."""
    variables = len(heights[0]) if heights else 0
    if not 2 <= variables <= MOST_VARIABLES or rank > MOST_GENERATORS:
        return
    if sum(len(fox_terms(word, heights)) for word in relators) > MOST_TERMS:
        return
    anchors = [k for k in range(rank) if any(heights[k])]
    for special in (None, *range(variables)):
        for anchor in anchors[:variables]:
            if budget.exhausted:
                return
            budget.spend(COST)
            system = _System(rank, relators, heights, anchor)
            for modulus, values in system.points(special):
                if modulus.degree() == 1:
                    yield Character(Rationals(), [value[0] for value in values], heights)
                else:
                    yield Character(NumberField(modulus), values, heights)


class _System:
    """The equations J v = 0, v[anchor] = 0, a random form in v = 1, the anchor's multiplier not 1, all t_i invertible."""

    def __init__(self, rank: int, relators: Sequence[Word], heights: Sequence[Height], anchor: int) -> None:
        self.count = len(heights[0])
        others = [k for k in range(rank) if k != anchor]
        names = ["y", *(f"v{k}" for k in others), *(f"t{i}" for i in range(self.count)), "h"]
        self.context = fmpz_mpoly_ctx.get(tuple(names), Ordering.lex)
        gens = dict(zip(names, self.context.gens(), strict=True))
        self.t = [gens[f"t{i}"] for i in range(self.count)]
        self.h = gens["h"]
        zero = self.context.constant(0)
        self.equations = []
        for word in relators:
            terms = {key: value for key, value in fox_terms(word, heights).items() if key[0] != anchor}
            lowest = [min((height[i] for _, height in terms), default=0) for i in range(self.count)]
            row = zero
            for (k, height), value in terms.items():
                row = row + value * gens[f"v{k}"] * self._monomial([x - y for x, y in zip(height, lowest, strict=True)])
            self.equations.append(row)
        up, down = ([max(0, sign * x) for x in heights[anchor]] for sign in (1, -1))
        unit = (self._monomial(up) - self._monomial(down)) * self._monomial([1] * self.count)
        self.equations.append(gens["y"] * unit - 1)
        self.equations.append(sum(((3 * i + 1) * gens[f"v{k}"] for i, k in enumerate(others)), zero) - 1)
        self.equations.append(self.h - sum(((2 * i + 1) * t for i, t in enumerate(self.t)), zero))

    def _monomial(self, exponents: Sequence[int]) -> Polynomial:
        product = self.context.constant(1)
        for t, exponent in zip(self.t, exponents, strict=True):
            product = product * t**exponent
        return product

    def points(self, special: int | None) -> Iterator[tuple[fmpz_poly, list[fmpq_poly]]]:
        """(f, [g_1, ..., g_b]) of the isolated points, those with t_special = 2 if asked."""
        extra = [] if special is None else [self.t[special] - 2]
        basis = self._basis([*self.equations, *extra])
        last = next((p for p in basis or () if self._only(p, []) and p.degrees()[-1]), None)
        if basis is None or last is None:
            return
        for factor, _ in self._in_h(last).factor()[1]:
            if 1 <= factor.degree() <= HIGHEST_DEGREE and factor[0]:
                values = self._values(basis, factor)
                if values is not None:
                    yield (factor if factor[factor.degree()] > 0 else -factor), values

    def _values(self, basis: list[Polynomial], factor: fmpz_poly) -> list[fmpq_poly] | None:
        """t_i as polynomials in h over Q[h]/(factor), the last one first. As h tells the points apart, its polynomial over the later ones,
        c t^k + c' t^(k-1) + ..., has one root, and t = -c' / (k c)."""
        number = NumberField(factor)
        known = [*basis, sum((int(c) * self.h**i for i, c in enumerate(factor.coeffs())), self.context.constant(0))]
        values: list[fmpq_poly] = []
        for i in reversed(range(self.count)):
            found = self._basis(known)
            candidates = [p for p in found or () if self._only(p, [i]) and self._lead_is_power(p, i)]
            if not candidates:
                return None
            p = min(candidates, key=lambda q: q.degrees()[self._place(i)])
            degree = p.degrees()[self._place(i)]
            by_power = self._by_power(p, i)
            lead, next_one = by_power[degree], by_power.get(degree - 1, fmpq_poly([0]))
            value = -next_one / (degree * lead[0]) % number.modulus
            values.insert(0, value)
            scale = int(value.denom())
            whole = [int(c) for c in (value * scale).numer().coeffs()]
            known.append(scale * self.t[i] - sum((c * self.h**k for k, c in enumerate(whole)), self.context.constant(0)))
        return values

    def _basis(self, equations: list[Polynomial]) -> list[Polynomial] | None:
        basis: Any
        basis, complete = fmpz_mpoly_vec(equations, self.context).buchberger_naive(limits=LIMITS)
        return list(basis.autoreduction()) if complete else None

    def _place(self, i: int) -> int:
        return self.context.nvars() - 1 - self.count + i

    def _only(self, p: Polynomial, variables: list[int]) -> bool:
        """Whether h and these t_i are all that occurs."""
        allowed = {self._place(i) for i in variables} | {self.context.nvars() - 1}
        return all(not degree or k in allowed for k, degree in enumerate(p.degrees()))

    def _lead_is_power(self, p: Polynomial, i: int) -> bool:
        degrees = p.monoms()[0]
        return bool(degrees[self._place(i)] and not degrees[-1])

    def _in_h(self, p: Polynomial) -> fmpz_poly:
        coefficients = [0] * (p.degrees()[-1] + 1)
        for exponents, value in p.terms():
            coefficients[exponents[-1]] += int(value)
        return fmpz_poly(coefficients)

    def _by_power(self, p: Polynomial, i: int) -> dict[int, fmpq_poly]:
        """The coefficients of the powers of t_i, as polynomials in h."""
        parts: dict[int, fmpq_poly] = {}
        for exponents, value in p.terms():
            power = exponents[self._place(i)]
            parts[power] = parts.get(power, fmpq_poly([0])) + fmpq_poly([0] * exponents[-1] + [int(value)])
        return parts
