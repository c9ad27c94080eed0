"""The claims "word trivial" and "word not trivial" (FORMAT.md)."""

from __future__ import annotations

from typing import Any

from .derivation import replay
from .parse import integer, word
from .refused import require
from .table import Table
from .words import cyclic_form, reduced

TRIVIAL_KEYS = ("word", "lemmas", "goal")
NONTRIVIAL_KEYS = ("word", "point")


def check_trivial(value: dict[str, Any], table: Table) -> dict[str, Any]:
    """Refuse unless an equation of the group itself is a conjugate of the word or of its inverse."""
    require(table.index == 1, "the table of a word that is trivial has one point")
    letters = reduced(word(value["word"], "word", table.generators))
    equations = list(table.relators)
    replay(value["lemmas"], equations, table.generators)
    goal = integer(value["goal"], "goal", 0 if letters else -1, len(equations) - 1 if letters else -1)
    require(not letters or cyclic_form(equations[goal]) == cyclic_form(letters), f"the word is not what equation {goal} says")
    return {"length": len(value["word"])}


def check_nontrivial(value: dict[str, Any], table: Table) -> dict[str, Any]:
    """Refuse unless the word moves the point."""
    point = start = integer(value["point"], "point", 0, table.index - 1)
    letters = word(value["word"], "word", table.rank)
    for letter in letters:
        point = table.step(point, letter)
    require(point != start, f"the word does not move point {start}")
    return {"length": len(letters), "degree": table.index}
