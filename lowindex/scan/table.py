"""Results of a scan as tables."""

from __future__ import annotations

import csv
import io
import json
import re
from collections.abc import Sequence
from fractions import Fraction
from typing import Any

from lowindex.errors import InputError
from lowindex.scan.store import UNDECIDED, Item, Result
from lowindex.words import Expression, Value

Row = dict[str, Any]

COLUMNS = {
    "place": "number in the scan",
    "name": "name of the presentation",
    "presentation": "its text",
    "verdict": "of the task",
    "index": "of the subgroup",
    "growth_degree": "of polynomial growth",
    "hirsch_length": "of the nilpotent subgroup",
    "class": "of the nilpotent subgroup",
    "finite_order": "order of a finite group",
    "order": "of a quotient",
    "epimorphisms": "onto the target",
    "kernels": "with the target as quotient",
    "image": "what a quotient is",
    "homology": "first homology of the subgroup",
    "complete_to": "bound that was searched completely",
    "reason": "in a few words",
    "effort": "of the run",
    "seconds": "of the run",
    "version": "of the run",
}
"""The columns beside the parameters of the family."""

DEFAULT = ("name", "verdict", "index", "growth_degree", "finite_order", "order", "kernels", "image", "complete_to", "reason")
FORMATS = ("text", "markdown", "csv", "latex", "json")


def rows_of(results: Sequence[tuple[Item, Result | None]]) -> list[Row]:
    """One row a member; a member without a result has the verdict "not run"."""
    rows = []
    for item, result in results:
        row: Row = {"place": item.place, "name": item.name or None, "presentation": item.text, "parameters": item.parameters}
        row |= item.parameters
        if result is None:
            rows.append(row | {"verdict": "not run"})
        else:
            run = {"verdict": result.verdict, "effort": result.effort, "seconds": round(result.seconds, 3), "version": result.version}
            rows.append(row | result.facts | run)
    return rows


def selected(rows: Sequence[Row], where: str | None, sort: str | None, *, descending: bool = False) -> list[Row]:
    """The rows that satisfy a condition, sorted by a column, empty cells last. InputError when these cannot be used."""
    found = list(rows)
    if where is not None:
        known = _known(rows)
        for name in re.findall(r"(?<![\"\w])([^\W\d_]\w*)(?=\s*(?:<|>|=|!|≤|≥|≠))", where):
            if name not in known and name not in ("and", "or", "not"):
                raise InputError(f"unknown column {name!r} in the condition; there are: {', '.join(known)}")
        found = [row for row in found if Expression(_quoted(where), _values(row, known), texts=True).condition()]
    if sort is not None:
        if sort not in _known(rows):
            raise InputError(f"unknown column {sort!r} to sort by; there are: {', '.join(_known(rows))}")
        filled = [row for row in found if row.get(sort) is not None]
        filled.sort(key=lambda row: (isinstance(row[sort], str), row[sort]), reverse=descending)
        found = filled + [row for row in found if row.get(sort) is None]
    return found


def _quoted(where: str) -> str:
    """Verdicts of several words may stand without quotes."""
    for verdict in ("not virtually nilpotent", "virtually nilpotent", "no quotient", "not run"):
        where = re.sub(rf'(?<!["\w] )(?<!")\b{verdict}\b(?!")', f'"{verdict}"', where)
    return where


def _known(rows: Sequence[Row]) -> list[str]:
    parameters = dict.fromkeys(name for row in rows for name in row["parameters"])
    return [*parameters, *COLUMNS]


def _values(row: Row, known: Sequence[str]) -> dict[str, Value]:
    values: dict[str, Value] = {}
    for name in known:
        value = row.get(name)
        values[name] = Fraction(value) if isinstance(value, int | float) and not isinstance(value, bool) else value
    return values


def columns_of(rows: Sequence[Row], wanted: str | None) -> list[str]:
    """The columns to show: those asked for, else the parameters and the usual ones that are not empty. InputError for an unknown one."""
    known = _known(rows)
    if wanted is not None:
        chosen = [name.strip() for name in wanted.split(",")]
        for name in chosen:
            if name not in known:
                raise InputError(f"unknown column {name!r}; there are: {', '.join(known)}")
        return chosen
    parameters = known[: len(known) - len(COLUMNS)]
    return parameters + [name for name in DEFAULT if any(row.get(name) is not None for row in rows)]


