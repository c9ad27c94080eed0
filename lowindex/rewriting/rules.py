"""A set of rewriting rules that remember the equation each comes from.

A rule lhs -> rhs belongs to a cyclic word: `equation` is the number of a logged relator q, and lhs · rhs^-1 is the rotation
of q (sign = 1) or of q^-1 (sign = -1) by `offset` letters. So using the rule at a place P lhs Q multiplies by one conjugate of q:

    P lhs Q  =  (P t) q^sign (P t)^-1 · P rhs Q,      t = conjugator of the rotation.

Free reduction is built in: x x^-1 -> 1 is a rule without equation.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple

from lowindex.rewriting.derivation import Factor
from lowindex.rewriting.order import Order
from lowindex.rewriting.strings import INVERSE_LETTER, inverted, joined, letter_of

MOST_STEPS = 20_000
"""Letters looked at before one rewriting is given up."""


def longest_allowed(word: str) -> int:
    """A rewriting is given up, too, when the word has grown beyond this length: some orderings let words explode."""
    return 2 * len(word) + 400


class Rule(NamedTuple):
    """lhs -> rhs; see the head of this file. equation = -1 for free reduction."""

    lhs: str
    rhs: str
    equation: int
    offset: int
    sign: int


class RuleSet:
    """Rules by left side, with the lengths of left sides by their last two letters. `words` is the log's list of equations.

    No left side has length 1: a relator that says so eliminates a generator (see completion.py).
    """

    def __init__(self, order: Order, words: list[str]) -> None:
        self.order = order
        self.words = words
        self.by_lhs: dict[str, Rule] = {}
        self.of_equation: dict[int, list[Rule]] = {}
        self.ends: dict[str, dict[int, int]] = {}
        self.scanned = 0

    def admit(self, generators: Iterable[int]) -> None:
        """Make the letters of these generators cancel."""
        for generator in generators:
            for letter in (letter_of(generator), letter_of(-generator)):
                self._install(Rule(letter + INVERSE_LETTER[letter], "", -1, 0, 1))

    def rotations(self, word: str, equation: int) -> list[Rule]:
        """The rules that the relator `word` (cyclically reduced, of length >= 2) gives in the ordering, one for every
        rotation of it and of its inverse, without those that only lengthen another one."""
        found: dict[str, Rule] = {}
        length = len(word)
        for sign, form in ((1, word), (-1, inverted(word))):
            double = form + form
            for offset in range(length):
                rotation = double[offset : offset + length]
                cut = self.order.split(rotation)
                lhs = rotation[:cut]
                if lhs not in found:
                    found[lhs] = Rule(lhs, inverted(rotation[cut:]), equation, offset, sign)
        return [rule for lhs, rule in found.items() if lhs[1:] not in found and lhs[:-1] not in found]

    def add(self, word: str, equation: int) -> list[Rule]:
        """Install a relator; the rules that are new."""
        rules = [rule for rule in self.rotations(word, equation) if rule.lhs not in self.by_lhs]
        for rule in rules:
            self._install(rule)
        self.of_equation[equation] = rules
        return rules

    def remove(self, equation: int) -> list[Rule]:
        """Take a relator out; the rules it had."""
        rules = self.of_equation.pop(equation)
        for rule in rules:
            self._uninstall(rule)
        return rules

    def drop(self, rule: Rule) -> None:
        """Take one rule out and leave the others of its relator."""
        self.of_equation[rule.equation].remove(rule)
        self._uninstall(rule)

    def conjugator(self, rule: Rule) -> str:
        """t with  lhs · rhs^-1 = t q^sign t^-1  (the shorter of the two that the rotation offers)."""
        word = self.words[rule.equation]
        form = word if rule.sign > 0 else inverted(word)
        if 2 * rule.offset <= len(form):
            return inverted(form[: rule.offset])
        return form[rule.offset :]

    def reduce(self, word: str) -> str:
        """The word rewritten until no left side is left in it, leftmost end first (or MOST_STEPS were taken)."""
        by_lhs, ends = self.by_lhs, self.ends
        end, limit, longest = 2, self.scanned + MOST_STEPS, longest_allowed(word)
        while end <= len(word) <= longest and self.scanned < limit:
            self.scanned += 1
            for length in ends.get(word[end - 2 : end], ()):
                if length <= end and (rule := by_lhs.get(word[end - length : end])):
                    word = word[: end - length] + rule.rhs + word[end:]
                    end = max(end - length, 1)
                    break
            end += 1
        return word

    def reduce_logged(self, word: str, prefix: str, factors: list[Factor]) -> str:
        """As `reduce`; appends the factors of every step, conjugated by `prefix` as well."""
        by_lhs, ends = self.by_lhs, self.ends
        end, limit, longest = 2, self.scanned + MOST_STEPS, longest_allowed(word)
        while end <= len(word) <= longest and self.scanned < limit:
            self.scanned += 1
            for length in ends.get(word[end - 2 : end], ()):
                if length <= end and (rule := by_lhs.get(word[end - length : end])):
                    self.log(rule, joined(prefix, word[: end - length]), factors)
                    word = word[: end - length] + rule.rhs + word[end:]
                    end = max(end - length, 1)
                    break
            end += 1
        return word

    def log(self, rule: Rule, prefix: str, factors: list[Factor]) -> None:
        """Append the factor of one step of `rule` behind `prefix`."""
        if rule.equation >= 0:
            factors.append(Factor(joined(prefix, self.conjugator(rule)), rule.equation, rule.sign))

    def place_of_match(self, double: str, length: int) -> int:
        """Where in a cyclic word (given twice in a row) a rule that shortens it starts: the place of a left side of at most
        `length` letters; -1 when there is none."""
        by_lhs, ends = self.by_lhs, self.ends
        for end in range(2, len(double)):
            self.scanned += 1
            for size in ends.get(double[end - 2 : end], ()):
                rule = by_lhs.get(double[end - size : end]) if size <= min(length, end) else None
                if rule is not None and len(rule.rhs) < size:
                    return end - size
        return -1

    def _uninstall(self, rule: Rule) -> None:
        del self.by_lhs[rule.lhs]
        lengths = self.ends[rule.lhs[-2:]]
        lengths[len(rule.lhs)] -= 1
        if not lengths[len(rule.lhs)]:
            del lengths[len(rule.lhs)]

    def _install(self, rule: Rule) -> None:
        self.by_lhs[rule.lhs] = rule
        lengths = self.ends.setdefault(rule.lhs[-2:], {})
        lengths[len(rule.lhs)] = lengths.get(len(rule.lhs), 0) + 1
