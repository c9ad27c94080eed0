"""Collection against matrices, quotients against known groups, proofs against the checker's own arithmetic."""

from __future__ import annotations

import numpy as np
import pytest
from corpus import nilpotent as corpus
from flint import fmpz_mat
from hypothesis import given, settings
from hypothesis import strategies as st

from lowindex.budget import Budget
from lowindex.nilpotent import is_consistent, nilpotent_quotient, prove_nilpotent
from lowindex.nilpotent.enumerated import finite_replay
from lowindex.nilpotent.lattice import close_conjugations
from lowindex.nilpotent.quotient import NilpotentQuotient
from lowindex.rewriting import Derivation, RelatorSet, Shortlex
from lowindex.words import Presentation, reduced


def quotient(text: str, max_class: int = 8) -> NilpotentQuotient:
    """The quotient, with everything that must hold for any quotient checked."""
    group = Presentation.parse(text)
    found = nilpotent_quotient(group.rank, group.relators, max_class=max_class, budget=Budget())
    nilpotent = found.group
    assert is_consistent(nilpotent)
    assert all(not any(nilpotent.evaluate(word, found.images)) for word in group.relators)
    for k, definition in enumerate(nilpotent.definitions):
        if definition[0] == "generator":
            assert found.images[definition[1] - 1] == nilpotent.generator(k)
        else:
            _, j, i = definition
            assert nilpotent.commutator(nilpotent.generator(j), nilpotent.generator(i)) == nilpotent.generator(k)
            assert (nilpotent.weights[i], nilpotent.weights[j]) == (1, nilpotent.weights[k] - 1)
    return found


# ranks of the factors of free nilpotent groups: Witt's formula (C)
@pytest.mark.parametrize(("rank", "ranks"), [(2, [2, 1, 2, 3, 6, 9]), (3, [3, 3, 8, 18]), (4, [4, 6, 20])])
def test_free_groups(rank: int, ranks: list[int]) -> None:
    text = f"⟨{', '.join('abcd'[:rank])} | ⟩"
    found = quotient(text, len(ranks))
    assert found.factors == tuple((n, ()) for n in ranks)
    assert not found.stable


@pytest.mark.parametrize("n", [3, 4, 5, 6])
def test_unitriangular(n: int) -> None:
    found = quotient(corpus.unitriangular(n))
    assert found.stable
    assert found.factors == tuple((n - k, ()) for k in range(1, n))
    assert found.growth_degree == n * (n * n - 1) // 6


KNOWN = [
    ("⟨a, b | a^2 = b^3⟩", 1, None, True),  # a knot group: Z
    ("⟨a, b | a^2 = b^2, aba = b⟩", 2, 8, True),  # quaternion group
    ("⟨a, b | a^2, b^2, (ab)^128⟩", 7, 256, True),  # dihedral of order 256: maximal class
    ("⟨a, b | a^3, b^3, (ab)^3, (a^-1b)^3⟩", 2, 27, True),  # OEIS A051576
    ("⟨a | a⟩", 0, 1, True),
    ("⟨a | ⟩", 1, None, True),
    ("⟨a, b | a^2, b^3, (ab)^5⟩", 0, 1, True),  # perfect
    ("⟨a, b | a^4, b^2, (ab)^4⟩", 8, 1024, False),  # p4: 2-quotients of every class
]


@pytest.mark.parametrize(("text", "nilpotency_class", "order", "stable"), KNOWN)
def test_known_groups(text: str, nilpotency_class: int, order: int | None, stable: bool) -> None:
    found = quotient(text)
    assert (found.nilpotency_class, found.order, found.stable) == (nilpotency_class, order, stable)


def test_burnside_3_3() -> None:
    """OEIS A051576 (L): order 2187, class 3."""
    words = ["a", "b", "c", "ab", "ac", "bc", "a^-1b", "a^-1c", "b^-1c", "abc", "abc^-1", "ab^-1c", "a^-1bc"]
    found = quotient(f"⟨a, b, c | {', '.join(f'({w})^3' for w in words)}⟩")
    assert (found.order, found.nilpotency_class) == (2187, 3)


LETTERS = st.lists(st.sampled_from([1, -1, 2, -2, 3, -3]), max_size=25)


