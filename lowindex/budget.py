"""Budget: how much a search may still do.

Work is counted in units that depend only on the input (about a microsecond of compiled code each), so the same
version gives the same answer on every machine. Seconds are an optional cap on top. Running out is a result: engines
look at `exhausted` between slices and return what they have.
"""

from __future__ import annotations

import math
import time


class Budget:
    """A purse of work units with an optional deadline.

    `work`: units (None: no limit). `seconds`: wall-clock cap (None: no limit).
    A purse made by `part` charges its parent too and obeys the parent's deadline.

    >>> purse = Budget(100)
    >>> lane = purse.part(30)
    >>> lane.spend(40)
    >>> lane.exhausted, purse.left
    (True, 60)
    """

    def __init__(self, work: int | None = None, *, seconds: float | None = None) -> None:
        self.limit: float = math.inf if work is None else work
        self.spent = 0
        self.deadline: float = math.inf if seconds is None else time.monotonic() + seconds
        self._parent: Budget | None = None

    def part(self, work: int, *, seconds: float | None = None) -> Budget:
        """A purse of at most `work` units out of this one, with a deadline no later than this one's."""
        child = Budget(work, seconds=seconds)
        child.deadline = min(child.deadline, self.deadline)
        child._parent = self
        return child

    def spend(self, units: int) -> None:
        """Charge `units` of work here and in every purse above."""
        self.spent += units
        if self._parent is not None:
            self._parent.spend(units)

    @property
    def left(self) -> int:
        """Units left, 0 when over; a purse without limit reports 2**62."""
        own = self.limit - self.spent
        if self._parent is not None:
            own = min(own, self._parent.left)
        return int(max(0, min(own, 2**62)))

    @property
    def out_of_time(self) -> bool:
        """Whether the deadline has passed."""
        return self.deadline < math.inf and time.monotonic() > self.deadline

    @property
    def exhausted(self) -> bool:
        """Whether work or time has run out."""
        return self.left == 0 or self.out_of_time
