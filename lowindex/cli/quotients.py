"""lowindex quotients: homomorphisms into symmetric groups and onto finite groups."""

from __future__ import annotations

import argparse
import json
from collections.abc import Iterator, Sequence
from typing import Any

from lowindex.budget import Budget
from lowindex.cli.console import announce_compilation, show
from lowindex.cli.options import require_positive_seconds
from lowindex.cli.source import read_source
from lowindex.errors import InputError
from lowindex.words import Presentation

EXAMPLE = """examples:
  lowindex quotients "⟨a, b | a^2, b^3⟩" --degree 5 --transitive
  lowindex quotients "⟨a, b | a^2, b^3, (ab)^7⟩" --onto "PSL(2,7)" --count
  lowindex quotients "⟨a, b | ⟩" --degree 4 --types "a: 2 2, b: 3"

targets: C6, D5 (of order 10), S5, A5, Q8, PSL(2,7), PGL(2,5), SL(2,3), AGL(1,7), A5 x C2, permutations "(1 2 3), (1 2)"
exit codes: 0 done, 2 bad input, 3 the search did not end within --seconds"""


LARGEST_DEGREE = 100

PROPERTIES = ("transitive", "primitive", "abelian", "nilpotent", "soluble", "perfect", "simple", "derived_length")


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "quotients",
        help="homomorphisms into S_n or onto a finite group",
        description="Homomorphisms into the symmetric group of a degree, or to a finite group, one of each conjugacy class, with what "
        "the image is.",
        epilog=EXAMPLE,
    )
    parser.add_argument("source", metavar="SOURCE", help="a presentation ⟨…⟩, a file of presentations, a catalog name, or -")
    which = parser.add_mutually_exclusive_group(required=True)
    which.add_argument("--degree", type=int, metavar="N", help="homomorphisms into the symmetric group of this degree")
    which.add_argument("--onto", metavar="TARGET", help="homomorphisms to a named group; those onto it are listed")
    parser.add_argument("--count", action="store_true", help="only numbers, exact")
    parser.add_argument("--transitive", action="store_true", help="only transitive images (with --degree)")
    parser.add_argument("--primitive", action="store_true", help="only primitive images (with --degree)")
    parser.add_argument("--even", action="store_true", help="only into the alternating group (with --degree)")
    types = 'cycle types of words (with --degree): "a: 2 2 1, a b: 5"; fixed points may be left out'
    parser.add_argument("--types", metavar="TYPES", help=types)
    parser.add_argument("--seconds", type=float, metavar="S", help="stop after this time")
    parser.add_argument("--json", action="store_true", help="JSON: one object with --count, else one object a class")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """List or count for every group; the exit code."""
    announce_compilation("search_kernel" if arguments.onto is None else "onto_kernel")
    require_positive_seconds(arguments)
    if arguments.degree is not None and not 1 <= arguments.degree <= LARGEST_DEGREE:
        raise InputError(f"--degree must be between 1 and {LARGEST_DEGREE}, not {arguments.degree}")
    ended = True
    for group in read_source(arguments.source):
        budget = Budget(seconds=arguments.seconds)
        if arguments.onto is None:
            ended &= (_count_degree if arguments.count else _list_degree)(group, arguments, budget)
        else:
            ended &= (_count_onto if arguments.count else _list_onto)(group, arguments, budget)
    return 0 if ended else 3


def _count_degree(group: Presentation, arguments: argparse.Namespace, budget: Budget) -> bool:
    from lowindex.quotients import count_homomorphisms

    if arguments.transitive or arguments.primitive or arguments.even or arguments.types:
        found = sum(1 for _ in _filtered(group, arguments, budget))
        ended = not budget.exhausted
        item = {"degree": arguments.degree, "classes": found, "complete": ended}
        show(json.dumps(item) if arguments.json else f"{group}: {found} classes")
        return ended
    counts = count_homomorphisms(group, arguments.degree, budget=budget)
    if arguments.json:
        show(json.dumps({"degree": list(range(len(counts))), "homomorphisms": list(counts), "complete_to": len(counts) - 1}))
    else:
        show(f"{group}\n" + "\n".join(f"|Hom(G, S_{n})| = {count}" for n, count in enumerate(counts)))
    return bool(len(counts) == arguments.degree + 1)


