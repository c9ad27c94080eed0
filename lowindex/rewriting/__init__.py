"""Rewriting with a log: derivations, Tietze moves, Knuth-Bendix completion."""

from lowindex.rewriting.abbreviate import abbreviate
from lowindex.rewriting.completion import Completion
from lowindex.rewriting.derivation import Derivation, Factor, Lemma, Proof
from lowindex.rewriting.order import Order, RecursivePath, Shortlex, WeightedShortlex
from lowindex.rewriting.relators import RelatorSet, Unfinished, solved, substituted
from lowindex.rewriting.rules import Rule, RuleSet
from lowindex.rewriting.simplify import eliminate_short, propagate, simplify
from lowindex.rewriting.strings import encoded, letter_of

__all__ = [
    "Completion",
    "Derivation",
    "Factor",
    "Lemma",
    "Order",
    "Proof",
    "RecursivePath",
    "RelatorSet",
    "Rule",
    "RuleSet",
    "Shortlex",
    "Unfinished",
    "WeightedShortlex",
    "abbreviate",
    "eliminate_short",
    "encoded",
    "letter_of",
    "propagate",
    "simplify",
    "solved",
    "substituted",
]