def rendered(rows: Sequence[Row], columns: Sequence[str], form: str) -> str:
    """The table in one of the formats."""
    if form == "json":
        keep = [key for key in COLUMNS if key != "presentation"]
        return "\n".join(
            json.dumps(
                {"name": row["name"], "parameters": row["parameters"], "presentation": row["presentation"]}
                | {key: row.get(key) for key in keep if key not in ("name", "place")}
                | {"searched": row.get("searched")},
                ensure_ascii=False,
            )
            for row in rows
        )
    cells = [["" if row.get(name) is None else str(row.get(name)) for name in columns] for row in rows]
    if form == "csv":
        out = io.StringIO()
        writer = csv.writer(out, lineterminator="\n")
        writer.writerows([columns, *cells])
        return out.getvalue().rstrip("\n")
    if form == "markdown":
        lines = ["| " + " | ".join(cell.replace("|", "\\|") for cell in line) + " |" for line in [list(columns), *cells]]
        return "\n".join([lines[0], "|" + "---|" * len(columns), *lines[1:]])
    if form == "latex":
        lines = [" & ".join(map(_tex, line)) + r" \\" for line in cells]
        head = " & ".join(map(_tex, columns)) + r" \\"
        begin = rf"\begin{{tabular}}{{{'l' * len(columns)}}}"
        return "\n".join([begin, r"\toprule", head, r"\midrule", *lines, r"\bottomrule", r"\end{tabular}"])
    widths = [max(len(line[k]) for line in [list(columns), *cells]) for k in range(len(columns))]
    numeric = [all(re.fullmatch(r"-?[\d.]*", line[k]) for line in cells) for k in range(len(columns))]
    return "\n".join(_aligned([list(columns), *cells], widths, numeric))


def _aligned(lines: Sequence[Sequence[str]], widths: Sequence[int], right: Sequence[bool]) -> list[str]:
    put = [str.rjust if numeric else str.ljust for numeric in right]
    return ["  ".join(p(cell, width) for p, cell, width in zip(put, line, widths, strict=True)).rstrip() for line in lines]


_TEX = {
    "⟨": r"$\langle$",
    "⟩": r"$\rangle$",
    "|": r"$\mid$",
    "^": r"\^{}",
    "~": r"\~{}",
    **{character: "\\" + character for character in "_&%#{}$"},
}


def _tex(text: str) -> str:
    return "".join(_TEX.get(character, character) for character in text)


def grid(rows: Sequence[Row], across: str, down: str) -> str:
    """Verdicts of a family with two parameters: a line for every value of `down`, a column for every value of `across`."""
    for name in (across, down):
        if any(name not in row["parameters"] for row in rows):
            raise InputError(f"{name!r} is no parameter of every member; a grid needs two parameters")
    lines = sorted({row[down] for row in rows})
    columns = sorted({row[across] for row in rows})
    cell = {(row[down], row[across]): _short(row) for row in rows}
    table = [[f"{down}\\{across}", *map(str, columns)], *([str(y), *(cell.get((y, x), "") for x in columns)] for y in lines)]
    widths = [max(len(line[k]) for line in table) for k in range(len(columns) + 1)]
    key = "a number: finite of this order; d2: polynomial growth of degree 2; x: not virtually nilpotent; ?: undecided"
    return "\n".join([*_aligned(table, widths, [True] * len(widths)), key])


def _short(row: Row) -> str:
    if row["verdict"] == "virtually nilpotent":
        return str(row["finite_order"]) if row.get("finite_order") is not None else f"d{row.get('growth_degree')}"
    short = {"not virtually nilpotent": "x", UNDECIDED: "?", "quotient": "+", "no quotient": "-", "error": "!"}
    return short.get(row["verdict"], str(row["verdict"]))


def summary(rows: Sequence[Row]) -> str:
    """One line: the range that is complete and the exceptions."""
    total = len(rows)
    if not total:
        return "no members"
    open_rows = [row for row in rows if row["verdict"] in (UNDECIDED, "error", "not run")]
    counts: dict[str, int] = {}
    for row in rows:
        counts[row["verdict"]] = counts.get(row["verdict"], 0) + 1
    parts = ", ".join(f"{count} {verdict}" for verdict, count in sorted(counts.items(), key=lambda item: -item[1]))
    shown = f"{total} members: {parts}"
    if not open_rows:
        return f"{shown}; every member is decided"
    names = [_called(row) for row in open_rows[:12]] + (["..."] if len(open_rows) > 12 else [])
    return f"{shown}; all are decided except {'; '.join(names)}"


def _called(row: Row) -> str:
    if row["parameters"]:
        return "(" + ", ".join(f"{name} = {value}" for name, value in row["parameters"].items()) + ")"
    return str(row["name"] or row["presentation"])
