"""Lemmas: each is, in the free group, a product of conjugates of earlier equations."""

from __future__ import annotations

from typing import Any

from .parse import integer, listing, word
from .refused import require
from .words import Word, inverse, reduced


def replay(lemmas: Any, equations: list[Word], symbols: int) -> None:
    """Check every lemma and append its word to the equations."""
    for number, lemma in enumerate(listing(lemmas, "lemmas")):
        where = f"lemma {number}"
        require(type(lemma) is list and len(lemma) == 2, f"{where} is not a pair")
        claimed = word(lemma[0], where, symbols)
        require(claimed == reduced(claimed), f"{where} is not freely reduced")
        out: list[int] = []
        for factor in listing(lemma[1], f"{where}, factors"):
            require(type(factor) is list and len(factor) == 3, f"{where}: a factor is not a triple")
            conjugator = word(factor[0], f"{where}, conjugator", symbols)
            earlier = equations[integer(factor[1], f"{where}, number of an equation", 0, len(equations) - 1)]
            sign = integer(factor[2], f"{where}, sign", -1, 1)
            require(sign != 0, f"{where}: a sign is 0")
            _multiply(out, conjugator)
            _multiply(out, earlier if sign > 0 else inverse(earlier))
            _multiply(out, inverse(conjugator))
        require(tuple(out) == claimed, f"{where}: the factors do not multiply to its word")
        equations.append(claimed)


def _multiply(out: list[int], letters: Word) -> None:
    for letter in letters:
        if out and out[-1] == -letter:
            out.pop()
        else:
            out.append(letter)
