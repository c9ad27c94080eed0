"""What a low-index search looks for, and places in its tree."""

from __future__ import annotations

from dataclasses import dataclass, replace

from lowindex.cosets import Columns, Encoding, plain_encoding
from lowindex.errors import InputError
from lowindex.search.symmetry import symmetries
from lowindex.words import Presentation, Word, cyclic_form, reduced

MOST_NUMBERS = 50_000_000
"""Places for the comparison of a table with itself seen from all base points: (index + 1)^2 for every symmetry, 8 bytes each."""


@dataclass(frozen=True)
class Conditions:
    """Which subgroups of index at most N are listed; without any, one of each conjugacy class.

    `normal`: only normal subgroups. `containing`, `avoiding`: subgroups that contain every, or none, of some words; then every subgroup is
    listed, not only one of a class. `fixed_point_free`: no conjugate of these words lies in the subgroup, as holds for all elements
    of prime order when it is to be torsion-free. `up_to_symmetry`: one subgroup for each orbit under conjugation and the permutations
    of generators and their inverses that preserve the set of relators.
    """

    normal: bool = False
    containing: tuple[Word, ...] = ()
    avoiding: tuple[Word, ...] = ()
    fixed_point_free: tuple[Word, ...] = ()
    up_to_symmetry: bool = False

    def __post_init__(self) -> None:
        if self.up_to_symmetry and (self.normal or self.containing or self.avoiding or self.fixed_point_free):
            raise InputError("subgroups up to symmetry cannot be combined with other conditions; leave one of them out")
        if not all(map(reduced, self.avoiding)) or not all(map(reduced, self.fixed_point_free)):
            raise InputError("every subgroup contains the identity; a word to be avoided must not be trivial")

    @property
    def mode(self) -> int:
        """0: every subgroup, 1: one of each class, 2: normal ones."""
        if self.normal:
            return 2
        return 0 if self.containing or self.avoiding else 1


@dataclass(frozen=True)
class Place:
    """Where a search stands: everything that comes after the trial `path` (the values at the branching slots, from the root) in the order
    of the backtrack, among the nodes that share its first `floor` values. The empty path stands for the whole tree."""

    path: tuple[int, ...] = ()
    floor: int = 0


ROOT = Place()


@dataclass(frozen=True)
class Task:
    """A search, apart from how far it is. Subgroups found do not depend on `encoding`, their order does."""

    presentation: Presentation
    index: int
    conditions: Conditions
    encoding: Encoding

    def __post_init__(self) -> None:
        highest = int((MOST_NUMBERS / len(self.symmetry)) ** 0.5) - 1
        if not 1 <= self.index <= highest:
            raise InputError(f"index must be between 1 and {highest}, not {self.index}")

    @classmethod
    def plain(cls, presentation: Presentation, index: int, conditions: Conditions) -> Task:
        """With the relators as they stand."""
        return cls(presentation, index, conditions, plain_encoding(presentation))

    def encoded(self, encoding: Encoding) -> Task:
        """The same search written otherwise."""
        return replace(self, encoding=encoding)

    @property
    def symmetry(self) -> tuple[Columns, ...]:
        """Permutations of the columns under which tables are compared, the identity first."""
        identity = tuple(range(self.encoding.width))
        return symmetries(self.encoding) if self.conditions.up_to_symmetry else (identity,)

    @property
    def words(self) -> tuple[list[tuple[Columns, int]], Columns]:
        """The cyclic words to be traced with their kinds (0: must close, 1: must not), and the inverses of their columns. A word that
        concerns the subgroup only, not its conjugates, begins with a column of its own that is defined at point 1 only."""
        encoding, conditions = self.encoding, self.conditions
        words = [(word, 0) for word in encoding.relators]
        words += [(encoding.reduced(encoding.spelled(cyclic_form(word)), cyclically=True), 1) for word in conditions.fixed_point_free]
        here = len(encoding.inverses)
        for kind, given in ((0, conditions.containing), (1, conditions.avoiding)):
            words += [((here, *encoding.reduced(encoding.spelled(word), cyclically=False)), kind) for word in given]
        return words, (*encoding.inverses, here)
