"""Cyclically presented groups and other families with known members."""


def _cyclic(n: int, relator: str) -> str:
    """n generators; in the relator x<k> stands for x_(i+k), indices modulo n."""
    names = [f"x{i}" for i in range(n)]
    relators = []
    for i in range(n):
        parts = [names[(i + int(token[1:])) % n] if token.startswith("x") else token for token in relator.split()]
        relators.append(" ".join(parts))
    return f"⟨{', '.join(names)} | {', '.join(relators)}⟩"


def fibonacci(r: int, n: int) -> str:
    """F(r, n): x_i x_(i+1) ... x_(i+r-1) = x_(i+r)."""
    return _cyclic(n, " ".join(f"x{k}" for k in range(r)) + f" = x{r}")


def sieradski(n: int) -> str:
    """S(n): x_i x_(i+2) = x_(i+1)."""
    return _cyclic(n, "x0 x2 = x1")


# Orders: R. M. Thomas, Bull. LMS 21 (1989) 463-465 (L), and C; F(3, n): D. L. Johnson, J. W. Wamsley, D. Wright 1974 (M), C.
FIBONACCI_ORDERS = {(2, 3): 8, (2, 4): 5, (2, 5): 11, (2, 7): 29, (3, 2): 8, (3, 3): 2, (3, 5): 22, (3, 6): 1512}

# S(2..5): C
SIERADSKI_ORDERS = {2: 3, 3: 8, 4: 24, 5: 120}


def two_three_seven(k: int) -> str:
    """(2, 3, 7; k)."""
    return f"⟨a, b | a^2, b^3, (ab)^7, [a,b]^{k}⟩"


# H. S. M. Coxeter, Trans. AMS 45 (1939) 73-150 (M), C
TWO_THREE_SEVEN_ORDERS = {4: 168, 5: 1, 6: 1092, 7: 1092}
TWO_THREE_SEVEN_SLOW = {8: 10752}

BURNSIDE_2_3 = "⟨a, b | a^3, b^3, (ab)^3, (a^-1b)^3⟩"  # order 27, OEIS A051576 (L)
