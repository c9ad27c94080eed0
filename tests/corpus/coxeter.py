"""Coxeter groups. Orders of finite ones: J. E. Humphreys, Reflection Groups and Coxeter Groups (1990); Bourbaki. Affine ones: virtually Z^rank,
the translations have the order of the finite Weyl group as index (Bourbaki VI 4; M, C for rank 2)."""

from math import factorial

Edges = dict[tuple[int, int], int]


def coxeter(rank: int, edges: Edges) -> str:
    """The Coxeter group with these labels (2 where none is given, 0: no relation), as text."""
    names = "abcdefgh"[:rank]
    relators = [f"{x}^2" for x in names]
    for i in range(rank):
        for j in range(i + 1, rank):
            m = edges.get((i, j), 2)
            if m:
                relators.append(f"({names[i]}{names[j]})^{m}")
    return f"⟨{', '.join(names)} | {', '.join(relators)}⟩"


def path(*labels: int) -> Edges:
    """A path with these labels."""
    return {(i, i + 1): m for i, m in enumerate(labels)}


# name: (presentation, order)
FINITE = {
    "A3": (coxeter(3, path(3, 3)), factorial(4)),
    "A4": (coxeter(4, path(3, 3, 3)), factorial(5)),
    "A5": (coxeter(5, path(3, 3, 3, 3)), factorial(6)),
    "B3": (coxeter(3, path(4, 3)), 8 * factorial(3)),
    "B4": (coxeter(4, path(4, 3, 3)), 16 * factorial(4)),
    "D4": (coxeter(4, {(0, 2): 3, (1, 2): 3, (2, 3): 3}), 8 * factorial(4)),
    "H3": (coxeter(3, path(5, 3)), 120),
    "F4": (coxeter(4, path(3, 4, 3)), 1152),
    "I2(7)": (coxeter(2, path(7)), 14),
}
FINITE_SLOW = {
    "A6": (coxeter(6, path(3, 3, 3, 3, 3)), factorial(7)),
    "B5": (coxeter(5, path(4, 3, 3, 3)), 32 * factorial(5)),
    "D5": (coxeter(5, {(0, 2): 3, (1, 2): 3, (2, 3): 3, (3, 4): 3}), 16 * factorial(5)),
    "H4": (coxeter(4, path(5, 3, 3)), 14400),
}

# name: (presentation, rank, order of the finite Weyl group)
AFFINE = {
    "A~1": (coxeter(2, {(0, 1): 0}), 1, 2),
    "A~2": (coxeter(3, {(0, 1): 3, (1, 2): 3, (0, 2): 3}), 2, 6),
    "A~3": (coxeter(4, {(0, 1): 3, (1, 2): 3, (2, 3): 3, (0, 3): 3}), 3, 24),
    "A~4": (coxeter(5, {(0, 1): 3, (1, 2): 3, (2, 3): 3, (3, 4): 3, (0, 4): 3}), 4, 120),
    "B~3": (coxeter(4, {(0, 2): 3, (1, 2): 3, (2, 3): 4}), 3, 48),
    "C~2": (coxeter(3, path(4, 4)), 2, 8),
    "C~3": (coxeter(4, path(4, 3, 4)), 3, 48),
    "D~4": (coxeter(5, {(0, 2): 3, (1, 2): 3, (2, 3): 3, (2, 4): 3}), 4, 192),
    "G~2": (coxeter(3, path(3, 6)), 2, 12),
}
AFFINE_SLOW = {"F~4": (coxeter(5, path(3, 4, 3, 3)), 4, 1152)}
