#!/usr/bin/env python3
"""Measures the search engines side by side in one run: against sympy, against the kernels' own plain Python bodies, against the ways of
writing a presentation, the strategies of coset enumeration against each other, and how time grows with the index, the number of subgroups
and the processes.

    python tools/bench.py [--rounds 3] [--plot FILE.svg] [--only sympy,plain,encodings,cosets,growth,memory,processes,start]

Every figure is a ratio of medians of paired runs: the two sides take turns, so that a busy machine slows both. How to read the tables is
said in DEVELOPERS.md.
"""

from __future__ import annotations

import argparse
import os
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Iterable
from concurrent.futures import ProcessPoolExecutor
from functools import partial
from pathlib import Path
from typing import Any

ROOT = Path(__file__).resolve().parents[1]
sys.path[:0] = [str(ROOT), str(ROOT / "tests")]

from corpus import coxeter, cyclic  # noqa: E402

from lowindex.budget import Budget  # noqa: E402
from lowindex.cosets import enumerate_cosets, enumeration_kernel  # noqa: E402
from lowindex.cosets.enumeration import STRATEGIES  # noqa: E402
from lowindex.quotients import count_onto  # noqa: E402
from lowindex.search import ROOT as WHOLE  # noqa: E402
from lowindex.search import Conditions, SubgroupSearch, Task, search_kernel, walk, written_best  # noqa: E402
from lowindex.words import Presentation  # noqa: E402

FIGURE_EIGHT = "⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩"
HEISENBERG = "⟨a, b | [a,[a,b]], [b,[a,b]]⟩"
TRIANGLE = "⟨a, b | a^2, b^3, (ab)^7⟩"
MODULAR = "⟨a, b | a^2, b^3⟩"
GENUS_TWO = "⟨a, b, c, d | [a,b][c,d]⟩"
FREE = "⟨a, b | ⟩"
Z3 = "⟨a, b, c | [a,b], [a,c], [b,c]⟩"
CYCLIC_SIX = "⟨a,b,c,d,e,f | ab=c, bc=d, cd=e, de=f, ef=a, fa=b⟩"

AGAINST_SYMPY = [("free of rank 2", FREE, 6), ("modular", MODULAR, 12), ("(2,3,7)", TRIANGLE, 15), ("Heisenberg", HEISENBERG, 7)]
AGAINST_SYMPY += [("genus 2", GENUS_TWO, 3), ("figure-eight", FIGURE_EIGHT, 7)]
ENCODED = [("free of rank 2", FREE, 8), ("modular", MODULAR, 24), ("(2,3,7)", TRIANGLE, 70), ("genus 2", GENUS_TWO, 5)]
ENCODED += [("Heisenberg", HEISENBERG, 14), ("Z^3", Z3, 24), ("figure-eight", FIGURE_EIGHT, 12), ("cyclic of 6 generators", CYCLIC_SIX, 50)]
E7 = coxeter.coxeter(7, {**coxeter.path(3, 3, 3, 3, 3), (2, 6): 3, (5, 6): 2})
CUBES = ["a", "b", "c", "ab", "ab^-1", "ac", "ac^-1", "bc", "bc^-1", "abc", "abc^-1", "ab^-1c", "a^-1bc"]
ENUMERATED: list[tuple[str, str, str | None]] = [
    ("E6", coxeter.coxeter(6, {**coxeter.path(3, 3, 3, 3), (2, 5): 3, (4, 5): 2}), None),
    ("E7 over <a>", E7, "a"),
    ("E7", E7, None),
    ("(2,3,7;8)", cyclic.two_three_seven(8), None),
    ("(2,3,9;5)", "⟨a, b | a^2, b^3, (ab)^9, [a,b]^5⟩", None),
    ("B(2,4)", "⟨a, b | a^4, b^4, (ab)^4, (a^-1b)^4, (a^2b)^4, (ab^2)^4, (a^2b^2)^4, (a^-1bab)^4, (ab^-1ab)^4⟩", None),
    ("B(3,3)", f"⟨a, b, c | {', '.join(f'({word})^3' for word in CUBES)}⟩", None),
    ("PSL(2,61)", "⟨s, t | s^61, t^2, (s t)^3, (s^2 t s^31 t)^3⟩", None),
    ("F(2,7)", cyclic.fibonacci(2, 7), None),
    ("S9", coxeter.coxeter(8, coxeter.path(3, 3, 3, 3, 3, 3, 3)), None),
]
COSETS_OF_SYMPY = [("A5", "⟨a, b | a^2, b^3, (ab)^5⟩"), ("(2,3,7;4)", cyclic.two_three_seven(4)), ("(2,3,7;6)", cyclic.two_three_seven(6))]


