"""lowindex: does a finitely presented group have a nilpotent subgroup of finite index? A verdict, and a witness that can be checked.

Names are loaded when they are first used, so that importing the package stays quick.
"""

from __future__ import annotations

from importlib import import_module
from typing import Any

__version__ = "0.1.0"

_ROOMS = {
    "Presentation": "words",
    "parse_file": "words",
    "Budget": "budget",
    "CosetTable": "cosets",
    "enumerate_cosets": "cosets",
    "subgroup_presentation": "cosets",
    "Conditions": "search",
    "SubgroupSearch": "search",
    "subgroups": "search",
    "count_classes": "search",
    "homomorphisms": "quotients",
    "count_onto": "quotients",
    "NormalSubgroups": "quotients",
    "Verdict": "decision",
    "hunt": "decision",
    "decide_word": "decision",
    "compare": "decision",
    "Witness": "witness",
    "check": "checker",
}

__all__ = sorted([*_ROOMS, "__version__"])


def __getattr__(name: str) -> Any:
    if name in _ROOMS:
        value = getattr(import_module(f"lowindex.{_ROOMS[name]}"), name)
        globals()[name] = value
        return value
    raise AttributeError(f"module 'lowindex' has no attribute {name!r}")
