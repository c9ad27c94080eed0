"""Obstructions to virtual nilpotence: what is found is proposed to the checker."""

from lowindex.obstructions.affine import AffineObstruction, affine_obstructions, is_cyclotomic
from lowindex.obstructions.alexander import alexander_polynomial
from lowindex.obstructions.pro_p import ProPObstruction, pro_p_obstruction
from lowindex.obstructions.small_cancellation import SmallCancellation

Obstruction = AffineObstruction | ProPObstruction | SmallCancellation

__all__ = [
    "AffineObstruction",
    "Obstruction",
    "ProPObstruction",
    "SmallCancellation",
    "affine_obstructions",
    "alexander_polynomial",
    "is_cyclotomic",
    "pro_p_obstruction",
]