def _filtered(group: Presentation, arguments: argparse.Namespace, budget: Budget) -> Iterator[Sequence[tuple[int, ...]]]:
    from lowindex.quotients import has_types, homomorphisms, is_even, is_primitive, wanted_types

    wanted = wanted_types(group, arguments.types) if arguments.types else []
    for found in homomorphisms(group, degree=arguments.degree, budget=budget):
        images = found.images
        if (arguments.transitive or arguments.primitive) and not found.transitive:
            continue
        if arguments.primitive and not is_primitive(images):
            continue
        if arguments.even and not all(map(is_even, images)):
            continue
        if has_types(images, wanted):
            yield images


def _list_degree(group: Presentation, arguments: argparse.Namespace, budget: Budget) -> bool:
    for number, images in enumerate(_filtered(group, arguments, budget), 1):
        _show(group, number, images, {}, arguments.json)
    return not budget.exhausted


def _list_onto(group: Presentation, arguments: argparse.Namespace, budget: Budget) -> bool:
    from lowindex.quotients import HomomorphismSearch

    search = HomomorphismSearch(group, arguments.onto, budget=budget)
    kernels: dict[str, int] = {}
    number = 0
    for found in search:
        if found.onto:
            number += 1
            kernel = kernels.setdefault(found.kernel, len(kernels) + 1)
            _show(group, number, found.images, {"conjugates": found.size, "kernel": kernel}, arguments.json)
    if not arguments.json:
        ended = "" if search.finished else "; the search did not end"
        show(f"{number} classes of epimorphisms onto {arguments.onto} of order {search.target.order}, {len(kernels)} kernels{ended}")
    return bool(search.finished)


def _count_onto(group: Presentation, arguments: argparse.Namespace, budget: Budget) -> bool:
    from lowindex.quotients import count_onto

    counts = count_onto(group, arguments.onto, budget=budget)
    if arguments.json:
        names = ("target", "order", "homomorphisms", "epimorphisms", "kernels", "complete")
        show(json.dumps({name: getattr(counts, name) for name in names}))
    else:
        at_least = "" if counts.complete else "at least "
        show(
            f"{group}\n  target {counts.target} of order {counts.order}: {at_least}{counts.homomorphisms} homomorphisms, "
            f"{at_least}{counts.epimorphisms} "
            f"epimorphisms, {at_least}{counts.kernels} kernels"
        )
    return bool(counts.complete)


def _show(group: Presentation, number: int, images: Sequence[tuple[int, ...]], more: dict[str, Any], as_json: bool) -> None:
    from lowindex.quotients import describe_image

    image = describe_image(images or [(0,)])
    if as_json:
        item = {"number": number, "images": {name: [i + 1 for i in perm] for name, perm in zip(group.names, images, strict=True)}}
        item |= more | {"order": image.order, "name": image.name or None, "why": image.why or None, "factors": image.factors}
        item |= {key: getattr(image, key) for key in PROPERTIES}
        show(json.dumps(item, ensure_ascii=False))
        return
    name = f"{image.name} ({image.why}), " if image.name else ""
    notes = "".join(f", {key} {value}" for key, value in more.items())
    show(f"{number}. image {name}order {image.order}, {image.adjectives}{notes}")
    show("   " + ", ".join(f"{name} -> {cycle_notation(perm)}" for name, perm in zip(group.names, images, strict=True)))


def cycle_notation(permutation: Sequence[int]) -> str:
    """Cycles on 1, 2, ...; () for the identity."""
    from lowindex.quotients import cycles

    return "".join(f"({' '.join(str(i + 1) for i in cycle)})" for cycle in cycles(permutation) if len(cycle) > 1) or "()"
