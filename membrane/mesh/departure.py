"""How far the curved mesh departs from the true outline, as the stretch of a map between them."""

from __future__ import annotations

import numpy as np
from numpy.polynomial.chebyshev import chebder, chebval, chebvander

from membrane.kernel import Kernel
from membrane.mesh.curve import from_chord, segment_sides
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.raw_mesh import RawMesh
from membrane.triangle import lattice, lobatto, tabulated

SAMPLES = 8
"""Points for each degree of a polynomial; between them it rises by less than 2 percent."""

ROUNDING = 1e-15
"""Departure, relative to the vertices' coordinates, that is the rounding of the curve's points."""

SAFETY = 2.0
"""For that rise, and for the map's steepness, which is looked at on a lattice."""


def departure(kernel: Kernel, raw: RawMesh, mesh: Mesh) -> Floats:
    """(n_triangles,): the stretch or shrinkage, less 1, of a map from the mesh onto the outline.

    A side departs from its curve by E(s), which is 0 at its ends. The map moves a point of the
    triangles beside it by l_a l_b q(s), q = E/(s (1 - s)), s = (1 + l_b - l_a)/2, with the
    derivative |q| |grad (l_a l_b)| + l_a l_b |q'| |grad s| at most; on the reference triangle
    the slopes are at most sqrt(2) and sqrt(5)/2, and l_a l_b <= 1/4.

    E is followed by a polynomial of twice the geometry's degree and more, which it is or, for
    arcs of circles and ellipses, is to rounding; then between that many Chebyshev points it
    cannot rise much: H. Ehlich & K. Zeller, Math. Z. 86 (1964) 41 (from memory).
    """
    if mesh.order == 1:
        return np.zeros(mesh.size)
    segment, triangle, _ = segment_sides(raw, mesh.triangles)
    q, slope = _steepest(kernel, raw, mesh.order)
    stretch = (np.sqrt(2) * q + np.sqrt(5) / 8 * slope)[segment]
    together = np.bincount(triangle, stretch, mesh.size)
    return np.asarray(SAFETY * together * _steepness(mesh))


def _steepest(kernel: Kernel, raw: RawMesh, order: int) -> tuple[Floats, Floats]:
    """The largest |q| and |q'| (n_segments,) along each segment, metres."""
    count = 2 * order + 2
    z = np.cos(np.pi * (np.arange(count) + 0.5) / count)
    dense = np.cos(np.pi * (np.arange(SAMPLES * count) + 0.5) / (SAMPLES * count))
    to_series = np.linalg.inv(chebvander(z, count - 1))
    q, slope = np.zeros((2, raw.segments.shape[1]))
    for curve in np.unique(raw.segment_curve):
        on = np.nonzero(raw.segment_curve == curve)[0]
        error = _missed(kernel, raw, int(curve), on, order, (1 + z) / 2)
        series = np.tensordot(to_series, error, axes=(1, 1))  # (n, 2, n_segments)
        for found, each in ((q, series), (slope, 2 * chebder(series))):
            found[on] = np.hypot(*chebval(dense, each)).max(axis=-1)
    return q, slope


def _missed(kernel: Kernel, raw: RawMesh, curve: int, on: Ints, order: int, s: Floats) -> Floats:
    """(2, n_s, n): E/(s (1 - s)), what the sides of a mesh miss of their curve at ``s``."""
    nodes = lobatto(order)
    parameters, ends = raw.segment_parameters[:, on], raw.vertices[:, raw.segments[:, on]]
    both = from_chord(kernel, curve, parameters, ends, np.concatenate([nodes, s])[None])
    # the outline goes through the vertices, whatever the kernel leaves between its curves
    start, stop = both[:, [0]], both[:, [order]]
    all_s = np.concatenate([nodes, s])[None, :, None]
    both = both - (1 - all_s) * start - all_s * stop
    fit = np.linalg.solve(chebvander(2 * nodes - 1, order).T, chebvander(2 * s - 1, order).T).T
    at_nodes, exact = both[:, : order + 1], both[:, order + 1 :]
    missed = exact - np.einsum("sn,dnm->dsm", fit, at_nodes)
    missed[:, :, np.abs(missed).max(axis=(0, 1)) < ROUNDING * np.abs(ends).max()] = 0.0
    return np.asarray(missed / (s * (1 - s))[:, None])


def _steepness(mesh: Mesh) -> Floats:
    """(n_triangles,), per metre: the largest |dX/dx| on a lattice of each triangle."""
    _, slopes = tabulated(lattice(mesh.order).points, mesh.order)
    (a, b), (c, d) = np.einsum("dit,kin->dktn", mesh.nodes, slopes, optimize=True)
    squares, determinant = a**2 + b**2 + c**2 + d**2, np.abs(a * d - b * c)
    least = squares - np.sqrt(np.maximum(squares**2 - 4 * determinant**2, 0.0))
    return np.asarray((1 / np.sqrt(least / 2)).max(axis=1))
