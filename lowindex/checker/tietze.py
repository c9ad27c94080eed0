"""A shorter presentation of the same group, by Tietze moves that never lengthen a relator (FORMAT.md, "Shortened presentations")."""

from __future__ import annotations

from .words import Word, cyclic_form, reduced

MOST_REWRITTEN = 5_000_000


def shortened(rank: int, relators: list[Word]) -> tuple[int, list[Word]]:
    """Number of generators and relators. Relators are kept up to rotation and inversion, each once and none empty; a generator that a
    relator of length 1 or 2 makes trivial or another letter is eliminated. Stopping after any round would be sound."""
    words = sorted({cyclic_form(word) for word in relators} - {()}, key=len)
    alive = set(range(1, rank + 1))
    rewritten = 0
    while rewritten <= MOST_REWRITTEN and (values := _solved(words)):
        alive -= set(values)
        rewritten += sum(map(len, words))
        words = sorted({cyclic_form(_substituted(word, values)) for word in words} - {()}, key=len)
    return len(alive), words


def _solved(words: list[Word]) -> dict[int, int]:
    """For generators that short relators eliminate a letter that is not eliminated, or 0 for 1."""
    values: dict[int, int] = {}

    def value(letter: int) -> int:
        while letter and abs(letter) in values:
            following = values[abs(letter)]
            if following and abs(following) in values:
                further = values[abs(following)]
                values[abs(letter)] = following = further if following > 0 else -further
            letter = following if letter > 0 else -following
        return letter

    for word in words:
        if len(word) > 2:
            break
        left, right = value(word[0]), value(-word[1]) if len(word) == 2 else 0
        if abs(left) != abs(right):
            if left == 0:
                left, right = right, 0
            values[abs(left)] = right if left > 0 else -right
    return {k: value(k) for k in values}


def _substituted(word: Word, values: dict[int, int]) -> Word:
    letters = (values.get(abs(letter), abs(letter)) * (1 if letter > 0 else -1) for letter in word)
    return reduced(letter for letter in letters if letter)
