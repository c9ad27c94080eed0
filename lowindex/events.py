"""What a run reports while it goes on: frozen records handed to the caller's `listen`."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TypeAlias


@dataclass(frozen=True)
class Event:
    """One report. `stage`: the lane ("descent", "breadth", ...); `text`: a line for people; `index`: of the subgroup in hand, or 0."""

    stage: str
    text: str
    index: int = 0


Listener: TypeAlias = Callable[[Event], None]


def silent(event: Event) -> None:
    """The listener that hears nothing; the default everywhere."""
