"""The hunt: lanes in the order of the plan, and a verdict that announces only what the independent checker accepted."""

from __future__ import annotations

import time
from collections.abc import Iterable, Sequence
from contextlib import suppress
from dataclasses import replace
from typing import Any

import lowindex
from lowindex.algebra import polynomial_text
from lowindex.budget import Budget
from lowindex.checker import Refused, check
from lowindex.cosets import CosetTable, enumerate_cosets
from lowindex.decision.breadth import Classes, breadth, covers
from lowindex.decision.descent import descend
from lowindex.decision.finite import cyclic_visits, regular_table
from lowindex.decision.plan import Plan, Stage, plan_for
from lowindex.decision.verdict import NO, UNDECIDED, YES, Verdict
from lowindex.decision.visit import Trial, Visit
from lowindex.events import Event, Listener, silent
from lowindex.nilpotent import ChainProof
from lowindex.obstructions import AffineObstruction, Obstruction, ProPObstruction
from lowindex.rewriting import Unfinished
from lowindex.witness import Witness, not_virtually_nilpotent, virtually_nilpotent
from lowindex.words import Presentation, Word, inverse, product


def hunt(
    presentation: Presentation,
    *,
    effort: int = 5,
    seconds: float | None = None,
    subgroup: Sequence[Word] = (),
    listen: Listener = silent,
) -> Verdict:
    """Decide whether the group has a nilpotent subgroup of finite index, within an effort from 1 to 9.

    `seconds` is a cap on top of the effort. `subgroup`: words that generate a subgroup of finite index to start from. Ctrl-C ends
    the hunt with the verdict "undecided" and what was searched. InputError for an effort out of range.

    >>> from lowindex.words import Presentation
    >>> found = hunt(Presentation.parse("⟨a, b | a^2, b^2⟩"))
    >>> found.verdict, found.index, found.growth_degree
    ('virtually nilpotent', 2, 1)
    """
    return _Hunt(presentation, plan_for(effort), seconds, tuple(subgroup), listen).verdict()


LARGEST_FITTING = 400
"""In a finite group the descent is not followed beyond this index; cyclic subgroups give shorter witnesses there."""


