"""lowindex compare: tell two groups apart."""

from __future__ import annotations

import argparse
import json

from lowindex.budget import Budget
from lowindex.cli.console import announce_compilation, show
from lowindex.cli.options import require_positive_seconds
from lowindex.cli.source import read_one
from lowindex.errors import InputError

EXAMPLE = """example:
  lowindex compare "⟨a, b, c | [a,b], [a,c], [b,c]⟩" "⟨x, y, t | [x,y], t x t^-1 = x^-1, t y t^-1 = y^-1⟩" --index 6

exit codes: 0 they differ, 1 no difference found, 2 bad input"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "compare",
        help="tell two groups apart by their subgroups of low index",
        description="Compares classes of subgroups by index: how many, their lengths, first homology, indices of cores. A difference "
        "proves that the groups are not isomorphic (it rests on the completeness of both searches); no difference proves nothing.",
        epilog=EXAMPLE,
    )
    parser.add_argument("first", metavar="A", help="a presentation ⟨…⟩, a file with one, a catalog name, or -")
    parser.add_argument("second", metavar="B", help="another one")
    parser.add_argument("--index", type=int, default=6, metavar="N", help="the highest index (default 6)")
    parser.add_argument("--seconds", type=float, metavar="S", help="stop after this time")
    parser.add_argument("--witness", metavar="FILE", help="write both lists of classes for the checker to FILE")
    parser.add_argument("--json", action="store_true", help="one JSON object")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Compare two groups; the exit code."""
    announce_compilation()
    groups = [read_one(arguments.first), read_one(arguments.second)]
    require_positive_seconds(arguments)
    if arguments.index < 1:
        raise InputError(f"--index must be at least 1, not {arguments.index}")
    from lowindex.decision import compare

    found = compare(groups[0], groups[1], index=arguments.index, budget=Budget(seconds=arguments.seconds))
    if found.witness is not None and arguments.witness:
        found.witness.save(arguments.witness)
    if arguments.json:
        sides = [
            [{"length": k.length, "H1": k.homology, "core_index": k.core, "classes": n} for k, n in sorted(side.items(), key=str)]
            for side in found.kinds
        ]
        item = {
            "groups": [str(group) for group in groups],
            "differ_at": found.index,
            "what": found.what or None,
            "complete_to": found.complete_to,
            "classes": sides or None,
            "rests_on": "completeness of both searches",
        }
        show(json.dumps(item, ensure_ascii=False))
    elif found.index is None:
        show(f"equal up to index {found.complete_to}, complete: number, lengths, first homology and core indices of the classes agree")
    else:
        show(f"the groups are not isomorphic: they differ at index {found.index}\n  {found.what}")
        accepted = "; the lists are accepted by the independent checker" if found.witness else ""
        show(f"  this rests on the completeness of both searches{accepted}")
    return 0 if found.index is not None else 1
