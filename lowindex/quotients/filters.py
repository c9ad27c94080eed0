"""Conditions on homomorphisms into symmetric groups."""

from __future__ import annotations

import re
from collections.abc import Sequence

from lowindex.errors import InputError
from lowindex.words import Presentation, Word

Permutation = tuple[int, ...]


def value(images: Sequence[Permutation], word: Word) -> Permutation:
    """The permutation of a word, letters acting from the left to the right."""
    points = list(range(len(images[0]) if images else 1))
    for letter in word:
        move = images[abs(letter) - 1]
        if letter < 0:
            back = [0] * len(move)
            for i, j in enumerate(move):
                back[j] = i
            points = [back[i] for i in points]
        else:
            points = [move[i] for i in points]
    return tuple(points)


def cycles(permutation: Sequence[int]) -> list[list[int]]:
    """The cycles by their least points, fixed points included.

    >>> cycles((1, 0, 2))
    [[0, 1], [2]]
    """
    seen: set[int] = set()
    found: list[list[int]] = []
    for start in range(len(permutation)):
        cycle, point = [], start
        while point not in seen:
            seen.add(point)
            cycle.append(point)
            point = permutation[point]
        if cycle:
            found.append(cycle)
    return found


def cycle_type(permutation: Permutation) -> tuple[int, ...]:
    """The lengths of the cycles, longest first, fixed points included.

    >>> cycle_type((1, 0, 2))
    (2, 1)
    """
    return tuple(sorted(map(len, cycles(permutation)), reverse=True))


def is_even(permutation: Permutation) -> bool:
    """Whether the permutation lies in the alternating group."""
    return (len(permutation) - len(cycles(permutation))) % 2 == 0


def is_primitive(images: Sequence[Permutation]) -> bool:
    """Whether a transitive group preserves no partition but the two trivial ones: for every i > 0 the finest one that joins 0 and i (M.
    D. Atkinson 1975)."""
    degree = len(images[0]) if images else 1
    for other in range(1, degree):
        block = list(range(degree))

        def root(i: int, block: list[int] = block) -> int:
            while block[i] != i:
                i = block[i]
            return i

        block[other] = 0
        queue = [(0, other)]
        for i, j in queue:
            for move in images:
                a, b = root(move[i]), root(move[j])
                if a != b:
                    block[max(a, b)] = min(a, b)
                    queue.append((a, b))
        if any(root(i) for i in range(degree)):
            return False
    return degree > 1


def wanted_types(presentation: Presentation, text: str) -> list[tuple[Word, tuple[int, ...]]]:
    """Conditions like "a: 2 2 1, a b: 5" as words and cycle types. InputError when they cannot be read."""
    found = []
    for part in text.split(","):
        match = re.fullmatch(r"(.+?):\s*(\d+(?:\s+\d+)*)\s*", part.strip())
        if not match:
            raise InputError(f"cycle types must be given as WORD: LENGTHS, such as 'a: 2 2 1, a b: 5', not {part.strip()[:40]!r}")
        lengths = tuple(sorted(map(int, match[2].split()), reverse=True))
        found.append((presentation.word(match[1]), lengths))
    return found


def has_types(images: Sequence[Permutation], wanted: Sequence[tuple[Word, tuple[int, ...]]]) -> bool:
    """Whether the words have these cycle types; fixed points need not be listed."""
    for word, lengths in wanted:
        found = [n for n in cycle_type(value(images, word)) if n > 1]
        if found != [n for n in lengths if n > 1]:
            return False
    return True
