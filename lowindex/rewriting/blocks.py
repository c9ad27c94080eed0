"""Commuting generators sorted in blocks: x^p y^q = y^q x^p as one lemma, built by doubling.

A word in commuting letters could be sorted by swaps of two letters; that takes p q steps for one pair of blocks, each step with a
long conjugator. Here a swap of blocks is one factor, and the lemma  E(x^p, y^q) = x^p y^q x^-p y^-q  comes from

    E(x^(a+b), Y) = x^a E(x^b, Y) x^-a · E(x^a, Y),      E(X, y^(a+b)) = E(X, y^a) · y^a E(X, y^b) y^-a.
"""

from __future__ import annotations

from itertools import groupby

from lowindex.rewriting.derivation import Derivation, Factor
from lowindex.rewriting.strings import INVERSE_LETTER, generator_of, inverted, joined


class Blocks:
    """The commutators of generators proved so far, and the lemmas on blocks made from them."""

    def __init__(self, derivation: Derivation) -> None:
        self.derivation = derivation
        self._swaps: dict[str, tuple[int, int, int]] = {}
        self._powers: dict[tuple[str, int, str, int], int] = {}

    def __bool__(self) -> bool:
        return bool(self._swaps)

    def learn(self, word: str, equation: int) -> bool:
        """Note a relator if it is the commutator of two generators."""
        if len(word) != 4 or word[0] == word[1]:
            return False
        if word[2] != INVERSE_LETTER[word[0]] or word[3] != INVERSE_LETTER[word[1]]:
            return False
        for sign, form in ((1, word), (-1, inverted(word))):
            double = form + form
            for offset in range(4):
                self._swaps.setdefault(double[offset : offset + 2], (equation, offset, sign))
        return True

    def forget(self, word: str, equation: int) -> None:
        """The relator is no longer in force: what it said must not make it, or its consequences, look trivial."""
        for form in (word, inverted(word)):
            double = form + form
            for offset in range(len(word) if len(word) == 4 else 0):
                if self._swaps.get(double[offset : offset + 2], (-1,))[0] == equation:
                    del self._swaps[double[offset : offset + 2]]

    def sorted_logged(self, word: str, prefix: str, factors: list[Factor]) -> str:
        """The word with every block moved left past greater generators that it commutes with, and blocks of one generator merged;
        appends the factors, conjugated by `prefix` as well."""
        if not self._swaps:
            return word
        runs: list[tuple[str, int]] = []
        rest = [(letter, len(list(group))) for letter, group in groupby(word)]
        for letter, count in rest:
            self._insert(runs, letter, count, prefix, factors)
        return "".join([letter * count for letter, count in runs])

    def _insert(self, runs: list[tuple[str, int]], letter: str, count: int, prefix: str, factors: list[Factor]) -> None:
        place = self._place(runs, letter)
        for k in range(len(runs) - 1, place - 1, -1):
            before = "".join([c * n for c, n in runs[:k]])
            factors.append(Factor(joined(prefix, before), self._swap(*runs[k], letter, count), 1))
        if place and generator_of(runs[place - 1][0]) == generator_of(letter):
            other, n = runs[place - 1]
            total = n + count if other == letter else n - count
            if total:
                runs[place - 1] = (other, total) if total > 0 else (letter, -total)
            else:
                del runs[place - 1]
                self._resettle(runs, place - 1, prefix, factors)
        else:
            runs.insert(place, (letter, count))

    def _resettle(self, runs: list[tuple[str, int]], place: int, prefix: str, factors: list[Factor]) -> None:
        """A block vanished: those behind it may move on."""
        behind = runs[place:]
        del runs[place:]
        for letter, count in behind:
            self._insert(runs, letter, count, prefix, factors)

    def _place(self, runs: list[tuple[str, int]], letter: str) -> int:
        """How far left a block may go: behind the block of its own generator when that can be reached, else before the greater
        ones it commutes with."""
        generator = generator_of(letter)
        place = best = len(runs)
        while place:
            other = runs[place - 1][0]
            if generator_of(other) == generator:
                return place
            if other + letter not in self._swaps:
                return best
            place -= 1
            if generator_of(other) > generator:
                best = place
        return best

    def _swap(self, x: str, p: int, y: str, q: int) -> int:
        """Number of the equation x^p y^q x^-p y^-q."""
        key = x, p, y, q
        if key not in self._powers:
            if p > 1:
                a = p // 2
                factors = [Factor(x * a, self._swap(x, p - a, y, q), 1), Factor("", self._swap(x, a, y, q), 1)]
            elif q > 1:
                a = q // 2
                factors = [Factor("", self._swap(x, 1, y, a), 1), Factor(y * a, self._swap(x, 1, y, q - a), 1)]
            else:
                equation, offset, sign = self._swaps[x + y]
                form = self.derivation.words[equation] if sign > 0 else inverted(self.derivation.words[equation])
                factors = [Factor(inverted(form[:offset]), equation, sign)]
            word = x * p + y * q + INVERSE_LETTER[x] * p + INVERSE_LETTER[y] * q
            self._powers[key] = self.derivation.derive(word, factors)
        return self._powers[key]
