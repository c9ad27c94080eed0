"""Tietze simplification: which generators to eliminate, in which order, and when to shorten.

Elimination takes the shortest relator first and in it the generator whose elimination lengthens the others least; shortening runs
after every pass. The limits come from experiments with subgroups of space groups: free elimination without shortening, or with
larger limits, makes words explode.
"""

from __future__ import annotations

import heapq
from collections.abc import Collection, Mapping

from lowindex.rewriting.relators import RelatorSet, occurs_once
from lowindex.rewriting.strings import generator_of

GROWTH = 100
"""One elimination may lengthen the other relators by this many letters in all."""

LONGEST = 40
"""Relators of more letters eliminate nothing."""


def eliminate_short(relators: RelatorSet, keep: Collection[int] = (), *, most: int = 3) -> None:
    """Take the queue by length: a relator of at most `most` letters that solves a generator eliminates it. Relators are substituted,
    not yet rewritten against each other, so that thousands of them cost little; what is left goes back on the queue."""
    users: dict[int, set[int]] = {}
    heap: list[tuple[int, int]] = []
    current: set[int] = set()

    def put(equation: int) -> None:
        number = relators.reduced_equation(equation)
        word = relators.derivation.words[number]
        if word and number not in current:
            current.add(number)
            heapq.heappush(heap, (len(word), number))
            for generator in {generator_of(c) for c in word}:
                users.setdefault(generator, set()).add(number)

    while relators.queue:
        put(heapq.heappop(relators.queue)[1])
    while heap and heap[0][0] <= most and not relators.budget.exhausted:
        number = heapq.heappop(heap)[1]
        if number not in current:
            continue
        word = relators.derivation.words[number]
        solvable = [
            (len(users[g]), -g) for g in {generator_of(c) for c in word}.difference(keep) if occurs_once(word, g)
        ]
        if not solvable:
            continue
        generator = -min(solvable)[1]
        relators.eliminate(generator, number)
        for other in sorted(users.pop(generator) & current):
            current.discard(other)
            if other != number:
                put(other)
    for number in sorted(current):
        relators.insert(number)


def propagate(relators: RelatorSet, basis: Collection[int], weight: Mapping[int, int]) -> None:
    """Solve the other generators in terms of `basis`, one relator with a single unsolved letter at a time.

    Words are sorted by the commutators of basis elements that are already relators, and by nothing else, so they stay as short
    as exponent vectors. When every relator has several unsolved letters, the lightest of the closest one join the basis.
    What is left of the relators goes back on the queue.
    """
    basis = set(basis)
    heap: list[tuple[int, int, int]] = []
    current: set[int] = set()
    users: dict[int, set[int]] = {}

    def unsolved(word: str) -> int:
        return sum(1 for c in word if generator_of(c) not in basis)

    def put(equation: int) -> None:
        number = relators.reduced_equation(equation)
        word = relators.derivation.words[number]
        if not word or number in current or number in relators.active:
            return
        unknown = unsolved(word)
        if not unknown and len(word) <= 5:
            relators.take(number)
            return
        current.add(number)
        heapq.heappush(heap, (unknown, len(word), number))
        for generator in {generator_of(c) for c in word}:
            users.setdefault(generator, set()).add(number)

    def again(generator: int) -> None:
        for other in sorted(users.pop(generator, set()) & current):
            current.discard(other)
            put(other)

    while relators.queue:
        put(heapq.heappop(relators.queue)[1])
    for number in sorted(relators.active):
        if unsolved(relators.active[number]) or len(relators.active[number]) > 5:
            relators.retire(number)
            put(number)
    while heap and not relators.budget.exhausted:
        unknown, _, number = heapq.heappop(heap)
        if number not in current or not unknown:
            continue
        word = relators.derivation.words[number]
        if not relators.single.keys().isdisjoint(word):
            current.discard(number)
            put(number)
            continue
        others = sorted({generator_of(c) for c in word}.difference(basis), key=lambda g: (weight[g], g))
        if not others or unsolved(word) != unknown:
            continue
        if unknown == 1:
            current.discard(number)
            relators.eliminate(others[0], number)
            again(others[0])
        else:
            basis.add(others[0])
            again(others[0])
            if number in current:
                heapq.heappush(heap, (unsolved(word), len(word), number))
    for number in sorted(current):
        relators.insert(number)


def simplify(
    relators: RelatorSet,
    keep: Collection[int] = (),
    *,
    growth: int = GROWTH,
    longest: int = LONGEST,
    weight: Mapping[int, int] | None = None,
) -> None:
    """Eliminate generators outside `keep` and shorten relators until neither helps."""
    relators.settle()
    while not relators.budget.exhausted:
        choice = relators.cheapest(keep, growth=growth, longest=longest, weight=weight)
        if choice is None:
            return
        relators.eliminate(*choice)
        relators.settle()
