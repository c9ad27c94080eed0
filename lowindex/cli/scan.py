"""lowindex scan: a family, or a file of presentations, through a task, into a store."""

from __future__ import annotations

import argparse
import os
import time
from typing import TYPE_CHECKING

from lowindex.cli.console import LoggedBar, announce_compilation, remark, show
from lowindex.cli.executors import cluster, terminated_like_interrupt
from lowindex.cli.options import require_positive_seconds
from lowindex.cli.source import read_source, read_text
from lowindex.errors import InputError
from lowindex.words import Family, parse_values

if TYPE_CHECKING:
    from lowindex.scan import Item, Result

EXAMPLE = """examples:
  lowindex scan "⟨x_i (i mod n) | x_i x_{i+1} = x_{i+2}⟩" --set n=2..8 --store fibonacci.scan
  lowindex scan "⟨a, b | a^p, b^q, (a b)^r⟩ where p <= q <= r" --set p=2..4 --set q=2..4 --set r=2..6 --store triangles.scan --jobs 2
  lowindex scan groups.txt --onto "PSL(2,7)" --store groups.scan
  lowindex table triangles.scan

A second scan into the same store goes on where the first one stopped; decided members are never computed again. With --again and
more effort an unfinished search of --betti goes on from its checkpoint.
exit codes: 0 all decided, 2 bad input, 3 some undecided, 130 interrupted (what was found is stored)"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "scan",
        help="decide every member of a family, resumably",
        description="Runs a hunt, or another task, on every member of a family or every presentation of a file, and "
        "keeps the results in a store.",
        epilog=EXAMPLE,
    )
    parser.add_argument("family", metavar="FAMILY", help="a family ⟨…⟩ with parameters, a file of presentations or with one family, or -")
    values = "values of a parameter: n=2..12, p=3,5,7"
    parser.add_argument("--set", dest="values", action="append", default=[], metavar="NAME=VALUES", help=values)
    parser.add_argument("--store", required=True, metavar="FILE", help="the store, made if it does not exist")
    task = parser.add_mutually_exclusive_group()
    task.add_argument("--onto", metavar="TARGET", help="instead of a hunt: is there an epimorphism onto this group?")
    task.add_argument("--smallest-quotient", type=int, metavar="N", help="instead: the least order of a non-abelian quotient, up to N")
    task.add_argument("--betti", type=int, metavar="N", help="instead: the least index, up to N, of a subgroup with infinite H_1")
    parser.add_argument("--effort", type=int, default=5, metavar="E", help="for each member, 1 to 9 (default 5)")
    parser.add_argument("--seconds", type=float, metavar="S", help="cap for each member")
    parser.add_argument("--memory", type=int, default=0, metavar="MB", help="cap of the address space of a worker, in megabytes")
    parser.add_argument("--jobs", type=int, default=1, metavar="N", help="processes (default 1)")
    parser.add_argument("--cluster", metavar="ADDRESS", help="address of a Dask scheduler to use instead of processes")
    parser.add_argument("--split", action="store_true", help="with --betti: one member at a time, its search shared by all workers")
    parser.add_argument("--again", action="store_true", help="also members that stayed undecided at a smaller effort")
    parser.add_argument("--log", metavar="FILE", help="append one line for every member")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Scan; the exit code."""
    announce_compilation()
    from lowindex.decision import plan_for
    from lowindex.scan import Job, Store, check_task, rows_of, run_scan, summary

    plan_for(arguments.effort)
    for name, least in (("jobs", 1), ("memory", 0)):
        if getattr(arguments, name) < least:
            raise InputError(f"--{name} must be at least {least}, not {getattr(arguments, name)}")
    require_positive_seconds(arguments)
    task = _task(arguments)
    check_task(task)
    scan, items = _items(arguments)
    if arguments.split and arguments.betti is None:
        raise InputError("--split shares the search of --betti among workers; other tasks cannot be split")
    job = Job(task, arguments.effort, arguments.seconds, arguments.memory, arguments.split)
    with Store(arguments.store, create=True) as store, terminated_like_interrupt():
        store.enter(scan, items)
        pending = store.pending(scan, task, arguments.effort, again=arguments.again)
        interrupted = False
        try:
            progress = _Progress(len(pending), arguments.log)
            with progress, cluster(arguments.cluster) as executor:
                run_scan(store, pending, job, jobs=arguments.jobs, report=progress, executor=executor)
        except KeyboardInterrupt:
            interrupted = True
        rows = rows_of(list(store.results(scan, task)))
        show(summary(rows))
        if interrupted:
            remark(f"interrupted; what was found is in {arguments.store}, the same command goes on")
            return 130
        return 0 if all(row["verdict"] not in ("undecided", "error", "not run") for row in rows) else 3


def _task(arguments: argparse.Namespace) -> str:
    if arguments.onto is not None:
        return f"onto:{arguments.onto}"
    if arguments.smallest_quotient is not None:
        return f"smallest-quotient:{arguments.smallest_quotient}"
    return f"betti:{arguments.betti}" if arguments.betti is not None else "hunt"


def _items(arguments: argparse.Namespace) -> tuple[str, list[Item]]:
    """The name of the scan, which is its family with the values, and the members."""
    from lowindex.scan import Item

    values = dict(parse_values(text) for text in arguments.values)
    text = arguments.family
    if not os.path.lexists(text):
        from lowindex.known import entry

        known = entry(text)
        text = known.text if known is not None and known.is_family else text
    is_text = text.strip()[:1] in ("⟨", "<")
    if not is_text and text != "-" and values:
        text = read_text(text)
        is_text = True
    if is_text:
        family = Family(" ".join(line.split("#")[0] for line in text.splitlines()).strip())
        members = list(family.members(values))
        items = [Item(k, "", m.parameters, m.presentation.digest, str(m.presentation)) for k, m in enumerate(members, 1)]
        name = " ".join([family.text, *sorted(arguments.values)])
    else:
        groups = read_source(text)
        items = [Item(k, g.name, {}, g.digest, str(g)) for k, g in enumerate(groups, 1)]
        name = os.path.basename(text) or "standard input"
    if not items:
        raise InputError("the family has no members for these values; change --set or the condition")
    return name, items


class _Progress(LoggedBar):
    """Decided and undecided members."""

    def __init__(self, total: int, log: str | None) -> None:
        super().__init__(log, total=total, unit=" groups")
        self.decided = self.undecided = 0

    def __call__(self, item: Item, result: Result) -> None:
        """One member is done."""
        if result.verdict in ("undecided", "error"):
            self.undecided += 1
        else:
            self.decided += 1
        name = item.name or ", ".join(f"{key}={value}" for key, value in item.parameters.items()) or str(item.place)
        stamp = time.strftime("%Y-%m-%d %H:%M:%S")
        line = f"{stamp}  {name}: {result.verdict} in {result.seconds:.2f} s: {result.facts.get('reason', '')}"
        self.advance(1, f"{self.decided} decided, {self.undecided} undecided", line)
