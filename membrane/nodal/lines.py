"""Nodal lines: crossings of a mode's sign joined into polylines on the curved head."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.nodal.closer import look_closer, need_closer_look
from membrane.nodal.crossings import Signs, find_crossings
from membrane.nodal.edges import MeshEdges
from membrane.nodal.join import chains
from membrane.nodal.pieces import merged
from membrane.nodal.slopes import with_slopes
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.pencil import Space
from membrane.sides import lie_on
from membrane.subdivision import Subdivision
from membrane.triangle import EDGES, shapes

SAME = 1e-9
"""Points of a line nearer than this share of their triangle's size are one point."""

SPECK = 0.06
"""Lines shorter than this share of the size of a domain, the root of the head's area over the
mode's number, are dropped. Round a corner, where the mode is small and least well known, its
error draws such specks; a mode hardly can, as each of its domains needs room for its
frequency (G. Faber 1923, E. Krahn 1925, from memory)."""


def trace(
    space: Space,
    vectors: Floats,
    divided: Subdivision,
    values: Floats,
    edges: MeshEdges,
    fixed: Sequence[str],
) -> list[tuple[Floats, ...]]:
    """The nodal lines of each mode: polylines (2, n) metres, closed ones end where they start.

    values : (n_points, n) of the modes at the points of ``divided``
    Every point lies on the zero set of the mode's own polynomial. Fixed edges are no
    nodal lines; a line that ends there ends where the slope of the head changes sign.
    """
    held = lie_on(space.mesh, fixed)
    signed = with_slopes(space, vectors, divided, values, held)
    signs = Signs.of(values, signed, divided, held)
    close = need_closer_look(divided, edges, signs, values)
    wide = find_crossings(space, vectors, divided, edges, signs, left_out=close)
    pieces = merged([wide, look_closer(space, vectors, divided, edges, signs, close)])
    points = _positions(space.mesh, pieces.triangle, pieces.reference)
    sizes = _sizes(space.mesh)[pieces.triangle]
    specks = SPECK * np.sqrt(_area(space.mesh) / np.arange(1, vectors.shape[1] + 1))
    lines: list[list[Floats]] = [[] for _ in range(vectors.shape[1])]
    for chain in chains(pieces.segments, pieces.triangle.size):
        line = _cleaned(points[:, chain], sizes[chain])
        mode = pieces.mode[chain[0]]
        if np.hypot(*np.diff(line)).sum() > specks[mode]:
            lines[mode].append(line)
    return [tuple(found) for found in lines]


def _positions(mesh: Mesh, triangle: Ints, reference: Floats) -> Floats:
    phi, _ = shapes(reference, mesh.order)
    return np.asarray(np.einsum("din,in->dn", mesh.nodes[:, :, triangle], phi))


def _area(mesh: Mesh) -> float:
    """Of the straight triangles, square metres."""
    (x0, x1, x2), (y0, y1, y2) = mesh.vertices[:, mesh.triangles]
    return 0.5 * float(np.abs((x1 - x0) * (y2 - y0) - (x2 - x0) * (y1 - y0)).sum())


def _sizes(mesh: Mesh) -> Floats:
    """(n_triangles,) the shortest distance between two vertices of each triangle, metres."""
    corners = mesh.vertices[:, mesh.triangles]
    lengths = [np.hypot(*(corners[:, a] - corners[:, b])) for a, b in EDGES]
    return np.asarray(np.min(lengths, axis=0))


def _cleaned(line: Floats, sizes: Floats) -> Floats:
    """The line without points that repeat the one before; its two ends stay."""
    apart = np.hypot(*np.diff(line)) > SAME * sizes[1:]
    keep = np.append(True, apart)
    cleaned = line[:, keep]
    cleaned[:, -1] = line[:, -1]
    return cleaned
