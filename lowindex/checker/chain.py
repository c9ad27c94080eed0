"""The central chain of a witness: symbols with weights and relative orders, and what is claimed of them (FORMAT.md, step 4)."""

from __future__ import annotations

from typing import Any

from .nilpotent import Syllables
from .parse import fields, integer, integers, listing
from .refused import require
from .words import Word

LONGEST_CHAIN = 120
MOST_IMAGES = 10_000_000
HUGE = 10**12


class Chain:
    """a_0, a_1, ...: `symbols`, `weights`, `orders` (0: infinite), `powers` of finite orders, `conjugates`[j, i] = a_j^(a_i) for j > i,
    `images` of the Schreier generators. Vectors are syllables (k, exponent). `definitions` are the words of the symbols behind the
    Schreier generators."""

    def __init__(self, value: Any, generators: int, definitions: list[Word]) -> None:
        names = ("symbols", "weights", "orders", "powers", "conjugates", "images")
        symbols, weights, orders, powers, conjugates, images = fields(value, names, "chain")
        self.symbols = integers(symbols, "chain.symbols", 1, generators + len(definitions))
        self.size = len(self.symbols)
        require(self.size <= LONGEST_CHAIN, f"the chain has more than {LONGEST_CHAIN} symbols")
        require(len(set(self.symbols)) == self.size, "a symbol stands twice in the chain")
        self.weights = integers(listing(weights, "chain.weights", self.size), "chain.weights", 1, LONGEST_CHAIN)
        self.orders = integers(listing(orders, "chain.orders", self.size), "chain.orders", 0, HUGE)
        require(1 not in self.orders, "an order in the chain is 1")
        self._check_definitions(generators, definitions)
        self.powers = self._powers(listing(powers, "chain.powers"))
        self.conjugates = self._conjugates(listing(conjugates, "chain.conjugates"))
        require(generators * self.size <= MOST_IMAGES, f"Schreier generators times chain symbols is more than {MOST_IMAGES}")
        images = listing(images, "chain.images", generators)
        self.images = [self._vector(image, f"the image of Schreier generator {s}") for s, image in enumerate(images, 1)]

    def _check_definitions(self, generators: int, definitions: list[Word]) -> None:
        require(self.weights == sorted(self.weights), "the weights decrease along the chain")
        require(not self.weights or self.weights[0] == 1, "the first weight is not 1")
        weight_of: dict[int, int] = {}
        for k, (symbol, weight) in enumerate(zip(self.symbols, self.weights)):
            if weight > 1:
                require(symbol > generators, f"chain symbol {k} has weight {weight} but no definition")
                word = definitions[symbol - generators - 1]
                shape = len(word) == 4 and word[0] == -word[2] and word[1] == -word[3]
                shape = shape and weight_of.get(word[3]) == 1 and weight_of.get(word[2]) == weight - 1
                require(shape, f"chain symbol {k} is not a commutator of earlier ones of weights {weight - 1} and 1")
            weight_of[symbol] = weight

    def _vector(self, value: Any, where: str) -> Syllables:
        found: list[tuple[int, int]] = []
        last = -1
        for pair in listing(value, where):
            place, exponent = listing(pair, f"an entry of {where}", 2)
            last = integer(place, f"a place in {where}", last + 1, self.size - 1)
            low, high = (1, self.orders[last] - 1) if self.orders[last] else (-HUGE, HUGE)
            require(integer(exponent, f"the exponent at {last} in {where}", low, high), f"{where} has the exponent 0")
            found.append((last, exponent))
        return tuple(found)

    def _powers(self, value: list[Any]) -> dict[int, Syllables]:
        found: dict[int, Syllables] = {}
        last = -1
        for item in value:
            place, vector = listing(item, "an entry of chain.powers", 2)
            last = integer(place, "a place in chain.powers", last + 1, self.size - 1)
            where = f"the power of {last}"
            require(self.orders[last], f"{where} is given, but its order is infinite")
            found[last] = power = self._vector(vector, where)
            require(all(k > last for k, _ in power), f"{where} is not a product of later generators")
        return found

    def _conjugates(self, value: list[Any]) -> dict[tuple[int, int], Syllables]:
        found: dict[tuple[int, int], Syllables] = {}
        last = (-1, -1)
        for item in value:
            upper, lower, vector = listing(item, "an entry of chain.conjugates", 3)
            i = integer(lower, "a place in chain.conjugates", 0, self.size - 1)
            j = integer(upper, "a place in chain.conjugates", i + 1, self.size - 1)
            where = f"the conjugate of {j} by {i}"
            require((j, i) > last, f"{where} is out of order or stands twice")
            last = j, i
            found[j, i] = image = self._vector(vector, where)
            least = self.weights[j] + self.weights[i]
            shape = image[:1] == ((j, 1),) and all(self.weights[k] >= least for k, _ in image[1:])
            require(shape, f"{where} is not generator {j} times generators of weight {least} or more")
        return found

    def spelled(self, vector: Syllables) -> Word:
        """A vector as a word in symbols."""
        out: list[int] = []
        for k, exponent in vector:
            out += [self.symbols[k] if exponent > 0 else -self.symbols[k]] * abs(exponent)
        return tuple(out)
