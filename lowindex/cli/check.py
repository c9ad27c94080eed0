"""lowindex check: the independent checker."""

from __future__ import annotations

import argparse
import json

from lowindex.checker import Refused, check
from lowindex.cli.console import show
from lowindex.cli.source import read_one, read_text

EXAMPLE = """example:
  lowindex check p4.json --for "⟨a, b | a^4, b^2, (a b)^4⟩"

exit codes: 0 all accepted, 1 one refused, 2 unusable file"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "check",
        help="check witnesses with the independent checker",
        description="Checks witnesses: standard library only, no search. lowindex/checker/FORMAT.md says what acceptance proves.",
        epilog=EXAMPLE,
    )
    parser.add_argument("witness", nargs="+", metavar="WITNESS", help="a witness file")
    parser.add_argument("--for", dest="source", metavar="SOURCE", help="the presentation in your hand; witnesses about others are refused")
    parser.add_argument("--json", action="store_true", help="one JSON object a witness")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Check every witness; the exit code."""
    bound = None
    if arguments.source is not None:
        group = read_one(arguments.source)
        bound = list(group.names), list(group.relators)
    code = 0
    for path in arguments.witness:
        text = read_text(path)
        try:
            report = check(text, presentation=bound)
        except Refused as reason:
            code = 1
            result = {"witness": path, "accepted": False, "reason": str(reason)}
            line = f"{path}: refused: {reason}"
        else:
            result = {"witness": path, "accepted": True, "claim": report.claim, "group": report.group, "summary": report.summary}
            line = f"{path}: accepted: {report}"
        show(json.dumps(result, ensure_ascii=False) if arguments.json else line)
    return code
