"""Results as witnesses: canonical JSON for the checker."""

from lowindex.witness.assemble import different_groups, not_virtually_nilpotent, virtually_nilpotent, word_not_trivial, word_trivial
from lowindex.witness.writer import Witness

__all__ = ["Witness", "different_groups", "not_virtually_nilpotent", "virtually_nilpotent", "word_not_trivial", "word_trivial"]
