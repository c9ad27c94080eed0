"""lowindex COMMAND ...: a thin reader of the library."""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Sequence
from typing import Any, NoReturn

from lowindex import __version__
from lowindex.cli import catalog, check, compare, export, growth, hunt, quotients, scan, subgroups, table, word
from lowindex.cli.console import complain
from lowindex.errors import InputError, LowindexError


class _Parser(argparse.ArgumentParser):
    """Mistakes in the options are input that cannot be used: one line, exit code 2. Descriptions and examples are shown as they stand."""

    def __init__(self, **options: Any) -> None:
        super().__init__(**{"formatter_class": argparse.RawDescriptionHelpFormatter, **options})

    def error(self, message: str) -> NoReturn:
        raise InputError(f"{message}; {self.prog} --help shows what there is")


def parser() -> argparse.ArgumentParser:
    """The parser of the whole command line."""
    top = _Parser(
        prog="lowindex",
        formatter_class=argparse.HelpFormatter,
        description="Decides whether a finitely presented group has a nilpotent subgroup of finite index (equivalently, polynomial "
        "growth), with a witness that an independent checker accepts.",
    )
    top.add_argument("--version", action="version", version=f"lowindex {__version__}")
    commands = top.add_subparsers(title="commands", metavar="COMMAND", required=True)
    for module in (hunt, check, export, subgroups, quotients, word, compare, growth, scan, table, catalog):
        module.add(commands)
    return top


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command; the exit code."""
    try:
        chosen = parser().parse_args(arguments)
        return int(chosen.run(chosen))
    except LowindexError as error:
        complain(error)
        return 2
    except KeyboardInterrupt:
        return 130
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 1


if __name__ == "__main__":
    sys.exit(main())
