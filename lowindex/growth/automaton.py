"""Growth from a complete rewriting system: normal forms are the words without a left side in them, read by an automaton.

For shortlex the normal form of an element is a geodesic, so the number of normal forms of length n is the size of the sphere, and the
series is rational (D. B. A. Epstein et al., Word Processing in Groups, 1992). The automaton is that of A. V. Aho and M. J. Corasick,
Comm. ACM 18 (1975) 333-340.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from flint import fmpq

from lowindex.budget import Budget
from lowindex.growth.system import complete_system
from lowindex.rewriting import letter_of
from lowindex.words import Presentation

MOST_RULES = 2000
MOST_STATES = 3000


@dataclass(frozen=True)
class Automaton:
    """`moves[state]`: the states reached by reading a letter, dead ends left out; state 0 is the start, and every state accepts.
    `rules`: left and right sides. `complete`: every overlap of left sides resolves; else the words counted contain all normal forms."""

    moves: tuple[tuple[int, ...], ...]
    rules: tuple[tuple[str, str], ...]
    complete: bool

    def counts(self, radius: int) -> list[int]:
        """Words of length 0, 1, ..., radius."""
        here = [1] + [0] * (len(self.moves) - 1)
        sizes = [1]
        for _ in range(radius):
            after = [0] * len(self.moves)
            for state, count in enumerate(here):
                if count:
                    for target in self.moves[state]:
                        after[target] += count
            here = after
            sizes.append(sum(here))
        return sizes

    @property
    def exponential(self) -> bool:
        """Whether two different loops meet in a state: a strongly connected part with more edges than states."""
        import networkx

        graph = networkx.MultiDiGraph((state, target) for state, targets in enumerate(self.moves) for target in targets)
        return any(graph.subgraph(part).number_of_edges() > len(part) for part in networkx.strongly_connected_components(graph))

    def series(self) -> tuple[list[int], list[int]]:
        """Numerator and denominator of the generating function, coefficients from degree 0, in lowest terms with denominator beginning
        with 1."""
        size = len(self.moves)
        return rational_series(self.counts(2 * size + 1), size)


def rational_series(counts: Sequence[int], degree: int) -> tuple[list[int], list[int]]:
    """The quotient of polynomials of degree at most `degree` with these first 2 * degree + 2 coefficients: the shortest recurrence
    (J. L. Massey, IEEE Trans. Inform. Theory 15 (1969) 122-127)."""
    current, previous = [fmpq(1)], [fmpq(1)]
    length, shift, last = 0, 1, fmpq(1)
    for n in range(len(counts)):
        gap = sum((current[i] * counts[n - i] for i in range(1, length + 1) if i < len(current)), fmpq(counts[n]))
        if gap == 0:
            shift += 1
            continue
        update = current + [fmpq(0)] * max(0, len(previous) + shift - len(current))
        for i, c in enumerate(previous):
            update[i + shift] -= gap / last * c
        if 2 * length <= n:
            length, previous, last, shift = n + 1 - length, current, gap, 1
        else:
            shift += 1
        current = update
    while current[-1] == 0:
        current.pop()
    product = [sum((current[i] * counts[n - i] for i in range(min(n, len(current) - 1) + 1)), fmpq(0)) for n in range(degree + 1)]
    while len(product) > 1 and product[-1] == 0:
        product.pop()
    return [int(c.p) for c in product], [int(c.p) for c in current]


def rewriting_automaton(presentation: Presentation, *, budget: Budget) -> Automaton | None:
    """The automaton of a shortlex rewriting system, the first of a few orders of the generators that is complete, else the last one; None
    without rules that fit."""
    generators = tuple(range(1, presentation.rank + 1))
    found: Automaton | None = None
    for order in dict.fromkeys((generators, generators[::-1], generators[1::2] + generators[::2])):
        rules, complete = complete_system(presentation, order, budget=budget.part(budget.left // 3))
        if len(rules) <= MOST_RULES:
            found = _automaton(rules, presentation.rank, complete) or found
        if found is not None and found.complete:
            break
    return found


def _automaton(rules: dict[str, str], rank: int, complete: bool) -> Automaton | None:
    letters = [letter_of(s * g) for g in range(1, rank + 1) for s in (1, -1)]
    dead = set(rules)
    prefixes = {left[:n] for left in dead for n in range(len(left))} | {""}
    if len(prefixes) > MOST_STATES:
        return None
    number = {"": 0}
    words = [""]
    moves: list[tuple[int, ...]] = []
    for word in words:
        targets = []
        for letter in letters:
            longer = word + letter
            suffixes = [longer[n:] for n in range(len(longer))]
            if any(suffix in dead for suffix in suffixes):
                continue
            target = next((suffix for suffix in suffixes if suffix in prefixes), "")
            if target not in number:
                number[target] = len(words)
                words.append(target)
            targets.append(number[target])
        moves.append(tuple(targets))
    return Automaton(tuple(moves), tuple(rules.items()), complete)
