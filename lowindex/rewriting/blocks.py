"""Collection in blocks: x^p y^q = y^q x^p z^n as one lemma, built by doubling.

A word in commuting letters could be sorted by swaps of two letters; that takes p q steps for one pair of blocks, each step with a
long conjugator. Here a swap of blocks is one factor. Two kinds of relators are used, both between generators:

    [x, y] = 1            blocks of x and y may pass each other;
    [x, y] = z^n, z commuting with x and y (class two)
                          a block of the smaller generator may move left past a block of the greater one and leaves a power of z.

The lemmas are the words  W(x^p, y^q) = x^p y^q z^-m x^-p y^-q  (z missing in the first kind), from

    W(x^(a+b), Y) = x^a W(x^b, Y) x^-a · (z-power past x^-b) · W(x^a, Y),
    W(x, y^(a+b)) = W(x, y^a) · (z-power past y^b) · y^a W(x, y^b) y^-a.
"""

from __future__ import annotations

from itertools import groupby
from typing import NamedTuple

from lowindex.rewriting.derivation import Derivation, Factor
from lowindex.rewriting.strings import INVERSE_LETTER, generator_of, inverted, joined


class Swap(NamedTuple):
    """x y = y x z^exponent, z = "" when the two commute. It comes from a rotation of a logged relator that starts with the letters
    `direct`: x y themselves or, for class two, x and y up to inversion."""

    equation: int
    offset: int
    sign: int
    z: str
    exponent: int
    direct: str


