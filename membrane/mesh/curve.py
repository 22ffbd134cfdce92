"""Curved sides: the kernel's own curves blended into the triangles beside them."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.blend import blending
from membrane.mesh.corner import Fan
from membrane.mesh.fans import FanNodes
from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.outline import Outline
from membrane.records.raw_mesh import RawMesh
from membrane.triangle import EDGES, nodes

STRAIGHT = 1e-13
"""Largest departure from the chord, relative to its length, of a straight side."""


def curved(
    kernel: Kernel, outline: Outline, raw: RawMesh, order: int, fans: Sequence[Fan] = ()
) -> Mesh:
    """The mesh of geometry order ``order``; of the fans' own where every side is straight."""
    triangles = np.sort(raw.triangles, axis=0)
    sides = segment_sides(raw, triangles)
    if not _any_bent(kernel, raw):
        order = max((fan.power for fan in fans), default=1)
    placed = _nodes(kernel, raw, triangles, sides, order)
    if fans:
        FanNodes(kernel, raw, triangles, order).draw_in(placed, fans)
    return Mesh(
        vertices=raw.vertices,
        triangles=triangles,
        nodes=placed,
        order=order,
        region_names=tuple(region.name for region in outline.regions),
        region=_regions(outline, raw),
        edges=_edges(outline, raw),
        lines=_lines(outline, raw),
    )


def _any_bent(kernel: Kernel, raw: RawMesh) -> bool:
    middle = np.array([[0.25, 0.5]])
    ends = raw.vertices[:, raw.segments]
    for curve in np.unique(raw.segment_curve):
        on = raw.segment_curve == curve
        bend = from_chord(kernel, int(curve), raw.segment_parameters[:, on], ends[:, :, on], middle)
        if np.abs(bend).max() > STRAIGHT * np.ptp(ends[:, :, on], axis=1).max():
            return True
    return False


def _nodes(
    kernel: Kernel, raw: RawMesh, triangles: Ints, sides: tuple[Ints, Ints, Ints], order: int
) -> Floats:
    """Geometry nodes (2, n, n_triangles): straight ones, moved where a side is curved."""
    x, y = nodes(order)
    barycentric = np.array([1 - x - y, x, y])
    placed: Floats = np.einsum("dvt,vn->dnt", raw.vertices[:, triangles], barycentric)
    if order == 1:
        return placed
    segment, triangle, local = sides
    for curve in np.unique(raw.segment_curve):
        for side, (low, high) in enumerate(EDGES):
            on = (raw.segment_curve[segment] == curve) & (local == side)
            placed[:, :, triangle[on]] += _blend(
                kernel, raw, int(curve), segment[on], barycentric[low], barycentric[high]
            )
    return placed


def _blend(
    kernel: Kernel, raw: RawMesh, curve: int, segment: Ints, low: Floats, high: Floats
) -> Floats:
    """Displacement (2, n_nodes, n) of the nodes of triangles that have a side on a curve."""
    s, weight = blending(low, high)
    parameters, ends = raw.segment_parameters[:, segment], raw.vertices[:, raw.segments[:, segment]]
    return from_chord(kernel, curve, parameters, ends, s[None]) * weight[:, None]


def from_chord(kernel: Kernel, curve: int, parameters: Floats, ends: Floats, s: Floats) -> Floats:
    """Curve minus chord, (2, n_s, n_segments), at fractions ``s`` (1, n_s) of segments.

    parameters : (2, n_segments) and ends (2, 2, n_segments), from lower to higher vertex
    """
    fraction = s.T
    on_curve = parameters[0] + fraction * (parameters[1] - parameters[0])
    exact = kernel.evaluate(curve, on_curve.ravel()).reshape(2, *on_curve.shape)
    return np.asarray(exact - ((1 - fraction) * ends[:, [0]] + fraction * ends[:, [1]]))


def segment_sides(raw: RawMesh, triangles: Ints) -> tuple[Ints, Ints, Ints]:
    """For every pair of a triangle and a segment on its side: segment, triangle, side."""
    count = raw.vertices.shape[1]
    keys = raw.segments[0] * count + raw.segments[1]
    order = np.argsort(keys)
    found = []
    for side, (low, high) in enumerate(EDGES):
        wanted = triangles[low] * count + triangles[high]
        place = np.minimum(np.searchsorted(keys[order], wanted), len(keys) - 1)
        segment = order[place]
        triangle = np.nonzero(keys[segment] == wanted)[0]
        found.append((segment[triangle], triangle, np.full(len(triangle), side)))
    segment, triangle, local = (np.concatenate(part) for part in zip(*found, strict=True))
    return segment, triangle, local


def _regions(outline: Outline, raw: RawMesh) -> Ints:
    index = np.full(raw.face.max() + 1, -1)
    for number, region in enumerate(outline.regions):
        index[list(region.faces)] = number
    return np.asarray(index[raw.face])


def _edges(outline: Outline, raw: RawMesh) -> dict[str, Ints]:
    left = _lie_left(raw)
    edges = {}
    for name in outline.edges:
        on = np.isin(raw.segment_curve, [c.tag for c in outline.curves if c.edge == name])
        for side in (0, 1):
            lips = [c.tag for c in outline.curves if c.lips and c.lips[side] == name]
            on |= np.isin(raw.segment_curve, lips) & (left == (side == 0))
        edges[name] = raw.segments[:, on]
    return edges


def _lie_left(raw: RawMesh) -> Bools:
    """(n_segments,): whether a triangle lies to the left of the curve along each segment."""
    count = raw.vertices.shape[1]
    around = raw.triangles * count + raw.triangles[[1, 2, 0]]
    start, stop = raw.segment_parameters
    low, high = raw.segments
    forward = np.where(start < stop, low * count + high, high * count + low)
    return np.isin(forward, around)


def _lines(outline: Outline, raw: RawMesh) -> dict[str, Ints]:
    lines = {}
    for name in outline.lines:
        curves = [curve.tag for curve in outline.curves if name in curve.lines]
        lines[name] = np.unique(raw.segments[:, np.isin(raw.segment_curve, curves)], axis=1)
    return lines
