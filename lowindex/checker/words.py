"""Words in a free group: tuples of nonzero integers, -x the inverse of x."""

from __future__ import annotations

from collections.abc import Iterable
from hashlib import sha256

Word = tuple[int, ...]


def reduced(letters: Iterable[int]) -> Word:
    """The freely reduced word."""
    out: list[int] = []
    for letter in letters:
        if out and out[-1] == -letter:
            out.pop()
        else:
            out.append(letter)
    return tuple(out)


def inverse(word: Word) -> Word:
    """The inverse word."""
    return tuple(-letter for letter in reversed(word))


def append(out: list[int], word: Word) -> None:
    """Multiply a reduced word in a list by a reduced word: only the letters that cancel are looked at."""
    cancelled = 0
    for letter in word:
        if not out or out[-1] != -letter:
            break
        out.pop()
        cancelled += 1
    out.extend(word[cancelled:])


def cyclic_form(word: Word) -> Word:
    """One word for all cyclic rotations of a reduced word and of its inverse, cyclically reduced."""
    start, end = 0, len(word)
    while end - start > 1 and word[start] == -word[end - 1]:
        start, end = start + 1, end - 1
    core = word[start:end]
    return min(_least_rotation(core), _least_rotation(inverse(core)))


def _least_rotation(word: Word) -> Word:
    """The lexicographically least rotation, by the two pointers i, j that stand where it may start (time linear in the length)."""
    size = len(word)
    i, j, same = 0, 1, 0
    while i < size and j < size and same < size:
        left, right = word[(i + same) % size], word[(j + same) % size]
        if left == right:
            same += 1
            continue
        if left > right:
            i += same + 1
        else:
            j += same + 1
        j += i == j
        same = 0
    start = min(i, j)
    return word[start:] + word[:start]


def is_power(word: Word) -> bool:
    """Whether a cyclically reduced word is a proper power."""
    size = len(word)
    return any(size % d == 0 and word[:-d] == word[d:] for d in range(1, size // 2 + 1))


def group_text(names: list[str], relators: list[Word]) -> str:
    """The presentation in print: runs of a letter as powers, a relator that is a power of a word of two letters or more in brackets."""
    shown = ", ".join(_relator_text(names, word) for word in relators)
    return f"⟨{', '.join(names)} | {shown}⟩"


def _relator_text(names: list[str], word: Word) -> str:
    size = len(word)
    for period in range(1, size // 2 + 1):
        if size % period == 0 and word[:-period] == word[period:] and len(set(word[:period])) > 1:
            return f"({_runs(names, word[:period])})^{size // period}"
    return _runs(names, word)


def _runs(names: list[str], word: Word) -> str:
    parts: list[str] = []
    start = 0
    for place in range(1, len(word) + 1):
        if place == len(word) or word[place] != word[start]:
            n = (place - start) * (1 if word[start] > 0 else -1)
            parts.append(names[abs(word[start]) - 1] + ("" if n == 1 else f"^{n}"))
            start = place
    return " ".join(parts)


def digest(text: str) -> str:
    """SHA-256 of a text, in hexadecimal."""
    return sha256(text.encode()).hexdigest()
