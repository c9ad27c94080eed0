"""Exact linear algebra for groups: abelianization."""

from lowindex.algebra.abelian import Abelianization, abelianization, exponent, mod_p_rank, relation_matrix

__all__ = ["Abelianization", "abelianization", "exponent", "mod_p_rank", "relation_matrix"]
