"""Symmetries of a presentation: permutations of the generators and their inverses that preserve the set of relators up to rotation and
inversion, such as the cyclic shift of a cyclically presented group. They act on the subgroups of the group."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator

from lowindex.cosets import Columns, Encoding
from lowindex.errors import InputError

MOST_SYMMETRIES = 1_000


def symmetries(encoding: Encoding) -> tuple[Columns, ...]:
    """As permutations of the columns of a plain encoding, the identity first. InputError when there are more than MOST_SYMMETRIES."""
    found = []
    for images in _extended(encoding, (), _profiles(encoding)):
        found.append(images)
        if len(found) > MOST_SYMMETRIES:
            raise InputError(f"the presentation has more than {MOST_SYMMETRIES} symmetries; list one subgroup of each class instead")
    return tuple(sorted(found))


def _extended(encoding: Encoding, images: Columns, profiles: list[object]) -> Iterator[Columns]:
    """All symmetries that begin with these images of the first columns."""
    column = len(images)
    if column == encoding.width:
        yield images
        return
    inverse = encoding.inverses[column]
    for image in range(encoding.width):
        fits = image not in images and profiles[image] == profiles[column]
        if fits and (inverse >= column or encoding.inverses[image] == images[inverse]):
            further = (*images, image)
            if _preserves(encoding, further):
                yield from _extended(encoding, further, profiles)


def _profiles(encoding: Encoding) -> list[object]:
    """What a symmetry cannot change about a column: whether it is an involution, and how often it occurs in relators of each length."""
    often = Counter((x, len(word)) for word in encoding.relators for x in (*word, *encoding.inverse(word)))
    lengths = sorted({len(word) for word in encoding.relators})
    return [(encoding.inverses[c] == c, tuple(often[c, length] for length in lengths)) for c in range(encoding.width)]


def _preserves(encoding: Encoding, images: Columns) -> bool:
    """Whether relators whose columns all have images go to relators."""
    cyclic = {_least(word, encoding) for word in encoding.relators}
    known = [word for word in encoding.relators if max(word) < len(images)]
    return all(_least(tuple(images[c] for c in word), encoding) in cyclic for word in known)


def _least(word: Columns, encoding: Encoding) -> Columns:
    """The least of the rotations of a word and its inverse."""
    return min(form[k:] + form[:k] for form in (word, encoding.inverse(word)) for k in range(len(form)))
