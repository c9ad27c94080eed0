"""Finite quotients."""

from lowindex.quotients.characters import twisted_characters
from lowindex.quotients.counting import count_homomorphisms
from lowindex.quotients.cut import Cut
from lowindex.quotients.homomorphisms import Homomorphism, homomorphisms
from lowindex.quotients.induced import induced_cuts
from lowindex.quotients.layers import elementary_table, layer_cuts
from lowindex.quotients.permutations import permutation_cut

__all__ = [
    "Cut",
    "Homomorphism",
    "count_homomorphisms",
    "elementary_table",
    "homomorphisms",
    "induced_cuts",
    "layer_cuts",
    "permutation_cut",
    "twisted_characters",
]
