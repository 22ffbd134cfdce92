"""Points on regions, edges and line loads where varying coefficients are looked at."""

from __future__ import annotations

from collections.abc import Iterable
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
"""Into how many parts the sides of a triangle, and the segments of a line, are divided."""


def samples(kernel: Kernel, outline: Outline) -> dict[str, Samples]:
    """Samples of every region, edge and line load, by name."""
    sizes = {region.name: sqrt(region.area) / ACROSS for region in outline.regions}
    raw = kernel.triangulate(outline, sizes)
    regions = {r.name: _within(raw, np.isin(raw.face, r.faces)) for r in outline.regions}
    curves = outline.curves
    edges = {n: _along(kernel, raw, [c.tag for c in curves if n in c.edges]) for n in outline.edges}
    lines = {n: _along(kernel, raw, [c.tag for c in curves if n in c.lines]) for n in outline.lines}
    return {**regions, **edges, **lines}


def _within(raw: RawMesh, chosen: Bools) -> Samples:
    """The middles of the small triangles that some triangles are divided into."""
    small = lattice(PARTS)
    (s, t) = small.points[:, small.triangles].mean(axis=1)
    corners = raw.vertices[:, raw.triangles[:, chosen]]
    shares = np.stack([1.0 - s - t, s, t])
    points = np.einsum("dkt,kn->dtn", corners, shares).reshape(2, -1)
    areas = np.repeat(raw.areas[chosen], s.size)
    return Samples(points, areas / areas.sum())


def _along(kernel: Kernel, raw: RawMesh, curves: Iterable[int]) -> Samples:
    shares = (np.arange(PARTS) + 0.5) / PARTS
    points, lengths = [], []
    for curve in curves:
        mine = raw.segment_curve == curve
        start, stop = raw.segment_parameters[:, mine]
        parameters = (start[:, None] + shares * (stop - start)[:, None]).ravel()
        points.append(kernel.evaluate(curve, parameters))
        ends = raw.vertices[:, raw.segments[:, mine]]
        lengths.append(np.repeat(np.hypot(*(ends[:, 1] - ends[:, 0])), PARTS))
    weights = np.concatenate(lengths)
    return Samples(np.hstack(points), weights / weights.sum())
