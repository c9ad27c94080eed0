"""A set of relators kept reduced against each other, every change logged: elimination of generators and shortening of relators.

These are Tietze moves (H. Tietze 1908; Havas, Kenne, Richardson, Robertson, A Tietze transformation program, 1984): a relator
in which a generator occurs exactly once eliminates it; where a relator contains the left side of a rule of another one it is
rewritten. Rules come from all rotations of all relators (see rules.py).
"""

from __future__ import annotations

import heapq
from collections.abc import Collection, Iterable, Mapping
from itertools import groupby

from lowindex.budget import Budget
from lowindex.rewriting.blocks import Blocks
from lowindex.rewriting.derivation import Derivation, Factor
from lowindex.rewriting.order import Order
from lowindex.rewriting.rules import Rule, RuleSet
from lowindex.rewriting.strings import cyclic_ends, decoded, generator_of, inverted, joined, letter_of
from lowindex.words import Word, inverse, reduced

LONGEST_WORD = 20_000
"""Words that would grow beyond this length end the work on a set of relators."""

ROUNDS = 60
"""How often one relator is rotated and rewritten before it is taken as it is."""

LONGEST_DETOUR = 3000
"""It is taken as it is, too, when the conjugator and the number of rewriting steps have grown beyond this."""


class Unfinished(Exception):
    """A set of relators could not be reduced within its budget, or words grew too long: it must not be used as a presentation."""


