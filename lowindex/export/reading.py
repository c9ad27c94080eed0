"""A witness read back for people: everything that its text only implies is recomputed.

Exports are made from the witness file alone. It must have been accepted by the checker before; nothing is checked again here.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Any

from lowindex.cosets import CosetTable, SubgroupPresentation, subgroup_presentation
from lowindex.witness import Witness
from lowindex.words import Presentation, Word, product

Factor = tuple[Word, int, int]


@dataclass(frozen=True)
class Reading:
    """A witness with its group, coset table, transversal, Schreier generators and equations."""

    witness: Witness

    @property
    def content(self) -> dict[str, Any]:
        """The JSON object."""
        return self.witness.content

    @property
    def claim(self) -> str:
        """What the witness proves."""
        return self.witness.claim

    @cached_property
    def group(self) -> Presentation:
        """The presented group."""
        return self.presentation_of(self.content["group"])

    @staticmethod
    def presentation_of(group: dict[str, Any]) -> Presentation:
        """A group as witnesses have it."""
        return Presentation(tuple(group["names"]), tuple(map(tuple, group["relators"])))

    @cached_property
    def subgroup(self) -> SubgroupPresentation:
        """H, the stabiliser of point 0, on its Schreier generators."""
        table = self.content["table"]
        return subgroup_presentation(self.group, CosetTable.from_permutations(table))

    @property
    def index(self) -> int:
        """[G : H]."""
        return self.subgroup.table.index

    @property
    def rank(self) -> int:
        """Number of Schreier generators."""
        return self.subgroup.rank

    @cached_property
    def definitions(self) -> list[Word]:
        """The words that define the symbols behind the Schreier generators."""
        return [tuple(word) for word in self.content.get("symbols", ())]

    @cached_property
    def lemmas(self) -> list[tuple[Word, list[Factor]]]:
        """Word and factors of every lemma."""
        return [(tuple(word), [(tuple(u), j, e) for u, j, e in factors]) for word, factors in self.content.get("lemmas", ())]

    @cached_property
    def equations(self) -> list[Word]:
        """Rewritten relators, definitions, lemmas, in the order of their numbers."""
        defined = [product((-(self.rank + d),), word) for d, word in enumerate(self.definitions, 1)]
        return [*self.subgroup.relators, *defined, *(word for word, _ in self.lemmas)]

    @property
    def first_definition(self) -> int:
        """The number of the first equation that is a definition."""
        return len(self.subgroup.relators)

    @property
    def first_lemma(self) -> int:
        """The number of the first equation that is a lemma."""
        return self.first_definition + len(self.definitions)

    @cached_property
    def used_relators(self) -> list[int]:
        """The rewritten relators that the proof refers to, in increasing order."""
        goals = self.content.get("goals", {"generators": (), "conjugates": (), "powers": ()})
        numbers = {j for _, factors in self.lemmas for _, j, _ in factors}
        numbers |= {*goals["generators"], *(number for _, _, number in goals["conjugates"]), *goals["powers"]} - {None, -1}
        return sorted(number for number in numbers if number < self.first_definition)

    def replacements(self, lemma: int) -> list[tuple[Word, int]]:
        """The proof of a lemma as a chain: its word, then after every factor what is left of it and the number of the equation used;
        the last word is empty."""
        word, factors = self.lemmas[lemma]
        chain = [(word, -1)]
        for u, j, sign in factors:
            equation = self.equations[j]
            used = product(u, equation if sign > 0 else tuple(-x for x in reversed(equation)), tuple(-x for x in reversed(u)))
            word = product(tuple(-x for x in reversed(used)), word)
            chain.append((word, j))
        return chain
