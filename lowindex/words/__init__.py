"""Words, presentations and their textbook notation."""

from lowindex.words.expressions import Expression, Value
from lowindex.words.family import Family, Member, parse_values
from lowindex.words.presentation import Presentation, parse_file
from lowindex.words.word import (
    Word,
    commutator,
    conjugate,
    cyclic_form,
    cyclically_reduced,
    inverse,
    power,
    primitive_root,
    product,
    reduced,
)

__all__ = [
    "Expression",
    "Family",
    "Member",
    "Presentation",
    "Value",
    "Word",
    "commutator",
    "conjugate",
    "cyclic_form",
    "cyclically_reduced",
    "inverse",
    "parse_file",
    "parse_values",
    "power",
    "primitive_root",
    "product",
    "reduced",
]
