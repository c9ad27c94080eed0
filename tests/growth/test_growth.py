"""Exact growth against published series."""

from __future__ import annotations

from itertools import pairwise
from pathlib import Path

import pytest
from corpus import coxeter, cyclic, flat, plane
from sympy import Poly, fraction, symbols, together

from lowindex.budget import Budget
from lowindex.cli.main import main
from lowindex.decision import hunt
from lowindex.growth import Growth, growth
from lowindex.words import Presentation

Z = symbols("z")


def grown(text: str, radius: int, *, effort: int = 4, use_witness: bool = True) -> Growth:
    group = Presentation.parse(text)
    witness = hunt(group, effort=effort).witness if use_witness else None
    return growth(group, radius, witness=None if witness is None else witness.content, budget=Budget(20_000_000))


def coefficients(expression: object, count: int) -> tuple[int, ...]:
    """Of a rational function in z, from sympy."""
    above, below = (Poly(part, Z).all_coeffs()[::-1] for part in fraction(together(expression)))
    found: list[int] = []
    for n in range(count):
        rest = (above[n] if n < len(above) else 0) - sum(below[k] * found[n - k] for k in range(1, min(n, len(below) - 1) + 1))
        found.append(int(rest / below[0]))
    return tuple(found)


# text: (sphere sizes from radius 0, growth degree; source)
EXACT = {
    "⟨a, b | [a,b]⟩": ([1, 4, 8, 12, 16, 20, 24], 2),
    "⟨a, b, c | [a,b], [a,c], [b,c]⟩": ([1, 6, 18, 38, 66, 102, 146], 3),
    # OEIS A063810 (seen in print)
    "⟨a, b | [a,b,a], [a,b,b]⟩": ([1, 4, 12, 36, 82, 164, 294, 476, 724, 1052, 1464, 1972, 2590, 3324, 4186], 4),
    "⟨a, b, c | [a,b] = c, [a,c], [b,c]⟩": ([1, 6, 22, 54, 106, 190, 318, 502, 754, 1086], 4),
    "⟨x, y, t | [x,y], t x t^-1 = y, t y t^-1 = x^-1⟩": ([1, 6, 18, 38, 66, 102], 3),
    "⟨x, y, t | [x,y], t x t^-1 = y, t y t^-1 = x^-1 y^-1⟩": ([1, 6, 22, 50, 90, 144, 210], 3),
}


@pytest.mark.parametrize("text", EXACT)
def test_spheres(text: str) -> None:
    sizes, degree = EXACT[text]
    found = grown(text, len(sizes) - 1)
    assert (list(found.spheres), found.degree, found.kind) == (sizes, degree, "polynomial")


def test_heisenberg_series() -> None:
    """The rational function of OEIS A063810, to radius 24; printed as a fit, not as a theorem."""
    found = grown("⟨a, b | [a,b,a], [a,b,b]⟩", 24)
    numerator = 1 + Z + 4 * Z**2 + 11 * Z**3 + 8 * Z**4 + 21 * Z**5 + 6 * Z**6 + 9 * Z**7 + Z**8
    expected = numerator / ((1 - Z) ** 4 * (1 + Z + Z**2) * (1 + Z**2))
    assert found.spheres == coefficients(expected, 25)
    assert found.series is not None
    assert not found.series_proved
    fitted = sum(c * Z**k for k, c in enumerate(found.series[0])) / sum(c * Z**k for k, c in enumerate(found.series[1]))
    assert (fitted - expected).simplify() == 0


# name: sphere sizes for the generators of the corpus (OEIS sequences and sources as in the published tables of coordination sequences)
PLANE = {
    **dict.fromkeys(("p1", "pm", "pg", "pmm", "pgg"), (1, 4, 8, 12, 16, 20)),
    **dict.fromkeys(("p2", "cm", "pmg", "p3m1"), (1, 3, 6, 9, 12, 15)),
    **dict.fromkeys(("cmm", "p4", "p4m", "p4g"), (1, 3, 5, 8, 11, 13, 16, 19, 21, 24, 27)),  # A008576
    **dict.fromkeys(("p31m", "p6"), (1, 3, 4, 6, 8, 12, 14, 15, 18, 21, 22, 24, 28, 30, 30)),  # A250122
    "p3": [1, 4, 8, 14, 18, 22, 28, 30, 38, 38, 48, 46, 58, 54, 68],  # A008579
    "p6m": [1, 3, 5, 7, 9, 12, 15, 17, 19, 21, 24, 27, 29, 31, 33],  # A072154
}


@pytest.mark.parametrize("name", PLANE)
def test_plane_groups(name: str) -> None:
    """R. I. Grigorchuk, C. Kravaris arXiv:2012.13661; A. V. Shutov 2003 (seen in print, computed)."""
    sizes = PLANE[name]
    assert grown(plane.plane_group(name), len(sizes) - 1).spheres == tuple(sizes)


