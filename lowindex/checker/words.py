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


def same_relator(left: Word, right: Word) -> bool:
    """Whether two reduced words are conjugate in the free group, up to inversion."""
    left, right = _core(left), _core(right)
    if len(left) != len(right):
        return False
    if left in (right, inverse(right)):
        return True
    double = _spelled(left + left)
    return _spelled(right) in double or _spelled(inverse(right)) in double


def _core(word: Word) -> Word:
    start, end = 0, len(word)
    while end - start > 1 and word[start] == -word[end - 1]:
        start, end = start + 1, end - 1
    return word[start:end]


def _spelled(word: Word) -> str:
    return "," + ",".join(map(str, word)) + ","


def group_text(names: list[str], relators: list[Word]) -> str:
    """The presentation in print: runs of a letter as powers, a relator that is a power of a word of two letters or more in brackets."""
    shown = ", ".join(_relator_text(names, word) for word in relators)
    return f"⟨{', '.join(names)} | {shown}⟩" if relators else f"⟨{', '.join(names)} | ⟩"


def _relator_text(names: list[str], word: Word) -> str:
    for period in range(1, len(word) // 2 + 1):
        if len(word) % period == 0 and len(set(word[:period])) > 1 and word[:period] * (len(word) // period) == word:
            return f"({_runs(names, word[:period])})^{len(word) // period}"
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
