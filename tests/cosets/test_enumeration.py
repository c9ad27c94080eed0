"""Coset enumeration against orders of finite groups."""

from __future__ import annotations

import pytest
from corpus import coxeter, cyclic

from lowindex.budget import Budget
from lowindex.cosets import enumerate_cosets, enumeration_kernel, logged_enumeration, plain_encoding
from lowindex.cosets.enumeration import STRATEGIES, _Run
from lowindex.errors import InputError
from lowindex.words import Presentation

GROUPS = {
    "S4": ("⟨a, b | a^2, b^3, (ab)^4⟩", 24),
    "A5": ("⟨a, b | a^2, b^3, (ab)^5⟩", 60),
    **{f"F{n[0]},{n[1]}": (cyclic.fibonacci(*n), order) for n, order in cyclic.FIBONACCI_ORDERS.items()},
    **{f"(2,3,7;{k})": (cyclic.two_three_seven(k), order) for k, order in cyclic.TWO_THREE_SEVEN_ORDERS.items()},
    "(2,3,7;8)": (cyclic.two_three_seven(8), 10752),  # Leech, Mennicke 1961
    # H. S. M. Coxeter, Trans. AMS 45 (1939) 73-150 (M), C
    "(2,3,9;5)": ("⟨a, b | a^2, b^3, (ab)^9, [a,b]^5⟩", 10260),
    "(2,4,7;3)": ("⟨a, b | a^2, b^4, (ab)^7, [a,b]^3⟩", 2184),
    # OEIS A079682 (L)
    "B(2,4)": ("⟨a, b | a^4, b^4, (ab)^4, (a^-1b)^4, (a^2b)^4, (ab^2)^4, (a^2b^2)^4, (a^-1bab)^4, (ab^-1ab)^4⟩", 4096),
    **{f"Coxeter {name}": row for name, row in coxeter.FINITE.items()},
    **{f"Coxeter {name}": row for name, row in coxeter.FINITE_SLOW.items()},
}


@pytest.mark.parametrize("name", GROUPS)
def test_orders(name: str) -> None:
    text, order = GROUPS[name]
    group = Presentation.parse(text)
    found = enumerate_cosets(group, budget=Budget())
    assert found.table is not None
    assert found.table.index == order
    assert found.table.satisfies(group.relators)
    assert found.table.is_standard


@pytest.mark.parametrize("strategy", STRATEGIES)
def test_strategies_agree(strategy: str) -> None:
    group = Presentation.parse(cyclic.two_three_seven(6))
    tables = {enumerate_cosets(group, [group.word("ab")], budget=Budget(), strategy=s).table for s in (strategy, None)}
    assert len(tables) == 1
    assert next(iter(tables)).index == 156  # type: ignore[union-attr]


def test_subgroups_given_by_words() -> None:
    """Sylow subgroups of S4 have index 3 and 8; E7 over the parabolic E6 has index 56 (Humphreys 1990)."""
    s4 = Presentation.parse(GROUPS["S4"][0])
    assert enumerate_cosets(s4, [s4.word("b")], budget=Budget()).table.index == 8  # type: ignore[union-attr]
    e7 = Presentation.parse(coxeter.coxeter(7, {**coxeter.path(3, 3, 3, 3, 3), (2, 6): 3, (5, 6): 2}))
    parabolic = [(k,) for k in (1, 2, 3, 4, 5, 7)]
    assert enumerate_cosets(e7, parabolic, budget=Budget()).table.index == 56  # type: ignore[union-attr]


