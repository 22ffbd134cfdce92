"""Checks that a curved mesh covers its outline once and nowhere folds."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.errors import MeshError
from membrane.mesh.corner import Fan
from membrane.records.arrays import Floats
from membrane.records.mesh import Mesh
from membrane.records.outline import Outline
from membrane.triangle import gauss, lattice, tabulated

FLATTEST = 0.02
"""Least jacobian allowed, relative to the triangle's own mean."""

ROUNDING = 1e-12
"""Rounding of a jacobian at the corner of a fan, where there is nothing left of it."""

AREA = 1e-5
"""Largest relative error allowed in the area of a region."""


def check_mesh(mesh: Mesh, outline: Outline, fans: Sequence[Fan] = ()) -> None:
    """Raise MeshError where a triangle folds, an area is wrong or a tag is missing."""
    jacobian = jacobians(mesh)
    pinch = _pinch(mesh, fans)
    mean = jacobian.mean(axis=0) / pinch.mean(axis=0)
    if np.any((jacobian - FLATTEST * np.abs(mean) * pinch).min(axis=0) < -ROUNDING * mean):
        raise MeshError("a curved triangle folds over")
    if np.any(mesh.region < 0):
        raise MeshError("a triangle belongs to no region")
    covers = np.bincount(mesh.region, _areas(mesh), len(outline.regions))
    for region, covered in zip(outline.regions, covers, strict=True):
        if abs(covered - region.area) > AREA * outline.area:
            raise MeshError(
                f'region "{region.name}" is covered by {covered:.6g} m^2, '
                f"not by its {region.area:.6g} m^2"
            )
    for name in outline.edges:
        if mesh.edges[name].shape[1] == 0:
            raise MeshError(f'edge "{name}" has no sides of triangles')
    for name in outline.lines:
        if mesh.lines[name].shape[1] == 0:
            raise MeshError(f'line load "{name}" has no sides of triangles')


def jacobians(mesh: Mesh) -> Floats:
    """|det dx/dX| at a lattice of points of every triangle, (n_points, n_triangles), m^2.

    Signed so that a triangle that does not fold has no negative value.
    """
    _, slopes = tabulated(lattice(2 * mesh.order).points, mesh.order)
    return _oriented(mesh, slopes)


def _pinch(mesh: Mesh, fans: Sequence[Fan]) -> Floats:
    """How the jacobian of a fan falls to nothing at its corner, at the points of ``jacobians``."""
    x, y = lattice(2 * mesh.order).points
    away = 1 - np.array([1 - x - y, x, y])
    pinch = np.ones((x.size, mesh.size))
    for fan in fans:
        at = (mesh.vertices == fan.place[:, None]).all(axis=0)[mesh.triangles]
        corner, triangle = np.nonzero(at)
        pinch[:, triangle] = away[corner].T ** (2 * fan.power - 2)
    return pinch


def _oriented(mesh: Mesh, slopes: Floats) -> Floats:
    (a, c), (b, d) = np.tensordot(slopes, mesh.nodes, (1, 1)).transpose(0, 2, 1, 3)
    determinant = a * d - b * c
    return np.asarray(determinant * np.sign(determinant.mean(axis=0)))


def _areas(mesh: Mesh) -> Floats:
    """(n_triangles,) by Green's theorem along the sides, exact for the curved geometry."""
    points, weights = gauss(mesh.order + 1, 0, 0)
    s = (1 + points) / 2
    loops = [np.array([s, 0 * s]), np.array([1 - s, s]), np.array([0 * s, 1 - s])]
    directions = np.array([[1.0, 0.0], [-1.0, 1.0], [0.0, -1.0]])
    total = np.zeros(mesh.size)
    for loop, direction in zip(loops, directions, strict=True):
        values, slopes = tabulated(loop, mesh.order)
        x, y = np.tensordot(values, mesh.nodes, (0, 1)).transpose(1, 0, 2)
        along = np.tensordot(direction, slopes, 1)
        dx, dy = np.tensordot(along, mesh.nodes, (0, 1)).transpose(1, 0, 2)
        total += weights / 4 @ (x * dy - y * dx)
    return np.abs(total)