def seconds(action: Callable[[], Any]) -> float:
    began = time.perf_counter()
    action()
    return time.perf_counter() - began


def ratio(one: Callable[[], Any], other: Callable[[], Any], rounds: int) -> float:
    """Median time of the other over median time of the one, the two taking turns. A short run is repeated within a round."""
    times: tuple[list[float], list[float]] = ([], [])
    for _ in range(rounds):
        for action, kept in zip((one, other), times, strict=True):
            spent, runs = seconds(action), 1
            while spent < 0.02:
                spent, runs = spent + seconds(action), runs + 1
            kept.append(spent / runs)
    return statistics.median(times[1]) / statistics.median(times[0])


def table(title: str, head: Iterable[str], rows: Iterable[Iterable[object]]) -> None:
    head = list(head)
    print(f"\n## {title}\n\n| {' | '.join(head)} |\n|{'---|' * len(head)}")
    for row in rows:
        print(f"| {' | '.join(map(str, row))} |", flush=True)


def count(text: str, index: int) -> SubgroupSearch:
    search = SubgroupSearch(Presentation.parse(text), index, budget=Budget())
    search.count()
    return search


def count_as_written(task: Task) -> SubgroupSearch:
    search = SubgroupSearch.at(task, WHOLE, budget=Budget())
    search.count()
    return search


def of_sympy(text: str) -> Any:
    from sympy.combinatorics.fp_groups import FpGroup
    from sympy.combinatorics.free_groups import free_group

    group = Presentation.parse(text)
    free, *letters = free_group(",".join(group.names))
    relators = []
    for word in group.relators:
        product = free.identity
        for letter in word:
            product *= letters[abs(letter) - 1] ** (1 if letter > 0 else -1)
        relators.append(product)
    return FpGroup(free, relators)


def use_every_kernel() -> None:
    count_as_written(written_best(Task.plain(Presentation.parse(FIGURE_EIGHT), 12, Conditions()), Budget()))
    next(SubgroupSearch(Presentation.parse(FIGURE_EIGHT), 12, budget=Budget()))
    enumerate_cosets(Presentation.parse(TRIANGLE), [(1, 2)], budget=Budget(1000))
    enumerate_cosets(Presentation.parse(MODULAR), [(1,), (2,)], budget=Budget())
    count_onto(Presentation.parse(TRIANGLE), "PSL(2,7)", budget=Budget())


def against_sympy(rounds: int, _: Any) -> None:
    from sympy.combinatorics.fp_groups import low_index_subgroups

    rows = []
    for name, text, index in AGAINST_SYMPY:
        group = of_sympy(text)
        times = ratio(partial(count, text, index), lambda group=group, index=index: low_index_subgroups(group, index), min(rounds, 1))
        rows.append((name, index, int(count(text, index).counts[0].sum()), f"{times:,.0f}"))
    table("Low-index subgroups: sympy's time over ours", ("group", "index", "classes", "ratio"), rows)
    rows = []
    for name, text in COSETS_OF_SYMPY:
        group = of_sympy(text)
        ours = partial(enumerate_cosets, Presentation.parse(text), budget=Budget())
        found = ours().table
        theirs = partial(group.coset_enumeration, [], max_cosets=200_000)
        rows.append((name, found.index if found else "", "", f"{ratio(ours, theirs, min(rounds, 1)):,.0f}"))
    table("Coset enumeration over 1: sympy's time over ours", ("group", "order", "", "ratio"), rows)


def against_plain(rounds: int, _: Any) -> None:
    """The same bodies without the compiler."""
    rows: list[tuple[object, ...]] = []
    for name, text, index in (("modular", MODULAR, 9), ("(2,3,7)", TRIANGLE, 15), ("figure-eight", FIGURE_EIGHT, 6)):
        ours = partial(count_as_written, Task.plain(Presentation.parse(text), index, Conditions()))
        rows.append((name, index, f"{ratio(ours, partial(uncompiled, search_kernel, ours), rounds):,.0f}"))
    group = Presentation.parse(cyclic.two_three_seven(6))
    felsch = partial(enumerate_cosets, group, budget=Budget(), strategy="felsch")
    rows.append(("(2,3,7;6) by Felsch", "", f"{ratio(felsch, partial(uncompiled, enumeration_kernel, felsch), rounds):,.0f}"))
    table("Plain Python body's time over the compiled one's", ("group", "index", "ratio"), rows)