class Blocks:
    """The commutators of generators known so far, and the lemmas on blocks made from them."""

    def __init__(self, derivation: Derivation) -> None:
        self.derivation = derivation
        self._swaps: dict[str, Swap] = {}
        self._lemmas: dict[tuple[str, int, str, int, int], int] = {}

    def learn(self, word: str, equation: int) -> None:
        """Note a relator if it is the commutator of two generators, or such a commutator times a power of a third."""
        for swap in _readings(word, equation):
            x, y = swap.direct[0], swap.direct[1]
            self._swaps.setdefault(x + y, swap)
            opposite = swap._replace(exponent=-swap.exponent)
            self._swaps.setdefault(INVERSE_LETTER[x] + y, opposite)
            self._swaps.setdefault(x + INVERSE_LETTER[y], opposite)
            self._swaps.setdefault(INVERSE_LETTER[x] + INVERSE_LETTER[y], swap)

    def forget(self, word: str, equation: int) -> None:
        """The relator is no longer in force: what it said must not make it, or its consequences, look trivial."""
        if _readings(word, equation):
            self._swaps = {pair: swap for pair, swap in self._swaps.items() if swap.equation != equation}

    def sorted_logged(self, word: str, prefix: str, factors: list[Factor]) -> str:
        """The word with every block moved left past greater generators that let it pass, and blocks of one generator merged; appends
        the factors, conjugated by `prefix` as well."""
        if not self._swaps:
            return word
        runs: list[tuple[str, int]] = []
        waiting = [(letter, len(list(group))) for letter, group in groupby(word)][::-1]
        while waiting:
            waiting += self._insert(runs, *waiting.pop(), prefix, factors)[::-1]
        return "".join([letter * count for letter, count in runs])

    def _insert(self, runs: list[tuple[str, int]], letter: str, count: int, prefix: str, factors: list[Factor]) -> list[tuple[str, int]]:
        """Put a block behind the runs and move it left; what has to be inserted after it."""
        place = self._place(runs, letter)
        for k in range(len(runs) - 1, place - 1, -1):
            other, n = runs[k]
            before = "".join([c * m for c, m in runs[:k]])
            factors.append(Factor(joined(prefix, before), self._lemma(other, n, letter, count), 1))
            z, exponent = self._tail(other, letter)
            if exponent:
                # other^n letter^count = letter^count other^n z^(exponent n count): start again from there
                left = (z if exponent > 0 else INVERSE_LETTER[z], abs(exponent) * n * count)
                rest = [(letter, count), (other, n), left, *runs[k + 1 :]]
                del runs[k:]
                return rest
        if place and generator_of(runs[place - 1][0]) == generator_of(letter):
            other, n = runs[place - 1]
            total = n + count if other == letter else n - count
            if total:
                runs[place - 1] = (other, total) if total > 0 else (letter, -total)
                return []
            rest = runs[place:]
            del runs[place - 1 :]
            return rest
        runs.insert(place, (letter, count))
        return []

    def _place(self, runs: list[tuple[str, int]], letter: str) -> int:
        """How far left a block may go: behind the block of its own generator when only commuting blocks or greater ones are between,
        else before the greater ones that let it pass."""
        generator = generator_of(letter)
        place = best = len(runs)
        while place:
            other = runs[place - 1][0]
            if generator_of(other) == generator:
                return place
            swap = self._usable(other + letter)
            if swap is None or (swap.exponent and generator_of(other) < generator):
                return best
            place -= 1
            if generator_of(other) > generator:
                best = place
                if swap.exponent:
                    return best
        return best

    def _usable(self, pair: str) -> Swap | None:
        """The swap of two letters, when the tail commutes with both."""
        swap = self._swaps.get(pair)
        if swap is None or not swap.exponent:
            return swap
        for letter in pair:
            tail = self._swaps.get(swap.z + letter)
            if tail is None or tail.exponent:
                return None
        return swap

    def _tail(self, x: str, y: str) -> tuple[str, int]:
        swap = self._swaps[x + y]
        return swap.z, swap.exponent

    def _lemma(self, x: str, p: int, y: str, q: int) -> int:
        """Number of the equation x^p y^q z^-m x^-p y^-q, m = exponent p q."""
        swap = self._swaps[x + y]
        key = x, p, y, q, swap.equation
        if key not in self._lemmas:
            word = x * p + y * q + self._z(swap, -p * q) + INVERSE_LETTER[x] * p + INVERSE_LETTER[y] * q
            self._lemmas[key] = self.derivation.derive(word, self._factors(swap, x, p, y, q))
        return self._lemmas[key]

    def _z(self, swap: Swap, times: int) -> str:
        m = swap.exponent * times
        return swap.z * m if m >= 0 else INVERSE_LETTER[swap.z] * -m

    def _past(self, power: str, block: str, before: str) -> list[Factor]:
        """The factor by which a power of z passes a block standing behind `before`."""
        if not power or not block:
            return []
        return [Factor(before, self._lemma(power[0], len(power), block[0], len(block)), 1)]

    def _factors(self, swap: Swap, x: str, p: int, y: str, q: int) -> list[Factor]:
        back = INVERSE_LETTER[x]
        if p > 1:
            a, b = p // 2, p - p // 2
            return [
                Factor(x * a, self._lemma(x, b, y, q), 1),
                *self._past(self._z(swap, -a * q), back * b, x * a + y * q + x * b),
                Factor("", self._lemma(x, a, y, q), 1),
            ]
        if q > 1:
            a, b = q // 2, q - q // 2
            return [
                Factor("", self._lemma(x, 1, y, a), 1),
                *self._past(self._z(swap, a), y * b, y * a + x),
                Factor(y * a, self._lemma(x, 1, y, b), 1),
            ]
        if x + y != swap.direct:
            return self._turned(swap, x, y)
        form = self.derivation.words[swap.equation]
        form = form if swap.sign > 0 else inverted(form)
        turn = Factor(inverted(form[: swap.offset]), swap.equation, swap.sign)
        # the rotation reads x y x^-1 y^-1 z^-n; the tail moves in front of x^-1 y^-1
        tail = self._z(swap, -1)
        moves = self._past(tail, back, x + y) + self._past(tail, INVERSE_LETTER[y], x + y + back)
        return [*moves, turn]

    def _turned(self, swap: Swap, x: str, y: str) -> list[Factor]:
        """W(x, y) from W of the direct pair, x or y or both being inverted."""
        a, b = swap.direct[0], swap.direct[1]
        direct = self._lemma(a, 1, b, 1)
        tail = self._z(swap, -1)
        if x == a:
            # a b^-1 tail a^-1 b = a tail b^-1 a^-1 b, and b a tail b^-1 a^-1 = W(a, b)^-1
            moved = [Factor(a, self._lemma(y, 1, tail[0], len(tail)), 1)] if tail else []
            return [*moved, Factor(y, direct, -1)]
        if y == b:
            return [*self._past(tail, a, x + b), Factor(x, direct, -1)]
        return [*self._past(tail, a, x + y), *self._past(tail, b, x + y + a), Factor(x + y, direct, 1)]


def _readings(word: str, equation: int) -> list[Swap]:
    """The ways in which some rotation of the relator or its inverse reads  x y x^-1 y^-1 z^m."""
    found: list[Swap] = []
    if not 4 <= len(word) <= 12:
        return found
    for sign, form in ((1, word), (-1, inverted(word))):
        double = form + form
        for offset in range(len(form)):
            rotation = double[offset : offset + len(form)]
            x, y, tail = rotation[0], rotation[1], rotation[4:]
            if generator_of(x) == generator_of(y) or rotation[2:4] != INVERSE_LETTER[x] + INVERSE_LETTER[y]:
                continue
            if not tail:
                found.append(Swap(equation, offset, sign, "", 0, x + y))
            elif len(set(tail)) == 1 and generator_of(tail[0]) not in (generator_of(x), generator_of(y)):
                found.append(Swap(equation, offset, sign, INVERSE_LETTER[tail[0]], len(tail), x + y))
    return found
