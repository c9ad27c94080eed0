"""The obstruction "small cancellation": H's relators satisfy C'(1/6), none is a proper power, and H is not trivial or Z (FORMAT.md)."""

from __future__ import annotations

from collections import Counter
from typing import Any

from .abelian import abelian_invariants, exponent_rows
from .parse import fields
from .refused import require
from .table import Table
from .tietze import shortened
from .words import Word, inverse, is_power

MOST_LETTERS = 10_000_000
MOST_MATRIX = 250_000


def check_small_cancellation(value: Any, table: Table) -> None:
    """Refuse unless the presentation is C'(1/6) without proper powers and its Euler characteristic excludes 1 and Z."""
    fields(value, ("kind",), "obstruction")
    g, relators = shortened(table.generators, table.relators)
    for word in relators:
        require(not is_power(word), f"a relator of length {len(word)} is a proper power")
    _check_pieces(relators)
    characteristic = 1 - g + len(relators)
    if characteristic in (0, 1):
        require(g * len(relators) <= MOST_MATRIX, f"generators times relators is more than {MOST_MATRIX}")
        columns = sorted({abs(letter) for word in relators for letter in word})
        rows = [[row.get(k, 0) for k in columns] for row in exponent_rows(relators)]
        rank, torsion = abelian_invariants(rows, len(columns))
        homology = rank + g - len(columns), torsion
        excluded = homology != (1 - characteristic, [])
        require(excluded, f"Euler characteristic {characteristic} and first homology do not exclude the trivial group or Z")


def _check_pieces(relators: list[Word]) -> None:
    """A piece of a sixth of a relator's length or more shows as a subword of that length, rounded up, that stands in two places: of the
    same or of different cyclic words, read forward or backward."""
    both = [word for relator in relators for word in (relator, inverse(relator))]
    work = 0
    for length in sorted({-(-len(word) // 6) for word in relators}):
        long = [word for word in both if len(word) >= length]
        work += sum(map(len, long)) * length
        require(work <= MOST_LETTERS, f"the subwords to compare have more than {MOST_LETTERS} letters in all")
        count = Counter(piece for word in long for piece in _subwords(word, length))
        for word in relators:
            if -(-len(word) // 6) == length:
                piece = next((piece for piece in _subwords(word, length) if count[piece] > 1), None)
                require(piece is None, f"a relator of length {len(word)} has a piece of length {length}")


def _subwords(word: Word, length: int) -> list[Word]:
    double = word + word
    return [double[i : i + length] for i in range(len(word))]
