"""The proposition of a witness "virtually nilpotent"."""

from __future__ import annotations

from typing import Any

from lowindex.export import mathematics as tex
from lowindex.export.document import Block, Items, Paragraph
from lowindex.export.lemmas import label, lemmas
from lowindex.export.literature import references
from lowindex.export.reading import Reading
from lowindex.export.subgroup import Names, action, listed, relators


def proposition(reading: Reading) -> list[Block]:
    """Statement and proof."""
    names = Names(reading)
    summary = reading.content["summary"]
    main, appendix = action(reading, names)
    text = (
        r"Tracing every relator of $G$ from every point gives defining relators of $H$ in the $\sigma_{i}$~\cite{Reidemeister}. "
        r"These are the ones that are used:"
    )
    for more, behind in (relators(reading, names, reading.used_relators, text), _definitions(reading, names), lemmas(reading, names)):
        main += more
        appendix += behind
    more, behind = _chain(reading, names)
    main += more
    appendix += behind
    statement = Paragraph(_statement(reading, summary), "Proposition")
    opening = Paragraph("Every step below can be checked by multiplying words out in a free group; nothing has to be searched.", "Proof")
    blocks = [statement, opening, *main, Paragraph(_conclusion(summary))]
    return [*blocks, references([*blocks, *appendix]), *appendix]


def _kind(summary: dict[str, Any]) -> str:
    if summary["class"] == 0:
        return "trivial"
    if summary["class"] == 1:
        return "abelian"
    bound = "" if summary["hirsch_length"] is not None else "at most "
    return f"nilpotent of class {bound}{summary['class']}"


def _statement(reading: Reading, summary: dict[str, Any]) -> str:
    group = f"Let $G = {tex.group(reading.group)}$."
    kind = _kind(summary)
    if summary["finite_order"] is not None:
        order = summary["finite_order"]
        return f"{group} The group $G$ is finite of order {order}; it has a subgroup $H$ of index {reading.index} that is {kind}."
    where = f"The group $G$ has a subgroup $H$ of index {reading.index} that is"
    if reading.index == 1:
        where = "The group $H = G$ is"
    if summary["hirsch_length"] is None:
        return f"{group} {where} {kind}; so $G$ has polynomial growth."
    return (
        f"{group} {where} {kind} and of Hirsch length {summary['hirsch_length']}, with lower central factors {_factors(summary)}. So $G$ "
        f"has "
        f"polynomial growth of degree {summary['growth_degree']}."
    )


def _factors(summary: dict[str, Any]) -> str:
    shown = []
    for rank, torsion in summary["factors"]:
        parts = ([r"\mathbb{Z}" + (f"^{{{rank}}}" if rank > 1 else "")] if rank else []) + [f"C_{{{d}}}" for d in torsion]
        shown.append("$" + r" \times ".join(parts) + "$")
    return ", ".join(shown)


def _definitions(reading: Reading, names: Names) -> tuple[list[Block], list[Block]]:
    if not reading.definitions:
        return [], []
    items = Items(
        tuple(f"${names.word(word)}$" for word in reading.definitions),
        tuple(f"${symbol} =$" for symbol in names.symbols[reading.rank :]),
    )
    return listed("Definitions", items, "More elements of $H$ are named:")


def _chain(reading: Reading, names: Names) -> tuple[list[Block], list[Block]]:
    chain = reading.content["chain"]
    goals = reading.content["goals"]
    size = len(chain["symbols"])
    if not size:
        everything = ", ".join(f"$({label(reading, number)})$" for number in goals["generators"] if number >= 0)
        return [Paragraph(f"So every generator of $H$ is trivial (up to inversion and rotation by {everything}), and $H = 1$.")], []
    elements = [rf"a_{{{k + 1}}}" for k in range(size)]
    weights = chain["weights"]
    items = Items(
        tuple(
            f"${names.symbols[symbol - 1]}$, of weight {weight}" + (f", with $a_{{{k + 1}}}^{{{order}}}$ trivial or later" if order else "")
            for k, (symbol, weight, order) in enumerate(zip(chain["symbols"], weights, chain["orders"], strict=True))
        ),
        tuple(f"${element} =$" for element in elements),
    )
    main: list[Block] = [Paragraph("The central chain of $H$ consists of these elements:"), items]
    facts: list[tuple[str, str]] = []
    for s, (image, number) in enumerate(zip(chain["images"], goals["generators"], strict=True)):
        if number >= 0:
            facts.append((f"({label(reading, number)})", f"${names.symbols[s]} = {_vector(image, elements)}$"))
    conjugates = {(j, i): vector for j, i, vector in chain["conjugates"]}
    for j, i, number in goals["conjugates"]:
        image = _vector(conjugates.get((j, i), [[j, 1]]), elements)
        facts.append((f"({label(reading, number)})", f"${elements[i]}^{{-1}}\\,{elements[j]}\\,{elements[i]} = {image}$"))
    powers = dict(chain["powers"])
    finite = [j for j, order in enumerate(chain["orders"]) if order]
    for j, number in zip(finite, goals["powers"], strict=True):
        if number is not None:
            fact = f"${elements[j]}^{{{chain['orders'][j]}}} = {_vector(powers.get(j, []), elements)}$"
            facts.append((f"({label(reading, number)})", fact))
    text = (
        "By the equations named in front, up to rotation and inversion, the following holds: the elements of the chain generate $H$, and "
        "what the ones of "
        "weight $1$ do to the others moves them by elements of larger weight only."
    )
    more, behind = listed("The central chain", Items(tuple(f for _, f in facts), tuple(f"${key}$" for key, _ in facts)), text)
    return main + more, behind


def _vector(vector: list[list[int]], elements: list[str]) -> str:
    return r"\,".join(tex.power(elements[k], n) for k, n in vector) or "1"


def _conclusion(summary: dict[str, Any]) -> str:
    text = (
        r"Let $F_{w}$ be generated by the elements of weight at least $w$. Each element of weight $w > 1$ is by its definition a "
        r"commutator of one of weight $w - 1$ "
        r"with one of weight $1$, so the elements of weight $1$ generate $H$, and by the equations above they commute with $F_{w}$ "
        r"modulo $F_{w+1}$. Hence $F_{w}$ contains the $w$-th "
        rf"term of the lower central series, and $H$ is nilpotent of class at most {summary['class']}~\cite{{Sims}}."
    )
    if summary["class"] <= 1:
        text = "So $H$ is generated by elements that commute." if summary["class"] else ""
    if summary["hirsch_length"] is None:
        return text
    text += (
        r" Conversely the relative orders, powers and conjugates of the chain are a consistent presentation of a nilpotent group $N$; "
        r"sending every $\sigma_{i}$ to its normal "
        "form in the chain respects the relators of $H$, so $H$ maps onto $N$. By the equations above $H$ is not larger than $N$, hence "
        "isomorphic to it."
    )
    if summary["finite_order"] is None:
        text += (
            f" So the factors are exact, and the growth degree is the sum of $w$ times the rank of the $w$-th factor, "
            f"{summary['growth_degree']}"
            r"~\cite{Bass}, \cite{Guivarch}."
        )
    return text


