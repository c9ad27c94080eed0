"""Tables, Schreier generators, rewriting, towers, against laws and brute force."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from lowindex.algebra import abelianization
from lowindex.budget import Budget
from lowindex.cosets import (
    CosetTable,
    SchreierTree,
    compose,
    core,
    intersection,
    pull_back,
    schreier_graph,
    standard_form,
    subgroup_presentation,
)
from lowindex.errors import InputError
from lowindex.search import SubgroupSearch
from lowindex.words import Presentation, product


@st.composite
def tables(draw: st.DrawFn) -> CosetTable:
    degree, rank = draw(st.integers(1, 7)), draw(st.integers(1, 3))
    permutations = [draw(st.permutations(range(degree))) for _ in range(rank)]
    permutations[0] = [(i + 1) % degree for i in range(degree)]
    return CosetTable.from_permutations(permutations)


@given(tables())
def test_schreier(table: CosetTable) -> None:
    """Schreier's index formula; generators fix point 0; the tree reaches every point by its transversal word."""
    tree = SchreierTree(table)
    assert len(tree.edges) == table.index * (table.rank - 1) + 1
    assert all(table.image(0, word) == 0 for word in tree.generators)
    assert [table.image(0, word) for word in tree.transversal] == list(range(table.index))


@given(tables(), st.data())
def test_rewriting_is_undone_by_substitution(table: CosetTable, data: st.DataObject) -> None:
    letters = st.sampled_from([s * k for k in range(1, table.rank + 1) for s in (1, -1)])
    word = product(data.draw(st.lists(letters, max_size=20)))
    tree = SchreierTree(table)
    t = tree.transversal
    back = product(*(tree.generators[x - 1] if x > 0 else [-y for y in reversed(tree.generators[-x - 1])] for x in tree.rewrite(0, word)))
    assert back == product(word, [-y for y in reversed(t[table.image(0, word)])])


@given(tables())
def test_standard_form(table: CosetTable) -> None:
    form = standard_form(table)
    assert form.is_standard
    assert standard_form(form) == form
    for base in range(table.index):
        assert standard_form(table, base).index == table.index


@settings(max_examples=50)
@given(tables(), st.data())
def test_towers(table: CosetTable, data: st.DataObject) -> None:
    """K in H in G: a word of G fixes 0 of the composed table exactly when it lies in H and its rewriting fixes 0 of K's."""
    tree = SchreierTree(table)
    degree = data.draw(st.integers(1, 3))
    images = [data.draw(st.permutations(range(degree))) for _ in tree.edges]
    images[0] = [(i + 1) % degree for i in range(degree)]
    inner = CosetTable.from_permutations(images)
    whole = compose(inner, tree)
    assert whole.index == table.index * inner.index
    letters = st.sampled_from([s * k for k in range(1, table.rank + 1) for s in (1, -1)])
    word = product(data.draw(st.lists(letters, max_size=12)))
    inside = table.image(0, word) == 0 and inner.image(0, tree.rewrite(0, word)) == 0
    assert inside == (whole.image(0, word) == 0)


@settings(max_examples=50)
@given(tables(), tables(), st.data())
def test_intersection_and_core(first: CosetTable, second: CosetTable, data: st.DataObject) -> None:
    if first.rank != second.rank:
        return
    both = intersection(first, second)
    letters = st.sampled_from([s * k for k in range(1, first.rank + 1) for s in (1, -1)])
    word = product(data.draw(st.lists(letters, max_size=12)))
    assert (both.image(0, word) == 0) == (first.image(0, word) == 0 and second.image(0, word) == 0)
    normal = core(first, max_index=6000)
    assert normal is not None
    trivial = all(first.image(point, word) == point for point in range(first.index))
    assert (normal.image(0, word) == 0) == trivial


def test_pull_back() -> None:
    table = CosetTable.from_permutations([[1, 2, 0], [1, 0, 2]])
    images = [(1, 2), (1,)]
    back = pull_back(table, images)
    assert back.index == 3
    assert back.image(0, (1, 2)) == pull_back(table, [(1, 2, 1)]).image(0, (1,))


def test_modular_group_subgroups_by_kurosh() -> None:
    """A subgroup of index n of C2 * C3 is a free product of e2 copies of C2, e3 of C3 and a free group of rank s, e2 and e3 the fixed
    points of the generators and n/6 = s - 1 + e2/2 + 2 e3/3 (Kurosh and Euler characteristic; M). So H_1 is known for every
    table: a test of search, rewriting and Smith form together."""
    group = Presentation.parse("⟨a, b | a^2, b^3⟩")
    seen = 0
    for found in SubgroupSearch(group, 12, budget=Budget()):
        a, b = found.table.permutations
        e2 = sum(i == j for i, j in enumerate(a))
        e3 = sum(i == j for i, j in enumerate(b))
        rank6 = found.index + 6 - 3 * e2 - 4 * e3
        assert rank6 % 6 == 0
        subgroup = subgroup_presentation(group, found.table)
        homology = abelianization(subgroup.rank, subgroup.relators)
        order = 1
        for d in homology.torsion:
            order *= d
        assert (homology.betti, order) == (rank6 // 6, 2**e2 * 3**e3)
        seen += 1
    assert seen == sum([1, 1, 2, 2, 1, 8, 6, 7, 14, 27, 26, 80])  # OEIS A121350


def test_from_permutations_refuses() -> None:
    for bad in ([[0, 0]], [[0, 1]], [[0, 2]], [[1, 0], [0, 1, 2]]):
        with pytest.raises(InputError):
            CosetTable.from_permutations(bad)


def test_schreier_graph() -> None:
    graph = schreier_graph(CosetTable.from_permutations([[1, 2, 0], [1, 0, 2]]), ["a", "b"])
    assert graph.number_of_nodes() == 3
    assert graph.number_of_edges() == 6
    assert graph.has_edge(0, 1, "a") and graph.has_edge(2, 2, "b")
