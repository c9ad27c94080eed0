"""Families: expansion, conditions, errors; expressions against Python's fractions."""

from __future__ import annotations

from fractions import Fraction
from math import gcd

import pytest
from corpus import cyclic
from hypothesis import given
from hypothesis import strategies as some

from lowindex.errors import InputError, NotationError
from lowindex.words import Expression, Family, Presentation, parse_values


def members(text: str, **values: list[int]) -> list[tuple[tuple[int, ...], str]]:
    return [(tuple(m.parameters.values()), str(m.presentation)) for m in Family(text).members(values)]


def test_fibonacci_family() -> None:
    """The same relators as the corpus has."""
    for n, member in zip(range(2, 8), Family("⟨x_i (i mod n) | x_i x_{i+1} = x_{i+2}⟩").members({"n": range(2, 8)}), strict=True):
        assert member.presentation.relators == Presentation.parse(cyclic.fibonacci(2, n)).relators


def test_exponents_and_conditions() -> None:
    found = members("⟨a, b | a^p, b^q, (a b)^r⟩ where p <= q <= r and 1/p + 1/q + 1/r > 1", p=[2, 3, 4], q=[2, 3, 4], r=[2, 3, 4, 5])
    assert [values for values, _ in found] == [(2, 2, 2), (2, 2, 3), (2, 2, 4), (2, 2, 5), (2, 3, 3), (2, 3, 4), (2, 3, 5)]
    assert found[-1][1] == "⟨a, b | a^2, b^3, (a b)^5⟩"
    assert members("⟨a, t | t a^m t^-1 = a^{2n - 1}⟩", m=[1], n=[-1, 2]) == [((1, -1), "⟨a, t | t a t^-1 a^3⟩"), ((1, 2), "⟨a, t | t a t^-1 a^-3⟩")]


def test_two_kinds_of_indices() -> None:
    text = "⟨x_i (i mod n), y_j (j mod m) | [x_i, y_j], x_i^{i+2}⟩"
    (_, shown), *_ = members(text, n=[2], m=[1])
    assert shown == "⟨x_0, x_1, y_0 | x_0^-1 y_0^-1 x_0 y_0, x_1^-1 y_0^-1 x_1 y_0, x_0^2, x_1^3⟩"


def test_conjugates_are_not_exponents() -> None:
    assert Family("⟨a, b | a^b = a^n⟩").parameters == ("n",)
    assert members("⟨a, b | a^b = a^n⟩", n=[2]) == [((2,), "⟨a, b | b^-1 a b a^-2⟩")]


@pytest.mark.parametrize(
    ("text", "values", "column"),
    [
        ("⟨a | a^{n/2}⟩", {"n": [3]}, 9),
        ("⟨a | a^{n+}⟩", {"n": [3]}, 11),
        ("⟨a | a^{1/(n-3)}⟩", {"n": [3]}, 11),
        ("⟨a | a^n⟩ where n", {"n": [3]}, 18),
        ("⟨a | a^n⟩ where n > 2 )", {"n": [3]}, 23),
        ("⟨x_i (j mod n) | x_i⟩", {"n": [3]}, 2),
        ("⟨x_i (i mod n) | x_i⟩", {"n": [0]}, 13),
        ("a | a^n", {"n": [3]}, 1),
        ("⟨a | a^n⟩ n > 2", {"n": [3]}, 10),
    ],
)
def test_errors_show_the_place(text: str, values: dict[str, list[int]], column: int) -> None:
    with pytest.raises(NotationError) as caught:
        list(Family(text).members(values))
    assert caught.value.column == column
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize("values", [{}, {"n": [1], "m": [1]}, {"m": [1]}])
def test_parameters_must_fit(values: dict[str, list[int]]) -> None:
    with pytest.raises(InputError):
        list(Family("⟨a | a^n⟩").members(values))


def test_lists_of_values() -> None:
    assert parse_values("n=2..5,9") == ("n", [2, 3, 4, 5, 9])
    assert parse_values(" m = -2..0 ") == ("m", [-2, -1, 0])
    for text in ("n", "n=", "n=a", "n=5..2", "n=1..99999999999", "2=n", "n=1.5"):
        with pytest.raises(InputError):
            parse_values(text)


NUMBERS = some.integers(-20, 20)


@given(NUMBERS, NUMBERS, NUMBERS)
def test_expressions_against_fractions(a: int, b: int, c: int) -> None:
    values = {"a": Fraction(a), "b": Fraction(b), "c": Fraction(c)}
    assert Expression("a b - c (a + 2) * 3", values).integer() == a * b - c * (a + 2) * 3
    assert Expression("gcd(a, b) + abs(c) - min(a, b, c)", values).integer() == gcd(a, b) + abs(c) - min(a, b, c)
    assert Expression("a < b <= c or not a != b", values).condition() == (a < b <= c or a == b)
    if b:
        assert Expression("a / b > c / 7", values).condition() == (Fraction(a, b) > Fraction(c, 7))
        assert Expression("a mod b", values).integer() == a % b
