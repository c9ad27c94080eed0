"""Knuth-Bendix completion of a group presentation with a log, run only as far as its goals need.

D. E. Knuth and P. B. Bendix, Simple word problems in universal algebras (1970); C. C. Sims, Computation with Finitely Presented
Groups (1994), ch. 2-3; for proofs of nilpotence C. C. Sims, Verifying nilpotence, J. Symbolic Computation 3 (1987) 231-247.
Every relator contributes the rules of all its rotations, so one lemma of the log carries many rules. Critical pairs are taken by
the length of the relator they would give; a given relator of length L joins at priority L/2.
"""

from __future__ import annotations

import heapq
from collections.abc import Hashable, Iterable, Mapping
from typing import TypeAlias

from lowindex.budget import Budget
from lowindex.rewriting.derivation import Derivation, Factor
from lowindex.rewriting.order import Order
from lowindex.rewriting.relators import RelatorSet, Unfinished, solved
from lowindex.rewriting.rules import Rule
from lowindex.rewriting.strings import cyclic_ends, encoded, free_reduced, inverted, joined, letter_of
from lowindex.words import Word

Goal: TypeAlias = Hashable
"""What names a goal."""

LONGEST_PAIR = 240
"""Pairs that would give a longer relator are not looked at."""

LONGEST_RELATOR = 1500
"""A completion in which a longer relator comes up has lost its way; recursive orderings let words explode."""

LONGEST_OVERLAP = 120
"""Longer relators only rewrite; their overlaps (and the memory for them) are left out."""

MOST_PAIRS = 400_000
"""When more pairs wait, the longer half is given up."""


