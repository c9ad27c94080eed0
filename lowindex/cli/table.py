"""lowindex table: the results of a scan."""

from __future__ import annotations

import argparse
from pathlib import Path
from typing import TYPE_CHECKING, Any

from lowindex.cli.console import show
from lowindex.cli.options import write_into
from lowindex.errors import InputError

if TYPE_CHECKING:
    from lowindex.scan import Store

EXAMPLE = """examples:
  lowindex table fibonacci.scan
  lowindex table triangles.scan --where "verdict = undecided and p = 2" --sort r --descending
  lowindex table triangles.scan --grid q,r --where "p = 2"
  lowindex table fibonacci.scan --format html --witnesses proofs > fibonacci.html
  lowindex table fibonacci.scan --format latex --columns n,verdict,finite_order

columns: the parameters, and place, name, presentation, verdict, index, growth_degree, hirsch_length, class, finite_order, order,
epimorphisms, kernels, image, homology, complete_to, reason, effort, seconds, version
verdicts of several words may be written without quotes; no shell or SQL is involved"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "table",
        help="print the results of a scan",
        description="Prints what a store of scans holds, with a line that says which range is complete and what is open.",
        epilog=EXAMPLE,
    )
    parser.add_argument("store", metavar="FILE", help="a store made by lowindex scan")
    parser.add_argument("--scan", metavar="K", type=int, help="the K-th scan in the store, when there are several")
    parser.add_argument("--task", metavar="TASK", help="hunt, onto:TARGET, ..., when there are several")
    parser.add_argument("--format", choices=("text", "markdown", "csv", "latex", "json", "html"), default="text")
    parser.add_argument("--json", dest="format", action="store_const", const="json", help="one JSON object a line")
    parser.add_argument("--columns", metavar="A,B,...", help="the columns to show")
    parser.add_argument("--where", metavar="CONDITION", help='only rows that satisfy it: "verdict = undecided and n > 5"')
    parser.add_argument("--sort", metavar="COLUMN", help="by this column")
    parser.add_argument("--descending", action="store_true", help="the greatest first")
    parser.add_argument("--grid", metavar="X,Y", help="a grid of verdicts over two parameters")
    witnesses = "write the witnesses of the rows shown into FOLDER; with --format html a page for each too"
    parser.add_argument("--witnesses", metavar="FOLDER", help=witnesses)
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Print; the exit code."""
    from lowindex.scan import Store, columns_of, grid, rendered, rows_of, selected, summary

    with Store(arguments.store) as store:
        scan = _chosen(store.scans(), arguments.scan)
        task = _task(store, scan, arguments.task)
        results = list(store.results(scan, task, witnesses=arguments.witnesses is not None))
    rows = selected(rows_of(results), arguments.where, arguments.sort, descending=arguments.descending)
    if arguments.witnesses is not None:
        _write_witnesses({item.place: result.witness for item, result in results if result is not None}, rows, arguments.witnesses)
    if arguments.format == "html":
        show(_page(scan, rows, columns_of(rows, arguments.columns), arguments.witnesses).rstrip("\n"))
        return 0
    if arguments.grid is not None:
        names = [name.strip() for name in arguments.grid.split(",")]
        if len(names) != 2:
            raise InputError(f"--grid takes two parameters, such as p,q, not {arguments.grid!r}")
        show(grid(rows, names[0], names[1]))
    else:
        show(rendered(rows, columns_of(rows, arguments.columns), arguments.format))
    if arguments.format in ("text", "markdown"):
        show(f"\n{summary(rows)}")
    return 0


def _chosen(scans: list[str], number: int | None) -> str:
    if not scans:
        raise InputError("the store has no scan yet; make one with lowindex scan")
    if number is None and len(scans) > 1:
        listed = "; ".join(f"{k}: {name[:60]}" for k, name in enumerate(scans, 1))
        raise InputError(f"the store has {len(scans)} scans; choose one with --scan: {listed}")
    if number is not None and not 1 <= number <= len(scans):
        raise InputError(f"--scan must be from 1 to {len(scans)}, not {number}")
    return scans[(number or 1) - 1]


def _task(store: Store, scan: str, wanted: str | None) -> str:
    tasks = store.tasks(scan) or ["hunt"]
    if wanted is None and len(tasks) > 1:
        raise InputError(f"the scan has several tasks; choose one with --task: {', '.join(tasks)}")
    if wanted is not None and wanted not in tasks:
        raise InputError(f"the scan has no results of the task {wanted!r}; there are: {', '.join(tasks)}")
    return wanted or tasks[0]


def _page(scan: str, rows: list[dict[str, Any]], columns: list[str], folder: str | None) -> str:
    """A page with links to the pages of the witnesses, which are written beside them."""
    from lowindex.export import Reading, page, table_page
    from lowindex.scan import summary
    from lowindex.witness import Witness

    links: list[str | None] = []
    for row in rows:
        witness = None if folder is None else Path(folder) / f"{row['place']}.json"
        links.append(None)
        if folder is not None and witness is not None and witness.is_file():
            reading = Reading(Witness(witness.read_text(encoding="utf-8").strip()))
            write_into(folder, f"{row['place']}.html", page(reading))
            links[-1] = f"{folder}/{row['place']}.html"
    return table_page(scan, columns, [[row.get(name) for name in columns] for row in rows], summary(rows), links)


def _write_witnesses(witnesses: dict[int, str | None], rows: list[dict[str, object]], folder: str) -> None:
    for row in rows:
        text = witnesses.get(int(str(row["place"])))
        if text is not None:
            write_into(folder, f"{row['place']}.json", text + "\n")
