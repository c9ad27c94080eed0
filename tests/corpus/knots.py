"""Knot groups from the PyPI package database-knotinfo (the KnotInfo table as open data): Wirtinger presentations from PD notation."""

from __future__ import annotations

import json
from functools import cache
from typing import NamedTuple

from database_knotinfo import link_list

from lowindex.words import Presentation


class Knot(NamedTuple):
    """A prime knot of the table: its group, and the coefficients of its Alexander polynomial from the table."""

    name: str
    group: Presentation
    alexander: tuple[int, ...]


@cache
def prime_knots(crossings: int) -> tuple[Knot, ...]:
    """All prime knots with 3 to this many crossings."""
    found = []
    for row in link_list()[2:]:
        if row["crossing_number"].isdigit() and 3 <= int(row["crossing_number"]) <= crossings:
            code = json.loads(row["pd_notation"])
            found.append(Knot(row["name"], _wirtinger(code), _coefficients(row["alexander_polynomial_vector"])))
    return tuple(found)


def _coefficients(text: str) -> tuple[int, ...]:
    """The table's vector: lowest and highest degree, then the coefficients."""
    numbers = [int(x) for x in text.strip("{}[] ").split(",")]
    return tuple(numbers[2:])


def _wirtinger(code: list[list[int]]) -> Presentation:
    """At a crossing [i, j, k, l] (counterclockwise from the incoming lower edge) the upper edges j and l belong to one arc o, and
    x_k = x_o^e x_i x_o^-e, e = 1 when the upper strand runs from j to l, else -1 (a global change of sign gives the mirror image)."""
    edges = 2 * len(code)
    arc = {edge: edge for edge in range(1, edges + 1)}

    def root(edge: int) -> int:
        while arc[edge] != edge:
            edge = arc[edge]
        return edge

    for _, j, _, k in code:
        arc[root(j)] = root(k)
    names = {edge: number for number, edge in enumerate(sorted({root(edge) for edge in arc}), 1)}
    relators = []
    for i, j, k, lower in code:
        sign = 1 if (lower - j) % edges == 1 else -1
        over = sign * names[root(j)]
        relators.append((names[root(k)], over, -names[root(i)], -over))
    return Presentation.from_relators(len(names), relators)
