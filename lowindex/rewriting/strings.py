"""Words as strings: one character a letter, so that Python's substring search and hashing do the matching.

The k-th generator is chr(2k), its inverse chr(2k + 1). Used inside this room only; everything that leaves it is a tuple of letters.
"""

from __future__ import annotations

from lowindex.words import Word


class _InverseCode(dict[int, int]):
    """Code point of a letter -> code point of its inverse, filled as letters are met."""

    def __missing__(self, code: int) -> int:
        self[code] = code ^ 1
        return code ^ 1


class _InverseLetter(dict[str, str]):
    """Letter -> inverse letter, filled as letters are met."""

    def __missing__(self, letter: str) -> str:
        self[letter] = inverse = chr(ord(letter) ^ 1)
        return inverse


_INVERSE_CODE = _InverseCode()
INVERSE_LETTER = _InverseLetter()


def letter_of(number: int) -> str:
    """The character of a letter: letter_of(k) for the k-th generator, letter_of(-k) for its inverse."""
    return chr(2 * number) if number > 0 else chr(1 - 2 * number)


def generator_of(letter: str) -> int:
    """The number k of the generator that the character, or its inverse, stands for."""
    return ord(letter) >> 1


def encoded(word: Word) -> str:
    """A tuple of letters as a string."""
    return "".join([chr(2 * k) if k > 0 else chr(1 - 2 * k) for k in word])


def decoded(text: str) -> Word:
    """The tuple of letters of a string."""
    return tuple([-(code >> 1) if code & 1 else code >> 1 for code in map(ord, text)])


def inverted(text: str) -> str:
    """The inverse word."""
    return text[::-1].translate(_INVERSE_CODE)


def free_reduced(text: str) -> str:
    """The freely reduced word."""
    out: list[str] = []
    for letter in text:
        if out and out[-1] == INVERSE_LETTER[letter]:
            out.pop()
        else:
            out.append(letter)
    return "".join(out)


def joined(left: str, right: str) -> str:
    """The product of two freely reduced words."""
    shorter = min(len(left), len(right))
    n = 0
    while n < shorter and left[-1 - n] == INVERSE_LETTER[right[n]]:
        n += 1
    return left[: len(left) - n] + right[n:] if n else left + right


def cyclic_ends(text: str) -> int:
    """How many letters to strip at each end of a freely reduced word to make it cyclically reduced."""
    n, last = 0, len(text) - 1
    while n < last - n and text[n] == INVERSE_LETTER[text[last - n]]:
        n += 1
    return n


def cyclic_key(text: str) -> str:
    """The least rotation of a cyclically reduced word or its inverse: one key for a relator in all its forms."""
    if not text:
        return text
    best = text
    for word in (text, inverted(text)):
        double = word + word
        first = min(word)
        start = word.find(first)
        while start >= 0:
            rotation = double[start : start + len(word)]
            if rotation < best:
                best = rotation
            start = word.find(first, start + 1)
    return best
