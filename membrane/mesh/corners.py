"""Where a mode has a singular point, and how strong it is."""

from __future__ import annotations

from collections import defaultdict
from dataclasses import dataclass
from math import inf, pi

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.corner import Corner
from membrane.mesh.kinks import kinks
from membrane.records.arrays import Floats
from membrane.records.membrane import Field, Membrane
from membrane.records.outline import Outline
from membrane.records.raw_mesh import RawMesh

__all__ = ["Corner", "corners"]

WHOLE = 1e-7
"""Rounding allowed where an exponent or an angle is compared to a whole number."""

STEADY = 1e-5
"""Jump of curvature, times the segments beside it, that no mode can tell from none."""

_AHEAD = 1e-3
"""Share of a segment after which a tangent shows which way its curve bends."""

TENSION_JUMP = 0.5
"""Exponent assumed where tensions meet at a corner: the weakest that there can be."""


@dataclass(frozen=True)
class Ray:
    """A kernel curve leaving a vertex.

    chord, tangent : directions of its first segment and of the curve itself, radians
    bend : signed curvature, per metre, positive to the left of the tangent
    length : of the chord, metres
    edge : the edge's name, None for the border of a patch
    """

    chord: float
    tangent: float
    bend: float
    length: float
    curve: int
    edge: str | None


@dataclass(frozen=True)
class Wedge:
    """The part of a region between two neighbouring rays; ``angle`` in radians."""

    first: Ray
    second: Ray
    region: str | None
    angle: float


def corners(
    kernel: Kernel, outline: Outline, membrane: Membrane, raw: RawMesh
) -> tuple[Corner, ...]:
    """Every vertex of the mesh that spoils the convergence of smooth elements, kinks included.

    The leading exponent at a corner of opening w is pi/w between like supports and pi/2w
    between a fixed and a moving one (P. Grisvard, Elliptic Problems in Nonsmooth Domains,
    1985); a whole exponent between straight sides leaves the mode smooth, and curved
    sides add terms one order weaker.
    """
    found = []
    for vertex, rays in _rays(kernel, outline, raw).items():
        if _passes_smoothly(rays, membrane):
            continue
        wedges = _wedges(vertex, rays, outline, raw)
        fan = _Fan(membrane, outline, raw.vertices[:, [vertex]])
        exponent = min(map(fan.exponent, _fans(wedges)), default=inf)
        if exponent < inf:
            found.append(Corner(vertex, exponent))
    return _with_kinks(found, kinks(outline, membrane, raw))


def _with_kinks(corners: list[Corner], kinks: tuple[Corner, ...]) -> tuple[Corner, ...]:
    """Each vertex once, with the weaker of its exponents."""
    weakest = {corner.vertex: corner.exponent for corner in corners}
    for kink in kinks:
        weakest[kink.vertex] = min(kink.exponent, weakest.get(kink.vertex, inf))
    return tuple(Corner(vertex, exponent) for vertex, exponent in weakest.items())


def _rays(kernel: Kernel, outline: Outline, raw: RawMesh) -> dict[int, list[Ray]]:
    """The rays of every vertex at which different curves meet, by rising direction."""
    edge_of = {curve.tag: curve.edge for curve in outline.curves}
    ends = defaultdict(list)
    for segment, (tail, tip) in enumerate(raw.segments.T):
        ends[int(tail)].append((segment, 0))
        ends[int(tip)].append((segment, 1))
    rays = {}
    for vertex, here in ends.items():
        if len({int(raw.segment_curve[segment]) for segment, _ in here}) > 1:
            leaving = [_ray(kernel, raw, edge_of, segment, end) for segment, end in here]
            rays[vertex] = sorted(leaving, key=lambda ray: ray.chord)
    return rays


def _ray(
    kernel: Kernel, raw: RawMesh, edge_of: dict[int, str | None], segment: int, end: int
) -> Ray:
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
    if abs(bend) * length < WHOLE:
        bend = 0.0  # a straight line, up to the kernel's rounding
    return Ray(_direction(chord), _direction(tangent), bend, length, curve, edge_of[curve])


def _direction(vector: Floats) -> float:
    return float(np.arctan2(vector[1], vector[0]))


def _passes_smoothly(rays: list[Ray], membrane: Membrane) -> bool:
    """True where two curves are one smooth curve under one support."""
    if len(rays) != 2:
        return False
    first, second = rays
    turn = (second.tangent - first.tangent) % (2 * pi)
    # leaving the vertex both ways, a steady curve bends to the left once, to the right once
    steady = abs(first.bend + second.bend) * max(first.length, second.length) <= STEADY
    alike = (first.edge in membrane.fixed_edges) == (second.edge in membrane.fixed_edges)
    return abs(turn - pi) < WHOLE and steady and alike


