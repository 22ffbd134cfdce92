"""An arc of a circle about the origin, for line loads and slits."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from math import ceil, cos, pi, sin
from typing import Any

from membrane.records.outline import Drawing
from membrane.units import Angle, PositiveLength

OPEN = True


@dataclass(frozen=True)
class Options:
    """The radius, and the angles from +x between which the arc runs counter-clockwise."""

    radius: PositiveLength
    start: Angle
    end: Angle

    def __post_init__(self) -> None:
        if not 0.0 < self.end - self.start < 2 * pi * (1 - 1e-9):
            raise ValueError("the arc must end between 0 and 360 deg after its start.")


def edges(options: Options) -> tuple[str, ...]:
    return ("line",)


def build(geometry: Any, options: Options) -> Drawing:
    turn = options.end - options.start
    pieces = ceil(turn / (2 * pi / 3))  # the kernel draws arcs below a half circle
    angles = [options.start + turn * k / pieces for k in range(pieces + 1)]
    centre = geometry.add_point([0.0, 0.0])
    ends = [geometry.add_point([options.radius * cos(a), options.radius * sin(a)]) for a in angles]
    arc = [geometry.add_circle_arc(a, centre, b) for a, b in pairwise(ends)]
    return Drawing(None, {"line": arc})
