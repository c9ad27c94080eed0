"""Another presentation of the same group: random Nielsen moves on the generators and products of relators, from a seed."""

from __future__ import annotations

import random

from lowindex.words import Presentation, Word, inverse, product, reduced

LONGEST = 60


def scrambled(presentation: Presentation, seed: int, *, moves: int = 12) -> Presentation:
    """The group again: moves that would make a relator longer than 60 letters are skipped."""
    chance = random.Random(seed)
    rank = presentation.rank
    relators = list(presentation.relators)
    for _ in range(moves):
        trial = _substituted(relators, rank, chance) if rank > 1 and chance.random() < 0.5 else _multiplied(relators, rank, chance)
        if all(len(word) <= LONGEST for word in trial):
            relators = trial
    return Presentation.from_relators(list(presentation.names), relators, name=f"{presentation.name} scrambled {seed}")


def _substituted(relators: list[Word], rank: int, chance: random.Random) -> list[Word]:
    """x_i is replaced by x_i x_j or x_j x_i (a Nielsen move: an automorphism of the free group)."""
    i, j = chance.sample(range(1, rank + 1), 2)
    image = (i, chance.choice((j, -j)))
    if chance.random() < 0.5:
        image = image[::-1]
    return [reduced(y for x in word for y in (image if x == i else inverse(image) if x == -i else (x,))) for word in relators]


def _multiplied(relators: list[Word], rank: int, chance: random.Random) -> list[Word]:
    """One relator is multiplied by a conjugate of another one, or conjugated, or inverted."""
    if not relators:
        return relators
    k = chance.randrange(len(relators))
    by = (chance.choice((1, -1)) * chance.randint(1, rank),)
    changed = product(inverse(by), relators[k], by) if chance.random() < 0.3 else relators[k]
    if len(relators) > 1:
        other = relators[chance.choice([n for n in range(len(relators)) if n != k])]
        changed = product(changed, inverse(by), other if chance.random() < 0.5 else inverse(other), by)
    return [changed if n == k else word for n, word in enumerate(relators)]
