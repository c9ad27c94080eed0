"""|Hom(G, S_n)| from the numbers of subgroups.

sum over n of |Hom(G, S_n)| z^n / n!  =  exp( sum over n of a_n z^n / n ),  a_n the number of subgroups of index n (R. P. Stanley,
Enumerative Combinatorics 2, 1999, ex. 5.13): a transitive homomorphism is a subgroup with its cosets numbered, any other is a union
of such.
"""

from __future__ import annotations

from fractions import Fraction
from math import factorial

from lowindex.budget import Budget
from lowindex.search import count_classes
from lowindex.words import Presentation


def count_homomorphisms(presentation: Presentation, degree: int, *, budget: Budget) -> tuple[int, ...]:
    """(|Hom(G, S_0)|, ..., |Hom(G, S_n)|) up to n = degree, or up to the index that the search completed within the budget."""
    counts = count_classes(presentation, degree, budget=budget)
    series = [Fraction(1)]
    for n in range(1, counts.complete_to + 1):
        # from the derivative: n h_n = sum of a_k h_(n-k)
        series.append(sum((counts.subgroups[k - 1] * series[n - k] for k in range(1, n + 1)), Fraction(0)) / n)
    return tuple(int(h * factorial(n)) for n, h in enumerate(series))