class _Hunt:
    def __init__(
        self, presentation: Presentation, plan: Plan, seconds: float | None, subgroup: tuple[Word, ...], listen: Listener
    ) -> None:
        self.presentation = presentation
        self.plan = plan
        self.subgroup = subgroup
        self.listen = listen
        self.began = time.monotonic()
        self.budget = Budget(plan.work, seconds=seconds)
        self.searched: dict[str, Any] = {"subgroups": 0, "complete_to_index": 1}
        self.found: Verdict | None = None
        self.open_at: int | None = None
        whole = CosetTable.from_permutations([[0]] * presentation.rank)
        self.whole = Visit(presentation, whole, max_class=plan.max_class, budget=self.budget)

    def verdict(self) -> Verdict:
        interrupted = False
        try:
            if self.subgroup:
                self._given()
            for stage in self.plan.stages:
                if self.found is None and not self.budget.exhausted:
                    self._run(stage)
        except KeyboardInterrupt:
            interrupted = True
        return self.found or self._undecided(interrupted)

    def _run(self, stage: Stage) -> None:
        budget = self.budget.part(self.plan.work * stage.share // 100)
        if stage.lane == "finite":
            self._finite(stage.reach, budget)
        elif stage.lane == "descent":
            self._try(descend(self.whole, reach=stage.reach, budget=budget), "descent")
        else:
            classes = Classes(self.whole, reach=stage.reach, budget=budget)
            self._try((breadth if stage.lane == "breadth" else covers)(classes), stage.lane)
            if stage.lane == "covers":
                self.searched["covers_to_index"] = classes.complete_to
            else:
                self.searched |= {"complete_to_index": classes.complete_to, "classes": classes.classes, "nodes": classes.nodes}

    def _given(self) -> None:
        """Start from the subgroup that the caller has in mind, when its cosets can be enumerated."""
        reach = self.plan.cosets
        budget = self.budget.part(self.budget.left // 3)
        table = enumerate_cosets(self.presentation, self.subgroup, budget=budget, max_cosets=reach).table
        self.searched["given_index"] = None if table is None else table.index
        if table is not None:
            visit = Visit(self.presentation, table, max_class=self.plan.max_class, budget=self.budget, how="the subgroup given")
            self._try(descend(visit, reach=max(reach, table.index), budget=budget), "descent")

    def _finite(self, max_cosets: int, budget: Budget) -> None:
        self.listen(Event("finite", f"coset enumeration, up to {max_cosets} cosets"))
        self.searched["cosets"] = max_cosets
        table = regular_table(self.presentation, max_cosets=max_cosets, budget=budget)
        if table is None:
            return
        self.searched["order"] = table.index
        reach = min(table.index, LARGEST_FITTING)
        self._try(descend(self.whole, reach=reach, budget=self.budget.part(self.budget.left // 3)), "descent", table.index)
        if self.found is None:
            self._try(cyclic_visits(self.whole, table, self.budget.part(self.budget.left // 2)), "finite", table.index)

    def _try(self, trials: Iterable[Trial], lane: str, order: int | None = None) -> None:
        """Go through the trials of a lane until one decides, or a presentation cannot be reduced within the budget. In a finite group of
        known order subgroups whose nilpotent quotient is too small are passed over, and nothing is refuted."""
        with suppress(Unfinished):
            for trial in trials:
                visit = trial.visit
                if not trial.proof:
                    self.searched["subgroups"] += 1
                    self.listen(Event(lane, f"index {visit.index}: {visit.how}", visit.index))
                    if order is None:
                        self._refute(trial)
                elif order is None or visit.quotient(visit.max_class).order == order // visit.index:
                    self._prove(trial)
                if self.found is not None:
                    return

    def _refute(self, trial: Trial) -> None:
        """Propose obstructions on a subgroup to the checker; the first that it accepts decides."""
        visit = trial.visit
        for obstruction in visit.obstructions(trial.budget):
            witness = not_virtually_nilpotent(
                self.presentation, visit.table, obstruction, effort=self.plan.effort, version=lowindex.__version__
            )
            if self._accepted(witness):
                reason = refutation(obstruction, visit)
                self.found = replace(self._verdict(NO, reason), index=visit.index, witness=witness)
                return

    def _prove(self, trial: Trial) -> None:
        """Try to prove a subgroup nilpotent."""
        visit = trial.visit
        proof = visit.proof(trial.budget)
        if proof is None:
            if visit.quotient(visit.max_class).nilpotency_class:
                self.open_at = visit.index
            return
        witness = virtually_nilpotent(
            self.presentation, visit.subgroup, proof, effort=self.plan.effort, version=lowindex.__version__
        )
        if not self._accepted(witness):
            raise AssertionError("the checker refused a proof of nilpotence")
        summary = witness.content["summary"]
        self.found = replace(
            self._verdict(YES, _reason(summary, visit)),
            index=summary["index"],
            nilpotency_class=summary["class"],
            hirsch_length=summary["hirsch_length"],
            growth_degree=summary["growth_degree"],
            finite_order=summary["finite_order"],
            factors=tuple((rank, tuple(torsion)) for rank, torsion in summary["factors"]),
            generators=_generators(visit, proof),
            witness=witness,
        )

    def _accepted(self, witness: Witness) -> bool:
        """Whether the independent checker accepts a witness for this presentation."""
        try:
            check(witness.text, presentation=(self.presentation.names, self.presentation.relators))
        except Refused:
            return False
        return True

    def _verdict(self, verdict: str, reason: str) -> Verdict:
        return Verdict(
            self.presentation, verdict, reason, self.searched, self.plan.effort, time.monotonic() - self.began, lowindex.__version__
        )

    def _undecided(self, interrupted: bool) -> Verdict:
        if interrupted:
            reason = "interrupted"
        elif self.open_at is not None:
            reason = f"a subgroup of index {self.open_at} has a stable nilpotent quotient, but the proof that it is nilpotent stayed open"
        elif self.budget.out_of_time:
            reason = "no witness within the time given"
        else:
            reason = f"no witness within effort {self.plan.effort}"
        return replace(self._verdict(UNDECIDED, reason), open_at=self.open_at)


def refutation(obstruction: Obstruction, visit: Visit) -> str:
    """An obstruction in a few words."""
    where = "the group itself" if visit.index == 1 else f"a subgroup of index {visit.index}"
    if isinstance(obstruction, ProPObstruction):
        return f"{where} has too few relators modulo {obstruction.prime} (Golod-Shafarevich, Lubotzky)"
    if isinstance(obstruction, AffineObstruction):
        field = {"Q": "the rationals", "Q[t]/(f)": f"Q[t]/({polynomial_text(obstruction.modulus)})", "F_p(t)": f"F_{obstruction.prime}(t)"}
        return f"{where} acts on {field[obstruction.kind]} by affine maps with a dilation and a translation"
    return f"small cancellation C'(1/6): {where} is hyperbolic and neither trivial nor infinite cyclic"


def _reason(summary: dict[str, Any], visit: Visit) -> str:
    if summary["finite_order"] is not None:
        return f"finite of order {summary['finite_order']}"
    kind = "abelian" if summary["class"] == 1 else f"nilpotent of class {summary['class']}"
    return f"{kind} subgroup of index {summary['index']} ({visit.how})"


def _generators(visit: Visit, proof: ChainProof) -> tuple[Word, ...]:
    """The elements of weight 1 of the chain as words of the group: they generate the subgroup."""
    words = list(visit.subgroup.generators)
    for defined in proof.definitions:
        words.append(product(*(words[x - 1] if x > 0 else inverse(words[-x - 1]) for x in defined)))
    return tuple(words[symbol - 1] for symbol, weight in zip(proof.symbols, proof.group.weights, strict=True) if weight == 1)
