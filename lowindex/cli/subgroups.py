"""lowindex subgroups: all subgroups of low index."""

from __future__ import annotations

import argparse
import json
import os
import time
from collections.abc import Iterable
from concurrent.futures import BrokenExecutor
from typing import TYPE_CHECKING, Any

from lowindex.cli.console import LoggedBar, announce_compilation, remark, show
from lowindex.cli.executors import executor, terminated_like_interrupt
from lowindex.cli.options import require_positive_seconds, write_into
from lowindex.cli.source import read_source
from lowindex.errors import InputError
from lowindex.words import Presentation

if TYPE_CHECKING:
    from lowindex.cosets import CosetTable
    from lowindex.search import Conditions, Part, SearchProgress, SubgroupClass


EXAMPLE = """examples:
  lowindex subgroups "⟨a, b | a^2, b^3⟩" --index 12 --count
  lowindex subgroups "⟨a, b | a^2, b^3, (a b)^7⟩" --index 24 --fixed-point-free "a, b, a b"
  lowindex subgroups "⟨a, b | a^2, b^3, (a b)^7⟩" --index 100 --count --jobs 2 --resume search.json

exit codes: 0 the search is complete, 2 bad input, 3 not complete within --seconds, 130 interrupted"""

SAVE_EVERY = 5.0
"""Seconds between two writings of the file of --resume."""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "subgroups",
        help="list or count the subgroups of index 1 to N",
        description="Every conjugacy class of subgroups of index at most N, with generators, H_1, class length.",
        epilog=EXAMPLE,
    )
    parser.add_argument("source", metavar="SOURCE", help="a presentation ⟨…⟩, a file of presentations, a catalog name, or -")
    parser.add_argument("--index", type=int, required=True, metavar="N", help="the highest index")
    parser.add_argument("--count", action="store_true", help="only numbers, by index")
    parser.add_argument("--normal", action="store_true", help="only normal subgroups")
    words = "several words are separated by commas"
    parser.add_argument("--containing", metavar="WORDS", help=f"every subgroup that contains these words, not one of each class; {words}")
    parser.add_argument("--avoiding", metavar="WORDS", help="every subgroup that contains none of these words")
    parser.add_argument("--fixed-point-free", metavar="WORDS", help="only subgroups that contain no conjugate of these words")
    parser.add_argument("--up-to-symmetry", action="store_true", help="one subgroup for each orbit under symmetries of the presentation")
    parser.add_argument("--jobs", type=int, default=1, metavar="N", help="processes (default 1)")
    parser.add_argument("--cluster", metavar="ADDRESS", help="address of a Dask scheduler to use instead of processes")
    parser.add_argument("--resume", metavar="FILE", help="keep the state of the search in FILE, and go on from it")
    parser.add_argument("--seconds", type=float, metavar="S", help="stop after this time")
    parser.add_argument("--log", metavar="FILE", help="append one line for every part of the search: place, nodes, trials, classes")
    parser.add_argument("--presentations", action="store_true", help="with a presentation of every subgroup")
    parser.add_argument("--graphs", metavar="FOLDER", help="write the Schreier graph of every class into FOLDER")
    parser.add_argument("--graph-format", choices=("svg", "graphml", "dot"), default="svg", help="of these files (default svg)")
    parser.add_argument("--json", action="store_true", help="JSON: one object with --count, else one object a class")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """List or count; the exit code."""
    announce_compilation()
    require_positive_seconds(arguments)
    if arguments.jobs < 1:
        raise InputError(f"--jobs must be at least 1, not {arguments.jobs}")
    groups = list(read_source(arguments.source))
    if arguments.resume is not None and len(groups) > 1:
        raise InputError("--resume keeps one search; give one presentation")
    return max([_one(group, arguments) for group in groups], default=0)


def _one(group: Presentation, arguments: argparse.Namespace) -> int:
    from lowindex.quotients import LARGEST_NORMAL_INDEX
    from lowindex.search import Conditions, SearchProgress, Task

    conditions = _conditions(group, arguments)
    kept = arguments.count or arguments.resume is not None
    if conditions == Conditions(normal=True) and not kept and 1 <= arguments.index <= LARGEST_NORMAL_INDEX:
        _list(group, _normal_by_layers(group, arguments.index), arguments)
        return 0
    task = Task.plain(group, arguments.index, conditions)
    progress = SearchProgress(task, listing=not arguments.count)
    resumed = arguments.resume is not None and os.path.lexists(arguments.resume)
    if resumed:
        progress = SearchProgress.load(arguments.resume, task, listing=not arguments.count)
    code = _search(progress, resumed, arguments)
    if arguments.count:
        _show_counts(group, progress, arguments)
    else:
        _list(group, sorted(progress.classes(), key=lambda item: (item.index, item.table.lists)), arguments)
    return code


