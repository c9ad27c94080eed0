"""lowindex subgroups: all subgroups of low index."""

from __future__ import annotations

import argparse
import json
from collections.abc import Iterable
from typing import TYPE_CHECKING, Any

from lowindex.cli.console import remark, show
from lowindex.cli.options import write_into
from lowindex.cli.source import read_source
from lowindex.words import Presentation

if TYPE_CHECKING:
    from lowindex.cosets import CosetTable
    from lowindex.search import SubgroupClass


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "subgroups",
        help="list or count the subgroups of index 1 to N",
        description="Every conjugacy class of subgroups of index at most N, with generators, H_1, class length.",
        epilog='example:\n  lowindex subgroups "⟨a, b | a^2, b^3⟩" --index 12 --count',
    )
    parser.add_argument("source", metavar="SOURCE", help="a presentation ⟨…⟩, a file of presentations, a catalog name, or -")
    parser.add_argument("--index", type=int, required=True, metavar="N", help="the highest index")
    parser.add_argument("--count", action="store_true", help="only numbers, by index")
    parser.add_argument("--normal", action="store_true", help="only normal subgroups")
    parser.add_argument("--presentations", action="store_true", help="with a presentation of every subgroup")
    parser.add_argument("--graphs", metavar="FOLDER", help="write the Schreier graph of every class into FOLDER")
    parser.add_argument("--graph-format", choices=("svg", "graphml", "dot"), default="svg", help="of these files (default svg)")
    parser.add_argument("--json", action="store_true", help="JSON: one object with --count, else one object a class")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """List or count; the exit code."""
    for group in read_source(arguments.source):
        if arguments.count:
            _count(group, arguments)
        else:
            _list(group, arguments)
    return 0


def _count(group: Presentation, arguments: argparse.Namespace) -> None:
    from lowindex.budget import Budget
    from lowindex.search import count_classes

    counts = count_classes(group, arguments.index, budget=Budget())
    numbers: dict[str, Any] = {
        "index": list(range(1, counts.complete_to + 1)),
        "classes": list(counts.classes),
        "subgroups": list(counts.subgroups),
        "normal": list(counts.normal),
        "complete_to": counts.complete_to,
    }
    if arguments.json:
        show(json.dumps(numbers))
        return
    show(f"{group}\n{'index':>6} {'classes':>12} {'subgroups':>14} {'normal':>8}")
    for row in zip(numbers["index"], counts.classes, counts.subgroups, counts.normal, strict=True):
        show(f"{row[0]:>6} {row[1]:>12} {row[2]:>14} {row[3]:>8}")
    show(f"complete to index {counts.complete_to} ({counts.nodes} nodes)")


def _write_graph(table: CosetTable, group: Presentation, number: int, arguments: argparse.Namespace) -> None:
    from lowindex.cosets import graph_text

    text = graph_text(table, group.names, arguments.graph_format)
    write_into(arguments.graphs, f"class-{number}-index-{table.index}.{arguments.graph_format}", text)


def _classes(group: Presentation, arguments: argparse.Namespace) -> Iterable[SubgroupClass]:
    """The classes by index; normal subgroups by layers of chief factors, which reach much farther."""
    from lowindex.budget import Budget
    from lowindex.quotients import LARGEST_NORMAL_INDEX, NormalSubgroups
    from lowindex.search import SubgroupClass, SubgroupSearch

    if not arguments.normal or arguments.index > LARGEST_NORMAL_INDEX:
        search = SubgroupSearch(group, arguments.index, budget=Budget())
        found = sorted(search, key=lambda item: (item.index, item.table.lists))
        yield from (item for item in found if item.normal or not arguments.normal)
        return
    normal = NormalSubgroups(group, arguments.index, Budget())
    yield from (SubgroupClass(table, 1) for table in normal)
    if normal.complete_to < arguments.index:
        remark(f"all normal subgroups of index up to {normal.complete_to} were found; above, some may be missing")


def _list(group: Presentation, arguments: argparse.Namespace) -> None:
    from lowindex.algebra import abelianization
    from lowindex.cosets import subgroup_presentation

    for number, found in enumerate(_classes(group, arguments), 1):
        if arguments.graphs:
            _write_graph(found.table, group, number, arguments)
        subgroup = subgroup_presentation(group, found.table)
        homology = abelianization(subgroup.rank, subgroup.relators)
        item: dict[str, Any] = {
            "index": found.index,
            "length": found.length,
            "normal": found.normal,
            "H1": str(homology),
            "permutations": [[i + 1 for i in images] for images in found.table.permutations],
            "generators": [group.text(word) for word in subgroup.generators],
        }
        if arguments.presentations:
            item["presentation"] = str(Presentation.from_relators(subgroup.rank, dict.fromkeys(subgroup.relators)))
        if arguments.json:
            show(json.dumps(item, ensure_ascii=False))
            continue
        kind = "normal" if found.normal else f"class of {found.length}"
        show(f"index {found.index}, {kind}, H_1 = {homology}")
        show("  generators: " + ", ".join(item["generators"]))
        if arguments.presentations:
            show("  presentation: " + item["presentation"])