class Completion(RelatorSet):
    """Completion with goals. `goals` maps a key to a word that should be proved trivial; `proved` maps it to the number of the
    equation, once it is. Run `run()` in slices: it stops when all goals are proved, nothing is left to do, or `work` is spent."""

    def __init__(self, derivation: Derivation, order: Order, generators: Iterable[int], *, budget: Budget) -> None:
        super().__init__(derivation, order, generators, budget=budget)
        self.goals: dict[Goal, str] = {}
        self.proved: dict[Goal, int] = {}
        self.solves: dict[Goal, int] = {}
        self._starts: dict[str, dict[str, None]] = {}
        self._stops: dict[str, dict[str, None]] = {}
        self._pairs: list[tuple[int, int, Rule, Rule, int]] = []
        self._waiting: list[tuple[int, int]] = []
        self._aligned: set[tuple[int, int, int, int]] = set()
        self._count = self._tried = 0
        self._longest = LONGEST_PAIR
        self._news = True

    def set_goals(self, goals: Mapping[Goal, Word], solves: Mapping[Goal, int]) -> None:
        """Ask for words to be proved trivial. `solves` names goals that say what an eliminated generator is: once one is proved, it
        takes the place of the relator that eliminated the generator."""
        self.goals.update({key: free_reduced(encoded(word)) for key, word in goals.items()})
        self.solves.update(solves)
        self._news = True

    @property
    def finished(self) -> bool:
        """Whether every goal is proved."""
        return not self.goals

    @property
    def dry(self) -> bool:
        """Whether nothing is left to do: the system is complete (up to pairs that were too long)."""
        return not (self.queue or self._pairs or self._waiting or self.retired)

    def run(self, *, work: int) -> bool:
        """Go on for about `work` units; whether every goal is proved."""
        purse = self.budget.part(work)
        outer, self.budget = self.budget, purse
        try:
            looked = 0
            while not purse.exhausted:
                if self._news and purse.spent >= looked:
                    self.look_at_goals()
                    looked = purse.spent + 20 * len(self.goals) + 200
                if self.finished or not self._step():
                    break
            self.look_at_goals()
        finally:
            self.budget = outer
        return self.finished

    def look_at_goals(self) -> None:
        """Log a proof of every goal that reduces to the empty word now."""
        if not self._news:
            return
        self._news = False
        for key in list(self.goals):
            self._try_goal(key)

    def _try_goal(self, key: Goal) -> None:
        factors: list[Factor] = []
        goal = self.goals[key]
        before = self.rules.scanned
        if not self.single.keys().isdisjoint(goal):
            word = self.rules.reduce_logged(self.substituted(goal, "", factors), "", factors)
        elif not self.rules.reduce(goal):
            word = self.rules.reduce_logged(goal, "", factors)
        else:
            word = goal
        self.budget.spend(1 + self.rules.scanned - before)
        if not word:
            self.proved[key] = self.derivation.derive(goal, factors)
            del self.goals[key]
            self._use_solution(key)

    def _use_solution(self, key: Goal) -> None:
        generator = self.solves.get(key, 0)
        for letter in (letter_of(generator), letter_of(-generator)):
            if letter in self.single:
                self.single[letter] = solved(self.derivation.words[self.proved[key]], self.proved[key], letter)

    # -- the next thing to do

    def _step(self) -> bool:
        pairs, queue, waiting = self._pairs, self.queue, self._waiting
        nearest = pairs[0][0] if pairs else LONGEST_PAIR
        if queue and queue[0][0] <= nearest:
            self.take(heapq.heappop(queue)[1])
        elif waiting and waiting[0][0] <= nearest:
            self._overlap_relator(heapq.heappop(waiting)[1])
        elif pairs:
            _, _, first, second, overlap = heapq.heappop(pairs)
            by_lhs = self.rules.by_lhs
            if overlap == 0:
                self._meet(first)
            elif by_lhs.get(first.lhs) is first and by_lhs.get(second.lhs) is second:
                self._resolve(first, second, overlap)
        elif self.retired:
            self._recheck_retired()
        else:
            return False
        return True

    def _resolve(self, first: Rule, second: Rule, overlap: int) -> None:
        """The critical pair of AB -> P and BC -> Q at B: rewrite PC and AQ; when they differ the pair gives a relator."""
        rules = self.rules
        before = rules.scanned
        head = first.lhs[: len(first.lhs) - overlap]
        left, right = joined(first.rhs, second.lhs[overlap:]), joined(head, second.rhs)
        differ = rules.reduce(left) != rules.reduce(right)
        self.budget.spend(2 + rules.scanned - before)
        if differ:
            # PC (AQ)^-1 = (AB P^-1)^-1 · A (BC Q^-1) A^-1
            factors: list[Factor] = []
            rules.log(first, "", factors)
            factors = [Factor(u, j, -e) for u, j, e in factors]
            rules.log(second, head, factors)
            self._equate(left, right, factors)

    def _recheck_retired(self) -> None:
        """Nothing else is left: see that both sides of the rules taken out still meet."""
        retired, self.retired = self.retired, []
        for rule in retired:
            self._meet(rule)

    def _meet(self, rule: Rule) -> None:
        """A rule that is no longer in force: see that its sides meet; when they do not, that gives a relator."""
        if not self.single.keys().isdisjoint(rule.lhs + rule.rhs):
            return
        before = self.rules.scanned
        differ = self.rules.reduce(rule.lhs) != self.rules.reduce(rule.rhs)
        self.budget.spend(2 + self.rules.scanned - before)
        if differ:
            factors: list[Factor] = []
            self.rules.log(rule, "", factors)
            self._equate(rule.lhs, rule.rhs, factors)

    def _equate(self, left: str, right: str, factors: list[Factor]) -> None:
        """left right^-1 = product of the factors: rewrite both sides on and make what is left a relator."""
        ahead: list[Factor] = []
        behind: list[Factor] = []
        left_form = self.rules.reduce_logged(left, "", ahead)
        right_form = self.rules.reduce_logged(right, "", behind)
        self.budget.spend(sum([len(u) for u, _, _ in ahead + behind]) // 20)
        # left = (ahead) left_form, right = (behind) right_form
        steps = [Factor(u, j, -e) for u, j, e in reversed(ahead)] + factors + behind
        word = joined(left_form, inverted(right_form))
        if not word:
            return
        if len(word) > LONGEST_RELATOR:
            raise Unfinished(f"a relator of more than {LONGEST_RELATOR} letters")
        number = self.derivation.derive(word, steps)
        if self.take(number) or not self.single.keys().isdisjoint(word):
            return
        if self.rules.reduce(left_form) != self.rules.reduce(right_form):
            # Conjugate to a word that rewrites to 1, but the two sides do not meet: keep the relator as it is.
            ends = cyclic_ends(word)
            number = self._conjugated(number, word[ends : len(word) - ends], word[:ends], [])
            self._activate(number, self.derivation.words[number])

    # -- overlaps

    def _activate(self, number: int, word: str) -> list[Rule]:
        rules = super()._activate(number, word)
        if rules:
            self._news = True
            if len(word) <= LONGEST_OVERLAP:
                heapq.heappush(self._waiting, (len(word), number))
        return rules

    def eliminate(self, generator: int, equation: int) -> None:
        """As in RelatorSet."""
        super().eliminate(generator, equation)
        self._news = True

    def pair_dropped(self, rule: Rule) -> None:
        """The equation of a rule that was taken out is looked at like a critical pair."""
        self._count += 1
        heapq.heappush(self._pairs, (len(rule.lhs) + len(rule.rhs), self._count, rule, rule, 0))

    def _overlap_relator(self, number: int) -> None:
        """Put the overlaps of a relator's rules, with each other and with those indexed before, on the heap."""
        rules = self.rules.of_equation.get(number, [])
        for rule in rules:
            lhs = rule.lhs
            for n in range(1, len(lhs)):
                self._starts.setdefault(lhs[:n], {})[lhs] = None
                self._stops.setdefault(lhs[-n:], {})[lhs] = None
        before = self._tried
        for rule in rules:
            self._overlaps(rule)
        self.budget.spend(len(rules) + (self._tried - before) // 2)

    def forget(self, rule: Rule) -> None:
        """Take a rule out of the index of overlaps."""
        lhs = rule.lhs
        for n in range(1, len(lhs)):
            self._starts.get(lhs[:n], {}).pop(lhs, None)
            self._stops.get(lhs[-n:], {}).pop(lhs, None)

    def _overlaps(self, rule: Rule) -> None:
        lhs, by_lhs = rule.lhs, self.rules.by_lhs
        for n in range(1, len(lhs)):
            for other in self._starts.get(lhs[-n:], ()):
                self._push(rule, by_lhs[other], n)
            for other in self._stops.get(lhs[:n], ()):
                if other != lhs:
                    self._push(by_lhs[other], rule, n)

    def _push(self, first: Rule, second: Rule, overlap: int) -> None:
        """Put a pair on the heap, once for each way of laying the two cyclic words along each other."""
        size = len(first.lhs) + len(first.rhs) + len(second.lhs) + len(second.rhs) - 2 * overlap
        self._tried += 1
        if size > self._longest:
            return
        place = self._alignment(first, second, overlap)
        if place not in self._aligned:
            self._aligned.add(place)
            self._count += 1
            heapq.heappush(self._pairs, (size, self._count, first, second, overlap))
            if self._count % MOST_PAIRS == 0:
                self._give_up_long_pairs()

    def _give_up_long_pairs(self) -> None:
        """Keep the shorter half of the pairs and take no more of the others' size."""
        self._pairs = heapq.nsmallest(MOST_PAIRS // 2, self._pairs)
        self._aligned.clear()
        if len(self._pairs) == MOST_PAIRS // 2:
            self._longest = self._pairs[-1][0]

    def _alignment(self, first: Rule, second: Rule, overlap: int) -> tuple[int, int, int, int]:
        """Where the longest common piece around the overlap starts in both relators, read so that the first is not inverted."""
        words = self.derivation.words
        one, two = words[first.equation], words[second.equation]
        here = first.offset + len(first.lhs) - overlap
        there = second.offset
        if first.sign < 0:
            # the overlap read backwards in the inverses
            here, there = -here - overlap, -there - overlap
        back = first.sign * second.sign < 0
        if back:
            two = inverted(two)
        m, n = len(one), len(two)
        steps = 0
        while steps < m + n and one[(here - 1) % m] == two[(there - 1) % n]:
            here, there, steps = here - 1, there - 1, steps + 1
        return first.equation, here % m, ~second.equation if back else second.equation, there % n
