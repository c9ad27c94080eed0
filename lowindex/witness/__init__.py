"""Witnesses: what the checker reads, made from results."""

from lowindex.witness.assemble import not_virtually_nilpotent, virtually_nilpotent
from lowindex.witness.writer import Witness

__all__ = ["Witness", "not_virtually_nilpotent", "virtually_nilpotent"]
