"""Words in a free group.

A letter is a nonzero integer: k is the k-th generator, -k its inverse. A word is a tuple of letters; every function here
returns a freely reduced one. Conventions: u^v = v^-1 u v, [u, v] = u^-1 v^-1 u v, [u, v, w] = [[u, v], w].
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TypeAlias

Word: TypeAlias = tuple[int, ...]


def reduced(letters: Iterable[int]) -> Word:
    """The freely reduced form.

    >>> reduced((1, 2, -2, 3))
    (1, 3)
    """
    out: list[int] = []
    for letter in letters:
        if out and out[-1] == -letter:
            out.pop()
        else:
            out.append(letter)
    return tuple(out)


def inverse(word: Iterable[int]) -> Word:
    """The inverse of a word: letters negated, in reverse order (reduced if the word is)."""
    return tuple([-letter for letter in word][::-1])


def product(*words: Iterable[int]) -> Word:
    """The product of words, reduced."""
    return reduced(letter for word in words for letter in word)


def power(word: Word, exponent: int) -> Word:
    """word^exponent, reduced; negative exponents and 0 are allowed."""
    return reduced((word if exponent >= 0 else inverse(word)) * abs(exponent))


def conjugate(word: Word, by: Word) -> Word:
    """word^by = by^-1 word by."""
    return product(inverse(by), word, by)


def commutator(left: Word, right: Word) -> Word:
    """[left, right] = left^-1 right^-1 left right."""
    return product(inverse(left), inverse(right), left, right)


def cyclically_reduced(word: Word) -> Word:
    """The cyclically reduced conjugate left when matching ends are stripped from the reduced word."""
    word = reduced(word)
    start, end = 0, len(word)
    while end - start > 1 and word[start] == -word[end - 1]:
        start, end = start + 1, end - 1
    return word[start:end]


def cyclic_form(word: Word) -> Word:
    """The least rotation of the cyclically reduced word or its inverse: equal for two words exactly when
    one is conjugate to the other or to its inverse in the free group."""
    word = cyclically_reduced(word)
    if not word:
        return word
    return min(map(_least_rotation, (word, inverse(word))))


def _least_rotation(word: Word) -> Word:
    """By comparing two starting places at a time, in linear time: when they differ after k letters, the k + 1 places from the greater
    one on are out."""
    i, j, k, length = 0, 1, 0, len(word)
    while i < length and j < length and k < length:
        left, right = word[(i + k) % length], word[(j + k) % length]
        if left == right:
            k += 1
            continue
        if left > right:
            i += k + 1
        else:
            j += k + 1
        j += i == j
        k = 0
    start = min(i, j)
    return word[start:] + word[:start]


def primitive_root(word: Word) -> tuple[Word, int]:
    """(u, n) with word = u^n, word cyclically reduced and n as large as possible; ((), 1) for the empty word."""
    length = len(word)
    for period in range(1, length + 1):
        if length % period == 0 and word[:period] * (length // period) == word:
            return word[:period], length // period
    return (), 1
