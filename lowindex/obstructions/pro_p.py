"""The pro-p obstruction: too few relators for the number of generators modulo a prime.

If H has g generators and r relators, d = dim H_1(H; F_p) >= 2 and r - g + d < d^2 / 4, the pro-p completion of H is not p-adic analytic
(Golod and Shafarevich; A. Lubotzky, Group presentation, p-adic analytic groups and lattices in SL_2(C), Ann. of Math. 118 (1983)), so H
is not virtually nilpotent.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from lowindex.algebra import Abelianization
from lowindex.words import Word, cyclic_form

PRIMES = (2, 3, 5, 7, 11, 13)


@dataclass(frozen=True)
class ProPObstruction:
    """The inequality holds modulo `prime`."""

    prime: int


def pro_p_obstruction(rank: int, relators: Sequence[Word], homology: Abelianization) -> ProPObstruction | None:
    """The prime for which the inequality holds with the largest margin; None when there is none."""
    count = len({cyclic_form(word) for word in relators} - {()})
    best: tuple[int, int] | None = None
    for p in PRIMES:
        d = homology.betti + sum(1 for order in homology.torsion if order % p == 0)
        margin = d * d - 4 * (count - rank + d)
        if d >= 2 and margin > 0 and (best is None or margin > best[0]):
            best = margin, p
    return ProPObstruction(best[1]) if best else None
