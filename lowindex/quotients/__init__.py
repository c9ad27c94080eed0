"""Finite quotients."""

from lowindex.quotients.characters import twisted_characters
from lowindex.quotients.cut import Cut
from lowindex.quotients.induced import induced_cuts
from lowindex.quotients.layers import elementary_table, layer_cuts
from lowindex.quotients.permutations import permutation_cut

__all__ = ["Cut", "elementary_table", "induced_cuts", "layer_cuts", "permutation_cut", "twisted_characters"]
