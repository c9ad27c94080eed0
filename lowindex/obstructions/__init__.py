"""Obstructions to virtual nilpotence."""

from lowindex.obstructions.affine import AffineObstruction, affine_obstruction, alexander_polynomial, is_cyclotomic
from lowindex.obstructions.pro_p import pro_p_prime

__all__ = ["AffineObstruction", "affine_obstruction", "alexander_polynomial", "is_cyclotomic", "pro_p_prime"]
