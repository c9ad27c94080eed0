"""Words, presentations and their textbook notation."""

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
    "Word",
    "commutator",
    "conjugate",
    "cyclic_form",
    "cyclically_reduced",
    "inverse",
    "power",
    "primitive_root",
    "product",
    "reduced",
]
