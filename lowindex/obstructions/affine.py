"""Affine obstructions: H acts on a field by x -> m x + v with a multiplier of infinite order and a translation.

Take a character m of H. The translations v are the solutions of J v = 0, J the Fox Jacobian at m; the principal ones (m(s) - 1) are
useless, and another one makes rho(s) = [[m, v], [0, 1]] a group in which every subgroup of finite index has a translation w and a
multiplier m of infinite order, so that iterated commutators w (m^k - 1)^c never vanish: H is not virtually nilpotent (J. Milnor, J. Diff.
Geom. 2 (1968) 447-449; J. A. Wolf, same volume, 421-446). For a map phi onto Z and m = t^phi another solution exists

    over Q with t = 2       when J has rank < n - 1 over Q(t),
    over Q or Q[t]/(f)      for an irreducible factor f of the Alexander polynomial, neither t nor cyclotomic,
    over F_p(t)             for a prime p that divides its content;

the isolated characters of isolated.py are tried after these.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from flint import fmpq, fmpz_poly

from lowindex.algebra import Abelianization
from lowindex.budget import Budget
from lowindex.obstructions.alexander import alexander_polynomial, generic_rank
from lowindex.obstructions.character import Character
from lowindex.obstructions.fields import Element, NumberField, RationalFunctions, Rationals, null_space
from lowindex.obstructions.isolated import isolated_characters
from lowindex.obstructions.maps import heights, maps_to_z
from lowindex.words import Word, inverse

MOST_GENERATORS = 24
MOST_POLYNOMIALS = 40
"""Maps onto Z whose Alexander polynomial is computed."""

HIGHEST_DEGREE = 60
"""The checker's bound on the degree of a modulus."""

LARGEST_CONTENT_PRIME = 10_000


@dataclass(frozen=True)
class AffineObstruction:
    """`kind`: "Q", "Q[t]/(f)" or "F_p(t)"; `modulus`: coefficients of f; `prime`: p. Multipliers and translations of the Schreier
    generators as the witness writes them; `dilation` and `translation` are words in Schreier generators."""

    kind: str
    modulus: tuple[int, ...]
    prime: int
    multipliers: tuple[tuple[object, object], ...]
    translations: tuple[tuple[object, object], ...]
    dilation: Word
    translation: Word


def affine_obstructions(
    rank: int, relators: Sequence[Word], homology: Abelianization, images: Sequence[Word], *, budget: Budget
) -> Iterator[AffineObstruction]:
    """The affine obstructions found of the group with `rank` generators. `images`: the Schreier generators as words in the generators."""
    if not homology.betti or rank > MOST_GENERATORS or rank < 2:
        return
    work = 20 * (sum(map(len, relators)) + rank * rank * len(relators))
    for character in _characters(rank, relators, homology, budget):
        budget.spend(work)
        found = _represented(relators, character, images)
        if found is not None:
            yield found
        if budget.exhausted:
            return