def _finite_polynomial(degrees: list[int]) -> object:
    total = 1
    for d in degrees:
        total *= sum(Z**k for k in range(d))
    return total


# name: degrees of the fundamental invariants (Bourbaki, Lie IV-VI, tables; common practice)
DEGREES = {"A3": [2, 3, 4], "B3": [2, 4, 6], "D4": [2, 4, 4, 6], "H3": [2, 6, 10]}


@pytest.mark.parametrize("name", DEGREES)
def test_finite_coxeter_groups(name: str) -> None:
    """The Poincare polynomial is the product of (1 - z^d) / (1 - z) over the degrees."""
    expected = Poly(_finite_polynomial(DEGREES[name]), Z).all_coeffs()[::-1]
    text = coxeter.FINITE[name]
    found = grown(text if isinstance(text, str) else text[0], 60)
    assert list(found.spheres) == [int(c) for c in expected]
    assert found.finished


@pytest.mark.parametrize(("name", "degrees"), [("A~2", [2, 3]), ("C~2", [2, 4]), ("G~2", [2, 6]), ("A~3", [2, 3, 4]), ("C~3", [2, 4, 6])])
def test_affine_coxeter_groups(name: str, degrees: list[int]) -> None:
    """R. Bott 1956: W(z) times the product of 1 / (1 - z^(d-1)) over the degrees (Bourbaki VI, section 4, ex. 10; M)."""
    expected = _finite_polynomial(degrees)
    for d in degrees:
        expected = expected / (1 - Z ** (d - 1))
    assert grown(coxeter.AFFINE[name][0], 12).spheres == coefficients(expected, 13)


def test_surface_group_by_an_automaton() -> None:
    """Genus 2: OEIS A063812, J. W. Cannon; P. de la Harpe 2000, p. 160 (seen in print)."""
    found = grown("⟨a, b, c, d | [a,b][c,d]⟩", 12)
    assert found.spheres[:8] == (1, 8, 56, 392, 2736, 19096, 133288, 930328)
    assert found.series_proved
    assert found.series == ((1, 2, 2, 2, 1), (1, -6, -6, -6, 1))
    assert found.kind == "exponential"


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("⟨a, b | ⟩", (1 + Z) / (1 - 3 * Z)),
        ("⟨a, b | a^2, b^3⟩", (1 + Z) * (1 + 2 * Z) / (1 - 2 * Z**2)),
        ("⟨a, b, c | a^2, b^2, c^2⟩", (1 + Z) / (1 - 2 * Z)),
    ],
)
def test_free_products_by_automata(text: str, expected: object) -> None:
    """1 / W(G * H) = 1 / W(G) + 1 / W(H) - 1 (P. de la Harpe, Topics in Geometric Group Theory, 2000, VI.4; M)."""
    found = grown(text, 10)
    assert found.series_proved
    assert found.spheres == coefficients(expected, 11)


def test_two_ways_agree() -> None:
    """The same spheres by collection from a witness and by an automaton, and by a regular table."""
    text = "⟨a, b | [a,b]⟩"
    assert grown(text, 12).spheres == grown(text, 12, use_witness=False).spheres
    finite = "⟨a, b | a^2, b^3, (ab)^4⟩"
    assert grown(finite, 30).spheres == grown(finite, 30, use_witness=False).spheres


def test_fibonacci_group_of_degree_four() -> None:
    """F(3,4) is virtually Heisenberg: balls grow like n^4 (hand proof in the tables of the literature)."""
    found = grown(cyclic.fibonacci(3, 4), 9)
    assert found.degree == 4
    assert all(a < b for a, b in pairwise(found.balls))


def test_flat_manifolds_have_cubic_balls() -> None:
    for name, row in flat.FLAT_MANIFOLDS.items():
        found = grown(row[0], 6)
        assert (found.degree, found.kind) == (3, "polynomial"), name


def test_bounds_where_the_word_problem_is_not_solved() -> None:
    found = grown("⟨a, b | [a b^-1, a^-1 b a], [a b^-1, a^-2 b a^2]⟩", 5, effort=2)
    assert found.kind == "unknown"
    assert len(found.lower) == len(found.upper) == 6
    assert all(a <= b for a, b in zip(found.lower, found.upper, strict=True))


@pytest.mark.parametrize("ending", ["png", "svg", "pdf"])
def test_plots(ending: str, tmp_path: Path) -> None:
    path = tmp_path / f"balls.{ending}"
    assert main(["growth", "⟨a, b | [a,b]⟩", "--radius", "9", "--plot", str(path)]) == 0
    assert path.read_bytes()[:5] in (b"\x89PNG\r", b"<?xml", b"%PDF-")


def test_command(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["growth", "⟨a, b | [a,b]⟩", "--radius", "5"]) == 0
    assert "polynomial of degree 2" in capsys.readouterr().out
    assert main(["growth", "⟨ | ⟩", "--radius", "5", "--json"]) == 0
    assert main(["growth", "⟨a | ⟩", "--radius", "-1"]) == 2
