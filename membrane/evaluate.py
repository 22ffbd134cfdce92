"""Values and slopes of finite-element functions at any point of a curved mesh."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.pencil import Space
from membrane.triangle import shapes

INSIDE = 1e-9
"""How far outside its triangle, in reference coordinates, rounding may put a point."""

SETTLED = 1e-13
"""Newton's method rests where a step is below this, in reference coordinates."""


@dataclass(frozen=True)
class Located:
    """Where points lie.

    triangle : (m,), -1 where a point is not on the mesh
    reference : (2, m), coordinates in that triangle
    """

    triangle: Ints
    reference: Floats


def values_at(space: Space, vectors: Floats, points: Floats) -> Floats:
    """(n, m) values of ``vectors`` (n_dofs, n) at ``points`` (2, m); NaN off the mesh."""
    found = locate(space.mesh, points)
    phi, _ = shapes(found.reference, space.degree)
    values = np.einsum("im,imn->nm", phi, vectors[space.element_dofs[:, found.triangle]])
    return np.where(found.triangle >= 0, values, np.nan)


def gradients_at(space: Space, vectors: Floats, points: Floats) -> Floats:
    """(2, n, m) slopes of ``vectors`` (n_dofs, n) at ``points`` (2, m); NaN off the mesh."""
    found = locate(space.mesh, points)
    _, slopes = shapes(found.reference, space.degree)
    _, jacobian = _map(space.mesh, found.triangle, found.reference)
    dofs = vectors[space.element_dofs[:, found.triangle]]
    local = np.einsum("kim,imn->knm", slopes, dofs)
    gradients = np.einsum("kdm,knm->dnm", _inverse(jacobian), local)
    return np.where(found.triangle >= 0, gradients, np.nan)


def locate(mesh: Mesh, points: Floats) -> Located:
    """The triangle and the reference coordinates of each of ``points`` (2, m)."""
    point, triangle = _candidates(mesh, points)
    reference = invert(mesh, triangle, points[:, point])
    depth = np.minimum(reference.min(axis=0), 1 - reference.sum(axis=0))
    order = np.lexsort((-depth, point))
    best = order[np.unique(point[order], return_index=True)[1]]
    best = best[depth[best] >= -INSIDE]
    where = np.full(points.shape[1], -1)
    where[point[best]] = triangle[best]
    coordinates = np.full(points.shape, 1 / 3)
    coordinates[:, point[best]] = reference[:, best]
    return Located(where, coordinates)


def _candidates(mesh: Mesh, points: Floats, chunk: int = 4096) -> tuple[Ints, Ints]:
    """Pairs of point and triangle whose bounding box, a little widened, holds the point."""
    low, high = mesh.nodes.min(axis=1), mesh.nodes.max(axis=1)
    margin = 0.1 * (high - low).max(axis=0)
    low, high = low - margin, high + margin
    pairs = []
    for start in range(0, points.shape[1], chunk):
        some = points[:, start : start + chunk, None]
        inside = ((some >= low[:, None]) & (some <= high[:, None])).all(axis=0)
        point, triangle = np.nonzero(inside)
        pairs.append((point + start, triangle))
    point, triangle = (np.concatenate(side) for side in zip(*pairs, strict=True))
    return point, triangle


def invert(mesh: Mesh, triangle: Ints, points: Floats, steps: int = 25) -> Floats:
    """Newton's method for the reference coordinates; NaN-free, diverged ones lie far out."""
    reference = np.full(points.shape, 1 / 3)
    moving = np.arange(points.shape[1])
    for _ in range(steps):
        here, jacobian = _map(mesh, triangle[moving], reference[:, moving])
        step = np.einsum("kdm,dm->km", _inverse(jacobian), points[:, moving] - here)
        before = reference[:, moving]
        reference[:, moving] = np.clip(before + step, -1.0, 2.0)
        moving = moving[np.abs(reference[:, moving] - before).max(axis=0) > SETTLED]
        if moving.size == 0:
            break
    return reference


def _map(mesh: Mesh, triangle: Ints, reference: Floats) -> tuple[Floats, Floats]:
    """Positions (2, m) and jacobians dx_d/dX_k as (2, 2, m) [d, k]."""
    phi, slopes = shapes(reference, mesh.order)
    corners = mesh.nodes[:, :, triangle]
    here = np.einsum("dim,im->dm", corners, phi)
    return here, np.einsum("dim,kim->dkm", corners, slopes)


def _inverse(jacobian: Floats) -> Floats:
    """dX_k/dx_d as (2, 2, m) [k, d]; a singular jacobian gives a large finite step."""
    (a, b), (c, d) = jacobian
    determinant = a * d - b * c
    safe = np.where(np.abs(determinant) > 1e-300, determinant, 1e-300)
    return np.array([[d, -b], [-c, a]]) / safe
