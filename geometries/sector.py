"""A sector of a disc, apex at the origin; its edges are the arc and the two radii.

At 360 deg it is a slit disc, whose radii are the two lips of one slit.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from math import ceil, cos, isclose, pi, sin
from typing import Any

from membrane.records.outline import Drawing, Lips
from membrane.units import Angle, PositiveLength


@dataclass(frozen=True)
class Options:
    """The radius, and the angle from ``start`` (along +x) round to ``end``."""

    radius: PositiveLength
    angle: Angle

    def __post_init__(self) -> None:
        if not (0 < self.angle < 2 * pi or self.is_slit_disc):
            raise ValueError("the angle of a sector must lie between 0 deg and 360 deg.")

    @property
    def is_slit_disc(self) -> bool:
        """Whether start and end are one line."""
        return isclose(self.angle, 2 * pi, rel_tol=1e-9)


def edges(options: Options) -> tuple[str, ...]:
    return ("arc", "start", "end")


def build(geometry: Any, options: Options) -> Drawing:
    pieces = ceil(options.angle / (2 * pi / 3))  # the kernel draws arcs below a half circle
    angles = [options.angle * k / pieces for k in range(pieces + 1)]
    apex = geometry.add_point([0.0, 0.0])
    ends = [geometry.add_point([options.radius * cos(a), options.radius * sin(a)]) for a in angles]
    if options.is_slit_disc:
        ends[-1] = ends[0]
    arc = [geometry.add_circle_arc(a, apex, b) for a, b in pairwise(ends)]
    start = geometry.add_line(apex, ends[0])
    if options.is_slit_disc:
        surface = geometry.add_plane_surface(geometry.add_curve_loop(arc))
        return Drawing(surface, {"arc": arc}, slits=[Lips(start, left="start", right="end")])
    end = geometry.add_line(ends[-1], apex)
    surface = geometry.add_plane_surface(geometry.add_curve_loop([start, *arc, end]))
    return Drawing(surface, {"arc": arc, "start": [start], "end": [end]})
