"""The first subgroup with infinite homology: left, taken up again, shared."""

from __future__ import annotations

import json
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import pytest
from corpus import coxeter

from lowindex.budget import Budget
from lowindex.cli.main import main
from lowindex.cosets import CosetTable
from lowindex.quotients import cycles
from lowindex.scan import Result, Store
from lowindex.scan.betti import Pool
from lowindex.scan.tasks import run_task
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation

KNOWN = [
    # text, bound, least index
    ("⟨a, b | a^4, b^2, (ab)^4⟩", 8, 4),  # p4: the rotations are of order 4
    ("⟨a | ⟩", 3, 1),
    ("⟨a, b | a^2, b^3, (ab)^5⟩", 60, None),  # finite
    (coxeter.coxeter(4, coxeter.path(3, 4, 3)), 12, None),  # finite
]
SHARED = pytest.mark.parametrize("shared", [False, True])


def found_by(text: str, bound: int, effort: int, shared: bool, checkpoint: str | None = None) -> Result:
    with ThreadPoolExecutor(2) as executor:
        return run_task(text, f"betti:{bound}", effort, None, checkpoint=checkpoint, pool=Pool(executor, 2) if shared else None)


@pytest.mark.parametrize(("text", "bound", "least"), KNOWN)
@SHARED
def test_least_index(text: str, bound: int, least: int | None, shared: bool) -> None:
    found = found_by(text, bound, 6, shared)
    if least is None:
        assert (found.verdict, found.facts) == ("none", {"complete_to": bound})
    else:
        assert (found.verdict, found.facts["index"]) == ("infinite", least)


def genus(table: CosetTable) -> int:
    """Of the surface that a subgroup of a triangle group uniformises, by Riemann and Hurwitz."""
    a, b = table.permutations[:2]
    ab = tuple(b[i] for i in a)
    points = sum(len(cycles(p)) for p in (a, b, ab))
    return (2 + table.index - points) // 2


@pytest.mark.parametrize("r", [7, 8, 9])
@SHARED
def test_triangle_groups_by_the_genus(r: int, shared: bool) -> None:
    """H_1 of a subgroup of a cocompact triangle group is infinite exactly when its genus is positive (Riemann-Hurwitz)."""
    text = f"⟨a, b | a^2, b^3, (ab)^{r}⟩"
    classes = SubgroupSearch(Presentation.parse(text), 30, budget=Budget())
    least = min(item.index for item in classes if genus(item.table) > 0)
    assert found_by(text, 30, 5, shared).facts["index"] == least


E6 = coxeter.coxeter(6, {**coxeter.path(3, 3, 3, 3), (2, 5): 3, (4, 5): 2})


@SHARED
def test_a_checkpoint_saves_the_work(shared: bool) -> None:
    """Runs of the least effort, each from where the last one stopped, get to the end; one such run alone does not."""
    checkpoint, reached = None, []
    while True:
        found = found_by(E6, 24, 1, shared, checkpoint)
        reached.append(found.facts["complete_to"])
        if found.verdict != "undecided":
            break
        checkpoint = found.checkpoint
        assert checkpoint is not None
        assert len(reached) < 200
    assert len(reached) > 2
    assert reached == sorted(reached)
    assert (found.verdict, reached[-1]) == ("none", 24)


def test_a_damaged_checkpoint_is_one_line() -> None:
    for state in ("", "[]", "[3, null, 4]", json.dumps([5, "{}"]), json.dumps(["x", "y"])):
        found = run_task("⟨a, b | a^2, b^3⟩", "betti:8", 3, None, checkpoint=state)
        assert found.verdict == "error"
        assert "checkpoint" in found.facts["reason"]


FAMILY = "⟨a, b | a^2, b^3, (ab)^7, [a,b]^n⟩"
"""n = 8: a finite group of order 10,752 (tests/cosets)."""


def test_scan_again_and_split(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = str(tmp_path / "s")
    command = ["scan", FAMILY, "--set", "n=8,9", "--store", path, "--betti", "56", "--split", "--jobs", "2"]
    assert main([*command, "--effort", "1"]) == 3
    with Store(path) as store:
        ((item, first), _) = store.results(store.scans()[0], "betti:56")
        assert first is not None
        assert first.verdict == "undecided"
        assert store.checkpoint(item.digest, "betti:56") is not None
    assert main([*command, "--effort", "6", "--again"]) == 0
    with Store(path) as store:
        found = [result for _, result in store.results(store.scans()[0], "betti:56")]
        assert [r.verdict for r in found if r is not None] == ["none", "infinite"]
        assert store.checkpoint(item.digest, "betti:56") is None
    capsys.readouterr()
    assert main(["scan", "⟨a | a^n⟩", "--set", "n=2", "--store", path, "--split"]) == 2
    assert "--betti" in capsys.readouterr().err
