"""Lanes and efforts as data.

Effort e stands for 40,000 * 4^(e-1) units of work in all (a unit is about one to three microseconds), so it decides how far each lane
goes, deterministically. Every stage names a lane, its share of the work in percent, and how far it goes at most.
"""

from __future__ import annotations

from dataclasses import dataclass

from lowindex.errors import InputError

EFFORTS = range(1, 10)


@dataclass(frozen=True)
class Stage:
    """`lane`: "finite", "descent", "covers" or "breadth". `share`: percent of the work of the whole hunt. `reach`: cosets (finite), index
    of the subgroup reached (descent), index searched (covers, breadth)."""

    lane: str
    share: int
    reach: int


@dataclass(frozen=True)
class Plan:
    """What one effort does: stages in order, and the class up to which nilpotent quotients are computed."""

    effort: int
    work: int
    max_class: int
    stages: tuple[Stage, ...]

    @property
    def cosets(self) -> int:
        """Cosets that an enumeration may define at most."""
        return max(stage.reach for stage in self.stages if stage.lane == "finite")


def plan_for(effort: int) -> Plan:
    """The plan of an effort 1..9; InputError for another number."""
    if effort not in EFFORTS:
        raise InputError(f"effort must be a number from 1 to 9, not {effort}")
    cosets = min(20_000_000, 4**effort * 600)
    return Plan(
        effort=effort,
        work=40_000 * 4 ** (effort - 1),
        max_class=5 + effort,
        stages=(
            Stage("finite", 10, min(cosets, 3000)),
            Stage("descent", 45, min(20_000, 200 * 2**effort)),
            Stage("covers", 15, 6 + 4 * effort),
            Stage("finite", 15, cosets),
            Stage("breadth", 15, 6 + 4 * effort),
        ),
    )