def _wedges(vertex: int, rays: list[Ray], outline: Outline, raw: RawMesh) -> list[Wedge]:
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


def _fans(wedges: list[Wedge]) -> list[list[Wedge]]:
    """Wedges of the head that follow each other without a gap."""
    gaps = [i for i, wedge in enumerate(wedges) if wedge.region is None]
    if not gaps:
        return [wedges]
    turned = wedges[gaps[0] + 1 :] + wedges[: gaps[0] + 1]
    fans: list[list[Wedge]] = [[]]
    for wedge in turned:
        if wedge.region is None:
            fans.append([])
        else:
            fans[-1].append(wedge)
    return [fan for fan in fans if fan]


class _Fan:
    """The exponent of a run of wedges under one membrane."""

    def __init__(self, membrane: Membrane, outline: Outline, place: Floats) -> None:
        self.membrane = membrane
        self.place = place
        self.straight = {curve.tag for curve in outline.curves if curve.edge is not None}

    def exponent(self, fan: list[Wedge]) -> float:
        """Smallest exponent that spoils smoothness; infinite where none does."""
        tensions = [self._here(Field.TENSION, w.region) for w in fan]
        if any(not np.allclose(tensions[0], other, rtol=1e-12) for other in tensions):
            return TENSION_JUMP
        if _turn(fan[0].first.tangent, fan[-1].second.tangent) == 2 * pi and len(fan) > 1:
            return self._inside(fan)
        return self._at_edge(fan, tensions[0])

    def _inside(self, fan: list[Wedge]) -> float:
        """Around an inner vertex only the density can jump: u has r^2 log r."""
        densities = [float(self._here(Field.AREAL_DENSITY, wedge.region)) for wedge in fan]
        return 2.0 if not np.allclose(densities[0], densities, rtol=1e-12) else inf

    def _at_edge(self, fan: list[Wedge], tension: Floats) -> float:
        first, last = fan[0].first, fan[-1].second
        held = {ray.edge in self.membrane.fixed_edges for ray in (first, last)}
        opening = _opening(fan, tension)
        leading = pi / opening if len(held) == 1 else pi / (2 * opening)
        if abs(leading - round(leading)) > WHOLE * leading:
            return leading
        bent = abs(first.bend) + abs(last.bend) > 0.0
        springs = any(self._is_elastic(ray) for ray in (first, last))
        several = len(fan) > 1
        if bent or springs or several:
            return leading + 1.0
        return leading + _weaker_by(self.membrane, str(fan[0].region))

    def _here(self, field: Field, name: str | None) -> Floats:
        """A field of a region at the vertex, or its mean where it has no sound value there."""
        here = np.asarray(self.membrane.at(field, str(name), self.place)[0])
        sound = np.isfinite(here).all() and np.trace(np.atleast_2d(here)) > 0.0
        return here if sound else np.asarray(self.membrane.total(field, str(name)))

    def _is_elastic(self, ray: Ray) -> bool:
        fields = (Field.EDGE_STIFFNESS, Field.EDGE_MASS)
        return any(self.membrane.parts(field, str(ray.edge)) for field in fields)


def _weaker_by(membrane: Membrane, region: str) -> float:
    """How much a varying coefficient adds to a whole exponent before it spoils smoothness.

    Where u goes like r^k, grad T . grad u has terms r^k and rho u terms r^(k+1); each makes
    a term two orders higher, with a logarithm where that exponent is a corner's own.
    """
    if membrane.varies(Field.TENSION, region):
        return 2.0
    others = (Field.AREAL_DENSITY, Field.BEDDING)
    return 3.0 if any(membrane.varies(field, region) for field in others) else inf


def _opening(fan: list[Wedge], tension: Floats) -> float:
    """The fan's angle after the stretching that makes the tension the same both ways."""
    root = np.linalg.inv(np.linalg.cholesky(tension))
    start = fan[0].first.tangent
    turned = np.concatenate([[start], start + np.cumsum([wedge.angle for wedge in fan])])
    # a straight angle maps to a straight angle, so halves are mapped and then doubled up
    steps = np.interp(np.linspace(0, len(fan), 16 * len(fan) + 1), np.arange(len(fan) + 1), turned)
    x, y = root @ np.array([np.cos(steps), np.sin(steps)])
    return float(np.abs(np.diff(np.unwrap(np.arctan2(y, x)))).sum())
