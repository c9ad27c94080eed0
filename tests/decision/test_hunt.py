"""The main job on groups with known truth (sources in tests/corpus). Every verdict's witness goes through the checker once more here."""

from __future__ import annotations

import pytest
from corpus import coxeter, cyclic, flat, never, nilpotent, plane, scramble, space

from lowindex.checker import check
from lowindex.decision import NO, YES, Verdict, hunt
from lowindex.words import Presentation


def proved(group: str | Presentation, **options: object) -> Verdict:
    """A positive verdict whose witness the checker accepts for this very presentation."""
    presentation = Presentation.parse(group) if isinstance(group, str) else group
    verdict = hunt(presentation, **options)  # type: ignore[arg-type]
    assert verdict.verdict == YES, verdict.reason
    assert verdict.witness is not None
    report = check(verdict.witness.text, presentation=(presentation.names, presentation.relators))
    assert report.summary["index"] == verdict.index
    return verdict


@pytest.mark.parametrize("name", plane.PLANE_GROUPS)
def test_plane_groups(name: str) -> None:
    verdict = proved(plane.plane_group(name))
    assert (verdict.growth_degree, verdict.index) == (2, plane.PLANE_GROUPS[name][1])


@pytest.mark.parametrize("name", flat.FLAT_MANIFOLDS)
def test_flat_manifolds(name: str) -> None:
    text, holonomy, *_ = flat.FLAT_MANIFOLDS[name]
    verdict = proved(text)
    assert (verdict.growth_degree, verdict.index) == (3, holonomy)


@pytest.mark.parametrize("triangle", flat.FLAT_TRIANGLES)
def test_flat_triangles(triangle: tuple[int, int, int]) -> None:
    verdict = proved(flat.flat_triangle(*triangle))
    assert (verdict.growth_degree, verdict.index) == (3, flat.FLAT_TRIANGLES[triangle])


@pytest.mark.parametrize("name", coxeter.AFFINE)
def test_affine_coxeter_groups(name: str) -> None:
    text, rank, order = coxeter.AFFINE[name]
    verdict = proved(text)
    assert (verdict.growth_degree, verdict.index) == (rank, order)


@pytest.mark.slow
@pytest.mark.parametrize("name", coxeter.AFFINE_SLOW)
def test_large_affine_coxeter_groups(name: str) -> None:
    text, rank, order = coxeter.AFFINE_SLOW[name]
    verdict = proved(text)
    assert (verdict.growth_degree, verdict.index) == (rank, order)


@pytest.mark.parametrize("name", coxeter.FINITE)
def test_finite_coxeter_groups(name: str) -> None:
    text, order = coxeter.FINITE[name]
    assert proved(text).finite_order == order


@pytest.mark.slow
@pytest.mark.parametrize("name", coxeter.FINITE_SLOW)
def test_large_finite_coxeter_groups(name: str) -> None:
    text, order = coxeter.FINITE_SLOW[name]
    assert proved(text, effort=6).finite_order == order


def test_fibonacci_group_2_6_is_flat() -> None:
    """F(2,6) is the Hantzsche-Wendt group (Helling, Kim, Mennicke; L): degree 3, index 4."""
    verdict = proved(cyclic.fibonacci(2, 6))
    assert (verdict.growth_degree, verdict.index) == (3, 4)


def test_fibonacci_group_3_4_is_virtually_heisenberg() -> None:
    """Hand proof with the sources of the corpus (C): degree 4."""
    assert proved(cyclic.fibonacci(3, 4)).growth_degree == 4


def test_sieradski_group_6_is_heisenberg() -> None:
    """J. Milnor, On the 3-dimensional Brieskorn manifolds M(p,q,r) (1975), as reported (L): degree 4."""
    verdict = proved(cyclic.sieradski(6))
    assert (verdict.growth_degree, verdict.index, verdict.nilpotency_class) == (4, 1, 2)


@pytest.mark.parametrize(("n", "order"), cyclic.SIERADSKI_ORDERS.items())
def test_finite_sieradski_groups(n: int, order: int) -> None:
    assert proved(cyclic.sieradski(n)).finite_order == order


@pytest.mark.parametrize(("member", "order"), cyclic.FIBONACCI_ORDERS.items())
def test_finite_fibonacci_groups(member: tuple[int, int], order: int) -> None:
    assert proved(cyclic.fibonacci(*member)).finite_order == order


@pytest.mark.parametrize(("k", "order"), cyclic.TWO_THREE_SEVEN_ORDERS.items())
def test_two_three_seven_k(k: int, order: int) -> None:
    assert proved(cyclic.two_three_seven(k)).finite_order == order


