"""The kernel curves that leave a vertex, and the wedges of the head between them."""

from __future__ import annotations

from collections import defaultdict
from dataclasses import dataclass
from math import pi

import numpy as np

from membrane.kernel import Kernel
from membrane.records.arrays import Floats
from membrane.records.outline import Curve, Outline
from membrane.records.raw_mesh import RawMesh

STRAIGHT = 1e-7
"""Curvature times length up to which a curve is a straight line: the kernel's rounding."""

_AHEAD = 1e-3
"""Share of a segment after which a tangent shows which way its curve bends."""


@dataclass(frozen=True)
class Ray:
    """A kernel curve leaving a vertex.

    chord, tangent : directions of its first segment and of the curve itself, radians
    bend : signed curvature, per metre, positive to the left of the tangent
    length : of the chord, metres
    left, right : names of the edges on its two sides, None within the head; the two
        differ along a slit only
    lines : names of the line loads that run along it
    """

    chord: float
    tangent: float
    bend: float
    length: float
    curve: int
    left: str | None
    right: str | None
    lines: tuple[str, ...]

    @property
    def parts(self) -> bool:
        """Whether it bounds the head on either side."""
        return self.left is not None


@dataclass(frozen=True)
class Wedge:
    """The part of a region between two neighbouring rays; ``angle`` in radians."""

    first: Ray
    second: Ray
    region: str | None
    angle: float


def rays_of(kernel: Kernel, outline: Outline, raw: RawMesh) -> dict[int, list[Ray]]:
    """The rays of every vertex at which curves meet or one ends, by rising direction."""
    curve_of = {curve.tag: curve for curve in outline.curves}
    ends = defaultdict(list)
    for segment, (tail, tip) in enumerate(raw.segments.T):
        ends[int(tail)].append((segment, 0))
        ends[int(tip)].append((segment, 1))
    rays = {}
    for vertex, here in ends.items():
        curves = {int(raw.segment_curve[segment]) for segment, _ in here}
        if len(curves) > 1 or len(here) == 1:
            leaving = [_ray(kernel, raw, curve_of, segment, end) for segment, end in here]
            rays[vertex] = sorted(leaving, key=lambda ray: ray.chord)
    return rays


def _ray(kernel: Kernel, raw: RawMesh, curve_of: dict[int, Curve], segment: int, end: int) -> Ray:
    here, there = raw.segments[end, segment], raw.segments[1 - end, segment]
    curve = int(raw.segment_curve[segment])
    parameter = raw.segment_parameters[[end], segment]
    step = float(raw.segment_parameters[1 - end, segment] - parameter[0])
    tangents = kernel.tangent(curve, parameter + step * np.array([0.0, _AHEAD]))
    tangent, ahead = (np.sign(step) * tangents).T
    side = np.sign(tangent[0] * ahead[1] - tangent[1] * ahead[0])
    bend = float(side * kernel.curvature(curve, parameter)[0])
    chord = raw.vertices[:, there] - raw.vertices[:, here]
    length = float(np.hypot(*chord))
    if abs(bend) * length < STRAIGHT:
        bend = 0.0
    left, right = _edges_beside(curve_of[curve], step)
    lines = curve_of[curve].lines
    return Ray(_direction(chord), _direction(tangent), bend, length, curve, left, right, lines)


def _edges_beside(curve: Curve, forward: float) -> tuple[str | None, str | None]:
    """The edges to the left and right as one leaves along a curve, or against it."""
    left, right = curve.lips or (curve.edge, curve.edge)
    return (left, right) if forward > 0.0 else (right, left)


def _direction(vector: Floats) -> float:
    return float(np.arctan2(vector[1], vector[0]))


def wedges_of(vertex: int, rays: list[Ray], outline: Outline, raw: RawMesh) -> list[Wedge]:
    """The wedges around a vertex, counter-clockwise; region None outside the head."""
    region_of = {face: region.name for region in outline.regions for face in region.faces}
    touching = np.nonzero((raw.triangles == vertex).any(axis=0))[0]
    centres = raw.vertices[:, raw.triangles[:, touching]].mean(axis=1)
    directions = np.arctan2(*(centres - raw.vertices[:, [vertex]])[::-1])
    wedges = []
    for first, second in zip(rays, rays[1:] + rays[:1], strict=True):
        opening = _turn(first.chord, second.chord)
        inside = (directions - first.chord) % (2 * pi) < opening
        face = int(raw.face[touching[inside][0]]) if inside.any() else None
        bent = (second.tangent - second.chord) - (first.tangent - first.chord)
        angle = opening + (bent + pi) % (2 * pi) - pi
        region = None if face is None else region_of[face]
        wedges.append(Wedge(first, second, region, angle))
    return wedges


def _turn(start: float, stop: float) -> float:
    """Counter-clockwise angle from one direction to another, in (0, 2 pi]."""
    return (stop - start) % (2 * pi) or 2 * pi


def fans_of(wedges: list[Wedge]) -> list[list[Wedge]]:
    """Wedges of the head that follow each other without an edge between them."""
    starts = [i for i, wedge in enumerate(wedges) if wedge.first.parts]
    if not starts:
        return [wedges]
    turned = wedges[starts[0] :] + wedges[: starts[0]]
    fans: list[list[Wedge]] = []
    for wedge in turned:
        if wedge.first.parts:
            fans.append([])
        if wedge.region is not None:
            fans[-1].append(wedge)
    return [fan for fan in fans if fan]
