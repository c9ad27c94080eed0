"""Presentations of subgroups of finite index.

K. Reidemeister, Knoten und Gruppen, Abh. Math. Sem. Hamburg 5 (1927); O. Schreier, ibid.: the Schreier generators of a table and its
relators, traced at every point, present the stabiliser of point 0.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from lowindex.cosets.schreier import SchreierTree
from lowindex.cosets.table import CosetTable
from lowindex.words import Presentation, Word


@dataclass(frozen=True)
class SubgroupPresentation:
    """The stabiliser H of point 0. `relators[i * |R| + j]` is relator j traced at point i, in Schreier generators 1..rank, freely
    reduced: it may be empty or repeated."""

    table: CosetTable
    tree: SchreierTree
    relators: tuple[Word, ...]

    @property
    def rank(self) -> int:
        """Number of Schreier generators."""
        return len(self.tree.edges)

    @property
    def generators(self) -> Sequence[Word]:
        """The Schreier generators as words in the generators of the group."""
        return self.tree.generators


def subgroup_presentation(presentation: Presentation, table: CosetTable) -> SubgroupPresentation:
    """The presentation of the stabiliser of point 0 in a table of the presented group."""
    tree = SchreierTree(table)
    relators = tuple(tree.rewrite(point, word) for point in range(table.index) for word in presentation.relators)
    return SubgroupPresentation(table, tree, relators)
