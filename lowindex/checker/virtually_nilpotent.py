"""The claim "virtually nilpotent": the stabiliser H of point 0 is nilpotent, with its invariants (FORMAT.md)."""

from __future__ import annotations

from typing import Any

from .derivation import replay
from .nilpotent import Nilpotent, Vector, abelian_invariants
from .parse import fields, integer, listing, word
from .refused import require
from .table import Table
from .words import Word, inverse, reduced, same_relator

MOST_SYMBOLS = 10_000_000
LONGEST_CHAIN = 120
MOST_LETTERS = 100_000_000
HUGE = 10**12


class Chain:
    """The chain a_0, a_1, ... with weights, orders, powers, conjugates and the images of the Schreier generators."""

    def __init__(self, value: Any, generators: int, definitions: list[Word]) -> None:
        symbols, weights, orders, powers, conjugates, images = fields(
            value, ("symbols", "weights", "orders", "powers", "conjugates", "images"), "chain"
        )
        total = generators + len(definitions)
        self.symbols = [integer(s, "a chain symbol", 1, total) for s in listing(symbols, "chain.symbols")]
        self.size = len(self.symbols)
        require(self.size <= LONGEST_CHAIN, f"the chain has more than {LONGEST_CHAIN} symbols")
        require(len(set(self.symbols)) == self.size, "a symbol stands twice in the chain")
        self.weights = [integer(w, "a weight", 1, LONGEST_CHAIN) for w in listing(weights, "chain.weights")]
        self.orders = [integer(e, "an order", 0, HUGE) for e in listing(orders, "chain.orders")]
        require(len(self.weights) == len(self.orders) == self.size, "the chain's lists differ in length")
        require(1 not in self.orders, "an order is 1")
        self.letters = 0
        self.powers = self._powers(listing(powers, "chain.powers"))
        self.conjugates = self._conjugates(listing(conjugates, "chain.conjugates"))
        require(len(listing(images, "chain.images")) == generators, "chain.images needs one vector per Schreier generator")
        self.images = [self._vector(image, f"the image of Schreier generator {s}") for s, image in enumerate(images, 1)]
        self._check_weights(generators, definitions)

    def _vector(self, value: Any, where: str) -> Vector:
        entries = [0] * self.size
        last = -1
        for pair in listing(value, where):
            require(type(pair) is list and len(pair) == 2, f"{where} has an entry that is not a pair")
            last = integer(pair[0], f"a place in {where}", last + 1, self.size - 1)
            order = self.orders[last]
            entries[last] = integer(pair[1], f"an exponent in {where}", *((1, order - 1) if order else (-HUGE, HUGE)))
            require(entries[last] != 0, f"{where} has the exponent 0")
            self.letters += abs(entries[last])
        return tuple(entries)

    def _powers(self, value: list[Any]) -> dict[int, Vector]:
        found: dict[int, Vector] = {}
        for pair in value:
            require(type(pair) is list and len(pair) == 2, "chain.powers has an entry that is not a pair")
            j = integer(pair[0], "a place in chain.powers", 0, self.size - 1)
            require(self.orders[j] and j not in found, f"chain.powers: no finite order at {j}, or twice")
            found[j] = self._vector(pair[1], f"the power of {j}")
            require(not any(found[j][: j + 1]), f"the power of {j} is not in later generators")
        return found

    def _conjugates(self, value: list[Any]) -> dict[tuple[int, int], Vector]:
        found: dict[tuple[int, int], Vector] = {}
        for triple in value:
            require(type(triple) is list and len(triple) == 3, "chain.conjugates has an entry that is not a triple")
            i = integer(triple[1], "a place in chain.conjugates", 0, self.size - 1)
            j = integer(triple[0], "a place in chain.conjugates", i + 1, self.size - 1)
            require((j, i) not in found, f"chain.conjugates: ({j}, {i}) stands twice")
            found[j, i] = image = self._vector(triple[2], f"the conjugate of {j} by {i}")
            require(not any(image[:j]) and image[j] == 1, f"the conjugate of {j} by {i} does not start with generator {j}")
        return found

    def _check_weights(self, generators: int, definitions: list[Word]) -> None:
        require(self.weights == sorted(self.weights), "weights decrease along the chain")
        require(not self.weights or self.weights[0] == 1, "the first weight is not 1")
        place = {symbol: k for k, symbol in enumerate(self.symbols)}
        for k, (symbol, weight) in enumerate(zip(self.symbols, self.weights)):
            if weight == 1:
                continue
            require(symbol > generators, f"chain symbol {k} has weight {weight} but no definition")
            defined = definitions[symbol - generators - 1]
            j, i = place.get(-defined[0], k) if defined else k, place.get(-defined[1], k) if len(defined) == 4 else k
            shape = len(defined) == 4 and j < k and i < k
            require(shape and defined == (-self.symbols[j], -self.symbols[i], self.symbols[j], self.symbols[i]),
                    f"chain symbol {k} is not defined as a commutator of earlier chain symbols")
            require(self.weights[i] == 1 and self.weights[j] == weight - 1, f"the weight of chain symbol {k} is wrong")
        for (j, i), image in self.conjugates.items():
            if self.weights[i] == 1:
                for k in range(j + 1, self.size):
                    require(not image[k] or self.weights[k] > self.weights[j], f"the conjugate of {j} by {i} is not central enough")

    def spelled(self, vector: Vector) -> Word:
        """The vector as a word in symbols."""
        out: list[int] = []
        for symbol, exponent in zip(self.symbols, vector):
            out += [symbol if exponent > 0 else -symbol] * abs(exponent)
        return tuple(out)

    def unit(self, j: int) -> Vector:
        """The vector of a_j."""
        return tuple(int(k == j) for k in range(self.size))


