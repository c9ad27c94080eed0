"""Exact linear algebra for groups: abelianization, free differential calculus."""

from lowindex.algebra.abelian import Abelianization, abelianization, exponent, exponent_sums, mod_p_rank, relation_matrix
from lowindex.algebra.fox import fox_terms, jacobian_mod
from lowindex.algebra.polynomials import polynomial_text

__all__ = [
    "Abelianization",
    "abelianization",
    "exponent",
    "exponent_sums",
    "fox_terms",
    "jacobian_mod",
    "mod_p_rank",
    "polynomial_text",
    "relation_matrix",
]