def uncompiled(module: Any, action: Callable[..., Any], *arguments: Any) -> None:
    compiled = {name: value for name, value in vars(module).items() if hasattr(value, "py_func")}
    try:
        for name, value in compiled.items():
            setattr(module, name, value.py_func)
        action(*arguments)
    finally:
        for name, value in compiled.items():
            setattr(module, name, value)


def encodings(rounds: int, _: Any) -> None:
    rows = []
    for name, text, index in ENCODED:
        plain = Task.plain(Presentation.parse(text), index, Conditions())
        best = written_best(plain, Budget())
        first, second = count_as_written(plain), count_as_written(best)
        times = ratio(partial(count, text, index), partial(count_as_written, plain), rounds)
        rows.append((name, index, first.nodes, first.trials, second.nodes, second.trials, f"{times:.2f}"))
    head = ("group", "index", "nodes as written", "trials", "nodes as chosen", "trials", "time as written / as chosen, choice included")
    table("Auxiliary generators and order of columns", head, rows)


def cosets(rounds: int, _: Any) -> None:
    rows = []
    for name, text, word in ENUMERATED:
        group = Presentation.parse(text)
        words = [] if word is None else [group.word(word)]
        race = partial(enumerate_cosets, group, words, budget=Budget(500_000_000), max_cosets=5_000_000)
        runs = {strategy: partial(race, strategy=strategy) for strategy in STRATEGIES}
        found = {strategy: run() for strategy, run in runs.items()}
        closed = [strategy for strategy in STRATEGIES if found[strategy].table is not None]
        times: dict[str, list[float]] = {strategy: [] for strategy in (*closed, "race")}
        for _round in range(rounds):
            for strategy in closed:
                times[strategy].append(seconds(runs[strategy]))
            times["race"].append(seconds(race))
        medians = {strategy: statistics.median(kept) for strategy, kept in times.items()}
        best = min(medians.values())
        order = next(found[strategy].table.index for strategy in closed)  # type: ignore[union-attr]
        cells = [f"{medians[s] / best:.1f} ({found[s].peak:,})" if s in closed else "not within 5 million" for s in STRATEGIES]
        rows.append((name, f"{order:,}", *cells, f"{medians['race'] / best:.1f}"))
    table("Coset enumeration: time over that of the fastest strategy (cosets live at most)", ("group", "cosets", *STRATEGIES, "race"), rows)


GROWING = (("free of rank 2", FREE, range(6, 10)), ("modular", MODULAR, range(16, 27, 2)), ("(2,3,7)", TRIANGLE, range(40, 81, 10)))


def growth(rounds: int, curves: dict[str, list[tuple[float, float]]]) -> None:
    del rounds
    rows: list[tuple[object, ...]] = []
    for name, text, indices in GROWING:
        first = None
        for index in indices:
            task = written_best(Task.plain(Presentation.parse(text), index, Conditions()), Budget())
            spent = min(seconds(partial(count_as_written, task)) for _ in range(3))
            search = count_as_written(task)
            classes = int(search.counts[0].sum())
            first = first or (spent, classes, search.nodes)
            curves.setdefault(f"{name}: time by index", []).append((index, spent / first[0]))
            curves.setdefault(f"{name}: time by classes", []).append((classes / first[1], spent / first[0]))
            rows.append((name, index, classes, f"{spent / first[0]:.1f}", f"{classes / first[1]:.1f}", f"{search.nodes / first[2]:.1f}"))
    table("Growth, over the first row of each group", ("group", "index", "classes", "time", "classes", "nodes"), rows)
    counted = partial(count, MODULAR, 20)
    listed = (("as tables, one by one", iter), ("as blocks", SubgroupSearch.blocks))
    rows = [(name, f"{ratio(counted, partial(exhaust, ways), 3):.1f}") for name, ways in listed]
    table("Listing over counting (modular, index 20)", ("listed", "time"), rows)


def exhaust(ways: Callable[[SubgroupSearch], Iterable[Any]]) -> None:
    for _ in ways(SubgroupSearch(Presentation.parse(MODULAR), 20, budget=Budget())):
        pass


