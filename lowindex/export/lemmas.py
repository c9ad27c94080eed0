"""Lemmas: products of conjugates of earlier equations, or chains of replacements."""

from __future__ import annotations

from lowindex.export.document import Block, Items
from lowindex.export.reading import Reading
from lowindex.export.subgroup import Names, listed

LONGEST_CHAIN = 8
LONGEST_WORD = 60
"""Lemmas with at most that many factors and letters are shown as a chain of replacements."""


def lemmas(reading: Reading, names: Names) -> tuple[list[Block], list[Block]]:
    """The lemmas of a witness, each with its proof."""
    if not reading.lemmas:
        return [], []
    items = Items(
        tuple(f"${names.word(word)} = 1$" for word, _ in reading.lemmas),
        tuple(f"($L_{{{k + 1}}}$)" for k in range(len(reading.lemmas))),
        tuple(_proof(reading, names, k) for k in range(len(reading.lemmas))),
    )
    text = (
        "Each of these equations follows from earlier ones: its left side is, in the free group, the product of conjugates of left sides "
        "of "
        r"earlier equations that is written behind it, or it is changed to $1$ step by step. ($D_{i}$) stands for the definition of "
        r"$\gamma_{i}$, "
        r"read as $\gamma_{i}^{-1}$ times its right side."
    )
    return listed("Lemmas", items, text)


def label(reading: Reading, number: int) -> str:
    """How an equation is called."""
    if number < reading.first_definition:
        return f"R_{{{number}}}"
    if number < reading.first_lemma:
        return f"D_{{{number - reading.first_definition + 1}}}"
    return f"L_{{{number - reading.first_lemma + 1}}}"


def _proof(reading: Reading, names: Names, k: int) -> str:
    factors = reading.lemmas[k][1]
    chain = reading.replacements(k)
    if len(factors) <= LONGEST_CHAIN and max(len(step) for step, _ in chain) <= LONGEST_WORD:
        steps = [f"${names.word(step)}$ by $({label(reading, j)})$" for step, j in chain[1:]]
        return ": it becomes " + ", then ".join(steps) + "."
    shown = []
    for u, j, sign in factors:
        power = "^{-1}" if sign < 0 else ""
        name = f"{label(reading, j)}{power}"
        shown.append(rf"{names.word(u)}\,\cdot {name}\cdot\,({names.word(u)})^{{-1}}" if u else name)
    return ", the product of " + ", ".join(f"${item}$" for item in shown) + "."
