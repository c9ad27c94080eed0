"""The log of a proof in a finitely presented group, and its cut.

Equations are words that are trivial in the group, numbered in the order they were found. An equation is *given*
(a relator or a definition), or *derived*: in the free group its word is the product of

    conjugator · word(j)^sign · conjugator^-1          over its factors (conjugator, j, sign), every j earlier.

That is all a reader has to check. `cut` keeps what the goals use, puts lemmas where they are used when that is
shorter, and numbers the rest anew: first all given equations, then the lemmas.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import NamedTuple

from lowindex.rewriting.strings import decoded, encoded, free_reduced, inverted, joined
from lowindex.words import Word

INLINE_CAP = 16
"""A lemma of more factors than this is never put where it is used."""


class Factor(NamedTuple):
    """conjugator · word(equation)^sign · conjugator^-1; the conjugator is a string (see strings.py)."""

    conjugator: str
    equation: int
    sign: int


@dataclass(frozen=True)
class Lemma:
    """A derived equation with its factors (conjugator, equation, sign), words as tuples of letters."""

    word: Word
    factors: tuple[tuple[Word, int, int], ...]


@dataclass(frozen=True)
class Proof:
    """A cut log. Equations 0..given-1 are the given ones, then the lemmas; goals[i] is the number of an equation that is
    conjugate to the i-th goal or its inverse in the free group (-1 where there was nothing to prove)."""

    given: int
    lemmas: tuple[Lemma, ...]
    goals: tuple[int, ...]

    @property
    def symbols(self) -> int:
        """Total length of the displayed words: lemmas and conjugators."""
        return sum(len(lemma.word) + sum(len(u) for u, _, _ in lemma.factors) for lemma in self.lemmas)


class Derivation:
    """The growing log. `words[k]` is the k-th equation, a freely reduced string; `factors[k]` is None for a given one."""

    def __init__(self, given: Iterable[Word] = ()) -> None:
        self.words: list[str] = []
        self.factors: list[tuple[Factor, ...] | None] = []
        for word in given:
            self.give(encoded(word))

    @property
    def given(self) -> list[int]:
        """The numbers of the given equations, in order."""
        return [number for number, factors in enumerate(self.factors) if factors is None]

    def give(self, word: str) -> int:
        """Log a given equation; its number."""
        self.words.append(word)
        self.factors.append(None)
        return len(self.words) - 1

    def derive(self, word: str, factors: Sequence[Factor]) -> int:
        """Log a derived equation; its number. What is already logged in the same form is not logged again."""
        if len(factors) == 1 and factors[0].sign == 1 and self.words[factors[0].equation] == word:
            return factors[0].equation
        self.words.append(word)
        self.factors.append(tuple(factors))
        return len(self.words) - 1

    def forget_from(self, number: int) -> None:
        """Drop the equations from this number on (a search that failed made them and nothing else uses them)."""
        del self.words[number:]
        del self.factors[number:]

    def holds(self, number: int) -> bool:
        """Whether the factors of an equation multiply out to its word (a given one holds)."""
        factors = self.factors[number]
        if factors is None:
            return True
        out: list[str] = []
        for conjugator, equation, sign in factors:
            word = self.words[equation]
            out += (conjugator, word if sign > 0 else inverted(word), inverted(conjugator))
        return free_reduced("".join(out)) == self.words[number]

    def used(self, goals: Sequence[int]) -> set[int]:
        """The numbers of all equations that the proofs of the goals use."""
        return set(self._users(goals))

    def cut(self, goals: Sequence[int]) -> Proof:
        """What the goals use (numbers of equations; -1: nothing to prove), renumbered. One pass upwards decides what is
        put where it is used, so nothing is expanded twice."""
        users = self._users(goals)
        wanted = set(goals)
        number: dict[int, int] = {}
        for k, factors in enumerate(self.factors):
            if factors is None:
                number[k] = len(number)
        given = len(number)
        placed: dict[int, tuple[Factor, ...]] = {}
        lemmas: list[Lemma] = []
        for k in sorted(users):
            if self.factors[k] is None:
                continue
            factors = self._expanded(k, placed)
            if len(factors) == 1 or (k not in wanted and self._worth_placing(k, factors, users[k])):
                # a goal that is a conjugate of another equation needs no lemma of its own
                placed[k] = factors
                if len(factors) == 1:
                    number[k] = number[factors[0].equation]
                continue
            number[k] = given + len(lemmas)
            lemmas.append(
                Lemma(decoded(self.words[k]), tuple((decoded(u), number[j], sign) for u, j, sign in factors)),
            )
        return Proof(given, tuple(lemmas), tuple(number[g] if g >= 0 else -1 for g in goals))

    def _users(self, goals: Sequence[int]) -> dict[int, list[str]]:
        """Equation -> the conjugators it is used with, for every equation that the goals reach."""
        users: dict[int, list[str]] = {g: [] for g in goals if g >= 0}
        for k in range(max(users, default=-1), -1, -1):
            if k in users:
                for conjugator, equation, _ in self.factors[k] or ():
                    users.setdefault(equation, []).append(conjugator)
        return users

    def _expanded(self, k: int, placed: dict[int, tuple[Factor, ...]]) -> tuple[Factor, ...]:
        """The factors of k with the placed lemmas written out, neighbours that cancel removed, conjugators shortened."""
        out: list[Factor] = []
        for conjugator, equation, sign in self.factors[k] or ():
            parts: Sequence[Factor] = placed.get(equation, (Factor("", equation, 1),))
            if sign < 0:
                parts = [Factor(u, j, -e) for u, j, e in reversed(parts)]
            for u, j, e in parts:
                factor = Factor(self._shortest(joined(conjugator, u), j), j, e)
                if out and out[-1] == Factor(factor.conjugator, j, -e):
                    out.pop()
                else:
                    out.append(factor)
        return tuple(out)

    def _shortest(self, conjugator: str, equation: int) -> str:
        """The shortest of conjugator · word^n; all conjugate the equation in the same way."""
        word = self.words[equation]
        for step in (word, inverted(word)):
            while len(other := joined(conjugator, step)) < len(conjugator):
                conjugator = other
        return conjugator

    def _worth_placing(self, k: int, factors: Sequence[Factor], conjugators: Sequence[str]) -> bool:
        """Whether writing the factors out at every use is no longer than keeping k as a lemma."""
        if len(factors) > INLINE_CAP or len(conjugators) * len(factors) > INLINE_CAP + len(conjugators):
            return False
        kept = len(self.words[k]) + sum(len(u) for u, _, _ in factors) + sum(map(len, conjugators))
        written = sum(len(joined(c, u)) for c in conjugators for u, _, _ in factors)
        return written <= kept