@pytest.mark.slow
@pytest.mark.parametrize(("k", "order"), cyclic.TWO_THREE_SEVEN_SLOW.items())
def test_large_two_three_seven_k(k: int, order: int) -> None:
    assert proved(cyclic.two_three_seven(k), effort=7).finite_order == order


def test_burnside_2_3() -> None:
    assert proved(cyclic.BURNSIDE_2_3).finite_order == 27


def test_heisenberg() -> None:
    verdict = proved(nilpotent.HEISENBERG)
    assert (verdict.index, verdict.nilpotency_class, verdict.hirsch_length, verdict.growth_degree) == (1, 2, 3, 4)


@pytest.mark.parametrize("k", [2, 3, 4, 6])
def test_heisenberg_by_cyclic(k: int) -> None:
    verdict = proved(nilpotent.heisenberg_by(k))
    assert (verdict.index, verdict.nilpotency_class, verdict.hirsch_length, verdict.growth_degree) == (k, 2, 3, 4)


@pytest.mark.parametrize(("n", "degree"), [(4, 10), (5, 20)])
def test_unitriangular_groups(n: int, degree: int) -> None:
    verdict = proved(nilpotent.unitriangular(n))
    assert (verdict.nilpotency_class, verdict.hirsch_length, verdict.growth_degree) == (n - 1, n * (n - 1) // 2, degree)


@pytest.mark.parametrize(("shape", "degree"), nilpotent.FREE_NILPOTENT_DEGREES.items())
def test_free_nilpotent_groups(shape: tuple[int, int], degree: int) -> None:
    verdict = proved(nilpotent.free_nilpotent(*shape))
    assert (verdict.index, verdict.nilpotency_class, verdict.growth_degree) == (1, shape[1], degree)


@pytest.mark.parametrize("number", [*range(1, 231, 6), 230])
def test_space_groups(number: int) -> None:
    """40 of the 230 types, without the translations as generators (source: the PyPI package spglib)."""
    group = space.SpaceGroup(number)
    verdict = proved(group.without_translations())
    assert (verdict.growth_degree, verdict.index) == (3, group.order)


@pytest.mark.slow
@pytest.mark.parametrize("number", range(1, 231))
def test_all_space_groups(number: int) -> None:
    group = space.SpaceGroup(number)
    for presentation in (group.with_translations(), group.without_translations()):
        verdict = proved(presentation)
        assert (verdict.growth_degree, verdict.index) == (3, group.order)


SCRAMBLED = [("p4", 2, 4), ("p6m", 2, 12), ("pgg", 2, 4), ("cm", 2, 2), ("p3m1", 2, 6)]


@pytest.mark.parametrize("seed", range(6))
@pytest.mark.parametrize(("name", "degree", "index"), SCRAMBLED)
def test_scrambled_plane_groups(name: str, degree: int, index: int, seed: int) -> None:
    """The same group in another presentation: the same verdict."""
    verdict = proved(scramble.scrambled(Presentation.parse(plane.plane_group(name)), seed))
    assert (verdict.growth_degree, verdict.index) == (degree, index)


@pytest.mark.parametrize("seed", range(4))
@pytest.mark.parametrize("name", ["G2", "G3", "G6", "B4"])
def test_scrambled_flat_manifolds(name: str, seed: int) -> None:
    text, holonomy, *_ = flat.FLAT_MANIFOLDS[name]
    verdict = proved(scramble.scrambled(Presentation.parse(text), seed))
    assert (verdict.growth_degree, verdict.index) == (3, holonomy)


@pytest.mark.parametrize("seed", range(3))
def test_scrambled_nilpotent_groups(seed: int) -> None:
    for text, degree in ((nilpotent.HEISENBERG, 4), (cyclic.BURNSIDE_2_3, 0)):
        assert proved(scramble.scrambled(Presentation.parse(text), seed, moves=6)).growth_degree == degree


@pytest.mark.parametrize("name", never.NEVER)
def test_never_virtually_nilpotent(name: str) -> None:
    """No effort may end in the wrong verdict; what the search did not settle is "undecided" with what was searched."""
    verdict = hunt(Presentation.parse(never.NEVER[name]), effort=3)
    assert verdict.verdict != YES
    if verdict.verdict != NO:
        assert verdict.searched["complete_to_index"] >= 1
        assert verdict.witness is None


def test_effort_is_deterministic() -> None:
    group = Presentation.parse(plane.plane_group("p6m"))
    first, second = hunt(group, effort=4), hunt(group, effort=4)
    assert first.witness == second.witness
    assert first.searched == second.searched
