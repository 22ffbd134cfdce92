"""Modes followed along a sweep, through crossings and clusters."""

from membrane.branches.follow import Followed, Lost, follow, follow_grid
from membrane.branches.shapes import Shapes

__all__ = ["Followed", "Lost", "Shapes", "follow", "follow_grid"]
