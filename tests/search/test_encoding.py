"""Ways to write a presentation for the search: none changes what is found."""

from __future__ import annotations

import pytest
from corpus import plane

from lowindex.budget import Budget
from lowindex.cosets import CosetTable, plain_encoding
from lowindex.search import ROOT, Conditions, SubgroupSearch, Task
from lowindex.search.encoding import _halved, encodings
from lowindex.words import Presentation

GROUPS = [
    ("⟨a, b | ⟩", 4),
    ("⟨a, b | a^2, b^3, (ab)^7⟩", 24),
    ("⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩", 8),
    ("⟨a, b | [a,[a,b]], [b,[a,b]]⟩", 9),
    ("⟨a, t | t a t^-1 = a^2⟩", 9),
    ("⟨a, b | a^2, b^2, (ab)^6, (ab)^9⟩", 6),
    ("⟨a, b | a^2, a b a b a b^-1 a b^-1 a^3 b^4⟩", 7),
    (plane.plane_group("p4g"), 12),
]


def found(task: Task) -> set[tuple[CosetTable, int]]:
    return {(item.table, item.length) for item in SubgroupSearch.at(task, ROOT, budget=Budget())}


@pytest.mark.parametrize(("text", "index"), GROUPS)
def test_every_encoding_finds_the_same(text: str, index: int) -> None:
    task = Task.plain(Presentation.parse(text), index, Conditions())
    expected = found(task)
    ways = [*encodings(task.encoding), _halved(task.encoding)]
    for encoding in ways[1:]:
        assert found(task.encoded(encoding)) == expected


def test_the_choice_saves_work() -> None:
    """The figure-eight knot group: triangles make the tree many times smaller."""
    group = Presentation.parse("⟨a, b | a b a^-1 b^-1 a = b a^-1 b^-1 a b⟩")
    search = SubgroupSearch(group, 12, budget=Budget())
    assert search.count()
    assert 20 * search.nodes < 651_940


def test_columns_and_triangles() -> None:
    plain = plain_encoding(Presentation.parse("⟨a, b | a^2, (ab)^3, b^4⟩"))
    assert (plain.columns, plain.inverses, plain.width) == ((0, 0, 1, 2), (0, 2, 1), 3)
    assert {min(word, plain.inverse(word)) for word in plain.relators} == {(0, 1, 0, 1, 0, 1), (1, 1, 1, 1)}
    assert plain.natural
    for encoding in encodings(plain):
        if encoding.width > plain.width:
            assert max(map(len, encoding.relators)) <= 4
            assert not encoding.natural


def test_long_relators_are_halved() -> None:
    """A relator of 30,000 letters has too many rotations to be used as it stands."""
    group = Presentation.parse("⟨a, b | a^10000 b^10000 a^-5000 b^-5000⟩")
    ways = list(encodings(plain_encoding(group)))
    assert len(ways) == 1
    assert max(map(len, ways[0].relators)) <= 3
    counts = SubgroupSearch(group, 3, budget=Budget())
    assert counts.count()
    short = SubgroupSearch(Presentation.parse("⟨a, b | a^4 b^4 a^-2 b^-2⟩"), 3, budget=Budget())
    assert short.count()
    assert counts.counts.tolist() == short.counts.tolist()  # exponents are the same modulo 6
