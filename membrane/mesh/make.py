"""From outline to mesh: triangulate, grade the corners, open slits, curve the sides, check."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from math import inf

from membrane.errors import MeshError
from membrane.kernel import COARSE, USUAL, Kernel
from membrane.mesh.checks import check_mesh
from membrane.mesh.corners import corners
from membrane.mesh.curve import curved
from membrane.mesh.departure import departure
from membrane.mesh.depth import FAN_POWERS, NO_FANS
from membrane.mesh.grade import graded
from membrane.mesh.resolution import (
    LOWEST_DEGREE,
    Resolution,
    check_affordable,
    region_sizes,
)
from membrane.mesh.slits import opened
from membrane.mesh.waves_along import curve_sizes
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.outline import Outline
from membrane.records.study import ModesWanted

LEAST_ORDER = 8
"""Order of the geometry where the elements' degree is lower: what sides miss of their curves
widens every bracket, however little of the head they bound."""

ATTEMPTS = 6
"""How often a mesh whose curved triangles fold is tried again, each time finer."""


def make_mesh(
    kernel: Kernel,
    outline: Outline,
    membrane: Membrane,
    wanted: ModesWanted,
    resolution: Resolution,
    *,
    fans: bool = True,
) -> Mesh:
    """A valid curved mesh of the outline in the open kernel session.

    fans : whether triangles at corners may be drawn in, which the proofs do not cover

    Raises MeshError where no valid mesh is found, or only one too large to solve on.
    """
    sizes = region_sizes(outline, membrane, wanted, resolution.phase)
    along = curve_sizes(outline, membrane, wanted, resolution.phase)
    check_affordable(outline, sizes, resolution.degree)
    for attempt in range(ATTEMPTS):
        finer = {name: size * 0.7**attempt for name, size in sizes.items()}
        try:
            return _attempt(kernel, outline, membrane, finer, along, resolution, fans)
        except MeshError as failure:
            last = failure
    raise MeshError(
        f"no valid mesh of the outline was found ({last}); "
        "move apart or leave out shapes that all but touch."
    )


def _attempt(
    kernel: Kernel,
    outline: Outline,
    membrane: Membrane,
    sizes: Mapping[str, float],
    along: Mapping[int, float],
    resolution: Resolution,
    fans: bool,
) -> Mesh:
    # the lowest degree is for very many small shapes, each exact enough with fewer segments
    bend = COARSE if resolution.degree == LOWEST_DEGREE else USUAL
    raw = kernel.triangulate(outline, sizes, bend, along)
    found = corners(kernel, outline, membrane, raw)
    powers = FAN_POWERS if fans else NO_FANS
    raw, drawn_in = graded(kernel, raw, found, resolution.tolerance, resolution.degree, powers)
    raw = opened(raw, [curve.tag for curve in outline.curves if curve.lips])
    mesh = curved(kernel, outline, raw, max(resolution.degree, LEAST_ORDER), drawn_in)
    check_mesh(mesh, outline, drawn_in)
    return replace(mesh, departure=inf if drawn_in else departure(kernel, raw, mesh))
