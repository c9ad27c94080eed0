"""lowindex export: a witness as a page to print."""

from __future__ import annotations

import argparse
from pathlib import Path

from lowindex.checker import Refused, check
from lowindex.cli.console import show
from lowindex.cli.options import write_into
from lowindex.cli.source import read_text
from lowindex.errors import InputError

EXAMPLE = """examples:
  lowindex export p4.json --to text
  lowindex export p4.json --to latex --output p4.tex
  lowindex export p4.json --to html --output p4.html
  lowindex export p4.json --to rocq --output p4-proof

exit codes: 0 done, 1 the checker refused the witness, 2 unusable file"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "export",
        help="write a witness as a proof to print",
        description="Writes a proposition with proof from a witness file alone, after the checker has accepted it: the action on points, "
        "the subgroup, its generators and relators, the lemmas and the central chain; or the obstruction with the theorem used and "
        "what to check by hand.",
        epilog=EXAMPLE,
    )
    parser.add_argument("witness", metavar="WITNESS", help="a witness file")
    kinds = "plain text (default), LaTeX, a page for a browser, a script for the Rocq proof assistant"
    parser.add_argument("--to", choices=("text", "latex", "html", "rocq"), default="text", help=kinds)
    parser.add_argument("--output", metavar="PATH", help="the file to write, for rocq a folder; else standard output")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Export one witness; the exit code."""
    from lowindex import export
    from lowindex.witness import Witness

    text = read_text(arguments.witness)
    try:
        check(text)
    except Refused as reason:
        show(f"{arguments.witness}: refused: {reason}")
        return 1
    reading = export.Reading(Witness(text.strip()))
    if arguments.to == "rocq":
        if arguments.output is None:
            raise InputError("--to rocq writes several files; name a folder with --output")
        for name, content in export.rocq(reading).items():
            write_into(arguments.output, name, content)
        return 0
    page = {"text": export.text, "latex": export.latex, "html": export.page}[arguments.to](reading)
    if arguments.output is None:
        show(page.rstrip("\n"))
        return 0
    try:
        Path(arguments.output).write_text(page, encoding="utf-8")
    except OSError as error:
        raise InputError(f"{arguments.output!r} cannot be written: {error.strerror}; name another path") from None
    return 0
