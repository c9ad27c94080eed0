"""The hunt for a verdict; words decided; groups compared."""

from lowindex.decision.compare import Comparison, compare
from lowindex.decision.decide import hunt
from lowindex.decision.plan import Plan, Stage, plan_for
from lowindex.decision.verdict import NO, UNDECIDED, YES, Verdict
from lowindex.decision.word import NONTRIVIAL, TRIVIAL, WordVerdict, decide_word

__all__ = [
    "NO",
    "NONTRIVIAL",
    "TRIVIAL",
    "UNDECIDED",
    "YES",
    "Comparison",
    "Plan",
    "Stage",
    "Verdict",
    "WordVerdict",
    "compare",
    "decide_word",
    "hunt",
    "plan_for",
]
