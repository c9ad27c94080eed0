"""Homomorphisms into symmetric groups against brute force."""

from __future__ import annotations

from itertools import permutations, product
from math import factorial

import pytest

from lowindex.budget import Budget
from lowindex.quotients import count_homomorphisms, homomorphisms
from lowindex.words import Presentation


@pytest.mark.parametrize("text", ["⟨a, b | a^2, b^3⟩", "⟨a, b | [a,b]⟩", "⟨a | a^4⟩", "⟨a, b | a b a^-1 b⟩"])
@pytest.mark.parametrize("degree", [1, 2, 3, 4])
def test_against_all_tuples(text: str, degree: int) -> None:
    group = Presentation.parse(text)
    points = range(degree)

    def act(point: int, letter: int, images: tuple[tuple[int, ...], ...]) -> int:
        image = images[abs(letter) - 1]
        return image[point] if letter > 0 else image.index(point)

    def holds(images: tuple[tuple[int, ...], ...]) -> bool:
        for word in group.relators:
            for start in points:
                point = start
                for letter in word:
                    point = act(point, letter, images)
                if point != start:
                    return False
        return True

    everything = {images for images in product(permutations(points), repeat=group.rank) if holds(images)}
    assert len(everything) == count_homomorphisms(group, degree, budget=Budget())[degree]
    classes = list(homomorphisms(group, degree=degree))
    seen: set[tuple[tuple[int, ...], ...]] = set()
    for found in classes:
        assert found.images in everything
        orbit = set()
        for by in permutations(points):
            orbit.add(tuple(tuple(by[image[by.index(i)]] for i in points) for image in found.images))
        assert seen.isdisjoint(orbit)
        assert factorial(degree) % len(orbit) == 0
        seen |= orbit
    assert seen == everything


def test_no_result_when_the_budget_is_spent() -> None:
    assert list(homomorphisms(Presentation.parse("⟨a, b, c | ⟩"), degree=12, budget=Budget(50))) == []


def test_a_stream_goes_on_where_its_budget_ended() -> None:
    group = Presentation.parse("⟨a, b | a^2, b^3⟩")
    stream = homomorphisms(group, degree=9, budget=Budget(3))
    assert list(stream) == []
    assert not stream.finished
    pieces = []
    while not stream.finished:
        stream.budget = Budget(20)
        pieces += list(stream)
    assert pieces == list(homomorphisms(group, degree=9))
