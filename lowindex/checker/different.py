"""The claim "different groups": the subgroups of one index are not alike (FORMAT.md)."""

from __future__ import annotations

from typing import Any

from .abelian import abelian_invariants, exponent_rows
from .group import read_group
from .parse import listing
from .refused import require
from .table import Table
from .tietze import shortened
from .words import Word

KEYS = ("other", "classes", "other classes")

MOST_CLASSES = 2_000
MOST_MATRIX = 250_000

Kind = tuple[int, int, tuple[int, ...]]
"""Members of the class, rank and torsion of H_1 of a member."""


def kinds(tables: list[Any], rank: int, relators: list[Word], where: str) -> tuple[list[Kind], int]:
    """What the classes are, sorted, and their index (0: none); refused when two of the tables are of the same class or the indices
    differ."""
    seen: set[tuple[int, ...]] = set()
    found: list[Kind] = []
    indices = set()
    for number, value in enumerate(tables):
        table = Table(value, rank, relators)
        forms = [_standard(table, base) for base in range(table.index)]
        require(min(forms) not in seen, f"{where}: class {number} is there twice")
        seen.add(min(forms))
        g, words = shortened(table.generators, table.relators)
        columns = sorted({abs(letter) for word in words for letter in word})
        require(len(columns) * len(words) <= MOST_MATRIX, f"{where}: generators times relators is more than {MOST_MATRIX}")
        rows = [[row.get(k, 0) for k in columns] for row in exponent_rows(words)]
        betti, torsion = abelian_invariants(rows, len(columns))
        found.append((table.index // forms.count(forms[0]), betti + g - len(columns), tuple(torsion)))
        indices.add(table.index)
    require(len(indices) <= 1, f"{where}: the classes have different indices")
    return sorted(found), max(indices, default=0)


def _standard(table: Table, base: int) -> tuple[int, ...]:
    """The table with the points numbered as they are met from a base point."""
    place = {base: 0}
    queue = [base]
    out: list[int] = []
    for point in queue:
        for k in range(1, table.rank + 1):
            for letter in (k, -k):
                image = table.step(point, letter)
                if image not in place:
                    place[image] = len(queue)
                    queue.append(image)
                out.append(place[image])
    return tuple(out)


def check(value: dict[str, Any], table: Table) -> dict[str, Any]:
    """Refuse unless the two lists of classes of one index differ in number, lengths or first homologies. That the lists are complete is not
    checked: it is the result of two searches."""
    require(table.index == 1, "the table of different groups has one point")
    names, relators, _ = read_group(value["other"], "other")
    lists = [listing(value[key], key) for key in ("classes", "other classes")]
    for key, items in zip(("classes", "other classes"), lists):
        require(len(items) <= MOST_CLASSES, f"{key}: more than {MOST_CLASSES}")
    one, index = kinds(lists[0], table.rank, table.relators, "classes")
    two, other_index = kinds(lists[1], len(names), relators, "other classes")
    require(one != two, "the two lists of classes have the same kinds")
    require(not index or not other_index or index == other_index, "the two lists have different indices")
    return {"index": max(index, other_index), "classes": [len(one), len(two)]}
