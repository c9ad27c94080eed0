"""Consistency of polycyclic presentations of nilpotent groups.

The presentation is consistent (exponent vectors are elements) when the words below collect to the same vector both ways; for nilpotent
presentations with weights only those of small weight need a test. M. R. Vaughan-Lee, An aspect of the nilpotent quotient algorithm
(1984); C. C. Sims, Computation with Finitely Presented Groups (1994), ch. 9, 11.
"""

from __future__ import annotations

from collections.abc import Iterator

from lowindex.nilpotent.collection import NilpotentPresentation, Vector


def consistency_pairs(group: NilpotentPresentation, *, most: int | None = None) -> Iterator[tuple[Vector, Vector]]:
    """Pairs of vectors that must be equal. With `most` only words of weight at most `most`, and in a_k a_j a_i only a_i of weight 1
    (enough when the group without its last weight is consistent); without it everything."""
    size, weights, orders = group.size, group.weights, group.orders
    limit = most if most is not None else 3 * max(weights, default=1)
    unit = [group.generator(k) for k in range(size)]
    for i in range(size):
        if most is not None and weights[i] > 1:
            break
        for j in range(i + 1, size):
            if weights[i] + 2 * weights[j] > limit:
                break
            right = group.multiply(unit[j], unit[i])
            for k in range(j + 1, size):
                if weights[i] + weights[j] + weights[k] > limit:
                    break
                left = group.multiply(unit[k], unit[j])
                yield group.multiply(left, unit[i]), group.multiply(unit[k], right)
    for j in range(size):
        if not orders[j]:
            continue
        power = group.power_image(j)
        yield group.multiply(power, unit[j]), group.multiply(unit[j], power)
        for i in range(j):
            if weights[i] + weights[j] <= limit:
                yield group.multiply(power, unit[i]), group.multiply(unit[i], group.power(group.conjugate_image(j, i), orders[j]))
        for k in range(j + 1, size):
            if weights[j] + weights[k] <= limit:
                yield group.multiply(unit[k], power), group.multiply(power, group.image(k, j, orders[j]))


def is_consistent(group: NilpotentPresentation) -> bool:
    """Whether every word of the full test collects to the same vector both ways."""
    return all(left == right for left, right in consistency_pairs(group))
