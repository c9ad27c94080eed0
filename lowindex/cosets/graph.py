"""Schreier graphs: as networkx graphs, as GraphML and DOT text, and as pictures (SVG)."""

from __future__ import annotations

from collections.abc import Sequence
from html import escape
from io import BytesIO
from math import cos, hypot, pi, sin
from typing import Any

from lowindex.cosets.table import CosetTable
from lowindex.errors import InputError

FORMATS = ("graphml", "dot", "svg")
LARGEST_PICTURE = 60
COLOURS = ("#0b6e99", "#b3541e", "#3d7a37", "#7b3f9e", "#8a6d00", "#a3203f", "#2f5d62", "#555555")
DASHES = ("", "7 3", "2 3", "9 3 2 3")


def schreier_graph(table: CosetTable, names: Sequence[str]) -> Any:
    """The networkx.MultiDiGraph with an edge i -> i · x_k, keyed by the name of x_k, for every point i and generator x_k."""
    import networkx

    graph = networkx.MultiDiGraph()
    graph.add_nodes_from(range(table.index))
    for k, name in enumerate(names, 1):
        graph.add_edges_from((i, j, name) for i, j in enumerate(table.permutation(k)))
    return graph


def graph_text(table: CosetTable, names: Sequence[str], form: str) -> str:
    """The Schreier graph as "graphml", "dot" or "svg". InputError for another form, or a picture of more than 60 points."""
    if form not in FORMATS:
        raise InputError(f"the format of a graph must be one of {', '.join(FORMATS)}, not {form!r}")
    if form == "svg":
        return _picture(table, names)
    if form == "dot":
        lines = [f'  {i} -> {j} [label="{name}"];' for k, name in enumerate(names, 1) for i, j in enumerate(table.permutation(k))]
        return "\n".join(["digraph schreier {", *lines, "}", ""])
    import networkx

    graph = schreier_graph(table, names)
    for _, _, key, data in graph.edges(keys=True, data=True):
        data["generator"] = key
    buffer = BytesIO()
    networkx.write_graphml(graph, buffer)
    return buffer.getvalue().decode()


def _picture(table: CosetTable, names: Sequence[str]) -> str:
    if table.index > LARGEST_PICTURE:
        raise InputError(f"a picture may have at most {LARGEST_PICTURE} points, not {table.index}; write graphml or dot")
    places = _layout(table, names)
    size = 160 + 46 * table.index**0.5 * 2
    parts = [
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {size:.0f} {size + 30:.0f}" role="img" font-family="sans-serif">',
        f"<title>Schreier graph with {table.index} points</title>",
        "<defs>",
    ]
    for k, colour in enumerate(COLOURS):
        parts.append(
            f'<marker id="tip{k}" viewBox="0 0 8 8" refX="7" refY="4" markerWidth="7" markerHeight="7" orient="auto-start-reverse">'
            f'<path d="M0 0 L8 4 L0 8 z" fill="{colour}"/></marker>'
        )
    parts.append("</defs>")
    at = {i: (40 + (size - 80) * (x + 1) / 2, 40 + (size - 80) * (y + 1) / 2) for i, (x, y) in places.items()}
    for k, name in enumerate(names, 1):
        images = table.permutation(k)
        for i, j in enumerate(images):
            if images[j] != i or i <= j:
                parts.append(_edge(at[i], at[j], k - 1, len(names), involution=i != j and images[j] == i, name=name, middle=size / 2))
    for i, (x, y) in at.items():
        fill = "#222222" if i == 0 else "#ffffff"
        text = "#ffffff" if i == 0 else "#222222"
        parts.append(f'<circle cx="{x:.1f}" cy="{y:.1f}" r="10" fill="{fill}" stroke="#222222"/>')
        parts.append(f'<text x="{x:.1f}" y="{y + 3.5:.1f}" text-anchor="middle" font-size="10" fill="{text}">{i}</text>')
    for k, name in enumerate(names):
        x = 20 + 70 * k
        style = f'stroke="{COLOURS[k % 8]}" stroke-width="2" stroke-dasharray="{DASHES[k // 8 % 4]}"'
        parts.append(f'<line x1="{x}" y1="{size + 12:.0f}" x2="{x + 26}" y2="{size + 12:.0f}" {style}/>')
        parts.append(f'<text x="{x + 32}" y="{size + 16:.0f}" font-size="12">{escape(name)}</text>')
    return "\n".join([*parts, "</svg>", ""])


def _layout(table: CosetTable, names: Sequence[str]) -> dict[int, tuple[float, float]]:
    """Places in the square from -1 to 1: a circle for a few points, else by forces, from a fixed start."""
    import networkx

    if table.index <= 8:
        turn = 2 * pi / table.index
        return {i: (sin(i * turn), -cos(i * turn)) if table.index > 1 else (0.0, 0.0) for i in range(table.index)}
    graph = networkx.Graph(schreier_graph(table, names))
    places = networkx.spring_layout(graph, iterations=400, seed=1)
    return {int(i): (float(x), float(y)) for i, (x, y) in places.items()}


def _edge(
    start: tuple[float, float], end: tuple[float, float], k: int, count: int, *, involution: bool, name: str, middle: float
) -> str:
    colour, tip = COLOURS[k % 8], f"url(#tip{k % 8})"
    style = f'fill="none" stroke="{colour}" stroke-width="1.6" stroke-dasharray="{DASHES[k // 8 % 4]}"'
    (x1, y1), (x2, y2) = start, end
    if start == end:
        away = hypot(x1 - middle, y1 - middle) or 1.0
        dx, dy = ((x1 - middle) / away, (y1 - middle) / away) if away > 1 else (0.0, -1.0)
        turn = 0.9 * (k - (count - 1) / 2)
        dx, dy = dx * cos(turn) - dy * sin(turn), dx * sin(turn) + dy * cos(turn)
        px, py = -dy, dx
        curve = f"M{x1 + 9 * dx:.1f} {y1 + 9 * dy:.1f} C{x1 + 34 * dx + 14 * px:.1f} {y1 + 34 * dy + 14 * py:.1f} "
        curve += f"{x1 + 34 * dx - 14 * px:.1f} {y1 + 34 * dy - 14 * py:.1f} {x1 + 10 * dx:.1f} {y1 + 10 * dy:.1f}"
        return f'<path d="{curve}" {style}><title>{escape(name)}</title></path>'
    length = hypot(x2 - x1, y2 - y1)
    ux, uy = (x2 - x1) / length, (y2 - y1) / length
    bend = 0.0 if involution and count == 1 else 14.0 * (k - (count - 1) / 2) + (0 if involution else 8)
    cx, cy = (x1 + x2) / 2 - uy * bend, (y1 + y2) / 2 + ux * bend
    curve = f"M{x1 + 10 * ux:.1f} {y1 + 10 * uy:.1f} Q{cx:.1f} {cy:.1f} {x2 - 11 * ux:.1f} {y2 - 11 * uy:.1f}"
    marker = "" if involution else f' marker-end="{tip}"'
    return f'<path d="{curve}" {style}{marker}><title>{escape(name)}</title></path>'
