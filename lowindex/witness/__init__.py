"""Witnesses: what the checker reads, made from results."""

from lowindex.witness.assemble import virtually_nilpotent
from lowindex.witness.writer import Witness

__all__ = ["Witness", "virtually_nilpotent"]
