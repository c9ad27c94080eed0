"""The claim "not virtually nilpotent": a subgroup H of finite index carries an obstruction (FORMAT.md)."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from .affine import check_affine
from .pro_p import check_pro_p
from .refused import require
from .small_cancellation import check_small_cancellation
from .table import Table

KEYS = ("obstruction",)

OBSTRUCTIONS: dict[str, Callable[[Any, Table], None]] = {
    "affine": check_affine,
    "pro-p": check_pro_p,
    "small cancellation": check_small_cancellation,
}


def check(value: dict[str, Any], table: Table) -> dict[str, Any]:
    """Check the obstruction; the summary that the witness must carry."""
    obstruction = value["obstruction"]
    kind = obstruction.get("kind") if type(obstruction) is dict else None
    require(type(kind) is str and kind in OBSTRUCTIONS, f"obstruction: unknown kind {str(kind)[:40]!r}")
    OBSTRUCTIONS[str(kind)](obstruction, table)
    return {"index": table.index}
