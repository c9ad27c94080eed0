"""The hunt for a verdict."""

from lowindex.decision.decide import hunt
from lowindex.decision.plan import Plan, Stage, plan_for
from lowindex.decision.verdict import NO, UNDECIDED, YES, Verdict

__all__ = ["NO", "UNDECIDED", "YES", "Plan", "Stage", "Verdict", "hunt", "plan_for"]
