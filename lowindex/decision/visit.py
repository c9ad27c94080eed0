"""One subgroup of finite index in the hand of the hunt: its table, presentation, abelianization, nilpotent quotient, proof.

Everything is computed when it is first asked for and kept.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

from lowindex.algebra import Abelianization, abelianization
from lowindex.budget import Budget
from lowindex.cosets import CosetTable, SubgroupPresentation, compose, pull_back, subgroup_presentation
from lowindex.nilpotent import ChainProof, NilpotentQuotient, nilpotent_quotient, prove_nilpotent, simplified_relators
from lowindex.obstructions import Obstruction, SmallCancellation, affine_obstructions, pro_p_obstruction
from lowindex.rewriting import RelatorSet
from lowindex.words import Presentation, Word


@dataclass(frozen=True)
class Trial:
    """What a lane proposes: prove that the subgroup of a visit is nilpotent (`proof`), or look for an obstruction on it."""

    visit: Visit
    budget: Budget
    proof: bool


class Visit:
    """The stabiliser H of point 0 of `table` in the group of `presentation`. `how` says in a line how it was reached."""

    def __init__(
        self, presentation: Presentation, table: CosetTable, *, max_class: int, budget: Budget, how: str = "the group itself"
    ) -> None:
        self.presentation = presentation
        self.table = table
        self.max_class = max_class
        self.budget = budget
        self.how = how
        self._quotient: NilpotentQuotient | None = None

    @property
    def index(self) -> int:
        """[G : H]."""
        return self.table.index

    @cached_property
    def subgroup(self) -> SubgroupPresentation:
        """H on its Schreier generators."""
        self.budget.spend(self.index * sum(map(len, self.presentation.relators)) // 10)
        return subgroup_presentation(self.presentation, self.table)

    @cached_property
    def _reduced(self) -> RelatorSet:
        return simplified_relators(self.subgroup.rank, self.subgroup.relators, budget=self.budget)

    @property
    def rank(self) -> int:
        """Number of generators left after Tietze moves."""
        return len(self._reduced.alive)

    @cached_property
    def relators(self) -> tuple[Word, ...]:
        """The relators left, in generators 1..rank."""
        return tuple(self._reduced.renumbered_words())

    @cached_property
    def images(self) -> Sequence[Word]:
        """Every Schreier generator as a word in the generators that are left."""
        return self._reduced.renumbered_images(self.subgroup.rank)

    @cached_property
    def homology(self) -> Abelianization:
        """H_1 of H."""
        return abelianization(self.rank, self.relators)

    def quotient(self, max_class: int) -> NilpotentQuotient:
        """The nilpotent quotient of H up to this class (a larger one when it is known already)."""
        known = self._quotient
        if known is None or (not known.stable and known.nilpotency_class < max_class):
            self._quotient = known = nilpotent_quotient(self.rank, self.relators, max_class=max_class, budget=self.budget)
        return known

    def proof(self, budget: Budget) -> ChainProof | None:
        """A proof that H is nilpotent, if the budget is enough to find one."""
        return prove_nilpotent(self.subgroup.rank, self.subgroup.relators, max_class=self.max_class, budget=budget)

    def obstructions(self, budget: Budget) -> Iterator[Obstruction]:
        """Obstructions to propose to the checker: affine ones first, as they are the easiest to check by hand and by other programs.
        Small cancellation is proposed for the group itself only."""
        yield from affine_obstructions(self.rank, self.relators, self.homology, self.images, budget=budget)
        pro_p = pro_p_obstruction(self.rank, self.relators, self.homology)
        if pro_p is not None:
            yield pro_p
        if self.index == 1 and self.relators:
            yield SmallCancellation()

    def below(self, table: CosetTable, *, how: str) -> Visit:
        """The subgroup K of H that is the stabiliser of 0 in a table over the generators left after Tietze moves."""
        over_schreier = pull_back(table, self.images)
        whole = compose(over_schreier, self.subgroup)
        return Visit(self.presentation, whole, max_class=self.max_class, budget=self.budget, how=how)