CUBES = ["a", "b", "c", "ab", "ab^-1", "ac", "ac^-1", "bc", "bc^-1", "abc", "abc^-1", "ab^-1c", "a^-1bc"]
LARGE = {
    "B(3,3)": (f"⟨a, b, c | {', '.join(f'({word})^3' for word in CUBES)}⟩", 2187),  # OEIS A079682 (L); 13 cubes suffice (C)
    # J. E. Humphreys, Reflection Groups and Coxeter Groups (1990)
    "E6": (coxeter.coxeter(6, {**coxeter.path(3, 3, 3, 3), (2, 5): 3, (4, 5): 2}), 51_840),
    "E7": (coxeter.coxeter(7, {**coxeter.path(3, 3, 3, 3, 3), (2, 6): 3, (5, 6): 2}), 2_903_040),
    "S9": (coxeter.coxeter(8, coxeter.path(3, 3, 3, 3, 3, 3, 3)), 362_880),
    # H. Behr, J. Mennicke, A presentation of the groups PSL(2,p), Canad. J. Math. 20 (1968) 1432-1438 (from memory); order p(p^2-1)/2
    **{f"PSL(2,{p})": (f"⟨s, t | s^{p}, t^2, (s t)^3, (s^2 t s^{(p + 1) // 2} t)^3⟩", p * (p * p - 1) // 2) for p in (11, 23, 37, 61)},
}


@pytest.mark.parametrize("name", LARGE)
def test_large_orders(name: str) -> None:
    text, order = LARGE[name]
    found = enumerate_cosets(Presentation.parse(text), budget=Budget(), max_cosets=5_000_000)
    assert found.table is not None
    assert found.table.index == order
    if name == "E7":
        assert found.peak == order  # Felsch defines no coset in vain here


def test_more_cosets_than_allowed() -> None:
    text = LARGE["E7"][0]
    for strategy in STRATEGIES:
        found = enumerate_cosets(Presentation.parse(text), budget=Budget(), max_cosets=100_000, strategy=strategy)
        assert found.table is None
        assert found.peak <= 100_000


@pytest.mark.slow
def test_eighty_million_entries() -> None:
    """The Coxeter group B8 over 1: 10,321,920 cosets in 8 columns (Humphreys 1990)."""
    found = enumerate_cosets(
        Presentation.parse(coxeter.coxeter(8, coxeter.path(4, 3, 3, 3, 3, 3, 3))), budget=Budget(), max_cosets=12_500_000, strategy="felsch"
    )
    assert found.table is not None
    assert found.table.index == 2**8 * 40_320


def test_infinite_groups_end_without_a_table() -> None:
    for text in ("⟨a | ⟩", "⟨a, b | [a,b]⟩", "⟨a, b, c, d | a^-1ba=b^2, b^-1cb=c^2, c^-1dc=d^2, d^-1ad=a^2⟩"):
        found = enumerate_cosets(Presentation.parse(text), budget=Budget(), max_cosets=20_000)
        assert found.table is None
        assert found.peak <= 20_000
    spent = enumerate_cosets(Presentation.parse("⟨a, b | ⟩"), budget=Budget(1000), max_cosets=10**7)
    assert spent.table is None


def test_unknown_strategy() -> None:
    with pytest.raises(InputError, match="strategy"):
        enumerate_cosets(Presentation.parse("⟨a | ⟩"), budget=Budget(), strategy="fast")


@pytest.mark.parametrize("strategy", STRATEGIES)
@pytest.mark.parametrize("name", ["S4", "(2,3,7;4)", "F3,2"])
def test_kernel_is_its_plain_body(name: str, strategy: str, monkeypatch: pytest.MonkeyPatch) -> None:
    """The compiled kernels do exactly what their Python bodies do: same tables, same counters."""
    group = Presentation.parse(GROUPS[name][0])
    compiled = _Run(plain_encoding(group), [], strategy, 5000)
    while not compiled.closed:
        compiled.advance(2000)
    for function in ("enumerate_slice", "compact", "standard"):
        monkeypatch.setattr(enumeration_kernel, function, getattr(enumeration_kernel, function).py_func)
    plain = _Run(plain_encoding(group), [], strategy, 5000)
    while not plain.closed:
        plain.advance(2000)
    assert compiled.state.tolist() == plain.state.tolist()
    assert (compiled.array == plain.array).all()
    assert compiled.table() == plain.table()


def test_log_counts_every_definition() -> None:
    group = Presentation.parse(GROUPS["A5"][0])
    log = logged_enumeration(group.rank, group.relators, max_cosets=1000, budget=Budget())
    assert log is not None
    assert log.order == 60
    assert sum(kind == 0 for kind, _, _ in log.steps) >= 59
