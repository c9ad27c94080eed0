"""Formulas: composed once in a small part of LaTeX, shown as they stand or as plain text."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from itertools import groupby

from lowindex.algebra import polynomial_text
from lowindex.quotients import cycles
from lowindex.words import Presentation, Word, primitive_root


def name(text: str) -> str:
    """The name of a generator: trailing digits become an index."""
    stem, digits, primes = re.fullmatch(r"(.*?)_?(\d*)(['′]*)", text).groups()  # type: ignore[union-attr]
    if not stem or "_" in stem or (digits and "'" in stem):
        return r"\mathit{" + text.replace("_", r"\_") + "}"
    shown = stem if len(stem) == 1 else rf"\mathit{{{stem}}}"
    return shown + primes + (f"_{{{digits}}}" if digits else "")


def power(base: str, exponent: int) -> str:
    """A power; the base itself for the exponent 1."""
    return base if exponent == 1 else f"{base}^{{{exponent}}}"


def word(letters: Word, names: Sequence[str]) -> str:
    """A word as a product of powers; 1 when it is empty."""
    syllables = []
    for letter, run in groupby(letters):
        syllables.append(power(names[abs(letter) - 1], len(list(run)) * (1 if letter > 0 else -1)))
    return r"\,\allowbreak ".join(syllables) or "1"


def group(presentation: Presentation) -> str:
    """A presentation."""
    names = list(map(name, presentation.names))
    relators = []
    for relator in presentation.relators:
        root, n = primitive_root(relator)
        relators.append(rf"({word(root, names)})^{{{n}}}" if n > 1 and len(set(root)) > 1 else word(relator, names))
    shown = r", \allowbreak ".join(relators)
    return rf"\langle {', '.join(names)} \mid {shown}\rangle"


def permutation(images: Sequence[int]) -> str:
    """Cycle notation; () for the identity."""
    return r"\allowbreak ".join("(" + r"\ ".join(map(str, cycle)) + ")" for cycle in cycles(images) if len(cycle) > 1) or "()"


def polynomial(coefficients: Sequence[int]) -> str:
    """A polynomial in t from its coefficients, degree 0 first."""
    return polynomial_text(coefficients, power="^{{{}}}")


def matrix(rows: Iterable[Iterable[str]]) -> str:
    """A matrix."""
    return r"\begin{pmatrix}" + r" \\ ".join(" & ".join(row) for row in rows) + r"\end{pmatrix}"


_PLAIN = [
    (re.compile(r"\\begin\{pmatrix\}(.*?)\\end\{pmatrix\}"), lambda m: "[[" + m[1].replace(" & ", ", ").replace(r" \\ ", "], [") + "]]"),
    (re.compile(r"\\(?:mathit|mathbb|mathbf|mathrm|operatorname)\{([^{}]*)\}"), lambda m: m[1]),
    (re.compile(r"\\frac\{([^{}]*)\}\{([^{}]*)\}"), lambda m: f"({m[1]})/({m[2]})"),
    (re.compile(r"([_^])\{([^{}]*)\}"), lambda m: (m[1] if m[1] == "^" else "") + m[2]),
]

_SIGNS = {
    r"\,\allowbreak ": " ", r"\allowbreak ": "", r"\langle ": "⟨", r"\rangle": "⟩", r"\mid ": "| ", r"\sigma": "s", r"\gamma": "g",
    r"\mapsto": "↦", r"\cdot": "·", r"\times": "×", r"\in ": "∈ ", r"\neq": "≠", r"\geq": "≥", r"\leq": "≤", r"\to": "→", r"\ne": "≠",
    r"\rho": "ρ", r"\,": " ", r"\ ": " ", r"\_": "_", r"\quad": " ", r"\{": "{", r"\}": "}", r"\dots": "…",
}  # fmt: skip


def plain(formula: str) -> str:
    """The formula as text in one line."""
    for pattern, replacement in _PLAIN:
        formula = pattern.sub(replacement, formula)
    for sign, shown in _SIGNS.items():
        formula = formula.replace(sign, shown)
    return formula.replace("{", "").replace("}", "")
