"""Operations on coset tables: standard form, core, intersection, towers, change of generators."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import TypeVar

import numpy as np
from numpy.typing import ArrayLike

from lowindex.cosets.reidemeister_schreier import SubgroupPresentation
from lowindex.cosets.schreier import SchreierTree
from lowindex.cosets.table import CosetTable, breadth_first
from lowindex.words import Word

Point = TypeVar("Point")


def standard_form(table: CosetTable, base: int = 0) -> CosetTable:
    """The standard table of the stabiliser of `base`: points renumbered in the order of their first appearance."""
    order = np.array(breadth_first(table.rows, base), dtype=np.int32)
    place = np.empty_like(order)
    place[order] = np.arange(len(order), dtype=np.int32)
    return CosetTable(place[table.rows[order]])


def core(table: CosetTable, *, max_index: int) -> CosetTable | None:
    """The normal core of the stabiliser of 0, as a table: the regular action of the group of permutations. None when it is of more
    than `max_index` points."""
    return regular_action(table.permutations, max_index=max_index)


def regular_action(permutations: Sequence[Sequence[int]], *, max_index: int | None = None) -> CosetTable | None:
    """The regular action of the group that permutations of the same points generate; None when it has more than `max_index` elements."""
    columns: list[Sequence[int]] = []
    for images in permutations:
        back = [0] * len(images)
        for i, j in enumerate(images):
            back[j] = i
        columns += [images, back]
    start = tuple(range(len(permutations[0]))) if permutations else (0,)
    return _orbit(start, len(columns), lambda p, c: tuple([columns[c][i] for i in p]), max_index)


def intersection(*tables: CosetTable) -> CosetTable:
    """The intersection of the stabilisers of 0 (at least one table, all over the same generators)."""
    lists = [table.lists for table in tables]
    found = _orbit((0,) * len(tables), 2 * tables[0].rank, lambda p, c: tuple([r[i][c] for r, i in zip(lists, p, strict=True)]))
    assert found is not None
    return found


def compose(table: CosetTable, subgroup: SubgroupPresentation | SchreierTree) -> CosetTable:
    """A table of K in H (over the Schreier generators of H) and the tree of H in G: the table of K in G."""
    tree = subgroup if isinstance(subgroup, SchreierTree) else subgroup.tree
    outer, inner = tree.table.lists, table.lists
    letters = [s * k for k in range(1, tree.table.rank + 1) for s in (1, -1)]

    def step(point: tuple[int, int], place: int) -> tuple[int, int]:
        i, j = point
        symbol = tree.symbol(i, letters[place])
        if symbol:
            j = inner[j][2 * abs(symbol) - 2 + (symbol < 0)]
        return outer[i][place], j

    found = _orbit((0, 0), len(letters), step)
    assert found is not None
    return found


def pull_back(table: CosetTable, images: Sequence[Word]) -> CosetTable:
    """The action of new generators y_1, y_2, ... given as words in the old ones, on the orbit of point 0."""
    columns = []
    points = np.arange(table.index)
    for word in images:
        here = points
        for letter in word:
            here = table.rows[here, 2 * abs(letter) - 2 + (letter < 0)]
        back = np.empty_like(here)
        back[here] = points
        columns += [here.tolist(), back.tolist()]
    found = _orbit(0, len(columns), lambda point, place: int(columns[place][point]))
    assert found is not None
    return found


def abelian_table(images: Sequence[Sequence[int]], moduli: Sequence[int], max_index: int | None = None) -> CosetTable | None:
    """The regular action of the subgroup of C_m1 × C_m2 × ... that the images of the generators (vectors) generate; None when it has
    more than `max_index` elements."""
    signed = [[s * x for x in image] for image in images for s in (1, -1)]

    def step(point: tuple[int, ...], place: int) -> tuple[int, ...]:
        return tuple([(x + y) % m for x, y, m in zip(point, signed[place], moduli, strict=True)])

    return _orbit((0,) * len(moduli), len(signed), step, max_index)


def vector_table(
    vectors: ArrayLike, matrices: Sequence[ArrayLike], q: int, max_index: int
) -> CosetTable | None:
    """The orbit of a list of row vectors over F_q under invertible matrices, one for every generator; None when it is longer than
    `max_index`."""
    forward = [np.array(matrix, dtype=np.int64) for matrix in matrices]
    start = np.array(vectors, dtype=np.int64) % q
    number = {start.tobytes(): 0}
    points = [start]
    columns: list[list[int]] = [[] for _ in forward]
    for point in points:
        for images, matrix in zip(columns, forward, strict=True):
            image = point @ matrix % q
            key = image.tobytes()
            if key not in number:
                if len(points) >= max_index:
                    return None
                number[key] = len(points)
                points.append(image)
            images.append(number[key])
    return standard_form(CosetTable.from_permutations(columns)) if columns else None


def _orbit(
    start: Point, columns: int, step: Callable[[Point, int], Point], max_index: int | None = None
) -> CosetTable | None:
    """The table on the orbit of `start`, points numbered as they are met; None when there are more than `max_index`."""
    number = {start: 0}
    points = [start]
    rows: list[list[int]] = []
    for point in points:
        row = []
        for place in range(columns):
            image = step(point, place)
            if image not in number:
                if max_index is not None and len(points) >= max_index:
                    return None
                number[image] = len(points)
                points.append(image)
            row.append(number[image])
        rows.append(row)
    return CosetTable(np.array(rows, dtype=np.int32).reshape(len(points), columns))
