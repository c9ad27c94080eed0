"""The Fitting subgroup of a finite permutation group, and the cut it gives.

Fit(Q) is the product of the p-cores O_p(Q); O_p(Q) is the core of a Sylow p-subgroup.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from lowindex.cosets import CosetTable
from lowindex.quotients.cut import Cut

Permutation = tuple[int, ...]

LARGEST_ORDER = 30_000


def permutation_cut(permutations: Sequence[Permutation]) -> Cut | None:
    """The cut of the group H whose generators act by these permutations; None when their group Q is nilpotent or of more than 30,000
    elements."""
    from sympy import factorint
    from sympy.combinatorics import Permutation as SympyPermutation
    from sympy.combinatorics import PermutationGroup

    group: Any = PermutationGroup([SympyPermutation(list(images)) for images in permutations])
    order = int(group.order())
    if order > LARGEST_ORDER or group.is_nilpotent:
        return None
    fitting: set[Permutation] = {tuple(range(len(permutations[0])))}
    for p in factorint(order):
        core = _core(group.sylow_subgroup(p), permutations)
        fitting = {_times(x, y) for x in fitting for y in core}
    table = _cosets(fitting, permutations)
    return Cut(table, "permutations", f"degree {len(permutations[0])}, order {order}, Fitting subgroup of order {len(fitting)}")


def _times(left: Permutation, right: Permutation) -> Permutation:
    """First left, then right."""
    return tuple([right[i] for i in left])


def _core(sylow: Any, permutations: Sequence[Permutation]) -> set[Permutation]:
    """The largest subset of a Sylow subgroup that is closed under conjugation by the generators."""
    elements = {tuple(int(i) for i in x.array_form) for x in sylow.elements}
    inverses = [tuple(sorted(range(len(x)), key=x.__getitem__)) for x in permutations]
    while True:
        kept = {x for x in elements if all(_times(_times(h, x), g) in elements for g, h in zip(permutations, inverses, strict=True))}
        if len(kept) == len(elements):
            return kept
        elements = kept


def _cosets(fitting: set[Permutation], permutations: Sequence[Permutation]) -> CosetTable:
    """The action on the cosets of a normal subgroup, each known by its least element."""

    def least(x: Permutation) -> Permutation:
        return min(_times(f, x) for f in fitting)

    start = least(tuple(range(len(permutations[0]))))
    number = {start: 0}
    points = [start]
    columns: list[list[int]] = [[] for _ in permutations]
    for point in points:
        for images, x in zip(columns, permutations, strict=True):
            image = least(_times(point, x))
            if image not in number:
                number[image] = len(points)
                points.append(image)
            images.append(number[image])
    return CosetTable.from_permutations(columns)
