"""Nilpotent groups: collection, nilpotent quotients, proofs of nilpotence."""

from lowindex.nilpotent.chain import ChainProof, conjugate_pairs, prove_nilpotent, quotient_of, simplified_relators
from lowindex.nilpotent.collection import NilpotentPresentation, Vector
from lowindex.nilpotent.consistency import is_consistent
from lowindex.nilpotent.enumerated import finite_replay
from lowindex.nilpotent.quotient import NilpotentQuotient, nilpotent_quotient

__all__ = [
    "ChainProof",
    "NilpotentPresentation",
    "NilpotentQuotient",
    "Vector",
    "conjugate_pairs",
    "finite_replay",
    "is_consistent",
    "nilpotent_quotient",
    "prove_nilpotent",
    "quotient_of",
    "simplified_relators",
]
