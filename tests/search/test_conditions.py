"""Searches under conditions, against filtering everything."""

from __future__ import annotations

from collections.abc import Iterator
from math import lcm

import pytest

from lowindex.budget import Budget
from lowindex.cosets import CosetTable, plain_encoding, standard_form
from lowindex.errors import InputError
from lowindex.quotients import NormalSubgroups
from lowindex.search import Conditions, SubgroupSearch
from lowindex.search.symmetry import symmetries
from lowindex.words import Presentation

GROUPS = [
    ("⟨a, b | a^2, b^3⟩", 8),
    ("⟨a, b | ⟩", 4),
    ("⟨a, b | a b a^-1 b⟩", 8),
    ("⟨a, b | a^3, b^3, (ab)^3⟩", 9),
    ("⟨a, b, c | a^2, b^2, c^2, (ab)^3, (bc)^3, (ac)^3⟩", 8),
    ("⟨a, b | [a,[a,b]], [b,[a,b]]⟩", 8),
]


def every_subgroup(group: Presentation, index: int) -> Iterator[CosetTable]:
    for item in SubgroupSearch(group, index, budget=Budget()):
        yield from {standard_form(item.table, base) for base in range(item.index)}


def under(group: Presentation, index: int, conditions: Conditions) -> list[tuple[CosetTable, int]]:
    return [(item.table, item.length) for item in SubgroupSearch(group, index, budget=Budget(), conditions=conditions)]


@pytest.mark.parametrize(("text", "index"), GROUPS)
def test_normal_subgroups(text: str, index: int) -> None:
    """Against the classes of length one, and against the normal subgroups by layers of chief factors."""
    group = Presentation.parse(text)
    classes = {item.table for item in SubgroupSearch(group, index, budget=Budget()) if item.normal}
    found = under(group, index, Conditions(normal=True))
    assert all(length == 1 for _, length in found)
    assert len(found) == len(dict(found))
    assert {table for table, _ in found} == classes
    assert sorted(table.index for table, _ in found) == sorted(table.index for table in NormalSubgroups(group, index, Budget()))


@pytest.mark.parametrize(("text", "index"), GROUPS)
@pytest.mark.parametrize(("inside", "outside"), [("a", None), ("a b, a^2", None), (None, "b"), ("a^2", "b"), ("b a b", "a")])
def test_words_inside_and_outside(text: str, index: int, inside: str | None, outside: str | None) -> None:
    group = Presentation.parse(text)
    words = group.words(inside) if inside else ()
    others = group.words(outside) if outside else ()
    found = under(group, index, Conditions(containing=words, avoiding=others))
    expected = {
        table
        for table in every_subgroup(group, index)
        if all(table.image(0, word) == 0 for word in words) and all(table.image(0, word) != 0 for word in others)
    }
    assert len(found) == len(expected)
    assert {table for table, _ in found} == expected
    for table, length in found:
        assert len({standard_form(table, base) for base in range(table.index)}) == length


@pytest.mark.parametrize(("text", "index"), GROUPS)
@pytest.mark.parametrize("words", ["a", "a, b", "a b a", "a b, b a^-1"])
def test_fixed_point_free_words(text: str, index: int, words: str) -> None:
    group = Presentation.parse(text)
    given = group.words(words)
    found = under(group, index, Conditions(fixed_point_free=given))
    expected = {
        (item.table, item.length)
        for item in SubgroupSearch(group, index, budget=Budget())
        if all(item.table.image(point, word) != point for point in range(item.index) for word in given)
    }
    assert set(found) == expected
    assert len(found) == len(expected)


@pytest.mark.parametrize(("p", "q", "r"), [(2, 3, 7), (2, 4, 5), (3, 3, 4), (2, 3, 3), (2, 5, 6)])
def test_torsion_free_covers_of_triangle_groups(p: int, q: int, r: int) -> None:
    """The least index of a torsion-free subgroup is the least common multiple of the periods, or twice that when the Euler characteristic
    would otherwise be odd: A. L. Edmonds, J. H. Ewing, R. S. Kulkarni, Torsion free subgroups of Fuchsian groups and tessellations of
    surfaces, Invent. Math. 69 (1982) 331-346 (from memory)."""
    group = Presentation.parse(f"⟨a, b | a^{p}, b^{q}, (a b)^{r}⟩")
    powers = [(word, n // prime) for word, n in (("a", p), ("b", q), ("a b", r)) for prime in (2, 3, 5, 7) if n % prime == 0]
    words = tuple(group.word(f"({word})^{power}") for word, power in powers)
    least = lcm(p, q, r)
    characteristic = least // p + least // q + least // r - least
    index = least if characteristic % 2 == 0 else 2 * least
    found = under(group, index, Conditions(fixed_point_free=words))
    assert found
    assert {table.index for table, _ in found} == {index}


SYMMETRIC = [
    ("⟨a, b | ⟩", 4, 8),
    ("⟨a, b | a^2, b^3⟩", 8, 2),
    ("⟨a, b | a^3, b^3⟩", 6, 8),
    ("⟨a, b, c | a b = c, b c = a, c a = b⟩", 8, 6),
    ("⟨a, b, c | a^2, b^2, c^2, (ab)^3, (bc)^3, (ac)^3⟩", 8, 6),
    ("⟨a,b,c,d,e,f | ab=c, bc=d, cd=e, de=f, ef=a, fa=b⟩", 12, 6),
]


@pytest.mark.parametrize(("text", "index", "order"), SYMMETRIC)
def test_up_to_symmetry(text: str, index: int, order: int) -> None:
    """One table for each orbit of the subgroups under conjugation and symmetries, with the size of the orbit."""
    group = Presentation.parse(text)
    encoding = plain_encoding(group)
    acting = symmetries(encoding)
    assert len(acting) == order
    columns = encoding.columns
    where = [columns.index(c) for c in range(encoding.width)]
    left = set(every_subgroup(group, index))
    for table, length in under(group, index, Conditions(up_to_symmetry=True)):
        orbit = set()
        for images in acting:
            moved = CosetTable(table.rows[:, [where[images[c]] for c in columns]].copy())
            orbit |= {standard_form(moved, base) for base in range(table.index)}
        assert len(orbit) == length
        assert orbit <= left
        left -= orbit
    assert not left


def test_conditions_that_cannot_be_met_together() -> None:
    with pytest.raises(InputError, match="up to symmetry"):
        Conditions(normal=True, up_to_symmetry=True)
    with pytest.raises(InputError, match="identity"):
        Conditions(avoiding=((),))
    free = Presentation.parse("⟨a, b, c, d, e, f | ⟩")
    with pytest.raises(InputError, match="symmetries"):
        SubgroupSearch(free, 2, budget=Budget(), conditions=Conditions(up_to_symmetry=True))