def check_virtually_nilpotent(value: dict[str, Any], table: Table, relators: list[Word]) -> dict[str, Any]:
    """Check everything behind the table; the summary that the witness must carry."""
    generators = table.generators
    definitions: list[Word] = []
    for d, item in enumerate(listing(value["symbols"], "symbols")):
        defined = word(item, f"definition {d}", generators + d)
        require(defined == reduced(defined), f"definition {d} is not freely reduced")
        definitions.append(defined)
    total = generators + len(definitions)
    require(total <= MOST_SYMBOLS, f"more than {MOST_SYMBOLS} symbols")
    rewritten = [table.rewritten(point, relator) for point in range(table.index) for relator in relators]
    equations = rewritten + [(-(generators + d), *defined) for d, defined in enumerate(definitions, 1)]
    replay(value["lemmas"], equations, total)
    chain = Chain(value["chain"], generators, definitions)
    letters = chain.letters + sum(order for order in chain.orders)
    require(letters <= MOST_LETTERS, f"the goals have more than {MOST_LETTERS} letters")
    exact = _check_goals(value["goals"], chain, equations)
    if exact:
        _check_isomorphism(chain, rewritten, definitions)
    return _summary(table.index, chain, exact)


def _check_goals(value: Any, chain: Chain, equations: list[Word]) -> bool:
    """Every goal is proved by the equation it names; whether all powers are among them."""
    generators, conjugates, powers = fields(value, ("generators", "conjugates", "powers"), "goals")

    def proves(number: Any, goal: Word, where: str) -> None:
        goal = reduced(goal)
        if not goal and number == -1:
            return
        equation = equations[integer(number, f"the equation for {where}", 0, len(equations) - 1)]
        require(same_relator(equation, goal), f"the equation {number} does not prove {where}")

    require(len(listing(generators, "goals.generators")) == len(chain.images), "goals.generators has the wrong length")
    for s, (number, image) in enumerate(zip(generators, chain.images), 1):
        proves(number, (-s, *chain.spelled(image)), f"Schreier generator {s}")
    expected = [(j, i) for j in range(chain.size) for i in range(j) if chain.weights[i] == 1]
    require(len(listing(conjugates, "goals.conjugates")) == len(expected), "goals.conjugates has the wrong length")
    for (j, i), item in zip(expected, conjugates):
        require(type(item) is list and len(item) == 3 and item[:2] == [j, i], f"goals.conjugates lacks ({j}, {i})")
        a, b = chain.symbols[j], chain.symbols[i]
        target = chain.spelled(chain.conjugates.get((j, i), chain.unit(j)))
        proves(item[2], (-b, a, b, *inverse(target)), f"the conjugate of {j} by {i}")
    finite = [j for j in range(chain.size) if chain.orders[j]]
    require(len(listing(powers, "goals.powers")) == len(finite), "goals.powers has the wrong length")
    for j, number in zip(finite, powers):
        if number is not None:
            target = inverse(chain.spelled(chain.powers.get(j, (0,) * chain.size)))
            proves(number, (chain.symbols[j],) * chain.orders[j] + target, f"the power of {j}")
    return None not in powers


def _check_isomorphism(chain: Chain, rewritten: list[Word], definitions: list[Word]) -> None:
    """The nilpotent presentation is consistent, and the images make a homomorphism from H onto its group that takes each chain symbol to its
    own generator."""
    group = Nilpotent(chain.orders, chain.powers, chain.conjugates)
    group.require_consistent()
    images = list(chain.images)
    inverses = [group.inverted(image) for image in images]
    for number, relator in enumerate(rewritten):
        require(not any(group.value(relator, images, inverses)), f"rewritten relator {number} is not trivial in the nilpotent group")
    for defined in definitions:
        images.append(group.value(defined, images, inverses))
        inverses.append(group.inverted(images[-1]))
    for k, symbol in enumerate(chain.symbols):
        require(images[symbol - 1] == chain.unit(k), f"chain symbol {k} does not map to generator {k}")


def _summary(index: int, chain: Chain, exact: bool) -> dict[str, Any]:
    nilpotency_class = max(chain.weights, default=0)
    summary: dict[str, Any] = {"index": index, "class": nilpotency_class}
    if not exact:
        return summary | {"hirsch_length": None, "factors": None, "growth_degree": None, "finite_order": None}
    factors = []
    for weight in range(1, nilpotency_class + 1):
        here = [k for k in range(chain.size) if chain.weights[k] == weight]
        rows = []
        for k in here:
            if chain.orders[k]:
                power = chain.powers.get(k, (0,) * chain.size)
                rows.append([chain.orders[k] * (other == k) - power[other] for other in here])
        factors.append([*abelian_invariants(rows, len(here))])
    order: int | None = index
    for e in chain.orders:
        order = order * e if order is not None and e else None
    return summary | {
        "hirsch_length": chain.orders.count(0),
        "factors": factors,
        "growth_degree": sum(weight * factor[0] for weight, factor in enumerate(factors, 1)),
        "finite_order": order,
    }
