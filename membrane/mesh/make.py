"""From outline to mesh: triangulate, grade the corners, open slits, curve the sides, check."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from membrane.errors import MeshError
from membrane.kernel import COARSE, USUAL, Kernel
from membrane.mesh.checks import check_mesh
from membrane.mesh.corners import corners
from membrane.mesh.curve import curved
from membrane.mesh.departure import departure
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

ATTEMPTS = 6
"""How often a mesh whose curved triangles fold is tried again, each time finer."""


def make_mesh(
    kernel: Kernel,
    outline: Outline,
    membrane: Membrane,
    wanted: ModesWanted,
    resolution: Resolution,
) -> Mesh:
    """A valid curved mesh of the outline in the open kernel session.

    Raises MeshError where no valid mesh is found, or only one too large to solve on.
    """
    sizes = region_sizes(outline, membrane, wanted, resolution.phase)
    along = curve_sizes(outline, membrane, wanted, resolution.phase)
    check_affordable(outline, sizes, resolution.degree)
    for attempt in range(ATTEMPTS):
        finer = {name: size * 0.7**attempt for name, size in sizes.items()}
        try:
            return _attempt(kernel, outline, membrane, finer, along, resolution)
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
) -> Mesh:
    # the lowest degree is for very many small shapes, each exact enough with fewer segments
    bend = COARSE if resolution.degree == LOWEST_DEGREE else USUAL
    raw = kernel.triangulate(outline, sizes, bend, along)
    found = corners(kernel, outline, membrane, raw)
    raw = graded(kernel, raw, found, resolution.tolerance, resolution.degree)
    raw = opened(raw, [curve.tag for curve in outline.curves if curve.lips])
    mesh = curved(kernel, outline, raw, resolution.degree)
    check_mesh(mesh, outline)
    return replace(mesh, departure=departure(kernel, raw, mesh))
