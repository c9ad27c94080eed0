"""The word problem: a derivation that a word is trivial, or a finite quotient in which it is not, the smallest degree first."""

from __future__ import annotations

import time
from dataclasses import dataclass, field
from typing import Any

import lowindex
from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.checker import check
from lowindex.cosets import CosetTable, abelian_table, enumerate_cosets
from lowindex.decision.plan import Plan, plan_for
from lowindex.decision.verdict import UNDECIDED
from lowindex.nilpotent import finite_replay
from lowindex.rewriting import Completion, Derivation, Factor, Proof, RelatorSet, Shortlex, Unfinished, encoded
from lowindex.search import SubgroupSearch
from lowindex.witness import Witness, word_not_trivial, word_trivial
from lowindex.words import Presentation, Word, reduced

TRIVIAL = "trivial"
NONTRIVIAL = "not trivial"

LARGEST_DEGREE = 200
FIRST_DEGREE = 7


@dataclass(frozen=True)
class WordVerdict:
    """`degree`: of the separating action; `smallest`: whether every smaller degree was searched without a separation. `searched`: what
    was covered."""

    verdict: str
    seconds: float
    searched: dict[str, Any] = field(default_factory=dict)
    degree: int | None = None
    smallest: bool = False
    witness: Witness | None = field(default=None, repr=False)


def decide_word(presentation: Presentation, word: Word, *, effort: int = 5, seconds: float | None = None) -> WordVerdict:
    """Decide whether a word is trivial, within an effort from 1 to 9 and a cap in seconds. InputError for an effort out of range."""
    plan = plan_for(effort)
    return _Word(presentation, reduced(word), plan, Budget(plan.work, seconds=seconds)).verdict()


class _Word:
    def __init__(self, presentation: Presentation, word: Word, plan: Plan, budget: Budget) -> None:
        self.presentation = presentation
        self.word = word
        self.plan = plan
        self.budget = budget
        self.began = time.monotonic()
        self.searched: dict[str, Any] = {"complete_to_degree": 1}

    def verdict(self) -> WordVerdict:
        if not self.word:
            return self._trivial(Proof(len(self.presentation.relators), (), (-1,)))
        work = self.budget.left
        return (
            self._separated(FIRST_DEGREE, self.budget.part(work // 8))
            or self._derived(self.budget.part(work // 4))
            or self._enumerated(self.budget.part(work // 4))
            or self._separated(LARGEST_DEGREE, self.budget)
            or self._abelian()
            or WordVerdict(UNDECIDED, time.monotonic() - self.began, self.searched)
        )

    def _separated(self, most: int, budget: Budget) -> WordVerdict | None:
        for degree in range(self.searched["complete_to_degree"] + 1, most + 1):
            search = SubgroupSearch(self.presentation, degree, budget=budget)
            for found in search:
                if found.index == degree and not found.table.satisfies([self.word]):
                    return self._moved(found.table)
            if not search.finished:
                return None
            self.searched["complete_to_degree"] = degree
        return None

    def _abelian(self) -> WordVerdict | None:
        """A cyclic quotient in which the word has another image than 1."""
        homology = abelianization(self.presentation.rank, self.presentation.relators)
        for place in range(len(homology.torsion) + homology.betti):
            images = [image[place] for image in homology.images]
            total = sum(images[abs(x) - 1] * (1 if x > 0 else -1) for x in self.word)
            if place < len(homology.torsion):
                modulus = homology.torsion[place]
            else:
                modulus = next(m for m in range(2, abs(total) + 3) if total % m) if total else 1
            if total % modulus:
                table = abelian_table([(image,) for image in images], [modulus])
                assert table is not None
                return self._moved(table)
        return None

    def _moved(self, table: CosetTable) -> WordVerdict:
        point = next(i for i in range(table.index) if table.image(i, self.word) != i)
        witness = word_not_trivial(self.presentation, self.word, table, point, effort=self.plan.effort, version=lowindex.__version__)
        smallest = self.searched["complete_to_degree"] >= table.index - 1
        return self._accepted(NONTRIVIAL, witness, degree=table.index, smallest=smallest)

    def _derived(self, budget: Budget) -> WordVerdict | None:
        """By completion in two orders of the generators."""
        generators = list(range(1, self.presentation.rank + 1))
        for order in (generators, generators[::-1]):
            derivation = Derivation(self.presentation.relators)
            system = Completion(derivation, Shortlex(order), generators, budget=budget)
            for number, relator in enumerate(self.presentation.relators):
                system.insert(number, priority=len(relator) // 2)
            system.set_goals({"word": self.word}, {})
            try:
                if system.run(work=budget.left // 2):
                    return self._trivial(derivation.cut([system.proved["word"]]))
            except Unfinished:
                continue
        return None

    def _enumerated(self, budget: Budget) -> WordVerdict | None:
        """In a finite group whose order a coset enumeration finds: the regular action separates, or the log of an enumeration is a
        proof."""
        table = enumerate_cosets(self.presentation, budget=budget, max_cosets=self.plan.cosets).table
        if table is None:
            return None
        self.searched["order"] = table.index
        if not table.satisfies([self.word]):
            return self._moved(table)
        derivation = Derivation(self.presentation.relators)
        generators = range(1, self.presentation.rank + 1)
        relators = RelatorSet(derivation, Shortlex(generators), generators, budget=budget)
        for number in range(len(self.presentation.relators)):
            relators.insert(number)
        relators.settle()
        replay = finite_replay(relators, table.index, max_cosets=self.plan.cosets, budget=budget)
        if replay is None:
            return None
        factors: list[Factor] = []
        plain = relators.substituted(encoded(self.word), "", factors)
        if plain:
            proved = replay.prove(plain)
            if proved is None:
                return None
            factors.append(Factor("", proved, 1))
        return self._trivial(derivation.cut([derivation.derive(encoded(self.word), factors)]))

    def _trivial(self, proof: Proof) -> WordVerdict:
        witness = word_trivial(self.presentation, self.word, proof, effort=self.plan.effort, version=lowindex.__version__)
        return self._accepted(TRIVIAL, witness)

    def _accepted(self, verdict: str, witness: Witness, *, degree: int | None = None, smallest: bool = False) -> WordVerdict:
        check(witness.text, presentation=(self.presentation.names, self.presentation.relators))
        return WordVerdict(verdict, time.monotonic() - self.began, self.searched, degree, smallest, witness)