def _conditions(group: Presentation, arguments: argparse.Namespace) -> Conditions:
    from lowindex.search import Conditions

    options = ("containing", "avoiding", "fixed_point_free")
    words = {name: group.words(text) for name in options if (text := getattr(arguments, name)) is not None}
    return Conditions(normal=arguments.normal, up_to_symmetry=arguments.up_to_symmetry, **words)


def _search(progress: SearchProgress, resumed: bool, arguments: argparse.Namespace) -> int:
    """Go through what is left; the exit code."""
    from lowindex.budget import Budget
    from lowindex.search import walk, written_best

    budget = Budget(seconds=arguments.seconds)
    saved = -SAVE_EVERY  # the first part is saved at once
    code = 130
    try:
        bar = LoggedBar(arguments.log, unit=" nodes", unit_scale=True)
        with terminated_like_interrupt(), executor(arguments.jobs, arguments.cluster) as (pool, workers), bar:
            if not resumed:
                progress.task = written_best(progress.task, budget)
            parts = walk(progress.task, budget=budget, listing=progress.listing, places=progress.places, executor=pool, workers=workers)
            for part, left in parts:
                progress.add(part, left)
                bar.advance(part.nodes, f"{int(progress.counts[0].sum())} found", _logged(part))
                if arguments.resume is not None and time.monotonic() > saved + SAVE_EVERY:
                    progress.save(arguments.resume)
                    saved = time.monotonic()
        code = 0 if progress.finished else 3
    except KeyboardInterrupt:
        pass
    except BrokenExecutor:
        remark("a worker died (memory or a crash), so the search stopped")
        code = 3
    if arguments.resume is not None:
        progress.save(arguments.resume)
    if not progress.finished:
        on = f"the same command goes on from {arguments.resume}" if arguments.resume is not None else "--resume FILE would keep it"
        remark(f"not complete: {progress.nodes} nodes, {int(progress.counts[0].sum())} found so far; {on}")
    return code


def _logged(part: Part) -> str:
    """The line of a part in the log."""
    path = " ".join(map(str, part.place.path)) or "root"
    found = int(part.counts[0].sum())
    ended = "ended" if not part.rest else f"left {len(part.rest)} places"
    return f"after {path} below {part.place.floor}: {part.nodes} nodes, {part.trials} trials, {found} found, {ended}"


def _show_counts(group: Presentation, progress: SearchProgress, arguments: argparse.Namespace) -> None:
    indices = range(1, progress.task.index + 1)
    classes, subgroups, normal = (row[1:].tolist() for row in progress.counts)
    complete_to = progress.task.index if progress.finished else 0
    if arguments.json:
        numbers = {"index": list(indices), "classes": classes, "subgroups": subgroups, "normal": normal, "complete_to": complete_to}
        show(json.dumps(numbers))
        return
    show(f"{group}\n{'index':>6} {'classes':>12} {'subgroups':>14} {'normal':>8}")
    for row in zip(indices, classes, subgroups, normal, strict=True):
        show(f"{row[0]:>6} {row[1]:>12} {row[2]:>14} {row[3]:>8}")
    state = f"complete to index {complete_to}" if complete_to else "not complete at any index"
    show(f"{state} ({progress.nodes} nodes)")


def _normal_by_layers(group: Presentation, index: int) -> Iterable[SubgroupClass]:
    """Normal subgroups by layers of chief factors, which reach much farther than a search."""
    from lowindex.budget import Budget
    from lowindex.quotients import NormalSubgroups
    from lowindex.search import SubgroupClass

    normal = NormalSubgroups(group, index, Budget())
    yield from (SubgroupClass(table, 1) for table in normal)
    if normal.complete_to < index:
        remark(f"all normal subgroups of index up to {normal.complete_to} were found; above, some may be missing")


def _write_graph(table: CosetTable, group: Presentation, number: int, arguments: argparse.Namespace) -> None:
    from lowindex.cosets import graph_text

    text = graph_text(table, group.names, arguments.graph_format)
    write_into(arguments.graphs, f"class-{number}-index-{table.index}.{arguments.graph_format}", text)


def _list(group: Presentation, classes: Iterable[SubgroupClass], arguments: argparse.Namespace) -> None:
    from lowindex.algebra import abelianization
    from lowindex.cosets import subgroup_presentation

    for number, found in enumerate(classes, 1):
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
