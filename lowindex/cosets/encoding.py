"""A presentation as columns of a coset table and cyclic words in them: a generator x with the relator x^2 gets one column, every other one
two."""

from __future__ import annotations

from dataclasses import dataclass, replace

from lowindex.words import Presentation, Word, cyclic_form

Columns = tuple[int, ...]


@dataclass(frozen=True)
class Encoding:
    """`columns`: the column of x1, x1^-1, x2, ...; `inverses`: the inverse column of every column; `relators`: cyclic words in
    columns; the first `width` columns count for the standard form, the others only carry deductions."""

    columns: Columns
    inverses: Columns
    relators: tuple[Columns, ...]
    width: int

    @property
    def natural(self) -> bool:
        """Whether standard tables of the search are standard tables of the group."""
        return self.width == len(set(self.columns)) and list(dict.fromkeys(self.columns)) == list(range(self.width))

    def spelled(self, word: Word) -> Columns:
        """A word in columns."""
        return tuple([self.columns[2 * abs(x) - 2 + (x < 0)] for x in word])

    def inverse(self, word: Columns) -> Columns:
        """The inverse of a word in columns."""
        return tuple([self.inverses[x] for x in reversed(word)])

    def reduced(self, word: Columns, *, cyclically: bool) -> Columns:
        """A word without a letter beside its inverse."""
        kept: list[int] = []
        for x in word:
            if kept and kept[-1] == self.inverses[x]:
                kept.pop()
            else:
                kept.append(x)
        start = 0
        while cyclically and len(kept) - start > 1 and kept[start] == self.inverses[kept[-1]]:
            start += 1
            kept.pop()
        return tuple(kept[start:])


def plain_encoding(presentation: Presentation) -> Encoding:
    """The relators as they stand."""
    involutions = {abs(word[0]) for word in presentation.relators if len(word) == 2 and word[0] == word[1]}
    columns: list[int] = []
    inverses: list[int] = []
    for k in range(1, presentation.rank + 1):
        here = len(inverses)
        if k in involutions:
            columns += [here, here]
            inverses.append(here)
        else:
            columns += [here, here + 1]
            inverses += [here + 1, here]
    found = Encoding(tuple(columns), tuple(inverses), (), len(inverses))
    words = [found.reduced(found.spelled(word), cyclically=True) for word in map(cyclic_form, presentation.relators)]
    return replace(found, relators=tuple(word for word in dict.fromkeys(words) if word))
