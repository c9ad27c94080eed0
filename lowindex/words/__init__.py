"""Words, presentations and their textbook notation."""

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
    "Presentation",
    "Word",
    "commutator",
    "conjugate",
    "cyclic_form",
    "cyclically_reduced",
    "inverse",
    "parse_file",
    "power",
    "primitive_root",
    "product",
    "reduced",
]