class RelatorSet:
    """Relators over the living generators. `active` maps equation numbers of the log to cyclically reduced words; `single` maps the
    letters of eliminated generators to the rules that replace them. Generators outside `keep` are eliminated as soon as a relator of
    at most `longest_solution` letters solves them (at first: only those that are trivial)."""

    def __init__(self, derivation: Derivation, order: Order, generators: Iterable[int], *, budget: Budget) -> None:
        self.derivation = derivation
        self.budget = budget
        self.alive = set(generators)
        self.rules = RuleSet(order, derivation.words)
        self.rules.admit(self.alive)
        self.blocks = Blocks(derivation)
        self.active: dict[int, str] = {}
        self.single: dict[str, Rule] = {}
        self.occurrences: dict[int, set[int]] = {g: set() for g in self.alive}
        self.queue: list[tuple[int, int]] = []
        self.retired: list[Rule] = []
        self._power_rules: dict[tuple[str, int, int], Rule] = {}
        self.keep: Collection[int] = self.alive
        self.longest_solution = 1

    # -- relators in and out

    def insert(self, equation: int, *, priority: int | None = None) -> None:
        """Put a logged equation on the queue of relators; short ones are taken first unless a priority says otherwise."""
        heapq.heappush(self.queue, (len(self.derivation.words[equation]) if priority is None else priority, equation))

    def settle(self, *, most: int = 2**62) -> None:
        """Take relators off the queue until none of at most `most` letters is left, or the budget is spent."""
        while self.queue and self.queue[0][0] <= most and not self.budget.exhausted:
            self.take(heapq.heappop(self.queue)[1])

    def take(self, equation: int) -> list[Rule]:
        """Reduce an equation by the relators in force and, when something is left, make it a relator; its rules."""
        number = self.reduced_equation(equation)
        word = self.derivation.words[number]
        if not word:
            return []
        solved_generator = self._solves(word)
        if solved_generator:
            self.eliminate(solved_generator, number)
            return []
        return self._activate(number, word)

    def _solves(self, word: str) -> int:
        """The generator that a new relator eliminates at once, 0 when none: the only letter, or the greatest generator outside `keep`
        that occurs once in a relator of at most `longest_solution` letters."""
        if len(word) == 1:
            return generator_of(word)
        if len(word) <= self.longest_solution:
            for generator in sorted({generator_of(c) for c in word}.difference(self.keep), reverse=True):
                if occurs_once(word, generator):
                    return generator
        return 0

    def reduced_equation(self, equation: int) -> int:
        """Number of an equation equivalent to the given one: cyclically reduced and rewritten."""
        factors: list[Factor] = []
        before = self.rules.scanned
        word = self.substituted(self.derivation.words[equation], "", factors)
        word = self.blocks.sorted_logged(word, "", factors)
        word = self.rules.reduce_logged(word, "", factors)
        prefix = ""
        for _ in range(ROUNDS):
            ends = cyclic_ends(word)
            prefix = joined(prefix, word[:ends])
            word = word[ends : len(word) - ends]
            place = self.rules.place_of_match(word + word, len(word))
            if place < 0 or len(prefix) + len(factors) > LONGEST_DETOUR:
                break
            prefix = joined(prefix, word[:place])
            word = self.rules.reduce_logged(word[place:] + word[:place], prefix, factors)
        self.budget.spend(1 + self.rules.scanned - before)
        return self._conjugated(equation, word, prefix, factors)

    def equation_without(self, equation: int, word: str, factors: list[Factor]) -> int:
        """Number of the cyclically reduced form of `word`, where  words[equation] = (factors) · word."""
        ends = cyclic_ends(word)
        return self._conjugated(equation, word[ends : len(word) - ends], word[:ends], factors)

    def add_generator(self, generator: int) -> None:
        """A new generator, whose definition is on the log."""
        self.alive.add(generator)
        self.occurrences[generator] = set()
        self.rules.admit([generator])

    def _conjugated(self, equation: int, word: str, prefix: str, factors: list[Factor]) -> int:
        """Log `word`, where  words[equation] = (factors) · prefix word prefix^-1."""
        back = inverted(prefix)
        self.budget.spend(sum([len(back) + len(u) for u, _, _ in factors]) // 20)
        steps = [Factor(joined(back, u), j, -e) for u, j, e in reversed(factors)]
        return self.derivation.derive(word, [*steps, Factor(back, equation, 1)])

    def _activate(self, number: int, word: str) -> list[Rule]:
        if number in self.active:
            return []
        rules = self.rules.add(word, number)
        self.budget.spend(len(word) * (4 + len(word) // 4) // 4)
        self._make_room(number, rules)
        self.active[number] = word
        self.blocks.learn(word, number)
        for generator in {generator_of(c) for c in word}:
            self.occurrences[generator].add(number)
        return rules

    def _make_room(self, number: int, rules: list[Rule]) -> None:
        """Send relators and rules that the new rules rewrite back to the queue."""
        if not rules:
            return
        shortest = min(len(rule.lhs) for rule in rules)
        generators = {generator_of(c) for c in self.derivation.words[number]}
        touched = set.union(*(self.occurrences[g] for g in generators))
        self.budget.spend(1 + len(touched) * len(rules) // 20)
        for other in sorted(touched):
            word = self.active[other]
            if len(word) < shortest:
                continue
            double = word + word
            hits = [rule for rule in rules if len(rule.lhs) <= len(word) and rule.lhs in double]
            if any(len(rule.rhs) < len(rule.lhs) for rule in hits):
                self.retire(other)
                self.insert(other)
            elif hits:
                self._drop_rewritten(other, hits)

    def _drop_rewritten(self, other: int, hits: list[Rule]) -> None:
        for rule in [r for r in self.rules.of_equation[other] if any(hit.lhs in r.lhs for hit in hits)]:
            self.rules.drop(rule)
            self.forget(rule)
            self.pair_dropped(rule)

    def pair_dropped(self, rule: Rule) -> None:
        """A rule whose left side another rule rewrites was taken out: its equation must still be reached (completion)."""
        self.retired.append(rule)

    def forget(self, rule: Rule) -> None:
        """A rule is gone (completion drops it from its index)."""

    def retire(self, equation: int) -> None:
        """Take a relator out of force."""
        word = self.active.pop(equation)
        self.blocks.forget(word, equation)
        for generator in {generator_of(c) for c in word}:
            self.occurrences[generator].discard(equation)
        for rule in self.rules.remove(equation):
            self.forget(rule)
            self.retired.append(rule)

    # -- what a caller reads

    def words(self) -> list[Word]:
        """The relators in force."""
        return [decoded(word) for word in self.active.values()]

    def solutions(self) -> list[tuple[int, Word]]:
        """(generator, word it equals), the generators eliminated last first: each word speaks of living generators and of
        those that come before it in this list."""
        return [
            (generator_of(letter), decoded(rule.rhs))
            for letter, rule in reversed(self.single.items())
            if not ord(letter) & 1
        ]

    def renumbered_words(self) -> list[Word]:
        """The relators in force, in the living generators numbered 1, 2, ... in increasing order. Unfinished when the budget is spent and
        some are still waiting on the queue."""
        if self.queue and self.budget.exhausted:
            raise Unfinished("the budget was spent before all relators were reduced")
        place = self._places()
        waiting = [self.derivation.words[number] for _, number in self.queue]
        return [tuple([place[x] for x in decoded(word)]) for word in (*self.active.values(), *waiting)]

    def renumbered_images(self, rank: int) -> list[Word]:
        """Each of the generators 1..rank as a word in the living ones, these numbered as in `renumbered_words`."""
        place = self._places()
        images: list[Word] = [(g,) for g in range(1, rank + 1)]
        for generator, word in self.solutions():
            images[generator - 1] = reduced(y for x in word for y in (images[x - 1] if x > 0 else inverse(images[-x - 1])))
        return [tuple([place[x] for x in word]) for word in images]

    def _places(self) -> dict[int, int]:
        place = {g: k for k, g in enumerate(sorted(self.alive), 1)}
        return place | {-g: -k for g, k in place.items()}

    # -- elimination

    def eliminate(self, generator: int, equation: int) -> None:
        """Replace a generator everywhere by what the logged relator, in which it occurs once, says it is."""
        word = self.derivation.words[equation]
        if equation in self.active:
            self.retire(equation)
        for letter in (letter_of(generator), letter_of(-generator)):
            self.single[letter] = solved(word, equation, letter)
        self.alive.discard(generator)
        for other in sorted(self.occurrences.pop(generator)):
            self.retire_without(other, generator)
            self.insert(other)

    def retire_without(self, equation: int, generator: int) -> None:
        """Retire a relator that contains a generator just eliminated."""
        self.occurrences[generator] = set()
        self.retire(equation)
        del self.occurrences[generator]

    def substituted(self, word: str, prefix: str, factors: list[Factor]) -> str:
        """The word with eliminated letters replaced until none is left, logged."""
        while not self.single.keys().isdisjoint(word):
            done = ""
            for letter, group in groupby(word):
                count = len(list(group))
                if letter in self.single:
                    rule = self._power_rule(self.single[letter], count)
                    self.rules.log(rule, joined(prefix, done), factors)
                    done = joined(done, rule.rhs)
                else:
                    done = joined(done, letter * count)
                if len(done) > LONGEST_WORD:
                    raise Unfinished(f"a word of more than {LONGEST_WORD} letters")
            word = self.blocks.sorted_logged(done, prefix, factors)
            self.budget.spend(1 + len(word))
        return word

    def _power_rule(self, rule: Rule, count: int) -> Rule:
        """letter^count -> sorted word, by doubling."""
        if count == 1:
            return rule
        key = rule.lhs, count, rule.equation
        if key not in self._power_rules:
            half = self._power_rule(rule, count // 2)
            rest = self._power_rule(rule, count - count // 2)
            factors: list[Factor] = []
            self.rules.log(half, "", factors)
            self.rules.log(rest, half.rhs, factors)
            word = joined(half.rhs, rest.rhs)
            if len(word) > LONGEST_WORD:
                raise Unfinished(f"a word of more than {LONGEST_WORD} letters")
            word = self.blocks.sorted_logged(word, "", factors)
            lhs = rule.lhs * count
            equation = self.derivation.derive(lhs + inverted(word), factors)
            self._power_rules[key] = Rule(lhs, word, equation, 0, 1)
        return self._power_rules[key]

    def cheapest(
        self, keep: Collection[int], *, growth: int, longest: int, weight: Mapping[int, int] | None = None
    ) -> tuple[int, int] | None:
        """(generator, equation) of the elimination to do next: in the shortest relator that solves a generator outside
        `keep`, the one that lengthens the others least; None when all cost more than `growth` letters or stand in
        relators of more than `longest` letters. With weights only the heaviest generator of a relator is eliminated, and
        relators with fewer other generators outside `keep` come first."""
        best: tuple[tuple[int, int, int, int], int] | None = None
        for number, word in self.active.items():
            if len(word) > longest:
                continue
            generators = {generator_of(c) for c in word}
            outside = generators.difference(keep)
            size = (len(outside) if weight else 0, len(word))
            if best and size > best[0][:2]:
                continue
            heaviest = max(weight[g] for g in generators) if weight else 0
            for g in outside:
                if (not weight or weight[g] == heaviest) and occurs_once(word, g):
                    cost = self._growth(g, number, len(word))
                    if cost <= growth and (best is None or (*size, cost, g) < best[0]):
                        best = (*size, cost, g), number
        return (best[0][3], best[1]) if best else None

    def _growth(self, generator: int, equation: int, length: int) -> int:
        plus, minus = letter_of(generator), letter_of(-generator)
        times = sum(
            self.active[k].count(plus) + self.active[k].count(minus)
            for k in self.occurrences[generator]
            if k != equation
        )
        return times * (length - 2)


def replaced(word: str, single: Mapping[str, Rule], rules: RuleSet, prefix: str, factors: list[Factor]) -> str:
    """The word with every letter that has a rule replaced once, logged behind `prefix`."""
    done = ""
    for letter in word:
        rule = single.get(letter)
        if rule is None:
            done = joined(done, letter)
        else:
            rules.log(rule, joined(prefix, done), factors)
            done = joined(done, rule.rhs)
        if len(done) > LONGEST_WORD:
            raise Unfinished(f"a word of more than {LONGEST_WORD} letters")
    return done


def substituted(word: str, single: Mapping[str, Rule], rules: RuleSet, factors: list[Factor]) -> str:
    """The word with letters replaced until no letter has a rule, logged."""
    while not single.keys().isdisjoint(word):
        word = replaced(word, single, rules, "", factors)
    return word


def occurs_once(word: str, generator: int) -> bool:
    """Whether a generator or its inverse occurs in the word exactly once in all."""
    return word.count(letter_of(generator)) + word.count(letter_of(-generator)) == 1


def solved(word: str, equation: int, letter: str) -> Rule:
    """The rule letter -> rest that a relator gives in which the letter or its inverse occurs exactly once."""
    sign = 1 if letter in word else -1
    form = word if sign > 0 else inverted(word)
    offset = form.index(letter)
    return Rule(letter, inverted(form[offset + 1 :] + form[:offset]), equation, offset, sign)
