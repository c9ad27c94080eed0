"""Nilpotent quotients of finitely presented groups, class by class, over the integers.

W. Nickel, Computing nilpotent quotients of finitely presented groups, DIMACS Series 25 (1996); C. C. Sims, Computation with Finitely
Presented Groups (1994), ch. 11. From H / gamma_{c+1} one goes to H / gamma_{c+2}: every relation that is not a definition gets a new
central generator (a tail), consistency and the relators say what holds between the tails, and the Hermite form of that leaves the
generators of weight c + 1. The columns are ordered so that those are commutators [a_j, a_i] with a_i of weight 1.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import prod

from flint import fmpz_mat

from lowindex.algebra import abelianization, relation_matrix
from lowindex.budget import Budget
from lowindex.nilpotent.collection import Definition, NilpotentPresentation, Vector
from lowindex.nilpotent.consistency import consistency_pairs
from lowindex.words import Word

MOST_GENERATORS = 80
"""A quotient that would need more generators is not built: the class before it is returned."""


MOST_TAILS = 400
"""A class that would need more tails is not computed."""


@dataclass(frozen=True)
class NilpotentQuotient:
    """H / gamma_{c+1}: `group`, the images of the generators of H, and whether it is the largest nilpotent quotient of H (`stable`: the
    next class adds nothing)."""

    group: NilpotentPresentation
    images: tuple[Vector, ...]
    stable: bool

    @property
    def nilpotency_class(self) -> int:
        """The class of the group (0 for the trivial group)."""
        return max(self.group.weights, default=0)

    @property
    def hirsch_length(self) -> int:
        """Number of infinite cyclic factors."""
        return self.group.orders.count(0)

    @property
    def factors(self) -> tuple[tuple[int, tuple[int, ...]], ...]:
        """(rank, torsion invariants) of gamma_k / gamma_{k+1}, k = 1, ..., class."""
        return tuple(_factor(self.group, weight) for weight in range(1, self.nilpotency_class + 1))

    @property
    def growth_degree(self) -> int:
        """sum of k * rank(gamma_k / gamma_{k+1}) (Bass 1972, Guivarc'h 1973)."""
        return sum(k * rank for k, (rank, _) in enumerate(self.factors, 1))

    @property
    def order(self) -> int | None:
        """Number of elements; None when infinite."""
        return None if self.hirsch_length else prod(self.group.orders)


def _factor(group: NilpotentPresentation, weight: int) -> tuple[int, tuple[int, ...]]:
    here = [k for k in range(group.size) if group.weights[k] == weight]
    place = {k: n for n, k in enumerate(here, 1)}
    relators = []
    for k in here:
        if group.orders[k]:
            power = group.power_image(k)
            word = [place[k]] * group.orders[k]
            for other in here:
                word += [-place[other] if power[other] > 0 else place[other]] * abs(power[other])
            relators.append(tuple(word))
    homology = abelianization(len(here), relators)
    return homology.betti, homology.torsion


def nilpotent_quotient(
    rank: int, relators: Sequence[Word], *, max_class: int, budget: Budget, prefer: Sequence[int] = ()
) -> NilpotentQuotient:
    """The quotient of class at most `max_class`; smaller when it is stable before, when the budget is spent, or when it would need too
    many generators. `prefer`: input generators to take first as generators of weight 1."""
    quotient = abelian_quotient(rank, relators, prefer)
    while quotient.nilpotency_class < max_class and not budget.exhausted:
        try:
            larger = _next_class(quotient, relators, budget)
        except OverflowError:
            break
        if larger is None:
            break
        if larger.stable:
            return larger
        quotient = larger
    return quotient


def abelian_quotient(rank: int, relators: Sequence[Word], prefer: Sequence[int] = ()) -> NilpotentQuotient:
    """H / H' on as few of the input generators as a few orders of columns give."""
    first = [g for g in prefer if 1 <= g <= rank]
    order = first + [g for g in range(1, rank + 1) if g not in set(first)]
    rows = relation_matrix(rank, relators)
    # The generators whose columns come last survive.
    best = _hermite_quotient(rank, rows, order[::-1])
    homology = abelianization(rank, relators)
    for turn in range(1, min(rank, 6)):
        if best.group.size <= homology.betti + len(homology.torsion):
            break
        best = min(best, _hermite_quotient(rank, rows, order[turn:] + order[:turn]), key=lambda found: found.group.size)
    return best


def _hermite_quotient(rank: int, rows: list[list[int]], columns: list[int]) -> NilpotentQuotient:
    lattice = [[row[g - 1] for g in columns] for row in rows]
    survivors, orders, values = _solve_lattice(lattice, rank)
    size = len(survivors)
    powers = {k: value for k, (order, value) in enumerate(orders) if order and any(value)}
    group = NilpotentPresentation(
        (1,) * size, tuple(order for order, _ in orders), powers, {}, tuple(("generator", columns[j]) for j in survivors)
    )
    images: list[Vector] = [()] * rank
    for j, g in enumerate(columns):
        images[g - 1] = values[j]
    return NilpotentQuotient(group, tuple(images), size == 0)


def _solve_lattice(rows: list[list[int]], size: int) -> tuple[list[int], list[tuple[int, Vector]], list[Vector]]:
    """The abelian group on `size` generators with these relations: the columns that survive (no pivot 1 in the Hermite form), for each of
    them its order (0: infinite) and the vector of that power, and the vector of every column, all in the survivors."""
    pivots: dict[int, list[int]] = {}
    if rows and size:
        hermite = fmpz_mat(rows).hnf()
        for i in range(min(hermite.nrows(), size)):
            row = [int(hermite[i, j]) for j in range(size)]
            pivot = next((j for j, x in enumerate(row) if x), -1)
            if pivot < 0:
                break
            pivots[pivot] = row
    survivors = [j for j in range(size) if j not in pivots or pivots[j][j] != 1]
    place = {j: k for k, j in enumerate(survivors)}
    values: list[Vector] = [()] * size
    orders: list[tuple[int, Vector]] = [(0, ())] * len(survivors)
    for j in range(size - 1, -1, -1):
        value = [0] * len(survivors)
        if j in pivots:
            for k in range(j + 1, size):
                if pivots[j][k]:
                    value = [x - pivots[j][k] * y for x, y in zip(value, values[k], strict=True)]
            value = _normalised(value, orders)
            if j in place:
                orders[place[j]] = pivots[j][j], tuple(value)
        if j in place:
            value = [int(k == place[j]) for k in range(len(survivors))]
        values[j] = tuple(value)
    return survivors, orders, values


def _normalised(value: list[int], orders: list[tuple[int, Vector]]) -> list[int]:
    """The vector with entries reduced modulo finite orders, from the left."""
    for k, (order, power) in enumerate(orders):
        if order and not 0 <= value[k] < order:
            times, rest = divmod(value[k], order)
            value = [x + times * y for x, y in zip(value, power, strict=True)]
            value[k] = rest
    return value


def _next_class(quotient: NilpotentQuotient, relators: Sequence[Word], budget: Budget) -> NilpotentQuotient | None:
    """H / gamma_{c+2} from H / gamma_{c+1}; None when the budget or the number of generators is exceeded."""
    cover = _Cover(quotient)
    if len(cover.tails) > MOST_TAILS:
        return None
    spent = 0
    rows: dict[tuple[int, ...], None] = {}
    for left, right in consistency_pairs(cover.group, most=cover.weight):
        spent = _charge(cover, spent, budget)
        if left != right:
            rows[tuple(x - y for x, y in zip(left, right, strict=True))] = None
        if budget.exhausted:
            return None
    for word in relators:
        value = cover.group.evaluate(word, cover.images)
        spent = _charge(cover, spent, budget)
        if any(value):
            rows[value] = None
        if budget.exhausted:
            return None
    budget.spend(len(rows) * len(cover.tails) // 5)
    return cover.quotient([list(row[cover.size :]) for row in rows])


def _charge(cover: _Cover, spent: int, budget: Budget) -> int:
    """Charge the steps of collection since `spent`; the steps so far."""
    steps = cover.group.steps
    budget.spend(1 + (steps - spent) * (2 + cover.group.size // 60))
    return steps


class _Cover:
    """The covering group of a nilpotent quotient of class c: tails are central generators of infinite order behind the others, in the
    order powers, images, conjugates by weight; the last ones are those that can survive."""

    def __init__(self, quotient: NilpotentQuotient) -> None:
        group = quotient.group
        self.base = quotient
        self.size = group.size
        self.weight = quotient.nilpotency_class + 1
        defined = {definition[1:] for definition in group.definitions if definition[0] == "commutator"}
        defining = {definition[1] for definition in group.definitions if definition[0] == "generator"}
        self.tails: list[tuple[str, int, int]] = [("power", j, 0) for j in range(self.size) if group.orders[j]]
        self.tails += [("image", g, 0) for g in range(1, len(quotient.images) + 1) if g not in defining]
        pairs = [
            (j, i)
            for j in range(self.size)
            for i in range(j)
            if group.weights[i] + group.weights[j] <= self.weight and (j, i) not in defined
        ]
        # conjugates by generators of weight 1 last, those of the heaviest a_j at the very end
        pairs.sort(key=lambda p: (group.weights[p[1]] == 1, group.weights[p[0]] if group.weights[p[1]] == 1 else 0, p))
        self.tails += [("conjugate", j, i) for j, i in pairs]
        place = {tail: self.size + k for k, tail in enumerate(self.tails)}
        width = self.size + len(self.tails)

        def extended(vector: Vector, tail: tuple[str, int, int]) -> Vector:
            wide = list(vector) + [0] * (width - self.size)
            if tail in place:
                wide[place[tail]] = 1
            return tuple(wide)

        powers = {j: extended(group.power_image(j), ("power", j, 0)) for j in range(self.size) if group.orders[j]}
        keys = {*group.conjugates, *pairs}
        conjugates = {(j, i): extended(group.conjugate_image(j, i), ("conjugate", j, i)) for j, i in keys}
        self.images = [extended(image, ("image", g, 0)) for g, image in enumerate(quotient.images, 1)]
        weights = group.weights + (self.weight,) * len(self.tails)
        self.group = NilpotentPresentation(weights, group.orders + (0,) * len(self.tails), powers, conjugates)

    def quotient(self, rows: list[list[int]]) -> NilpotentQuotient | None:
        """The next quotient from the relations between the tails."""
        survivors, orders, values = _solve_lattice(rows, len(self.tails))
        base, size = self.base, self.size
        if not survivors:
            return NilpotentQuotient(base.group, base.images, True)
        if size + len(survivors) > MOST_GENERATORS:
            return None
        definitions: list[Definition] = []
        for k in survivors:
            kind, j, i = self.tails[k]
            if kind != "conjugate" or base.group.weights[i] != 1 or base.group.weights[j] != self.weight - 1:
                raise AssertionError(f"the tail of {self.tails[k]} cannot define a generator of weight {self.weight}")
            definitions.append(("commutator", j, i))

        def narrowed(vector: Vector) -> Vector:
            tail = [0] * len(survivors)
            for k, x in enumerate(vector[size:]):
                if x:
                    tail = [y + x * z for y, z in zip(tail, values[k], strict=True)]
            return vector[:size] + tuple(_normalised(tail, orders))

        powers = {j: narrowed(vector) for j, vector in self.group.powers.items()}
        powers |= {size + k: (0,) * size + value for k, (order, value) in enumerate(orders) if order}
        conjugates = {
            (j, i): narrowed(vector)
            for (j, i), vector in self.group.conjugates.items()
        }
        unit = (0,) * size
        group = NilpotentPresentation(
            base.group.weights + (self.weight,) * len(survivors),
            base.group.orders + tuple(order for order, _ in orders),
            {j: vector for j, vector in powers.items() if any(vector)},
            {(j, i): v for (j, i), v in conjugates.items() if v != unit[:j] + (1,) + (0,) * (size + len(survivors) - j - 1)},
            base.group.definitions + tuple(definitions),
        )
        return NilpotentQuotient(group, tuple(narrowed(image) for image in self.images), False)
