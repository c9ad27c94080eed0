"""Characters: homomorphisms from H to the multiplicative group of a field, through H_1 modulo torsion."""

from __future__ import annotations

from collections.abc import Sequence

from lowindex.algebra import fox_terms
from lowindex.obstructions.fields import Element, Field
from lowindex.words import Word


class Character:
    """`heights`: the image of every generator in Z^b; `bases`: the images of the b unit vectors in the field."""

    def __init__(self, field: Field, bases: Sequence[Element], heights: Sequence[tuple[int, ...]]) -> None:
        self.field = field
        self.heights = heights
        self._bases = list(bases)
        self._powers: dict[tuple[int, int], Element] = {}
        self._values: dict[tuple[int, ...], Element] = {}

    def at(self, height: tuple[int, ...]) -> Element:
        """The value at a vector of Z^b."""
        if height not in self._values:
            value = self.field.one
            for i, exponent in enumerate(height):
                if exponent:
                    value = self.field.multiply(value, self._power(i, exponent))
            self._values[height] = value
        return self._values[height]

    def _power(self, i: int, exponent: int) -> Element:
        """A power of a basis element, square by square."""
        if (i, exponent) not in self._powers:
            base = self._bases[i]
            if exponent < 0:
                value = self.field.inverse(self._power(i, -exponent))
            elif exponent == 1:
                value = base
            else:
                half = self._power(i, exponent // 2)
                value = self.field.multiply(half, half)
                if exponent % 2:
                    value = self.field.multiply(value, base)
            self._powers[i, exponent] = value
        return self._powers[i, exponent]

    def derivatives(self, word: Word) -> list[Element]:
        """The Fox derivatives of a word by all generators."""
        field = self.field
        row = [field.zero] * len(self.heights)
        for (k, height), times in fox_terms(word, self.heights).items():
            row[k] = field.add(row[k], field.times(times, self.at(height)))
        return row

    def action(self, word: Word, translations: Sequence[Element]) -> tuple[tuple[int, ...], Element]:
        """(height, v) of the affine map x -> m x + v of a word, v from the translations of the generators."""
        field = self.field
        value = field.zero
        for (k, height), times in fox_terms(word, self.heights).items():
            value = field.add(value, field.multiply(field.times(times, self.at(height)), translations[k]))
        total = [0] * len(self.heights[0])
        for letter in word:
            sign = 1 if letter > 0 else -1
            total = [x + sign * y for x, y in zip(total, self.heights[abs(letter) - 1], strict=True)]
        return tuple(total), value
