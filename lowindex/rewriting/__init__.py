"""Rewriting with a log: derivations, Tietze moves, Knuth-Bendix completion."""

from lowindex.rewriting.completion import Completion
from lowindex.rewriting.derivation import Derivation, Lemma, Proof
from lowindex.rewriting.order import Order, RecursivePath, Shortlex, WeightedShortlex
from lowindex.rewriting.relators import RelatorSet
from lowindex.rewriting.simplify import simplify
from lowindex.rewriting.strings import encoded

__all__ = [
    "Completion",
    "Derivation",
    "Lemma",
    "Order",
    "Proof",
    "RecursivePath",
    "RelatorSet",
    "Shortlex",
    "WeightedShortlex",
    "encoded",
    "simplify",
]
