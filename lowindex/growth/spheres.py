"""Spheres of a Cayley graph by breadth-first search, exactly."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import accumulate

from lowindex.budget import Budget
from lowindex.growth.models import Move, State

MOST_ELEMENTS = 5_000_000


def sphere_sizes(start: State, moves: Sequence[Move], radius: int, *, budget: Budget) -> list[int]:
    """The numbers of elements at distance 0, 1, ..., at most `radius`; shorter when the budget or the memory for two spheres
    ends, and ending with the last nonempty sphere of a finite group."""
    sizes = [1]
    before: set[State] = set()
    here: set[State] = {start}
    while len(sizes) <= radius and not budget.exhausted:
        after: set[State] = set()
        for number, state in enumerate(here):
            for move in moves:
                image = move(state)
                if image not in here and image not in before:
                    after.add(image)
            if number % 1000 == 999:
                budget.spend(1000 * len(moves))
                if budget.exhausted or len(after) > MOST_ELEMENTS:
                    return sizes
        budget.spend(len(here) % 1000 * len(moves))
        if not after:
            break
        sizes.append(len(after))
        before, here = here, after
    return sizes


def balls(spheres: Sequence[int]) -> list[int]:
    """Sums of the sphere sizes."""
    return list(accumulate(spheres))
