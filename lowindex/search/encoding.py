"""A presentation as columns and cyclic words for the low-index search, and the choice between several ways to write it.

Long relators may be broken into triangles: an auxiliary generator
z = x y for a two-letter subword shortens them and lets the search see a contradiction earlier, often by orders of magnitude; the order of
columns matters too. Subgroups do not depend on any of this, only the order in which they are met does.
C. C. Sims, Computation with Finitely Presented Groups (1994), ch. 5.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from lowindex.cosets import Columns, Encoding

MOST_ROTATED = 5_000_000
"""Letters in all rotations of all relators up to which relators are used as they are."""

MOST_COUNTED = 1_000
"""Letters of relators up to which auxiliary generators are chosen by counting subwords."""


def encodings(plain: Encoding) -> Iterator[Encoding]:
    """The ways to write it that are worth a trial, the plain one first unless its rotations would be too many."""
    letters = sum(map(len, plain.relators))
    if letters > MOST_COUNTED:
        if sum(len(word) ** 2 for word in plain.relators) <= MOST_ROTATED:
            yield plain
        yield _halved(plain)
        return
    found = [plain, _frequent_first(plain)]
    for longest in (3, 4):
        broken = _broken(plain, longest)
        found += [broken, _frequent_first(broken)]
    yield from dict.fromkeys(found)


def _frequent_first(encoding: Encoding) -> Encoding:
    """The columns ordered by how often their letters occur."""
    often = Counter(x for word in encoding.relators for x in word)
    pairs = [sorted({c, encoding.inverses[c]}) for c in range(encoding.width) if c <= encoding.inverses[c]]
    order = [c for pair in sorted(pairs, key=lambda pair: -sum(often[c] for c in pair)) for c in pair]
    place = {c: k for k, c in enumerate(order)}
    return Encoding(
        tuple(place[c] for c in encoding.columns),
        tuple(place[encoding.inverses[c]] for c in order),
        tuple(tuple(place[c] for c in word) for word in encoding.relators),
        encoding.width,
    )


def _broken(encoding: Encoding, longest: int) -> Encoding:
    """The commonest two-letter subword of the longer relators becomes a generator until no relator is longer than `longest`."""
    while True:
        often = Counter(
            min((x, y), encoding.inverse((x, y)))
            for word in encoding.relators
            if len(word) > longest
            for x, y in zip(word, word[1:] + word[:1], strict=True)
        )
        if not often:
            return encoding
        pair = max(often, key=lambda pair: (often[pair], -pair[0], -pair[1]))
        encoding = _with_product(encoding, pair, longest)


def _with_product(encoding: Encoding, pair: Columns, longest: int) -> Encoding:
    """A new generator for a product of two letters, put into the relators longer than `longest`."""
    new = len(encoding.inverses)
    names = {pair: new, encoding.inverse(pair): new + 1}
    relators = [_shortened(word, names) if len(word) > longest else word for word in encoding.relators]
    inverses = (*encoding.inverses, new + 1, new)
    return Encoding(encoding.columns, inverses, (*relators, (*pair, new + 1)), new + 2)


def _shortened(word: Columns, names: dict[Columns, int]) -> Columns:
    """A cyclic word with two-letter subwords replaced from the left, beginning at one of them."""
    places = (k for k in range(len(word)) if (word[k], word[(k + 1) % len(word)]) in names)
    start = next(places, 0)
    word = word[start:] + word[:start]
    short: list[int] = []
    k = 0
    while k < len(word):
        name = names.get(word[k : k + 2])
        short.append(word[k] if name is None else name)
        k += 1 if name is None else 2
    return tuple(short)


def _halved(encoding: Encoding) -> Encoding:
    """For very long relators: again and again the letters of each are joined two by two, equal pairs by the same new letter. The many
    new columns only carry deductions."""
    inverses = list(encoding.inverses)
    names: dict[Columns, int] = {}
    triangles: list[Columns] = []
    relators = list(encoding.relators)
    while any(len(word) > 3 for word in relators):
        for number, word in enumerate(relators):
            if len(word) <= 3:
                continue
            short = []
            for k in range(0, len(word) - 1, 2):
                pair = word[k : k + 2]
                if pair not in names:
                    new = len(inverses)
                    inverses += [new + 1, new]
                    names[pair] = new
                    names[inverses[pair[1]], inverses[pair[0]]] = new + 1
                    triangles.append((*pair, new + 1))
                short.append(names[pair])
            relators[number] = (*short, *word[len(word) - len(word) % 2 :])
    return Encoding(encoding.columns, tuple(inverses), (*relators, *triangles), encoding.width)


def rotations(
    words: Sequence[tuple[Columns, int]], inverses: Sequence[int]
) -> tuple[NDArray[Any], NDArray[Any], NDArray[Any], NDArray[Any], NDArray[Any], NDArray[Any]]:
    """Cyclic words with their kinds as the kernel takes them: `forward, backward, starts, ends, kinds, first`."""
    found: set[tuple[Columns, int]] = set()
    for word, kind in words:
        for form in (word, tuple([inverses[x] for x in reversed(word)])):
            found |= {(form[k:] + form[:k], kind) for k in range(len(form))}
    ordered = sorted(found, key=lambda item: (item[0][0], len(item[0]), item))
    unused = len(inverses)
    forward: list[int] = []
    backward: list[int] = []
    starts: list[int] = []
    for word, _ in ordered:
        starts.append(len(forward))
        forward += [*word[1:], unused]
        backward += [*(inverses[x] for x in reversed(word[1:])), unused]
    ends = [*(start - 1 for start in starts[1:]), len(forward) - 1][: len(starts)]
    kinds = [kind for _, kind in ordered]
    begun = np.bincount([word[0] for word, _ in ordered], minlength=unused)
    first = np.concatenate([[0], np.cumsum(begun)])
    forms = [np.array(numbers, np.uint32) for numbers in (forward, backward, starts, ends, kinds, first)]
    return forms[0], forms[1], forms[2], forms[3], forms[4], forms[5]
