"""Abbreviations: new generators for two-letter words that occur often.

Presentations that come from a change of generators repeat the old generators as subwords; naming the commonest pair again and again finds
them and makes the relators short. (Introducing generators for common substrings: Havas, Kenne, Richardson, Robertson, A Tietze
transformation program, 1984.)
"""

from __future__ import annotations

from collections import Counter

from lowindex.rewriting.derivation import Factor
from lowindex.rewriting.relators import RelatorSet
from lowindex.rewriting.rules import Rule
from lowindex.rewriting.strings import decoded, inverted, joined, letter_of
from lowindex.words import Word

MOST_ABBREVIATIONS = 60
LEAST_USES = 4


def abbreviate(relators: RelatorSet, first: int) -> list[Word]:
    """Name pairs of letters in the relators on the queue while the commonest occurs at least four times; the words named. New
    generators are numbered from `first`; the definitions are given equations of the log."""
    derivation = relators.derivation
    numbers = [number for _, number in relators.queue]
    named: list[Word] = []
    while len(named) < MOST_ABBREVIATIONS and not relators.budget.exhausted:
        pair, uses = _commonest([derivation.words[number] for number in numbers])
        if uses < LEAST_USES:
            break
        generator = first + len(named)
        named.append(decoded(pair))
        definition = derivation.give(letter_of(-generator) + pair)
        relators.add_generator(generator)
        rules = {
            pair: Rule(pair, letter_of(generator), definition, 1, 1),
            inverted(pair): Rule(inverted(pair), letter_of(-generator), definition, 0, -1),
        }
        numbers = [_shortened(relators, number, rules) for number in numbers]
        relators.budget.spend(sum(len(derivation.words[number]) for number in numbers))
    relators.queue.clear()
    for number in numbers:
        if derivation.words[number]:
            relators.insert(number)
    return named


def _commonest(words: list[str]) -> tuple[str, int]:
    """The pair of letters, up to inversion, with most places that do not overlap, and their number."""
    counts: Counter[str] = Counter()
    for word in words:
        last = ""
        for place in range(len(word) - 1):
            pair = word[place : place + 2]
            key = min(pair, inverted(pair))
            if key != last:
                counts[key] += 1
                last = key
            else:
                last = ""
    return min(counts.items(), key=lambda item: (-item[1], item[0]), default=("", 0))


def _shortened(relators: RelatorSet, number: int, rules: dict[str, Rule]) -> int:
    """The relator with every place of the pairs replaced, cyclically reduced, as a logged equation."""
    word = relators.derivation.words[number]
    factors: list[Factor] = []
    done, place = "", 0
    while place < len(word):
        rule = rules.get(word[place : place + 2])
        if rule is None:
            done = joined(done, word[place])
            place += 1
        else:
            relators.rules.log(rule, done, factors)
            done = joined(done, rule.rhs)
            place += 2
    return relators.equation_without(number, done, factors)
