"""Free differential calculus. R. H. Fox, Free differential calculus I, Ann. of Math. 57 (1953).

d(uv) = du + u dv, d(x^-1) = -x^-1 dx. The Jacobian of a presentation has a row for every relator; pushed to a commutative ring by a
character it decides whether there are crossed homomorphisms beside the principal ones.
"""

from __future__ import annotations

from collections.abc import Sequence

from lowindex.words import Word

Height = tuple[int, ...]


def fox_terms(word: Word, heights: Sequence[Height]) -> dict[tuple[int, Height], int]:
    """The derivatives of a word in the group ring of Z^b, generator k + 1 going to heights[k] in Z^b: the coefficient of the monomial h in
    the derivative by generator k + 1, at key (k, h); zeros are left out."""
    terms: dict[tuple[int, Height], int] = {}
    here: Height = (0,) * (len(heights[0]) if heights else 0)
    for letter in word:
        k = abs(letter) - 1
        if letter < 0:
            here = tuple([x - y for x, y in zip(here, heights[k], strict=True)])
        terms[k, here] = terms.get((k, here), 0) + (1 if letter > 0 else -1)
        if letter > 0:
            here = tuple([x + y for x, y in zip(here, heights[k], strict=True)])
    return {key: value for key, value in terms.items() if value}


def jacobian_mod(relators: Sequence[Word], values: Sequence[int], q: int) -> list[list[int]]:
    """The Jacobian at the character that takes generator g to the unit values[g - 1] of F_q; entries mod q. Rows of zeros are left out."""
    inverses = [pow(value, -1, q) for value in values]
    rows: dict[tuple[int, ...], None] = {}
    for word in relators:
        row = [0] * len(values)
        prefix = 1
        for letter in word:
            if letter > 0:
                row[letter - 1] += prefix
                prefix = prefix * values[letter - 1] % q
            else:
                prefix = prefix * inverses[-letter - 1] % q
                row[-letter - 1] -= prefix
        reduced = tuple(x % q for x in row)
        if any(reduced):
            rows[reduced] = None
    return [list(row) for row in rows]
