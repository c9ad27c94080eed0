"""The obstruction "affine": H acts on a field by x -> m x + v, with a multiplier of infinite order and a translation (FORMAT.md)."""

from __future__ import annotations

from typing import Any

from .field import Field, Quotient
from .parse import fields, listing, word
from .polynomials import Polynomial, primitive
from .refused import require
from .table import Table
from .words import Word

Triple = tuple[Polynomial, Polynomial, Polynomial]


def check_affine(value: Any, table: Table) -> None:
    """Refuse unless the matrices satisfy the relators of H and the two words are what they must be."""
    names = ("kind", "field", "multipliers", "translations", "dilation", "translation")
    _, field, multipliers, translations, dilation, translation = fields(value, names, "obstruction")
    action = _Action(Field(field), multipliers, translations, table.generators)
    for number, relator in enumerate(table.relators):
        top, bottom, moved = action.value(relator)
        require(top == bottom and not moved, f"rewritten relator {number} does not act trivially")
    top, bottom, _ = action.value(word(dilation, "obstruction.dilation", table.generators))
    require(action.field.is_infinite(top, bottom), "the multiplier of obstruction.dilation may be a root of unity")
    top, bottom, moved = action.value(word(translation, "obstruction.translation", table.generators))
    require(top == bottom, "obstruction.translation is not a translation")
    require(action.field.is_unit(moved), "obstruction.translation may be the identity")


class _Action:
    """Schreier generator s acts as the matrix [[m, v], [0, 1]]. No element is ever inverted: the matrix of a word is kept as
    (top, bottom, moved) with m = top / bottom and v = moved / bottom."""

    def __init__(self, field: Field, multipliers: Any, translations: Any, generators: int) -> None:
        self.field = field
        pairs = zip(
            listing(multipliers, "obstruction.multipliers", generators),
            listing(translations, "obstruction.translations", generators),
        )
        self.matrices: list[tuple[Quotient, Quotient]] = []
        for s, (multiplier, translation) in enumerate(pairs, 1):
            m = field.element(multiplier, f"the multiplier of Schreier generator {s}")
            require(field.is_unit(m[0]), f"the multiplier of Schreier generator {s} may not be invertible")
            self.matrices.append((m, field.element(translation, f"the translation of Schreier generator {s}")))

    def value(self, letters: Word) -> Triple:
        """The matrix of a word, by multiplication on the right."""
        triple: Triple = [1], [1], []
        for letter in letters:
            triple = self._times(triple, letter)
            if not self.field.prime:
                top, bottom, moved = primitive(*triple)
                triple = top, bottom, moved
        return triple

    def _times(self, triple: Triple, letter: int) -> Triple:
        top, bottom, moved = triple
        (a, b), (c, e) = self.matrices[abs(letter) - 1]
        times = self.field.ring.product
        shifted = times(top, c)
        if letter > 0:  # m -> m a/b, v -> v + m c/e
            total = self.field.ring.difference(times(moved, e), [-x for x in shifted])
            return times(times(top, a), e), times(times(bottom, b), e), times(total, b)
        # m -> m b/a, v -> v - m (b/a) (c/e)
        left, right = times(times(moved, a), e), times(shifted, b)
        return times(times(top, b), e), times(times(bottom, a), e), self.field.ring.difference(left, right)
