"""The hunt for a verdict."""

from lowindex.hunt.decide import hunt
from lowindex.hunt.plan import Plan, Stage, plan_for
from lowindex.hunt.verdict import NO, UNDECIDED, YES, Verdict

__all__ = ["NO", "UNDECIDED", "YES", "Plan", "Stage", "Verdict", "hunt", "plan_for"]
