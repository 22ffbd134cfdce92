"""Points spread over regions and along edges, where varying coefficients are looked at."""

from __future__ import annotations

from math import sqrt

import numpy as np

from membrane.kernel import Kernel
from membrane.records.arrays import Bools
from membrane.records.outline import Outline, Samples
from membrane.records.raw_mesh import RawMesh
from membrane.triangle import lattice

ACROSS = 8.0
"""About how many triangles there are across a region."""

PARTS = 5
"""Into how many parts the sides of a triangle, and the segments of an edge, are divided."""


def samples(kernel: Kernel, outline: Outline) -> dict[str, Samples]:
    """Samples of every region and every edge, by name."""
    sizes = {region.name: sqrt(region.area) / ACROSS for region in outline.regions}
    raw = kernel.triangulate(outline, sizes)
    regions = {r.name: _within(raw, np.isin(raw.face, r.faces)) for r in outline.regions}
    edges = {name: _along(kernel, outline, raw, name) for name in outline.edges}
    return {**regions, **edges}


def _within(raw: RawMesh, chosen: Bools) -> Samples:
    """The middles of the small triangles that some triangles are divided into."""
    small = lattice(PARTS)
    (s, t) = small.points[:, small.triangles].mean(axis=1)
    corners = raw.vertices[:, raw.triangles[:, chosen]]
    shares = np.stack([1.0 - s - t, s, t])
    points = np.einsum("dkt,kn->dtn", corners, shares).reshape(2, -1)
    areas = np.repeat(raw.areas[chosen], s.size)
    return Samples(points, areas / areas.sum())


def _along(kernel: Kernel, outline: Outline, raw: RawMesh, edge: str) -> Samples:
    shares = (np.arange(PARTS) + 0.5) / PARTS
    points, lengths = [], []
    for curve in (curve.tag for curve in outline.curves if curve.edge == edge):
        mine = raw.segment_curve == curve
        start, stop = raw.segment_parameters[:, mine]
        parameters = (start[:, None] + shares * (stop - start)[:, None]).ravel()
        points.append(kernel.evaluate(curve, parameters))
        ends = raw.vertices[:, raw.segments[:, mine]]
        lengths.append(np.repeat(np.hypot(*(ends[:, 1] - ends[:, 0])), PARTS))
    weights = np.concatenate(lengths)
    return Samples(np.hstack(points), weights / weights.sum())
