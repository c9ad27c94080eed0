"""A witness, or a table of a scan, as one self-contained page of HTML: no network, no other files."""

from __future__ import annotations

import re
from collections.abc import Sequence
from html import escape
from importlib.resources import files
from math import log

from lowindex.budget import Budget
from lowindex.cosets import LARGEST_PICTURE, graph_text
from lowindex.export.document import Block, Heading, Items, Paragraph, References
from lowindex.export.mathematics import group
from lowindex.export.mathml import mathml
from lowindex.export.proposition import blocks, title
from lowindex.export.reading import Reading
from lowindex.growth import growth

PLOTTED_RADIUS = 14
PLOT_WORK = 200_000
"""Work for the sizes of balls on a page."""

FACTS = {"index": "index", "class": "class", "hirsch_length": "Hirsch length", "growth_degree": "degree of growth", "finite_order": "order"}


def tag(name: str, *content: str, **attributes: str | int) -> str:
    """An element; `content` is HTML already, attributes are escaped (class_ stands for class, aria_x for aria-x)."""
    shown = "".join(f' {key.rstrip("_").replace("_", "-")}="{escape(str(value))}"' for key, value in attributes.items())
    return f"<{name}{shown}>{''.join(content)}</{name}>"


def page(reading: Reading) -> str:
    """The page of a witness."""
    parts = [tag("h1", escape(title(reading))), _verdict(reading), *_blocks(blocks(reading))]
    if reading.index > 1:
        parts += _action(reading)
    parts += [*_growth(reading), _provenance(reading)]
    return _document(title(reading), tag("main", "\n".join(parts)))


def table_page(heading: str, columns: Sequence[str], rows: Sequence[Sequence[object]], summary: str, links: Sequence[str | None]) -> str:
    """The page of a scan: a table that can be sorted; `links` go with the rows, to the page of a witness or nowhere."""
    head = [tag("th", tag("button", escape(name.replace("_", " ")), type="button"), scope="col") for name in columns]
    lines = []
    for row, link in zip(rows, links, strict=True):
        proof = "" if link is None else tag("a", "witness", href=link)
        lines.append(tag("tr", *map(_cell, row), tag("td", proof)))
    table = tag("table", tag("thead", tag("tr", *head, tag("th", "proof", scope="col"))), tag("tbody", *lines))
    parts = [tag("h1", escape(heading)), tag("p", escape(summary), class_="verdict")]
    parts += [tag("p", "Press the name of a column to sort by it."), tag("div", table, class_="scroll")]
    return _document(heading, tag("main", "\n".join(parts), class_="wide"))


def _cell(value: object) -> str:
    if isinstance(value, int | float):
        return tag("td", str(value), class_="number")
    return tag("td", "" if value is None else escape(str(value)))


def _document(name: str, main: str) -> str:
    style, script = (files("lowindex.export").joinpath(f"page.{kind}").read_text(encoding="utf-8") for kind in ("css", "js"))
    meta = '<meta charset="utf-8">\n<meta name="viewport" content="width=device-width, initial-scale=1">\n'
    head = tag("head", "\n", meta, tag("title", escape(name)), "\n", tag("style", "\n", style), "\n")
    body = tag("body", "\n", main, "\n", tag("script", "\n", script), "\n")
    return "<!DOCTYPE html>\n" + tag("html", "\n", head, "\n", body, "\n", lang="en") + "\n"


def _listed(facts: Sequence[tuple[str, str]]) -> str:
    """Names and values."""
    return tag("dl", *(tag("dt", name) + tag("dd", value) for name, value in facts))


def _verdict(reading: Reading) -> str:
    summary = reading.content["summary"]
    facts = [(label, str(summary[key])) for key, label in FACTS.items() if isinstance(summary.get(key), int)]
    lead = tag("p", mathml(group(reading.group)), "<br>", tag("strong", escape(reading.claim)))
    return tag("div", lead, _listed(facts), class_="verdict")


def _blocks(found: Sequence[Block]) -> list[str]:
    """Running text; appendices fold."""
    parts: list[str] = []
    folded: list[str] | None = None
    for block in found:
        if isinstance(block, Heading):
            folded = [tag("summary", _inline(block.text))] if block.appendix else None
            parts += [] if block.appendix else [tag("h2", _inline(block.text))]
            continue
        if isinstance(block, Paragraph):
            lead = tag("strong", f"{block.kind}.") + " " if block.kind else ""
            shown = tag("p", lead, _inline(block.text))
        elif isinstance(block, Items):
            shown = _items(block)
        elif isinstance(block, References):
            entries = (tag("dt", f"[{key}]", id=key) + tag("dd", _inline(entry)) for key, entry in block.entries)
            shown = tag("h2", "References") + tag("dl", *entries)
        parts.append(shown if folded is None else tag("details", *folded, shown))
        folded = None
    return parts


