"""A picture of growth: balls against the radius, once with both axes logarithmic and once with one (matplotlib, the extra "plots")."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from lowindex.errors import InputError


def plot_balls(balls: Sequence[int], title: str, path: str) -> None:
    """Write a picture of ball sizes; the ending of the path says which kind. InputError without matplotlib or when the file cannot be
    written."""
    try:
        from matplotlib.figure import Figure
    except ImportError:
        raise InputError("a plot needs matplotlib, which is not installed; install it with: pip install 'lowindex[plots]'") from None
    figure: Any = Figure(figsize=(9, 4), layout="constrained")
    left, right = figure.subplots(1, 2)
    radii = range(len(balls))
    left.loglog(radii[1:], balls[1:], "o-", markersize=3)
    left.set_title("log-log: straight when polynomial")
    right.semilogy(radii, balls, "o-", markersize=3)
    right.set_title("semi-log: straight when exponential")
    for axes in (left, right):
        axes.set_xlabel("radius")
        axes.set_ylabel("elements in the ball")
        axes.grid(True, alpha=0.3)
    figure.suptitle(title if len(title) <= 100 else title[:99] + "…")
    try:
        figure.savefig(path)
    except (OSError, ValueError) as error:
        raise InputError(f"the plot cannot be written to {path!r}: {error}; name another path ending in .png, .svg or .pdf") from None
