"""Nilpotent and nilpotent-by-finite groups. Degrees: Bass 1972, Guivarc'h 1973 (formula L; values C)."""

from collections.abc import Sequence
from itertools import combinations, product

HEISENBERG = "⟨a, b | [a,b,a], [a,b,b]⟩"


def unitriangular(n: int) -> str:
    """UT_n(Z): degree n(n^2-1)/6, Hirsch length n(n-1)/2, class n - 1. Elementary matrices of the first diagonal generate; the relators say that
    distant ones commute, that [x_i, x_(i+1)] commutes with both, and [[x_i, x_(i+1)], [x_(i+1), x_(i+2)]] = 1."""
    x = [f"x{i}" for i in range(1, n)]
    relators = [f"[{x[i]},{x[j]}]" for i in range(n - 1) for j in range(i + 2, n - 1)]
    for i in range(n - 2):
        relators += [f"[{x[i]},{x[i + 1]},{x[i]}]", f"[{x[i]},{x[i + 1]},{x[i + 1]}]"]
    relators += [f"[[{x[i]},{x[i + 1]}],[{x[i + 1]},{x[i + 2]}]]" for i in range(n - 3)]
    return f"⟨{', '.join(x)} | {', '.join(relators)}⟩"


def free_nilpotent(rank: int, nilpotency_class: int) -> str:
    """All left-normed commutators of weight class + 1 in the generators. They are enough: modulo them the left-normed ones of weight
    class commute with every generator, and gamma_k is the normal closure of the left-normed commutators of weight k in the
    generators (P. Hall, The Edmonton notes on nilpotent groups, 1957)."""
    x = "abcdefgh"[:rank]
    commutators = [f"[{','.join(word)}]" for word in product(x, repeat=nilpotency_class + 1) if word[0] < word[1]]
    return f"⟨{', '.join(x)} | {', '.join(commutators)}⟩"


# rank, class -> growth degree; ranks of the factors by Witt's formula (C)
FREE_NILPOTENT_DEGREES = {(2, 2): 4, (2, 3): 10, (3, 2): 9}

_MATRIX = {2: ((-1, 0), (0, -1)), 3: ((0, 1), (-1, -1)), 4: ((0, 1), (-1, 0)), 6: ((0, -1), (1, 1))}


def _times(u: tuple[int, int, int], v: tuple[int, int, int]) -> tuple[int, int, int]:
    """In the Heisenberg group: (x, y, z) stands for the matrix with x, y beside the diagonal and z in the corner."""
    return u[0] + v[0], u[1] + v[1], u[2] + v[2] + u[0] * v[1]


def _power(u: tuple[int, int, int], n: int) -> tuple[int, int, int]:
    result = (0, 0, 0)
    base = u if n >= 0 else (-u[0], -u[1], u[0] * u[1] - u[2])
    for _ in range(abs(n)):
        result = _times(result, base)
    return result


def heisenberg_by(k: int) -> str:
    """Heisenberg x| C_k, k = 2, 3, 4, 6: growth degree 4, the Heisenberg group has index k. The automorphism induces a matrix of order k and
    determinant 1 on the abelianization; its central part is chosen so that the order is exactly k."""
    ((p, q), (r, s)) = _MATRIX[k]
    a, b, c = (1, 0, 0), (0, 1, 0), (0, 0, 1)

    def word(x: int, y: int, z: int) -> tuple[int, int, int]:
        return _times(_times(_power(a, x), _power(b, y)), _power(c, z))

    for m, n in product(range(-3, 4), repeat=2):
        images = word(p, q, m), word(r, s, n)

        def apply(u: tuple[int, int, int], images: Sequence[tuple[int, int, int]] = images) -> tuple[int, int, int]:
            # u = a^x b^y c^(z - x y), and c is fixed because the determinant is 1
            out = _times(_power(images[0], u[0]), _power(images[1], u[1]))
            return _times(out, _power(c, u[2] - u[0] * u[1]))

        u, v = a, b
        for _ in range(k):
            u, v = apply(u), apply(v)
        if (u, v) == (a, b):
            left, right = f"a^{p} b^{q} c^{m}", f"a^{r} b^{s} c^{n}"
            return f"⟨a, b, c, t | [a,b] = c, [a,c], [b,c], t^{k}, t^-1 a t = {left}, t^-1 b t = {right}⟩"
    raise AssertionError(f"no automorphism of order {k} in range")


def torus_bundle(matrix: Sequence[Sequence[int]]) -> str:
    """Z^n x|_A Z: t x_i t^-1 is the word of row i of A."""
    return abelian_by_abelian(matrix)


def abelian_by_abelian(*matrices: Sequence[Sequence[int]]) -> str:
    """Z^n x| Z^k for k <= 3 commuting matrices A: t x_i t^-1 is the word of row i of A."""
    size = len(matrices[0])
    names = [f"x{i + 1}" for i in range(size)]
    above = ["t", "s", "r"][: len(matrices)]
    relators = [f"[{u},{v}]" for group in (names, above) for u, v in combinations(group, 2)]
    for letter, matrix in zip(above, matrices, strict=True):
        for name, row in zip(names, matrix, strict=True):
            image = " ".join(f"{other}^{n}" for other, n in zip(names, row, strict=True) if n) or "1"
            relators.append(f"{letter} {name} {letter}^-1 = {image}")
    return f"⟨{', '.join([*names, *above])} | {', '.join(relators)}⟩"
