"""Formulas in the small part of LaTeX that pages use, as MathML."""

from __future__ import annotations

import re
from html import escape

_TOKEN = re.compile(r"\\begin\{pmatrix\}|\\end\{pmatrix\}|\\[A-Za-z]+|\\.|[{}^_&]|\d+|\s+|.")

_OPERATORS = {
    r"\langle": "⟨", r"\rangle": "⟩", r"\mid": "|", r"\mapsto": "↦", r"\cdot": "·", r"\times": "×", r"\in": "∈", r"\neq": "≠", r"\ne": "≠",
    r"\geq": "≥", r"\leq": "≤", r"\to": "→", r"\dots": "…", r"\_": "_", r"\{": "{", r"\}": "}",
}  # fmt: skip
_SIGNS = {"-": "−", "'": "′"}
_LETTERS = {r"\sigma": "σ", r"\gamma": "γ", r"\rho": "ρ"}
_BLANKS = {r"\,", r"\ ", r"\quad"}
_FONTS = {r"\mathit": ' class="italic"', r"\mathrm": ' mathvariant="normal"', r"\operatorname": ' mathvariant="normal"', r"\mathbb": ""}
_DOUBLE_STRUCK = str.maketrans("CFNQRZ", "ℂ𝔽ℕℚℝℤ")


def mathml(formula: str) -> str:
    """The formula as <math> elements, one for each part between the places where a line may be broken, with its LaTeX as annotation.

    >>> mathml("a^{2}").split("<annotation ")[0]
    '<math><semantics><mrow><msup><mi>a</mi><mn>2</mn></msup></mrow>'
    """
    return "<wbr>".join(map(_element, _parts(formula)))


def _parts(formula: str) -> list[str]:
    """The formula cut at every allowbreak outside of braces and matrices."""
    parts = [""]
    for piece in formula.split(r"\allowbreak "):
        inside = parts[-1].count("{") > parts[-1].count("}") or parts[-1].count(r"\begin") > parts[-1].count(r"\end")
        if inside or not parts[-1]:
            parts[-1] += piece
        else:
            parts.append(piece)
    return [part for part in parts if part] or [""]


def _element(formula: str) -> str:
    shown, rest = _row(_TOKEN.findall(formula), ())
    assert not rest
    source = f'<annotation encoding="application/x-tex">{escape(formula)}</annotation>'
    return f"<math><semantics><mrow>{shown}</mrow>{source}</semantics></math>"


def _row(tokens: list[str], stops: tuple[str, ...]) -> tuple[str, list[str]]:
    """What stands before a stop, and the tokens from the stop on."""
    parts: list[str] = []
    while tokens and tokens[0] not in stops:
        if tokens[0] in ("^", "_"):
            script, tokens_left = _one(tokens[1:])
            base = parts.pop() if parts else "<mrow></mrow>"
            element = "msup" if tokens[0] == "^" else "msub"
            if element == "msup" and base.startswith("<msub>"):
                base, element = base.removeprefix("<msub>").removesuffix("</msub>"), "msubsup"
            parts.append(f"<{element}>{base}{script}</{element}>")
            tokens = tokens_left
            continue
        part, tokens = _one(tokens)
        parts += [part] if part else []
    return "".join(parts), tokens


def _one(tokens: list[str]) -> tuple[str, list[str]]:
    """One element and the tokens after it."""
    token, rest = tokens[0], tokens[1:]
    if token == "{":
        shown, rest = _row(rest, ("}",))
        single = re.fullmatch(r"<(m[a-z]+)>[^<]*</\1>", shown)
        return (shown if single else f"<mrow>{shown}</mrow>"), rest[1:]
    if token == r"\begin{pmatrix}":
        return _matrix(rest)
    if token == r"\frac":
        above, rest = _one(rest)
        below, rest = _one(rest)
        return f"<mfrac>{above}{below}</mfrac>", rest
    if token in _FONTS:
        end = rest.index("}")
        text = "".join(rest[1:end]).replace(r"\_", "_")
        text = text.translate(_DOUBLE_STRUCK) if token == r"\mathbb" else text
        return f"<mi{_FONTS[token]}>{escape(text)}</mi>", rest[end + 1 :]
    if token == r"\allowbreak" or token.isspace():
        return "", rest
    if token in _BLANKS:
        return '<mspace width="0.2em"/>', rest
    if token in (r"\langle", r"\rangle"):
        return f'<mo stretchy="false" lspace="0" rspace="0">{_OPERATORS[token]}</mo>', rest
    if token in _OPERATORS:
        return f"<mo>{escape(_OPERATORS[token])}</mo>", rest
    if token in _LETTERS:
        return f"<mi>{_LETTERS[token]}</mi>", rest
    if token.isdigit():
        return f"<mn>{token}</mn>", rest
    if token.isalpha():
        return f"<mi>{token}</mi>", rest
    if token in "()[]":
        return f'<mo stretchy="false" lspace="0" rspace="0">{token}</mo>', rest
    return f"<mo>{escape(_SIGNS.get(token, token))}</mo>", rest


def _matrix(tokens: list[str]) -> tuple[str, list[str]]:
    end = r"\end{pmatrix}"
    rows = [""]
    while True:
        cell, tokens = _row(tokens, ("&", r"\\", end))
        rows[-1] += f"<mtd>{cell}</mtd>"
        if tokens[0] == end:
            table = "".join(f"<mtr>{row}</mtr>" for row in rows)
            return f"<mrow><mo>(</mo><mtable>{table}</mtable><mo>)</mo></mrow>", tokens[1:]
        if tokens[0] == r"\\":
            rows.append("")
        tokens = tokens[1:]
