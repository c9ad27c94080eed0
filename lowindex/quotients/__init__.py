"""Finite quotients."""

from lowindex.quotients.characters import twisted_characters
from lowindex.quotients.counting import count_homomorphisms
from lowindex.quotients.cut import Cut
from lowindex.quotients.filters import cycle_type, cycles, has_types, is_even, is_primitive, value, wanted_types
from lowindex.quotients.homomorphisms import Homomorphism, homomorphisms
from lowindex.quotients.images import Image, describe_image
from lowindex.quotients.induced import induced_cuts
from lowindex.quotients.layers import elementary_table, layer_cuts
from lowindex.quotients.normal import LARGEST_BOUND as LARGEST_NORMAL_INDEX
from lowindex.quotients.normal import NormalSubgroups
from lowindex.quotients.onto import HomomorphismClass, HomomorphismSearch, OntoCounts, count_onto, kernel_tables
from lowindex.quotients.permutations import permutation_cut
from lowindex.quotients.targets import target_order

__all__ = [
    "LARGEST_NORMAL_INDEX",
    "Cut",
    "Homomorphism",
    "HomomorphismClass",
    "HomomorphismSearch",
    "Image",
    "NormalSubgroups",
    "OntoCounts",
    "count_homomorphisms",
    "count_onto",
    "cycle_type",
    "cycles",
    "describe_image",
    "elementary_table",
    "has_types",
    "homomorphisms",
    "induced_cuts",
    "is_even",
    "is_primitive",
    "kernel_tables",
    "layer_cuts",
    "permutation_cut",
    "target_order",
    "twisted_characters",
    "value",
    "wanted_types",
]