@given(LETTERS, LETTERS)
def test_collection_against_matrices(left: list[int], right: list[int]) -> None:
    """UT_4(Z): two words have the same vector exactly when they have the same matrix."""
    found = _UT4
    matrices = {}
    for k in (1, 2, 3):
        matrix = np.eye(4, dtype=object)
        matrix[k - 1, k] = 1
        matrices[k] = matrix
        back = np.eye(4, dtype=object)
        back[k - 1, k] = -1
        matrices[-k] = back

    def value(word: list[int]) -> np.ndarray:  # type: ignore[type-arg]
        result = np.eye(4, dtype=object)
        for x in word:
            result = result.dot(matrices[x])
        return result

    group = found.group
    u, v = group.evaluate(reduced(left), found.images), group.evaluate(reduced(right), found.images)
    assert (u == v) == bool((value(left) == value(right)).all())
    assert group.multiply(u, v) == group.evaluate(reduced([*left, *right]), found.images)
    assert group.multiply(u, group.inverse(u)) == group.identity
    assert group.power(u, 3) == group.multiply(u, group.multiply(u, u))


_UT4 = quotient(corpus.unitriangular(4))


def test_large_exponents_cost_little() -> None:
    found = quotient(corpus.HEISENBERG)
    group = found.group
    a, b = (group.power(image, 10**30) for image in found.images)
    assert group.commutator(a, b)[2] in (10**60, -(10**60))


@pytest.mark.parametrize("matrix", [[[0, 1], [-1, 0]], [[0, 0, 1], [1, 0, 0], [0, 1, 0]]])
def test_abelian_presentations_are_proved_through_large_entries(matrix: list[list[int]]) -> None:
    """Z^n x| Z with a matrix of finite order, conjugated to entries above 5: its power-by-power presentation of Z^(n+1)."""
    size = len(matrix)
    change = fmpz_mat([[int(i == j) + (2 if j == i + 1 else 0) for j in range(size)] for i in range(size)])
    change = change * fmpz_mat([[int(i == j) + (1 if i == j + 1 else 0) for j in range(size)] for i in range(size)])
    conjugated = change * fmpz_mat(matrix) * fmpz_mat([[int(x) for x in row] for row in change.inv().tolist()])
    rows = [[int(conjugated[i, j]) for j in range(size)] for i in range(size)]
    order = next(k for k in range(1, 13) if fmpz_mat(matrix) ** k == fmpz_mat(size, size, [int(i % (size + 1) == 0) for i in range(size * size)]))
    from lowindex.cosets import CosetTable, subgroup_presentation

    group = Presentation.parse(corpus.torus_bundle(rows))
    table = CosetTable.from_permutations([list(range(order))] * size + [[(i + 1) % order for i in range(order)]])
    subgroup = subgroup_presentation(group, table)
    proof = prove_nilpotent(subgroup.rank, subgroup.relators, max_class=3, budget=Budget(3_000_000))
    assert proof is not None
    assert proof.quotient.factors == ((size + 1, ()),)


def test_lattice_closes_conjugations() -> None:
    """[a,b] = 1, and t commutes with a^2 b and a b: then t commutes with a and b."""
    relators = [(-1, -2, 1, 2), reduced((-3, 1, 1, 2, 3, -2, -1, -1)), reduced((-3, 1, 2, 3, -2, -1))]
    system = RelatorSet(Derivation(relators), Shortlex([1, 2, 3]), [1, 2, 3], budget=Budget(100_000))
    for number in range(3):
        system.insert(number)
    system.settle()
    close_conjugations(system, system.alive)
    commutators = [word for word in system.words() if len(word) == 4]
    assert len(commutators) == 3
    assert all(system.derivation.holds(number) for number in range(len(system.derivation.words)))


@settings(max_examples=30, deadline=None)
@given(st.lists(st.sampled_from([1, -1, 2, -2]), max_size=12).map(tuple))
def test_words_of_a_finite_group_by_enumeration(word: tuple[int, ...]) -> None:
    """In S4 a word is proved trivial exactly when its permutation is the identity."""
    group = Presentation.parse("⟨a, b | a^2, b^3, (ab)^4⟩")
    system = RelatorSet(Derivation(group.relators), Shortlex([1, 2]), [1, 2], budget=Budget(10_000))
    for number in range(3):
        system.insert(number)
    system.settle()
    replay = finite_replay(system, 24, max_cosets=1000, budget=Budget(10**7))
    assert replay is not None
    permutations = {1: (1, 0, 2, 3), 2: (0, 2, 3, 1)}
    points = list(range(4))
    for x in reduced(word):
        image = permutations[abs(x)]
        points = [image[i] if x > 0 else image.index(i) for i in points]
    from lowindex.rewriting import encoded

    number = replay.prove(encoded(reduced(word)))
    assert (number is not None) == (points == [0, 1, 2, 3])
    assert number is None or number < 0 or system.derivation.holds(number)
