"""What a scan does with one group. Tasks are text, so that they can be stored and sent to workers.

    hunt                  the verdict, with a witness
    onto:TARGET           whether there is an epimorphism onto a named finite group
    smallest-quotient:N   the least order of a non-abelian quotient, up to N
    betti:N               the least index, up to N, of a subgroup with infinite first homology
"""

from __future__ import annotations

import time
from concurrent.futures import BrokenExecutor

import lowindex
from lowindex.budget import Budget
from lowindex.decision import hunt, plan_for
from lowindex.errors import InputError
from lowindex.scan.betti import Finding, Pool, first_betti
from lowindex.scan.store import UNDECIDED, Result
from lowindex.words import Presentation


def check_task(task: str) -> None:
    """InputError for a task that does not exist."""
    kind, _, rest = task.partition(":")
    if kind == "hunt" and not rest:
        return
    if kind == "onto" and rest:
        from lowindex.quotients import target_order

        target_order(rest)
        return
    if kind in ("smallest-quotient", "betti") and rest.isdigit() and 1 <= int(rest) <= 2999:
        return
    raise InputError(f"unknown task {task[:60]!r}; give hunt, onto:TARGET, smallest-quotient:N or betti:N")


def run_task(
    text: str, task: str, effort: int, seconds: float | None, *, checkpoint: str | None = None, pool: Pool | None = None
) -> Result:
    """Run one task on one presentation, from a checkpoint if there is one; errors become results."""
    began = time.monotonic()
    try:
        found = _run(Presentation.parse(text), task, effort, seconds, checkpoint, pool)
    except MemoryError:
        found = Finding("error", {"reason": "out of memory"})
    except TimeoutError:
        found = Finding(UNDECIDED, {"reason": "stopped after the time given"}, checkpoint=checkpoint)
    except BrokenExecutor:
        raise
    except Exception as error:
        found = Finding("error", {"reason": f"{type(error).__name__}: {str(error)[:200]}"})
    spent = time.monotonic() - began
    return Result(task, effort, lowindex.__version__, found.verdict, found.facts, spent, found.witness, found.checkpoint)


def _run(group: Presentation, task: str, effort: int, seconds: float | None, checkpoint: str | None, pool: Pool | None) -> Finding:
    kind, _, rest = task.partition(":")
    if kind == "hunt":
        found = hunt(group, effort=effort, seconds=seconds)
        facts = found.as_json()
        keep = ("index", "growth_degree", "hirsch_length", "class", "finite_order", "reason", "searched")
        return Finding(found.verdict, {key: facts[key] for key in keep}, None if found.witness is None else found.witness.text)
    budget = Budget(plan_for(effort).work, seconds=seconds)
    if kind == "onto":
        return _onto(group, rest, budget)
    if kind == "smallest-quotient":
        return _smallest(group, int(rest), budget)
    return first_betti(group, int(rest), budget, checkpoint, pool)


def _onto(group: Presentation, target: str, budget: Budget) -> Finding:
    from lowindex.quotients import count_onto

    counts = count_onto(group, target, budget=budget)
    facts = {"order": counts.order, "epimorphisms": counts.epimorphisms, "kernels": counts.kernels, "complete": counts.complete}
    verdict = "quotient" if counts.kernels else "no quotient" if counts.complete else UNDECIDED
    return Finding(verdict, facts)


def _smallest(group: Presentation, bound: int, budget: Budget) -> Finding:
    from lowindex.quotients import NormalSubgroups, describe_image

    search = NormalSubgroups(group, bound, budget)
    for table in search:
        moves = table.permutations
        if any(any(p[q[i]] != q[p[i]] for i in range(table.index)) for p in moves for q in moves):
            image = describe_image(moves)
            return Finding("quotient", {"order": table.index, "image": image.name or image.adjectives, "complete": True})
    return Finding("no quotient" if search.complete_to >= bound else UNDECIDED, {"complete_to": search.complete_to})
