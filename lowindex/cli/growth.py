"""lowindex growth: sizes of spheres and balls."""

from __future__ import annotations

import argparse
import json
from collections.abc import Sequence
from typing import Any

from lowindex.budget import Budget
from lowindex.cli.console import announce_compilation, show
from lowindex.cli.options import require_positive_seconds
from lowindex.cli.source import read_one, read_text
from lowindex.errors import InputError
from lowindex.words import Presentation

EXAMPLE = """examples:
  lowindex growth "⟨a, b | [a,b,a], [a,b,b]⟩" --radius 14
  lowindex growth "⟨a, b, c, d | [a,b][c,d]⟩" --radius 8 --plot surface.svg

exit codes: 0 done, 2 bad input"""

LARGEST_RADIUS = 10_000


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "growth",
        help="exact sizes of spheres and balls in the Cayley graph",
        description="Counts elements by word length: exactly from a witness of virtual nilpotence, a regular table or a complete rewriting "
        "system, else between certified bounds. A hunt looks for a witness first, unless one is given.",
        epilog=EXAMPLE,
    )
    parser.add_argument("source", metavar="SOURCE", help="a presentation ⟨…⟩, a file with one, a catalog name, or -")
    parser.add_argument("--radius", type=int, required=True, metavar="R", help="the largest radius")
    parser.add_argument("--witness", metavar="FILE", help="a witness of this group, instead of a hunt")
    parser.add_argument("--effort", type=int, default=4, metavar="E", help="of the hunt and the counting, 1 to 9 (default 4)")
    parser.add_argument("--seconds", type=float, metavar="S", help="stop after about this time")
    parser.add_argument("--plot", metavar="FILE", help="write log-log and semi-log plots of the balls to FILE (.png, .svg, .pdf)")
    parser.add_argument("--json", action="store_true", help="one JSON object")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Count for one group; the exit code."""
    announce_compilation()
    group = read_one(arguments.source)
    if not 0 <= arguments.radius <= LARGEST_RADIUS:
        raise InputError(f"--radius must be between 0 and {LARGEST_RADIUS}, not {arguments.radius}")
    require_positive_seconds(arguments)
    from lowindex.algebra import polynomial_text
    from lowindex.decision import plan_for
    from lowindex.growth import growth, plot_balls

    plan = plan_for(arguments.effort)
    budget = Budget(plan.work, seconds=arguments.seconds)
    found = growth(group, arguments.radius, witness=_witness(group, arguments), budget=budget)
    if arguments.plot:
        plot_balls(found.balls, str(group), arguments.plot)
    exact_to = len(found.spheres) - 1
    if arguments.json:
        item: dict[str, Any] = {
            "presentation": str(group),
            "spheres": list(found.spheres),
            "balls": list(found.balls),
            "exact_to": exact_to,
            "degree": found.degree,
            "kind": found.kind,
            "source": found.source,
            "lower": list(found.lower) or None,
            "upper": list(found.upper) or None,
            "series": None if found.series is None else [list(part) for part in found.series],
            "series_proved": found.series_proved,
        }
        show(json.dumps(item, ensure_ascii=False))
        return 0
    degree = f" of degree {found.degree}" if found.kind == "polynomial" and found.degree is not None else ""
    show(f"{group}\n  growth {found.kind}{degree}; counted by {found.source}")
    show(f"  spheres  {', '.join(map(str, found.spheres))}" + (" (everything)" if found.finished else ""))
    show(f"  balls    {', '.join(map(str, found.balls))}")
    if found.lower:
        show(f"  exact to radius {exact_to}; beyond, balls lie between {_list(found.lower)} and {_list(found.upper)}")
    if found.series is not None:
        above, below = (polynomial_text(part, "z", ascending=True) for part in found.series)
        proved = "generating function of the spheres (theorem)" if found.series_proved else f"fits up to radius {exact_to}"
        show(f"  {proved}: ({above}) / ({below})")
    return 0


def _witness(group: Presentation, arguments: argparse.Namespace) -> dict[str, Any] | None:
    if arguments.witness is None:
        from lowindex.decision import hunt

        found = hunt(group, effort=arguments.effort, seconds=arguments.seconds)
        return None if found.witness is None else found.witness.content
    from lowindex.checker import Refused, check

    text = read_text(arguments.witness)
    try:
        check(text, presentation=(group.names, group.relators))
    except Refused as reason:
        raise InputError(f"{arguments.witness!r} is refused by the checker: {reason}") from None
    content: dict[str, Any] = json.loads(text)
    return content


def _list(numbers: Sequence[int]) -> str:
    return "[" + ", ".join(map(str, numbers)) + "]"
