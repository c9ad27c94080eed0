"""The low-index search: against brute force, its plain Python body, and interruptions."""

from __future__ import annotations

import pickle
from collections import Counter
from itertools import permutations, product

import pytest
from corpus import plane

from lowindex.budget import Budget
from lowindex.cosets import CosetTable, standard_form
from lowindex.errors import InputError
from lowindex.search import ROOT, Conditions, SubgroupSearch, Task, count_classes, search_kernel, subgroups, subgroups_by_index
from lowindex.words import Presentation

GROUPS = ["⟨a, b | ⟩", "⟨a, b | a^2, b^3⟩", "⟨a, b | [a,b]⟩", "⟨a, b | a b a^-1 b⟩", "⟨a | a^6⟩", "⟨a, b | a^2, b^2, (ab)^3⟩", "⟨a | ⟩"]


@pytest.mark.parametrize("text", GROUPS)
def test_against_all_permutations(text: str) -> None:
    """Index <= 4: every tuple of permutations, one by one."""
    group = Presentation.parse(text)
    for index in (1, 2, 3, 4):
        found: Counter[CosetTable] = Counter()
        for images in product(permutations(range(index)), repeat=group.rank):
            try:
                table = CosetTable.from_permutations(images)
            except InputError:
                continue
            if table.satisfies(group.relators):
                found[standard_form(table)] = 1
        classes = [item for item in SubgroupSearch(group, index, budget=Budget()) if item.index == index]
        listed: set[CosetTable] = set()
        for item in classes:
            conjugates = {standard_form(item.table, base) for base in range(index)}
            assert len(conjugates) == item.length
            assert item.table.is_standard and item.normal == (item.length == 1)
            assert listed.isdisjoint(conjugates)
            listed |= conjugates
        assert listed == set(found)


@pytest.mark.parametrize("text", [GROUPS[0], GROUPS[1], plane.plane_group("p6m")])
def test_kernel_is_its_plain_body(text: str, monkeypatch: pytest.MonkeyPatch) -> None:
    group = Presentation.parse(text)
    compiled = SubgroupSearch(group, 5, budget=Budget())
    expected = [(item.table, item.length) for item in compiled]
    for function in ("search_slice", "least_forms"):
        monkeypatch.setattr(search_kernel, function, getattr(search_kernel, function).py_func)
    plain = SubgroupSearch(group, 5, budget=Budget())
    assert [(item.table, item.length) for item in plain] == expected
    assert (plain.nodes, plain.trials) == (compiled.nodes, compiled.trials)


NODES = [
    ("⟨a, b | ⟩", 9, 1_893_784),
    ("⟨a, b | a^2, b^3⟩", 26, 3_045_274),
    ("⟨a, b | a^2, b^3, (ab)^7⟩", 75, 3_005_546),
    ("⟨a, b, c | [a,b], [a,c], [b,c]⟩", 32, 132_315),
    ("⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩", 12, 651_940),
    ("⟨a,b,c,d,e,f | ab=c, bc=d, cd=e, de=f, ef=a, fa=b⟩", 60, 38_741),
]


@pytest.mark.parametrize(("text", "index", "nodes"), NODES)
def test_node_counts_of_the_published_algorithm(text: str, index: int, nodes: int) -> None:
    """Nodes of a plain program of the same algorithm, measured independently; with the relators as they stand."""
    task = Task.plain(Presentation.parse(text), index, Conditions())
    search = SubgroupSearch.at(task, ROOT, budget=Budget())
    assert search.count()
    assert search.nodes == nodes


def test_pause_resume_and_pickle() -> None:
    group = Presentation.parse("⟨a, b | ⟩")
    whole = [item.table for item in SubgroupSearch(group, 5, budget=Budget())]
    search = SubgroupSearch(group, 5, budget=Budget(3))
    tables = []
    for _ in range(10_000):
        tables += [item.table for item in search]
        if search.finished:
            break
        search = pickle.loads(pickle.dumps(search))
        search.budget = Budget(3)
    assert search.complete_to == 5
    assert tables == whole


def test_budget_ends_with_what_is_complete() -> None:
    group = Presentation.parse("⟨a, b, c | ⟩")
    counts = count_classes(group, 30, budget=Budget(20_000))
    assert 1 <= counts.complete_to < 30
    assert counts.subgroups[:4] == (1, 7, 97, 2143)[: counts.complete_to]


def test_by_index_is_sorted() -> None:
    group = Presentation.parse("⟨a, b | a^2, b^3⟩")
    indices = [item.index for item in subgroups_by_index(group, 8, budget=Budget())]
    assert indices == sorted(indices)
    assert len(indices) == sum([1, 1, 2, 2, 1, 8, 6, 7])
    assert len(list(subgroups(group, index=8))) == len(indices)


@pytest.mark.parametrize("index", [0, -1, 10**9])
def test_bad_index(index: int) -> None:
    with pytest.raises(InputError, match="index"):
        SubgroupSearch(Presentation.parse("⟨a | ⟩"), index, budget=Budget())


def test_group_without_generators() -> None:
    assert [item.index for item in SubgroupSearch(Presentation.parse("⟨ | ⟩"), 5, budget=Budget())] == [1]
