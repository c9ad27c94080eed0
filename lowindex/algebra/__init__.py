"""Exact linear algebra for groups: abelianization, free differential calculus."""

from lowindex.algebra.abelian import Abelianization, abelianization, exponent, mod_p_rank, relation_matrix
from lowindex.algebra.fox import jacobian_mod

__all__ = ["Abelianization", "abelianization", "exponent", "jacobian_mod", "mod_p_rank", "relation_matrix"]
