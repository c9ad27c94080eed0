"""Complete shortlex rewriting systems of monoid rules, for counting normal forms.

The completion of rewriting/ keeps a log and rules of groups; here only the finished system matters, so this is the plain procedure:
orient equations, resolve overlaps, reduce rules by each other until nothing changes (D. E. Knuth, P. B. Bendix, Simple word problems in
universal algebras, 1970). A letter may be rewritten to its inverse, as an involution needs.
"""

from __future__ import annotations

import heapq
from collections.abc import Sequence

from lowindex.budget import Budget
from lowindex.rewriting import encoded, letter_of
from lowindex.words import Presentation

MOST_RULES = 2000
LONGEST = 200

Rules = dict[str, str]


def complete_system(presentation: Presentation, order: Sequence[int], *, budget: Budget) -> tuple[Rules, bool]:
    """Rules (left side -> right side), and whether they are complete: every overlap resolves."""
    system = _System(order, budget)
    for generator in order:
        system.equate(letter_of(generator) + letter_of(-generator), "")
        system.equate(letter_of(-generator) + letter_of(generator), "")
    for relator in presentation.relators:
        # both halves, so that short rules come early
        word = encoded(relator)
        half = len(word) // 2
        system.equate(word[:half], encoded(tuple(-x for x in reversed(relator[half:]))))
    complete = system.run()
    return system.rules, complete


class _System:
    def __init__(self, order: Sequence[int], budget: Budget) -> None:
        letters = [letter_of(s * g) for g in order for s in (1, -1)]
        self.place = {letter: k for k, letter in enumerate(letters)}
        self.budget = budget
        self.rules: Rules = {}
        self.lengths: dict[int, int] = {}
        self.heap: list[tuple[int, str, str]] = []

    def equate(self, left: str, right: str) -> None:
        """An equation to be looked at, shorter ones first."""
        heapq.heappush(self.heap, (len(left) + len(right), left, right))

    def run(self) -> bool:
        """Until no equation is left (True), or the budget or a bound is reached."""
        while self.heap:
            size, left, right = heapq.heappop(self.heap)
            if self.budget.exhausted or size > LONGEST or len(self.rules) > MOST_RULES:
                return False
            left, right = self.normal(left), self.normal(right)
            if left != right:
                if self._key(left) < self._key(right):
                    left, right = right, left
                self._add(left, right)
        return True

    def _key(self, word: str) -> tuple[int, list[int]]:
        return len(word), [self.place[letter] for letter in word]

    def normal(self, word: str) -> str:
        """The normal form, rewriting the first left side that ends earliest."""
        done, rest = "", word
        steps = 0
        while rest:
            done, rest = done + rest[0], rest[1:]
            steps += 1
            for length in self.lengths:
                right = self.rules.get(done[-length:]) if length <= len(done) else None
                if right is not None:
                    done, rest = done[: len(done) - length], right + rest
                    break
        self.budget.spend(1 + steps * (1 + len(self.lengths)) // 3)
        return done

    def _add(self, left: str, right: str) -> None:
        """A new rule: rules that contain its left side become equations again, overlaps with all rules become equations."""
        for other in [known for known in self.rules if left in known]:
            self.equate(other, self._remove(other))
        self.rules[left] = right
        self.lengths[len(left)] = self.lengths.get(len(left), 0) + 1
        for other, other_right in list(self.rules.items()):
            if left in other_right:
                self.rules[other] = self.normal(other_right)
            for (one, one_right), (two, two_right) in (((left, right), (other, other_right)), ((other, other_right), (left, right))):
                for n in range(1, min(len(one), len(two))):
                    if one.endswith(two[:n]):
                        self.equate(one_right + two[n:], one[: len(one) - n] + two_right)
        self.budget.spend(4 * len(self.rules))

    def _remove(self, left: str) -> str:
        self.lengths[len(left)] -= 1
        if not self.lengths[len(left)]:
            del self.lengths[len(left)]
        return self.rules.pop(left)
