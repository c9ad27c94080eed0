"""Exact growth of groups in which the word problem is solved, and certified bounds elsewhere."""

from lowindex.growth.growth import Growth, growth
from lowindex.growth.plot import plot_balls
from lowindex.growth.spheres import balls

__all__ = ["Growth", "balls", "growth", "plot_balls"]