def _characters(rank: int, relators: Sequence[Word], homology: Abelianization, budget: Budget) -> Iterator[Character]:
    """Characters at which a solution beside the principal ones may exist, the simplest fields first."""
    above = heights(homology)
    look = 50 + 2 * sum(map(len, relators)) + rank * len(relators)
    search = budget.part(budget.left // 2)
    maps: list[list[int]] = []
    for functional in maps_to_z(rank, relators, homology):
        phi = [sum(c * x for c, x in zip(functional, height, strict=True)) for height in above]
        search.spend(look)
        if generic_rank(rank, relators, phi) < rank - 1:
            field = Rationals()
            yield Character(field, [field.t], [(n,) for n in phi])
        else:
            maps.append(phi)
        if search.exhausted:
            break
    for phi in maps[:MOST_POLYNOMIALS]:
        if budget.exhausted:
            return
        budget.spend(look)
        delta = alexander_polynomial(rank, relators, phi, budget=budget)
        for other in _fields_of(delta) if delta else ():
            yield Character(other, [other.t], [(n,) for n in phi])
    yield from isolated_characters(rank, relators, above, budget=budget)


def _fields_of(delta: fmpz_poly) -> Iterator[Rationals | NumberField | RationalFunctions]:
    """The fields that a polynomial other than 0 names."""
    content, factors = delta.factor()
    for factor, _ in sorted(factors, key=lambda item: item[0].degree()):
        if 1 <= factor.degree() <= HIGHEST_DEGREE and factor[0] and not is_cyclotomic(factor):
            if factor.degree() == 1:
                yield Rationals(fmpq(-factor[0], factor[1]))
            else:
                yield NumberField(factor if factor[factor.degree()] > 0 else -factor)
    left = abs(int(content))
    for p in range(2, LARGEST_CONTENT_PRIME):
        if left % p == 0:
            yield RationalFunctions(p)
            while left % p == 0:
                left //= p
        if left == 1:
            return


def is_cyclotomic(factor: fmpz_poly) -> bool:
    """Whether an irreducible polynomial is cyclotomic, up to sign."""
    if abs(int(factor[factor.degree()])) != 1 or abs(int(factor[0])) != 1:
        return False
    field = NumberField(factor)
    return not field.infinite_order(field.t)


def _represented(relators: Sequence[Word], character: Character, images: Sequence[Word]) -> AffineObstruction | None:
    """The representation with this character, when there is a solution beside the principal ones."""
    field = character.field
    rows = [character.derivatives(word) for word in relators]
    solutions = null_space(rows, len(character.heights), field)
    if len(solutions) < 2:
        return None
    principal = [field.add(character.at(height), field.negative(field.one)) for height in character.heights]
    anchor = next((k for k, x in enumerate(principal) if x != field.zero), None)
    if anchor is None:
        return None
    for solution in solutions:
        # subtract a principal solution so that the anchor does not translate
        factor = field.negative(field.multiply(solution[anchor], field.inverse(principal[anchor])))
        moved = [field.add(x, field.multiply(factor, y)) for x, y in zip(solution, principal, strict=True)]
        if any(x != field.zero for x in moved):
            return _on_generators(character, field.cleared(moved), images)
    return None


def _on_generators(character: Character, translations: list[Element], images: Sequence[Word]) -> AffineObstruction | None:
    """Multipliers and translations of the Schreier generators, and the two words."""
    field = character.field
    action = [character.action(word, translations) for word in images]
    multipliers = [character.at(height) for height, _ in action]
    values = [value for _, value in action]
    order = sorted(range(len(action)), key=lambda s: (sum(map(abs, action[s][0])), s))
    dilation = next((s + 1 for s in order if any(action[s][0]) and field.infinite_order(multipliers[s])), 0)
    translation = _translation(multipliers, values, dilation, character) if dilation else ()
    if not translation:
        return None
    return AffineObstruction(
        kind=field.kind,
        modulus=tuple(int(c) for c in field.modulus.numer().coeffs()) if isinstance(field, NumberField) else (),
        prime=field.prime if isinstance(field, RationalFunctions) else 0,
        multipliers=tuple(map(field.written, multipliers)),
        translations=tuple(map(field.written, values)),
        dilation=(dilation,),
        translation=translation,
    )


def _translation(multipliers: Sequence[Element], values: Sequence[Element], dilation: int, character: Character) -> Word:
    """A Schreier generator that is a translation, else the commutator of one with the dilation."""
    field = character.field
    for s, (multiplier, value) in enumerate(zip(multipliers, values, strict=True), 1):
        if multiplier == field.one and value != field.zero:
            return (s,)
    minus = field.negative(field.one)
    a, v = field.add(multipliers[dilation - 1], minus), values[dilation - 1]
    for s, (multiplier, value) in enumerate(zip(multipliers, values, strict=True), 1):
        if field.multiply(a, value) != field.multiply(field.add(multiplier, minus), v):
            return (*inverse((dilation,)), -s, dilation, s)
    return ()
