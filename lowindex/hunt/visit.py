"""One subgroup of finite index in the hand of the hunt: its table, presentation, abelianization, nilpotent quotient, proof.

Everything is computed when it is first asked for and kept.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import cached_property

from lowindex.algebra import Abelianization, abelianization
from lowindex.budget import Budget
from lowindex.cosets import CosetTable, SubgroupPresentation, compose, pull_back, subgroup_presentation
from lowindex.nilpotent import ChainProof, NilpotentQuotient, prove_nilpotent, quotient_of, simplified_relators
from lowindex.rewriting import RelatorSet
from lowindex.words import Presentation, Word


class Visit:
    """The stabiliser H of point 0 of `table` in the group of `presentation`. `how` says in a line how it was reached;
    `contains_fitting`: whether H is known to contain the Fitting subgroup of a virtually nilpotent group."""

    def __init__(
        self,
        presentation: Presentation,
        table: CosetTable,
        *,
        budget: Budget,
        how: str = "the group itself",
        contains_fitting: bool = True,
    ) -> None:
        self.presentation = presentation
        self.table = table
        self.budget = budget
        self.how = how
        self.contains_fitting = contains_fitting

    @property
    def index(self) -> int:
        """[G : H]."""
        return self.table.index

    @cached_property
    def subgroup(self) -> SubgroupPresentation:
        """H on its Schreier generators."""
        return subgroup_presentation(self.presentation, self.table)

    @cached_property
    def reduced(self) -> RelatorSet:
        """The presentation of H after Tietze moves."""
        return simplified_relators(self.subgroup.rank, self.subgroup.relators, budget=self.budget)

    @cached_property
    def rank(self) -> int:
        """Number of generators left after Tietze moves."""
        return len(self.reduced.alive)

    @cached_property
    def relators(self) -> tuple[Word, ...]:
        """The relators left, in generators 1..rank."""
        return tuple(self.reduced.renumbered_words())

    @cached_property
    def images(self) -> Sequence[Word]:
        """Every Schreier generator as a word in the generators that are left."""
        return self.reduced.renumbered_images(self.subgroup.rank)

    @cached_property
    def homology(self) -> Abelianization:
        """H_1 of H."""
        return abelianization(self.rank, self.relators)

    def below(self, table: CosetTable, *, how: str, contains_fitting: bool) -> Visit:
        """The subgroup K of H that is the stabiliser of 0 in a table over the generators left after Tietze moves."""
        over_schreier = pull_back(table, self.images)
        return Visit(
            self.presentation,
            compose(over_schreier, self.subgroup),
            budget=self.budget,
            how=how,
            contains_fitting=self.contains_fitting and contains_fitting,
        )
