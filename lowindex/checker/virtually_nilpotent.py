"""The claim "virtually nilpotent": the stabiliser H of point 0 is nilpotent, with its invariants (FORMAT.md)."""

from __future__ import annotations

from typing import Any

from .abelian import abelian_invariants
from .chain import Chain
from .derivation import replay
from .nilpotent import Nilpotent, Syllables
from .parse import fields, integer, listing, word
from .refused import require
from .table import Table
from .words import Word, cyclic_form, inverse, reduced

KEYS = ("symbols", "lemmas", "chain", "goals")

MOST_GOAL_LETTERS = 20_000_000


def check(value: dict[str, Any], table: Table) -> dict[str, Any]:
    """Check everything behind the table; the summary that the witness must carry."""
    definitions: list[Word] = []
    for d, item in enumerate(listing(value["symbols"], "symbols")):
        definitions.append(word(item, f"definition {d}", table.generators + d))
        require(definitions[d] == reduced(definitions[d]), f"definition {d} is not freely reduced")
    equations = table.relators + [(-(table.generators + d), *defined) for d, defined in enumerate(definitions, 1)]
    replay(value["lemmas"], equations, table.generators + len(definitions))
    chain = Chain(value["chain"], table.generators, definitions)
    exact = _Goals(chain, equations).proved(value["goals"])
    if exact:
        _check_isomorphism(chain, table.relators, definitions)
    return _summary(table.index, chain, exact)


class _Goals:
    """The equations that make H nilpotent, each proved by an equation of the witness."""

    def __init__(self, chain: Chain, equations: list[Word]) -> None:
        self.chain = chain
        self.equations = equations
        self.letters = 0

    def proved(self, value: Any) -> bool:
        """Refuse unless each goal is proved; whether all powers are among them."""
        chain = self.chain
        generators, conjugates, powers = fields(value, ("generators", "conjugates", "powers"), "goals")
        listing(generators, "goals.generators", len(chain.images))
        for s, (number, image) in enumerate(zip(generators, chain.images), 1):
            self._proved(number, (-s,), image, 1, f"the goal of Schreier generator {s}")
        pairs = [(j, i) for j in range(chain.size) for i in range(j) if chain.weights[i] == 1]
        for (j, i), item in zip(pairs, listing(conjugates, "goals.conjugates", len(pairs))):
            upper, lower, number = listing(item, "an entry of goals.conjugates", 3)
            right = type(upper) is int and type(lower) is int and (upper, lower) == (j, i)
            require(right, f"goals.conjugates lacks ({j}, {i}) in its place")
            a, b = chain.symbols[j], chain.symbols[i]
            image = chain.conjugates.get((j, i), ((j, 1),))
            self._proved(number, (-b, a, b), image, -1, f"the goal of the conjugate of {j} by {i}")
        finite = [j for j in range(chain.size) if chain.orders[j]]
        for j, number in zip(finite, listing(powers, "goals.powers", len(finite))):
            if number is not None:
                self._count(chain.orders[j])
                self._proved(number, (chain.symbols[j],) * chain.orders[j], chain.powers.get(j, ()), -1, f"the goal of the power of {j}")
        return None not in powers

    def _proved(self, number: Any, left: Word, vector: Syllables, sign: int, where: str) -> None:
        """The goal is left · NF(vector)^sign = 1. It is proved by a conjugate of an equation or of its inverse."""
        self._count(sum(abs(exponent) for _, exponent in vector))
        spelled = self.chain.spelled(vector)
        goal = reduced(left + (spelled if sign > 0 else inverse(spelled)))
        integer(number, f"{where}, equation", 0 if goal else -1, len(self.equations) - 1 if goal else -1)
        if goal:
            equation = self.equations[number]
            require(cyclic_form(equation) == cyclic_form(goal), f"{where} is not what equation {number} says")

    def _count(self, letters: int) -> None:
        self.letters += letters
        require(self.letters <= MOST_GOAL_LETTERS, f"the goals have more than {MOST_GOAL_LETTERS} letters")


def _check_isomorphism(chain: Chain, relators: list[Word], definitions: list[Word]) -> None:
    """The nilpotent presentation is consistent, and the images make a homomorphism from H onto its group that takes each chain symbol to
    its own generator."""
    group = Nilpotent(chain.orders, chain.powers, chain.conjugates)
    group.require_consistent()

    def inverted(image: Syllables) -> Syllables:
        return group.syllables(group.inverted(group.vector(image)))

    images = list(chain.images)
    inverses = [inverted(image) for image in images]
    for number, relator in enumerate(relators):
        where = f"the image of rewritten relator {number} in the nilpotent group"
        require(not any(group.value(relator, images, inverses)), f"{where} is not trivial")
    for defined in definitions:
        images.append(group.syllables(group.value(defined, images, inverses)))
        inverses.append(inverted(images[-1]))
    for k, symbol in enumerate(chain.symbols):
        require(images[symbol - 1] == ((k, 1),), f"chain symbol {k} does not map to generator {k}")


def _summary(index: int, chain: Chain, exact: bool) -> dict[str, Any]:
    nilpotency_class = max(chain.weights, default=0)
    summary: dict[str, Any] = {"index": index, "class": nilpotency_class}
    if not exact:
        return summary | {"hirsch_length": None, "factors": None, "growth_degree": None, "finite_order": None}
    factors = [_factor(chain, weight) for weight in range(1, nilpotency_class + 1)]
    order = index
    for e in chain.orders:
        order *= e
    return summary | {
        "hirsch_length": chain.orders.count(0),
        "factors": factors,
        "growth_degree": sum(weight * factor[0] for weight, factor in enumerate(factors, 1)),
        "finite_order": order or None,
    }


def _factor(chain: Chain, weight: int) -> list[Any]:
    """[rank, torsion] of the factor of the lower central series: generators of this weight, with the powers of finite order."""
    here = [k for k in range(chain.size) if chain.weights[k] == weight]
    rows = []
    for k in here:
        if chain.orders[k]:
            power = dict(chain.powers.get(k, ()))
            rows.append([chain.orders[k] * (other == k) - power.get(other, 0) for other in here])
    return [*abelian_invariants(rows, len(here))]
