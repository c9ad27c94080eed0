"""Twisted characters: metabelian quotients F_q^+ x| C_m found by linear algebra.

Let chi: H -> C_m -> F_q^* be a character of order m > 1. Crossed homomorphisms H -> F_q with this action are the kernel of the Fox
Jacobian at chi; the principal ones have dimension 1. When there are others, H maps onto F_q^+ x| C_m, whose Fitting subgroup is
F_q^+: the cut is the kernel of chi.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import islice, product
from math import gcd

from flint import nmod_mat

from lowindex.algebra import Abelianization, exponent, jacobian_mod
from lowindex.budget import Budget
from lowindex.cosets import abelian_table
from lowindex.quotients.cut import Cut
from lowindex.words import Word

ORDERS = (2, 3, 4, 5, 6, 8, 7, 9, 10, 12)
"""Orders of characters tried when H_1 is infinite."""

PER_ORDER = 300
"""Characters tried for one order."""

MOST_HITS = 40
"""Characters whose kernels are intersected at most; groups with more of them are usually large."""

LARGEST_CUT = 500
"""The intersection of kernels is not taken beyond this index."""


def twisted_characters(rank: int, relators: Sequence[Word], homology: Abelianization, *, budget: Budget) -> Cut | None:
    """The intersection of the kernels of all characters that give a quotient F_q^+ x| C_m; None when none is found."""
    hits: list[tuple[int, tuple[int, ...]]] = []
    primes: dict[int, tuple[int, int]] = {}
    letters = sum(map(len, relators))
    for m in _orders(homology):
        for values in islice(characters(homology, m), PER_ORDER):
            if budget.exhausted or len(hits) == MOST_HITS:
                break
            for q in _primes(m):
                budget.spend(50 + rank + letters + rank * len(relators) // 5)
                if has_crossed(rank, relators, values, m, q):
                    hits.append((m, values))
                    primes[m] = m, q
                    break
    return _intersected(hits, list(primes.values())) if hits else None


def _orders(homology: Abelianization) -> list[int]:
    torsion = exponent(homology)
    divisors = [m for m in range(2, min(torsion, 60) + 1) if torsion % m == 0]
    return sorted({*divisors, *(ORDERS if homology.betti else ())})


def characters(homology: Abelianization, m: int) -> Iterator[tuple[int, ...]]:
    """The characters of order exactly m as values in Z/m on the generators, one of each class under the units of Z/m."""
    steps = [m // gcd(m, d) for d in homology.torsion] + [1] * homology.betti
    units = [u for u in range(2, m) if gcd(u, m) == 1]
    for coefficients in product(*(range(0, m, step) for step in steps)):
        if gcd(m, *coefficients) != 1:
            continue
        if any(tuple(u * c % m for c in coefficients) < coefficients for u in units):
            continue
        yield tuple(sum(c * x for c, x in zip(coefficients, image, strict=True)) % m for image in homology.images)


def _primes(m: int) -> list[int]:
    """Two small primes that are 1 mod m, and a larger one."""
    found = [q for q in range(m + 1, 100 * m + 100, m) if is_prime(q)][:2]
    return [large_prime(m), *found]


def large_prime(m: int) -> int:
    """A prime near 10,000 that is 1 mod m."""
    return next(q for q in range(10_000 // m * m + 1, 10**6, m) if is_prime(q))


def is_prime(n: int) -> bool:
    """Whether a small number is prime."""
    return n > 1 and all(n % d for d in range(2, int(n**0.5) + 1))


def root_of_unity(m: int, q: int) -> int:
    """An element of order m in F_q^*, m dividing q - 1."""
    for base in range(1, q):
        root = pow(base, (q - 1) // m, q)
        if all(pow(root, m // p, q) != 1 for p in range(2, m + 1) if m % p == 0 and is_prime(p)):
            return root
    raise AssertionError(f"no element of order {m} modulo {q}")


def has_crossed(rank: int, relators: Sequence[Word], values: Sequence[int], m: int, q: int) -> bool:
    """Whether the character with these values in Z/m, m dividing q - 1, has a crossed homomorphism to F_q that is not principal."""
    root = root_of_unity(m, q)
    rows = jacobian_mod(relators, [pow(root, v, q) for v in values], q)
    return rank > 1 and (not rows or nmod_mat(len(rows), rank, [x for row in rows for x in row], q).rank() < rank - 1)


def _intersected(hits: list[tuple[int, tuple[int, ...]]], used: list[tuple[int, int]]) -> Cut:
    kept: list[tuple[int, tuple[int, ...]]] = []
    best = None
    for hit in hits:
        trial = [*kept, hit]
        table = abelian_table(list(zip(*(values for _, values in trial), strict=True)), [m for m, _ in trial], LARGEST_CUT)
        if table is None:
            break
        if best is None or table.index > best.index:
            kept, best = trial, table
        if 2 * best.index > LARGEST_CUT:
            break
    assert best is not None
    quotients = ", ".join(f"F_{q} x| C{m}" for m, q in used)
    return Cut(best, "characters", f"{len(kept)} characters with quotients {quotients}")
