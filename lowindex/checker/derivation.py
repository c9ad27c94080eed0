"""Lemmas: each is, in the free group, a product of conjugates of earlier equations."""

from __future__ import annotations

from typing import Any

from .parse import integer, listing, word
from .refused import require
from .words import Word, append, inverse, reduced

MOST_MULTIPLIED = 50_000_000


def replay(lemmas: Any, equations: list[Word], symbols: int) -> None:
    """Check every lemma and append its word to the equations."""
    multiplied = 0
    for number, lemma in enumerate(listing(lemmas, "lemmas")):
        where = f"lemma {number}"
        claimed = word(listing(lemma, where, 2)[0], where, symbols)
        require(claimed == reduced(claimed), f"{where} is not freely reduced")
        out: list[int] = []
        for place, factor in enumerate(listing(lemma[1], f"{where}, factors")):
            here = f"{where}, factor {place}"
            letters, earlier, sign = listing(factor, here, 3)
            conjugator = reduced(word(letters, f"{here}, conjugator", symbols))
            equation = equations[integer(earlier, f"{here}, equation", 0, len(equations) - 1)]
            require(integer(sign, f"{here}, sign", -1, 1), f"{here}, sign is 0")
            multiplied += len(equation) + 2 * len(conjugator)
            require(multiplied <= MOST_MULTIPLIED, f"{where}: more than {MOST_MULTIPLIED} letters multiplied in all")
            append(out, conjugator)
            append(out, equation if sign > 0 else inverse(equation))
            append(out, inverse(conjugator))
        require(tuple(out) == claimed, f"{where}: the factors do not multiply to its word")
        equations.append(claimed)
