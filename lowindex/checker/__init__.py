"""The independent checker of witnesses: standard library only, no search. FORMAT.md says what a witness is and why acceptance proves it."""

from .refused import Refused
from .verdict import Report, check

__all__ = ["Refused", "Report", "check"]
