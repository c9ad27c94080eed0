"""Groups in which products are computed exactly: an element is a pair (point, vector), a generator moves it.

    virtually nilpotent   the coset of H, and the exponents of an element of H in its nilpotent presentation, both from a witness
    finite                the point of the regular action alone
"""

from __future__ import annotations

from collections.abc import Callable, Hashable
from typing import Any

from lowindex.cosets import CosetTable, subgroup_presentation
from lowindex.nilpotent import NilpotentPresentation, Vector
from lowindex.words import Presentation

State = Hashable
Move = Callable[[Any], Any]


def moves_of_table(table: CosetTable) -> tuple[State, list[Move]]:
    """The start and the moves by x1, x1^-1, x2, ... in a regular action."""
    rows = table.lists

    def move(place: int) -> Move:
        return lambda point: rows[point][place]

    return 0, [move(place) for place in range(2 * table.rank)]


def moves_of_witness(presentation: Presentation, content: dict[str, Any]) -> tuple[State, list[Move]]:
    """The start and the moves from a witness "virtually nilpotent" with exact invariants."""
    table = CosetTable.from_permutations(content["table"]) if content["table"] else CosetTable.from_permutations([])
    subgroup = subgroup_presentation(presentation, table)
    chain = content["chain"]
    size = len(chain["symbols"])

    def dense(vector: list[list[int]]) -> Vector:
        values = [0] * size
        for k, exponent in vector:
            values[k] = exponent
        return tuple(values)

    group = NilpotentPresentation(
        weights=tuple(chain["weights"]),
        orders=tuple(chain["orders"]),
        powers={j: dense(vector) for j, vector in chain["powers"]},
        conjugates={(j, i): dense(vector) for j, i, vector in chain["conjugates"]},
        unlimited=True,
    )
    images = [dense(vector) for vector in chain["images"]]
    inverses = [group.inverse(image) for image in images]
    rows, tree = table.lists, subgroup.tree

    def move(letter: int) -> Move:
        place = 2 * abs(letter) - 2 + (letter < 0)
        factors = []
        for point in range(table.index):
            symbol = tree.symbol(point, letter)
            factors.append(None if not symbol else images[symbol - 1] if symbol > 0 else inverses[-symbol - 1])

        def moved(state: tuple[int, Vector]) -> tuple[int, Vector]:
            point, vector = state
            factor = factors[point]
            return rows[point][place], vector if factor is None else group.multiply(vector, factor)

        return moved

    letters = [s * k for k in range(1, presentation.rank + 1) for s in (1, -1)]
    return (0, group.identity), [move(letter) for letter in letters]
