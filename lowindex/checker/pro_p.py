"""The obstruction "pro-p": H has too few relators for its number of generators modulo a prime (FORMAT.md)."""

from __future__ import annotations

from typing import Any

from .abelian import exponent_rows, rank_mod
from .parse import fields, integer
from .polynomials import is_prime
from .refused import require
from .table import Table
from .tietze import shortened

LARGEST_PRIME = 10**6


def check_pro_p(value: Any, table: Table) -> None:
    """Refuse unless d >= 2 and r - g + d < d^2 / 4 for H with g generators, r relators and H_1(H; F_p) of dimension d."""
    p = integer(fields(value, ("kind", "prime"), "obstruction")[1], "obstruction.prime", 2, LARGEST_PRIME)
    require(is_prime(p), f"obstruction.prime: {p} is not a prime")
    g, relators = shortened(table.generators, table.relators)
    r = len(relators)
    d = g - rank_mod(exponent_rows(relators), p)
    counts = f"with {g} generators, {r} relators, dimension {d} modulo {p}"
    require(d >= 2, f"the pro-p test needs dimension 2 or more: {counts}")
    require(4 * (r - g + d) < d * d, f"the pro-p test fails: {counts}")
