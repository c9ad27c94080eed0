"""lowindex subgroups: all subgroups of low index."""

from __future__ import annotations

import argparse
import json
from typing import Any

from lowindex.cli.console import show
from lowindex.cli.source import read_source
from lowindex.words import Presentation


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "subgroups",
        help="list or count the subgroups of index 1 to N",
        description="Every conjugacy class of subgroups of index at most N, with generators, H_1, class length.",
        epilog='example:\n  lowindex subgroups "⟨a, b | a^2, b^3⟩" --index 12 --count',
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("source", metavar="SOURCE", help="a presentation ⟨…⟩, a file of presentations, or -")
    parser.add_argument("--index", type=int, required=True, metavar="N", help="the highest index")
    parser.add_argument("--count", action="store_true", help="only numbers, by index")
    parser.add_argument("--normal", action="store_true", help="only normal subgroups")
    parser.add_argument("--presentations", action="store_true", help="with a presentation of every subgroup")
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


def _list(group: Presentation, arguments: argparse.Namespace) -> None:
    from lowindex.algebra import abelianization
    from lowindex.budget import Budget
    from lowindex.cosets import subgroup_presentation
    from lowindex.search import SubgroupSearch

    search = SubgroupSearch(group, arguments.index, budget=Budget())
    for found in sorted(search, key=lambda item: (item.index, item.table.lists)):
        if arguments.normal and not found.normal:
            continue
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
