"""The degree that needs the fewest unknowns on the triangles that an outline forces."""

from __future__ import annotations

from math import sqrt

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.resolution import (
    LOWEST_DEGREE,
    Resolution,
    check_affordable,
    first_resolution,
    region_sizes,
)
from membrane.records.arrays import Floats
from membrane.records.membrane import Membrane
from membrane.records.outline import Outline
from membrane.records.study import ModesWanted

MANY = 20_000
"""Unknowns up to which the first degree is kept: it is a matter of seconds, and exact to many
more digits than were asked for."""

PER_SEGMENT = 6.0
"""Triangles about each segment of a curve that is shorter than the waves ask for."""


def suited_resolution(
    kernel: Kernel, outline: Outline, membrane: Membrane, wanted: ModesWanted
) -> Resolution:
    """The first resolution to try.

    Where bends and gaps force very many triangles far smaller than the waves, as dots do, a
    lower degree is accurate enough on about the same triangles.
    Raises MeshError where the waves alone need too many.
    """
    first = first_resolution(wanted)
    sizes = region_sizes(outline, membrane, wanted, first.phase)
    check_affordable(outline, sizes, first.degree)
    if not first.degree_is_free or first.degree == LOWEST_DEGREE:
        return first
    squares = sum(r.area * (first.phase / sizes[r.name]) ** 2 for r in outline.regions)
    segments, shares = kernel.segments(outline, sizes)
    phases = first.phase * shares
    if unknowns(first, squares, segments, phases) <= MANY:
        return first
    lower = (first_resolution(wanted, p) for p in range(LOWEST_DEGREE, first.degree, 2))
    return min(first, *lower, key=lambda one: unknowns(one, squares, segments, phases))


def unknowns(resolution: Resolution, squares: float, segments: Floats, phases: Floats) -> float:
    """About how many unknowns a resolution has.

    squares : area of the head in squares of a wave length over 2 pi
    segments : how many segments bends and gaps force along each bit of the curves
    phases : their length times the wave number
    """
    by_waves = 4 / sqrt(3) * squares / resolution.phase**2
    forced = np.sum(segments[phases < 0.5 * resolution.phase])
    return float((by_waves + PER_SEGMENT * forced) * resolution.degree**2 / 2)