def memory(rounds: int, _: Any) -> None:
    """Peak memory of a process that counts, over one that counts a hundred times less."""
    del rounds
    rows = []
    for index in (6, 9, 10):
        code = f"import sys; sys.path[:0] = {sys.path[:2]!r}; import bench; s = bench.count(bench.FREE, {index}); import resource; "
        code += "print(int(s.counts[1].sum()), resource.getrusage(resource.RUSAGE_SELF).ru_maxrss)"
        done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, cwd=ROOT / "tools")
        rows.append([index, *map(int, done.stdout.split())])
    shown = [(index, f"{found:,}", f"{peak / rows[0][2]:.3f}") for index, found, peak in rows]
    table("Memory when counting subgroups of the free group of rank 2", ("index", "subgroups", "peak over the first"), shown)


def processes(rounds: int, curves: dict[str, list[tuple[float, float]]]) -> None:
    task = written_best(Task.plain(Presentation.parse(TRIANGLE), 92, Conditions()), Budget())
    rows = []

    def through(executor: ProcessPoolExecutor | None, workers: int) -> None:
        for _part in walk(task, budget=Budget(), listing=False, executor=executor, workers=workers):
            pass

    for workers in range(2, (os.cpu_count() or 1) + 1):

        def many(workers: int = workers) -> None:
            with ProcessPoolExecutor(workers) as executor:
                through(executor, workers)

        speedup = 1 / ratio(partial(through, None, 1), many, min(rounds, 2))
        rows.append((workers, f"{speedup:.2f}"))
        curves.setdefault("speed-up by processes", [(1, 1.0)]).append((workers, speedup))
    table("(2,3,7) to index 92: time here over time with processes, their start included", ("processes", "speed-up"), rows)


def start(rounds: int, _: Any) -> None:
    """These two are seconds, for they are compared with a promise, not with each other."""
    command = [sys.executable, "-m", "lowindex.cli.main", "subgroups", MODULAR, "--index", "6", "--count"]
    warm = statistics.median(seconds(partial(subprocess.run, command, cwd=ROOT, capture_output=True, check=True)) for _ in range(rounds))
    with tempfile.TemporaryDirectory() as folder:
        code = f"import sys; sys.path[:0] = {sys.path[:2]!r}; import bench; bench.use_every_kernel()"
        environment = {**os.environ, "NUMBA_CACHE_DIR": folder}
        cold = seconds(partial(subprocess.run, [sys.executable, "-c", code], cwd=ROOT / "tools", env=environment, check=True))
    rows = [("a search with compiled kernels on disk", "0.7 s", f"{warm:.2f} s"), ("compiling all kernels", "30 s", f"{cold:.1f} s")]
    table("Start", ("", "at most", "now"), rows)


PARTS = {"sympy": against_sympy, "plain": against_plain, "encodings": encodings, "cosets": cosets, "growth": growth, "memory": memory}
PARTS |= {"processes": processes, "start": start}


def draw(curves: dict[str, list[tuple[float, float]]], path: str) -> None:
    import matplotlib

    matplotlib.use("Agg")
    from matplotlib import pyplot

    kinds = ("time by index", "time by classes", "speed-up by processes")
    figure, axes = pyplot.subplots(1, 3, figsize=(13, 4))
    for axis, kind in zip(axes, kinds, strict=True):
        for name, points in curves.items():
            if name.endswith(kind):
                axis.plot(*zip(*points, strict=True), marker="o", label=name.split(":")[0])
        axis.set_title(kind)
        if "speed-up" not in kind:
            axis.set_yscale("log")
        axis.legend()
    figure.tight_layout()
    figure.savefig(path)


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--rounds", type=int, default=3, metavar="N", help="paired runs of which the median is taken (default 3)")
    parser.add_argument("--plot", metavar="FILE", help="draw the curves of the parts growth and processes into FILE (.svg, .png, .pdf)")
    parser.add_argument("--only", default=",".join(PARTS), metavar="PARTS", help=f"some of {', '.join(PARTS)}")
    arguments = parser.parse_args()
    unknown = [name for name in arguments.only.split(",") if name not in PARTS]
    if unknown:
        parser.error(f"there is no part {unknown[0]!r}; give some of {', '.join(PARTS)}")
    use_every_kernel()
    curves: dict[str, list[tuple[float, float]]] = {}
    for name in arguments.only.split(","):
        PARTS[name](arguments.rounds, curves)
    if arguments.plot:
        draw(curves, arguments.plot)


if __name__ == "__main__":
    main()
