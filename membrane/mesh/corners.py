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
from membrane.records.outline import Curve, Outline
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

LOAD_ENDS = 1.0
"""Exponent where springs or masses along a line end or bend: u has r log r.

The slope of u jumps by c u across a line with c = stiffness - lambda mass, like the
potential of a charge c u: that of a charged half line has r log r at its end.
"""


NEAR = 1e-6
"""How far off a line a vertex on it may be, in lengths of a segment beside it."""

ON_HEAD = (Field.AREAL_DENSITY, Field.BEDDING)
ON_EDGES = (Field.EDGE_STIFFNESS, Field.EDGE_MASS)
ON_LINES = (Field.LINE_STIFFNESS, Field.LINE_MASS)


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
    holds = _Holds(membrane)
    for vertex, rays in _rays(kernel, outline, raw).items():
        if _passes_smoothly(rays, holds):
            continue
        wedges = _wedges(vertex, rays, outline, raw)
        fan = _Fan(holds, raw.vertices[:, [vertex]])
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
    if abs(bend) * length < WHOLE:
        bend = 0.0  # a straight line, up to the kernel's rounding
    left, right = _edges_beside(curve_of[curve], step)
    lines = curve_of[curve].lines
    return Ray(_direction(chord), _direction(tangent), bend, length, curve, left, right, lines)


def _edges_beside(curve: Curve, forward: float) -> tuple[str | None, str | None]:
    """The edges to the left and right as one leaves along a curve, or against it."""
    left, right = curve.lips or (curve.edge, curve.edge)
    return (left, right) if forward > 0.0 else (right, left)


def _direction(vector: Floats) -> float:
    return float(np.arctan2(vector[1], vector[0]))


class _Holds:
    """What edges and lines do to the head beside them."""

    def __init__(self, membrane: Membrane) -> None:
        self.membrane = membrane

    def fixed(self, edge: str | None) -> bool:
        return edge in self.membrane.fixed_edges

    def springs(self, edge: str | None) -> tuple[float, float]:
        """Stiffness and mass along an edge, nothing where it is fixed."""
        if edge is None or self.fixed(edge):
            return 0.0, 0.0
        total = self.membrane.total
        return float(total(Field.EDGE_STIFFNESS, edge)), float(total(Field.EDGE_MASS, edge))

    def loads(self, ray: Ray) -> tuple[float, float]:
        """Stiffness and mass of all line loads along a ray."""
        total, lines = self.membrane.total, ray.lines
        stiffness = sum(float(total(Field.LINE_STIFFNESS, line)) for line in lines)
        return stiffness, sum(float(total(Field.LINE_MASS, line)) for line in lines)

    def alike(self, one: str | None, other: str | None) -> bool:
        """Whether two edges are held in the same way."""
        same_kind = (one is None) == (other is None) and self.fixed(one) == self.fixed(other)
        return same_kind and self.springs(one) == self.springs(other)


def _passes_smoothly(rays: list[Ray], holds: _Holds) -> bool:
    """True where two curves are one smooth curve under one support and one load."""
    if len(rays) != 2:
        return False
    first, second = rays
    turn = (second.tangent - first.tangent) % (2 * pi)
    # leaving the vertex both ways, a steady curve bends to the left once, to the right once
    steady = abs(first.bend + second.bend) * max(first.length, second.length) <= STEADY
    alike = (
        holds.alike(first.left, second.right)
        and holds.alike(first.right, second.left)
        and holds.loads(first) == holds.loads(second)
    )
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


class _Fan:
    """The exponent of a run of wedges under one membrane."""

    def __init__(self, holds: _Holds, place: Floats) -> None:
        self.holds = holds
        self.membrane = holds.membrane
        self.place = place

    def exponent(self, fan: list[Wedge]) -> float:
        """Smallest exponent that spoils smoothness; infinite where none does."""
        tensions = [self._here(Field.TENSION, w.region) for w in fan]
        if any(self._breaks(Field.TENSION, w.region, fan) for w in fan):
            return TENSION_JUMP
        if any(not np.allclose(tensions[0], other, rtol=1e-12) for other in tensions):
            return TENSION_JUMP
        if not fan[0].first.parts:
            return self._inside(fan, tensions[0])
        return self._at_edge(fan, tensions[0])

    def _inside(self, fan: list[Wedge], tension: Floats) -> float:
        """Around an inner vertex densities jump, u has r^2 log r; lines end, cross or bend."""
        densities = [float(self._here(Field.AREAL_DENSITY, wedge.region)) for wedge in fan]
        loads = [self.holds.loads(wedge.first) for wedge in fan]
        if not _balanced(loads, [wedge.first.tangent for wedge in fan], tension):
            return LOAD_ENDS
        lines = {line for wedge in fan for line in wedge.first.lines}
        if any(self._breaks(f, line, fan) for f in ON_LINES for line in lines):
            return LOAD_ENDS
        jumps = not np.allclose(densities[0], densities, rtol=1e-12)
        jumps = jumps or any(self._breaks(f, w.region, fan) for f in ON_HEAD for w in fan)
        return 2.0 if jumps or np.any(loads) else inf

    def _at_edge(self, fan: list[Wedge], tension: Floats) -> float:
        first, last = fan[0].first.left, fan[-1].second.right
        held = {self.holds.fixed(edge) for edge in (first, last)}
        opening = _opening(fan, tension)
        leading = pi / opening if len(held) == 1 else pi / (2 * opening)
        springs = [self.holds.springs(edge) for edge in (first, last)]
        loads = [self.holds.loads(wedge.first) for wedge in fan[1:]]
        straight = abs(opening - pi) < WHOLE
        breaks = any(self._breaks(f, edge, fan) for f in ON_EDGES for edge in (first, last))
        changing = straight and (breaks or springs[0] != springs[1])
        if held == {False} and (np.any(loads) or changing):
            return min(leading, LOAD_ENDS)
        if abs(leading - round(leading)) > WHOLE * leading:
            return leading
        bent = abs(fan[0].first.bend) + abs(fan[-1].second.bend) > 0.0
        several = len(fan) > 1
        if bent or np.any(springs) or several:
            return leading + 1.0
        return leading + _weaker_by(self.membrane, str(fan[0].region))

    def _breaks(self, field: Field, name: str | None, fan: list[Wedge]) -> bool:
        """Whether a field may jump or kink along a line through the vertex."""
        slack = NEAR * fan[0].first.length
        return self.membrane.breaks_at(field, str(name), tuple(self.place[:, 0]), slack)

    def _here(self, field: Field, name: str | None) -> Floats:
        """A field of a region at the vertex, or its mean where it has no sound value there."""
        here = np.asarray(self.membrane.at(field, str(name), self.place)[0])
        sound = np.isfinite(here).all() and np.trace(np.atleast_2d(here)) > 0.0
        return here if sound else np.asarray(self.membrane.total(field, str(name)))


def _balanced(loads: list[tuple[float, float]], directions: list[float], tension: Floats) -> bool:
    """Whether every load that arrives along one direction leaves along the opposite one.

    Then the r log r of the half lines cancel: their sum is c e/(e . T^-1 e) . T^-1 x log r
    over the loads c along the directions e.
    """
    e = np.array([np.cos(directions), np.sin(directions)])
    pull = e / np.einsum("in,ij,jn->n", e, np.linalg.inv(tension), e)
    sums = pull @ np.array(loads)
    return bool(np.all(np.abs(sums) <= WHOLE * (np.abs(pull) @ np.array(loads)).max(axis=0)))


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
