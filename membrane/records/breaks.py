"""Lines along which a function of place has a jump or a kink."""

from __future__ import annotations

from dataclasses import dataclass
from math import cos, hypot, sin
from typing import TypeAlias

Place = tuple[float, float]


@dataclass(frozen=True)
class Circle:
    """A circle about ``centre``, metres."""

    centre: Place
    radius: float

    def distance(self, place: Place) -> float:
        """From a place to the circle, metres."""
        x, y = place[0] - self.centre[0], place[1] - self.centre[1]
        return abs(hypot(x, y) - self.radius)


@dataclass(frozen=True)
class Straight:
    """A straight line through ``start`` at ``angle``, radians; a ray where it only begins there."""

    start: Place
    angle: float
    begins: bool = False

    def distance(self, place: Place) -> float:
        """From a place to the line, metres."""
        x, y = place[0] - self.start[0], place[1] - self.start[1]
        along = x * cos(self.angle) + y * sin(self.angle)
        behind = min(along, 0.0) if self.begins else 0.0
        return hypot(behind, y * cos(self.angle) - x * sin(self.angle))


Break: TypeAlias = Circle | Straight
