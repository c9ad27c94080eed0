"""Numbers of classes and subgroups of low index far out, each verified independently of this project (tests/corpus/counts.json says how:
M. Hall's recursion, |Hom(G, S_n)| by characters, zeta functions, all pairs of permutations one by one)."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest

from lowindex.budget import Budget
from lowindex.search import count_classes
from lowindex.words import Presentation

COUNTS: dict[str, dict[str, Any]] = json.loads((Path(__file__).parents[1] / "corpus" / "counts.json").read_text(encoding="utf-8"))

QUICK = {"triangle237": 78, "modular": 26, "z3": 28, "free3": 4, "genus2": 5, "bs12": 40}
"""The index up to which a group is tried in the fast tests (others: as far as the numbers go)."""


def compare(name: str, index: int) -> None:
    known = COUNTS[name]
    found = count_classes(Presentation.parse(known["presentation"].replace("<", "⟨").replace(">", "⟩")), index, budget=Budget())
    assert list(found.classes) == known["classes"][:index]
    assert list(found.subgroups) == known["subgroups"][:index]


@pytest.mark.parametrize("name", COUNTS)
def test_counts(name: str) -> None:
    compare(name, QUICK.get(name, len(COUNTS[name]["classes"])))


@pytest.mark.slow
@pytest.mark.parametrize("name", QUICK)
def test_counts_as_far_as_they_go(name: str) -> None:
    compare(name, len(COUNTS[name]["classes"]))
