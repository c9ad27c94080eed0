"""The proposition of a witness "not virtually nilpotent": the theorem used, the data, and what to check by hand."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from lowindex.export import mathematics as tex
from lowindex.export.document import Block, Items, Paragraph
from lowindex.export.literature import references
from lowindex.export.reading import Reading
from lowindex.export.subgroup import Names, action, listed


def proposition(reading: Reading) -> list[Block]:
    """Statement and proof."""
    names = Names(reading)
    main, appendix = action(reading, names)
    obstruction = reading.content["obstruction"]
    middle, behind = KINDS[obstruction["kind"]](obstruction, reading, names)
    statement = (
        f"Let $G = {tex.group(reading.group)}$. The group $G$ has no nilpotent subgroup of finite index; equivalently, its growth is not "
        r"polynomial~\cite{Gromov}."
    )
    smaller = "$G$" if reading.index == 1 else f"the subgroup $H$ of index {reading.index}"
    opening = (
        "Subgroups of finite index and quotients of a virtually nilpotent group are virtually nilpotent, so it is enough to show "
        f"that {smaller} is not."
    )
    blocks = [Paragraph(statement, "Proposition"), Paragraph(opening, "Proof"), *main, *middle]
    appendix = appendix + behind
    return [*blocks, references([*blocks, *appendix]), *appendix]


Parts = tuple[list[Block], list[Block]]


def _affine(obstruction: dict[str, Any], reading: Reading, names: Names) -> Parts:
    field = obstruction["field"]
    entries = []
    for m, v in zip(obstruction["multipliers"], obstruction["translations"], strict=True):
        entries.append("$" + tex.matrix([[_element(field, m), _element(field, v)], ["0", "1"]]) + "$")
    items = Items(tuple(entries), tuple(rf"${symbol} \mapsto$" for symbol in names.symbols))
    intro = (
        f"Let $K = {_field(field)}${_modulus_remark(field)}. Sending the generators of $H$ to the matrices below defines a homomorphism "
        r"$\rho$ from $H$ to $\mathrm{GL}_{2}(K)$: a map $x \mapsto m x + v$ for every element."
    )
    main, behind = listed("Matrices", items, intro)
    traced = (
        "all relators of $G$"
        if reading.index == 1
        else f"the words obtained by tracing every relator of $G$ from each of the {reading.index} points"
    )
    checks = Items(
        (
            rf"{traced} go to the identity matrix (then $\rho$ is a homomorphism, \cite{{Fox}});",
            rf"the word ${names.word(tuple(obstruction['dilation']))}$ goes to a matrix whose multiplier $m$ is not a root of unity"
            + _infinite(field)
            + ";",
            rf"the word ${names.word(tuple(obstruction['translation']))}$ goes to a matrix with multiplier $1$ and a translation $w \neq "
            rf"0$.",
        ),
        ("(1)", "(2)", "(3)"),
    )
    conclusion = (
        r"Suppose that a nilpotent group $N$ of class $c$ had finite index in $\rho(H)$. The translations in $\rho(H)$ are infinite in "
        r"number, since they contain those by the "
        r"different elements $w m^{j}$. So $N$ contains a translation by some $w' \neq 0$, and the $k$-th power of the matrix in (2) for "
        r"some $k > 0$. Taking commutators of the one with the other "
        r"$c$ times gives the translation by $w' (m^{k} - 1)^{c}$ up to a unit, which is not trivial: a contradiction (compare "
        r"\cite{Milnor} and \cite{Wolf})."
    )
    return [*main, Paragraph("To check by hand:"), checks, Paragraph(conclusion)], behind


def _field(field: dict[str, Any]) -> str:
    if field["kind"] == "Q":
        return r"\mathbb{Q}"
    if field["kind"] == "F_p(t)":
        return rf"\mathbb{{F}}_{{{field['prime']}}}(t)"
    return rf"\mathbb{{Q}}[t]/({tex.polynomial(field['modulus'])})"


def _modulus_remark(field: dict[str, Any]) -> str:
    if field["kind"] == "Q[t]/(f)":
        return " (where the polynomial has several factors, take one of them)"
    return ""


def _infinite(field: dict[str, Any]) -> str:
    if field["kind"] == "Q":
        return ", being neither $1$ nor $-1$"
    if field["kind"] == "F_p(t)":
        return ", not being a constant"
    degree = len(field["modulus"]) - 1
    return rf": a root of unity of order $n$ in $K$ would have $\operatorname{{phi}}(n) \leq {degree}$, and none of these powers is $1$"


def _element(field: dict[str, Any], value: list[Any]) -> str:
    above, below = value
    if field["kind"] == "Q":
        return str(above) if below == 1 else rf"\frac{{{above}}}{{{below}}}"
    if field["kind"] == "F_p(t)":
        top, bottom = tex.polynomial(above), tex.polynomial(below)
        return top if bottom == "1" else rf"\frac{{{top}}}{{{bottom}}}"
    top = tex.polynomial(above)
    return top if below == 1 else rf"\frac{{{top}}}{{{below}}}"


def _pro_p(obstruction: dict[str, Any], reading: Reading, names: Names) -> Parts:
    p = obstruction["prime"]
    text = (
        rf"Simplify the presentation of $H$ on its Schreier generators by relators that are trivial, repeated up to rotation and "
        rf"inversion, or of the forms $x$ and $x y$; "
        rf"let $g$ generators and $r$ relators be left, and let $d$ be the dimension of $H_{{1}}(H; \mathbb{{F}}_{{{p}}})$. To check by "
        rf"hand: $d \geq 2$ and $4 (r - g + d) < d^{{2}}$. Then the pro-{p} "
        rf"completion of $H$ is not $p$-adic analytic for $p = {p}$, by the inequality of Golod and "
        rf"Shafarevich~\cite{{GolodShafarevich}}, \cite{{Lubotzky}}, while that of a virtually nilpotent "
        r"group is."
    )
    return [Paragraph(text)], []


def _small_cancellation(obstruction: dict[str, Any], reading: Reading, names: Names) -> Parts:
    text = (
        r"To check by hand: no relator of $H$ is a proper power; a word that begins two different rotations of relators or their "
        r"inverses (a piece) is always shorter than a sixth "
        r"of each of them, the condition $C'(1/6)$; and the Euler characteristic $1 - g + r$, with $g$ generators and $r$ relators, "
        r"together with $H_{1}$ excludes the trivial and the infinite cyclic group. By~\cite{LyndonSchupp}, "
        r"chapter V, $H$ is then torsion-free and hyperbolic, so it contains a free group of rank $2$."
    )
    return [Paragraph(text)], []


KINDS: dict[str, Callable[[dict[str, Any], Reading, Names], Parts]] = {
    "affine": _affine,
    "pro-p": _pro_p,
    "small cancellation": _small_cancellation,
}