def _items(block: Items) -> str:
    lines = []
    for label, text, proof in zip(block.labels, block.texts, block.proofs or [""] * len(block.texts), strict=True):
        line = f"{_inline(label)} {_inline(text)}"
        lines.append(tag("li", tag("details", tag("summary", line), _inline(proof)) if proof else line))
    return tag("ul", *lines, class_="facts")


def _inline(text: str) -> str:
    """Running text with formulas between $ signs and citations."""
    pieces = re.split(r"\$(.*?)\$", text)
    return "".join(mathml(piece) if k % 2 else _prose(piece) for k, piece in enumerate(pieces))


def _prose(text: str) -> str:
    text = escape(text.replace("~", "\u00a0").replace("--", "–").replace("{-}", "-").replace("``", "“").replace("''", "”"), quote=False)
    text = re.sub(r"([A-Z])_\{(\d+)\}", r"\1<sub>\2</sub>", text)
    return re.sub(r"\\cite\{(.*?)\}", r'<a href="#\1">[\1]</a>', text)


def _action(reading: Reading) -> list[str]:
    """The Schreier graph and the coset table."""
    table, names = reading.subgroup.table, list(map(escape, reading.group.names))
    parts = [tag("h2", "The action on cosets")]
    if table.index <= LARGEST_PICTURE:
        caption = tag("figcaption", "Schreier graph; the dark point is the coset H.")
        parts.append(tag("figure", graph_text(table, reading.group.names, "svg"), caption))
    else:
        parts.append(tag("p", f"The Schreier graph has {table.index} points, too many for a picture; its edges stand in the table."))
    columns = [name + sign for name in names for sign in ("", tag("sup", "−1"))]
    head = tag("tr", *(tag("th", column, scope="col") for column in ["point", *columns]))
    rows = [
        tag("tr", tag("th", str(k), scope="row"), *(tag("td", str(j), class_="number") for j in row)) for k, row in enumerate(table.lists)
    ]
    whole = tag("div", tag("table", tag("thead", head), tag("tbody", *rows)), class_="scroll")
    return [*parts, tag("details", tag("summary", f"Coset table of {table.index} points"), whole)]


def _growth(reading: Reading) -> list[str]:
    """Sizes of balls, when they can be computed quickly."""
    if reading.claim not in ("virtually nilpotent", "not virtually nilpotent"):
        return []
    found = growth(reading.group, PLOTTED_RADIUS, witness=reading.content, budget=Budget(PLOT_WORK))
    balls = found.balls[1:]
    if len(balls) < 3:
        return []
    degree = f"; growth of degree {found.degree}" if found.degree is not None else ""
    caption = f"Elements in the balls of radius 1 to {len(balls)}, both axes logarithmic{degree}. From radius 0: "
    caption += ", ".join(map(str, found.balls)) + "."
    return [tag("h2", "Growth"), tag("figure", _plot(balls), tag("figcaption", caption))]


def _plot(balls: Sequence[int]) -> str:
    """Both axes logarithmic: in the end a straight line for polynomial growth."""
    width, height, margin = 420, 260, 40
    across, up = (width - 2 * margin) / log(len(balls)), (height - 2 * margin) / (log(balls[-1]) or 1)
    at = [(margin + across * log(radius), height - margin - up * log(size)) for radius, size in enumerate(balls, 1)]
    ticks = [(at[r - 1][0], height - 18.0, str(r), "middle") for r in (1, 2, 4, 8) if r <= len(balls)]
    ticks += [(4.0, at[k][1] + 4, str(balls[k]), "start") for k in (0, -1)]
    shapes = [
        tag("title", "Sizes of balls"),
        tag("path", d=f"M{margin} 20 V{height - margin} H{width - 20}", fill="none", stroke="#555"),
        tag("polyline", points=" ".join(f"{x:.1f},{y:.1f}" for x, y in at), fill="none", stroke="#0b5e86"),
        *(tag("circle", cx=f"{x:.1f}", cy=f"{y:.1f}", r=3, fill="#0b5e86") for x, y in at),
        *(tag("text", text, x=f"{x:.1f}", y=f"{y:.1f}", text_anchor=anchor) for x, y, text, anchor in ticks),
    ]
    frame = {"viewBox": f"0 0 {width} {height}", "width": str(width), "role": "img", "font_family": "sans-serif", "font_size": "11"}
    return tag("svg", *shapes, xmlns="http://www.w3.org/2000/svg", **frame)


def _provenance(reading: Reading) -> str:
    made = reading.content["made by"]
    facts = {
        "claim": reading.claim,
        "made by": f"lowindex {made['version']} at effort {made['effort']}",
        "SHA-256 of the witness": reading.witness.digest,
        "SHA-256 of the presentation": made["digest"],
        "to check again": f"lowindex check WITNESS --for '{reading.group}'",
    }
    return tag("h2", "Provenance") + _listed([(escape(key), tag("code", escape(str(value)))) for key, value in facts.items()])
