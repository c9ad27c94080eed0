"""The breadth lane: all classes of subgroups by increasing index. It finds witnesses of smaller index that are not normal."""

from __future__ import annotations

from collections.abc import Iterator

from lowindex.budget import Budget
from lowindex.cosets import pull_back
from lowindex.decision.descent import REFUTATION
from lowindex.decision.visit import Trial, Visit
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation


class Breadth:
    """`complete_to`: every class of subgroups of at most this index was looked at."""

    def __init__(self, start: Visit, *, reach: int, budget: Budget) -> None:
        self.start = start
        self.reach = reach
        self.budget = budget
        self.complete_to = 1
        self.classes = 1
        self.nodes = 0

    def trials(self) -> Iterator[Trial]:
        """Every class is tried for obstructions, those with a stable nilpotent quotient for a proof."""
        group = Presentation.from_relators(self.start.rank, self.start.relators)
        for index in range(2, self.reach + 1):
            search = SubgroupSearch(group, index, budget=self.budget)
            for found in search:
                if found.index != index:
                    continue
                self.classes += 1
                table = pull_back(found.table, self.start.images)
                how = f"class {self.classes} of the subgroups by index"
                visit = Visit(self.start.presentation, table, max_class=self.start.max_class, budget=self.budget, how=how)
                yield Trial(visit, self.budget.part(min(REFUTATION, self.budget.left // 10)), proof=False)
                quotient = visit.quotient(visit.max_class)
                if quotient.stable and quotient.nilpotency_class:
                    yield Trial(visit, self.budget.part(self.budget.left // 12), proof=True)
            self.nodes += search.nodes
            if not search.finished:
                return
            self.complete_to = index
