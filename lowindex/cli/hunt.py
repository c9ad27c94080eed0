"""lowindex hunt: decide."""

from __future__ import annotations

import argparse
import json
import sys
from pathlib import Path

from lowindex.cli.console import Progress, remark, show
from lowindex.cli.source import read_source
from lowindex.errors import InputError
from lowindex.words import Presentation

EXAMPLE = """example:
  lowindex hunt "⟨a, b | a^4, b^2, (a b)^4⟩" --witness p4.json
  lowindex check p4.json

exit codes: 0 decided, 2 input that cannot be used, 3 undecided within the effort, 130 interrupted"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "hunt",
        help="decide whether a group has a nilpotent subgroup of finite index",
        description="Looks for a nilpotent subgroup of finite index and proves that it is one. The result is announced only after the "
        "independent checker has accepted the witness.",
        epilog=EXAMPLE,
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("source", nargs="+", metavar="SOURCE", help="a presentation ⟨…⟩, a file of presentations, or -")
    parser.add_argument("--effort", type=int, default=5, metavar="E", help="how far to search, 1 to 9 (default 5); deterministic")
    parser.add_argument("--seconds", type=float, metavar="S", help="stop after this time, for each group, even within the effort")
    parser.add_argument("--witness", metavar="FILE", help="write the witness to FILE (with several groups, FILE-1, FILE-2, ...)")
    parser.add_argument("--json", action="store_true", help="one JSON object a group")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Hunt for every group; the exit code."""
    groups = [group for source in arguments.source for group in read_source(source)]
    if arguments.seconds is not None and not arguments.seconds > 0:
        raise InputError(f"--seconds must be positive, not {arguments.seconds}")
    from lowindex.decision import UNDECIDED, hunt, plan_for
    from lowindex.decision.kernels import kernels_are_cached

    plan_for(arguments.effort)
    if not kernels_are_cached():
        remark("compiling kernels, this once (about 10 seconds)")
    code = 0
    for number, group in enumerate(groups, 1):
        with Progress(group.name or "hunt") as progress:
            verdict = hunt(group, effort=arguments.effort, seconds=arguments.seconds, listen=progress)
        path = _witness_path(arguments.witness, number, len(groups))
        if verdict.witness is not None and path is not None:
            verdict.witness.save(path)
        saved = str(path) if verdict.witness is not None and path is not None else None
        if arguments.json:
            show(json.dumps(verdict.as_json(saved), ensure_ascii=False))
        else:
            show(_described(group, verdict, saved))
        if verdict.verdict == UNDECIDED:
            code = max(code, 3)
        if verdict.reason == "interrupted":
            return 130
    sys.stdout.flush()
    return code


def _witness_path(name: str | None, number: int, groups: int) -> Path | None:
    if name is None:
        return None
    path = Path(name)
    return path if groups == 1 else path.with_name(f"{path.stem}-{number}{path.suffix}")


def _described(group: Presentation, verdict: object, saved: str | None) -> str:
    from lowindex.decision.text import describe

    return describe(group, verdict, saved)  # type: ignore[arg-type]
