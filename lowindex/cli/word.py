"""lowindex word: is a word trivial?"""

from __future__ import annotations

import argparse
import json

from lowindex.cli.console import announce_compilation, show
from lowindex.cli.options import require_positive_seconds
from lowindex.cli.quotients import cycle_notation
from lowindex.cli.source import read_one

EXAMPLE = """examples:
  lowindex word "⟨a, b | a^2, b^3, (ab)^5⟩" "(a b^-1)^5"
  lowindex word "⟨a, b | a b^2 a^-1 = b^3⟩" "[a b a^-1, b]" --witness w.json

exit codes: 0 decided, 2 bad input, 3 undecided within the effort"""


def add(commands: argparse._SubParsersAction[argparse.ArgumentParser]) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "word",
        help="prove a word trivial, or separate it from 1 by a finite quotient",
        description="Proves that a word is trivial by a derivation from the relators, or finds permutations that satisfy the relators "
        "and by which the word moves a point, the smallest degree first.",
        epilog=EXAMPLE,
    )
    parser.add_argument("source", metavar="SOURCE", help="a presentation ⟨…⟩, a file with one, a catalog name, or -")
    parser.add_argument("word", metavar="WORD", help="a word in its generators")
    parser.add_argument("--effort", type=int, default=5, metavar="E", help="how far to search, 1 to 9 (default 5); deterministic")
    parser.add_argument("--seconds", type=float, metavar="S", help="stop after this time even within the effort")
    parser.add_argument("--witness", metavar="FILE", help="write the witness to FILE")
    parser.add_argument("--json", action="store_true", help="one JSON object")
    parser.set_defaults(run=run)


def run(arguments: argparse.Namespace) -> int:
    """Decide one word; the exit code."""
    announce_compilation()
    group = read_one(arguments.source)
    word = group.word(arguments.word)
    require_positive_seconds(arguments)
    from lowindex.decision import NONTRIVIAL, TRIVIAL, UNDECIDED, decide_word

    found = decide_word(group, word, effort=arguments.effort, seconds=arguments.seconds)
    if found.witness is not None and arguments.witness:
        found.witness.save(arguments.witness)
    content = {} if found.witness is None else found.witness.content
    if arguments.json:
        images = {name: [i + 1 for i in p] for name, p in zip(group.names, content["table"], strict=True)} if found.degree else None
        item = {
            "presentation": str(group),
            "word": group.text(word),
            "verdict": found.verdict,
            "degree": found.degree,
            "smallest": found.smallest,
            "images": images,
            "moved": content["point"] + 1 if found.degree else None,
            "searched": found.searched,
            "witness": arguments.witness if content else None,
        }
        show(json.dumps(item, ensure_ascii=False))
    elif found.verdict == TRIVIAL and found.witness is not None:
        show(f"{group.text(word)} = 1: {found.witness.lemmas} lemmas, {found.witness.symbols} symbols; accepted by the independent checker")
    elif found.verdict == NONTRIVIAL:
        smallest = "no smaller degree separates it"
        if not found.smallest:
            smallest = f"degrees up to {found.searched['complete_to_degree']} were searched"
        show(f"{group.text(word)} ≠ 1: it moves the point {content['point'] + 1} in this action of degree {found.degree}; {smallest}")
        for name, permutation in zip(group.names, content["table"], strict=True):
            show(f"  {name} -> {cycle_notation(permutation)}")
    else:
        show(f"{group.text(word)}: undecided; searched: " + ", ".join(f"{key.replace('_', ' ')} {n}" for key, n in found.searched.items()))
    return 3 if found.verdict == UNDECIDED else 0
