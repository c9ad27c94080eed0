"""Abelianization: the Smith form by python-flint as oracle, and the maps as homomorphisms."""

from __future__ import annotations

from flint import fmpz_mat
from hypothesis import given
from hypothesis import strategies as st

from lowindex.algebra import abelianization, jacobian_mod, mod_p_rank, relation_matrix
from lowindex.words import product


@st.composite
def presentations(draw: st.DrawFn) -> tuple[int, list[tuple[int, ...]]]:
    rank = draw(st.integers(1, 6))
    letters = st.integers(1, rank).flatmap(lambda k: st.sampled_from([k, -k]))
    return rank, draw(st.lists(st.lists(letters, max_size=14).map(tuple), max_size=7))


@given(presentations())
def test_invariants_and_images(group: tuple[int, list[tuple[int, ...]]]) -> None:
    rank, relators = group
    found = abelianization(rank, relators)
    rows = relation_matrix(rank, relators)
    diagonal: list[int] = []
    if rows:
        smith = fmpz_mat(rows).snf()
        diagonal = [abs(int(smith[i, i])) for i in range(min(smith.nrows(), smith.ncols()))]
    assert found.torsion == tuple(d for d in diagonal if d > 1)
    assert found.betti == rank - sum(1 for d in diagonal if d)
    moduli = [*found.torsion, *[0] * found.betti]
    for word in relators:
        for k, m in enumerate(moduli):
            total = sum(found.images[abs(x) - 1][k] * (1 if x > 0 else -1) for x in word)
            assert total % m == 0 if m else total == 0
    # onto: the images generate, so modulo every prime they have full rank
    for p in (2, 3, 5):
        assert mod_p_rank(rank, relators, p) == found.betti + sum(1 for d in found.torsion if d % p == 0)


@given(st.lists(st.sampled_from([1, -1, 2, -2]), max_size=20), st.lists(st.sampled_from([1, -1, 2, -2]), max_size=20))
def test_fox_jacobian_is_a_derivation(left: list[int], right: list[int]) -> None:
    """d(uv) = du + chi(u) dv (R. H. Fox 1953)."""
    q, values = 101, [3, 7]

    def row(word: list[int]) -> list[int]:
        rows = jacobian_mod([tuple(word)], values, q)
        return rows[0] if rows else [0, 0]

    chi = 1
    for x in left:
        chi = chi * (values[x - 1] if x > 0 else pow(values[-x - 1], -1, q)) % q
    assert row([*left, *right]) == [(a + chi * b) % q for a, b in zip(row(left), row(right), strict=True)]
    assert row(list(product(left))) == row(left)
