"""Geometric refinement of the triangles around singular corners."""

from __future__ import annotations

from collections import defaultdict
from math import atan2, ceil, inf, log

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.corners import Corner
from membrane.records.arrays import Floats
from membrane.records.raw_mesh import RawMesh

RATIOS = ((1.0, 0.4), (inf, 0.3))
"""Size of each layer to the one around it, for exponents up to the first number.

A polynomial follows r^a across a layer the better the thinner it is; with these, elements
of degree 8 leave less than 1e-9 at slits and reentrant corners in our trials.
"""

STRONG = 1.0
"""Exponent below which wide triangles at a corner are halved."""

WIDEST = 1.1
"""Widest angle of a triangle at a strong corner, radians: a little over 60 degrees."""

SMALLEST = 2e-11
"""Size of the innermost layer to the corner's coordinates, well above their rounding."""

GAPS = 1e3
"""Size of the innermost layer to what the kernel leaves between a corner and its curves."""

DEEPEST = 60
"""Most layers at one corner."""


def ratio(exponent: float) -> float:
    """Size of each layer to the one around it at a corner of that exponent."""
    return next(size for most, size in RATIOS if exponent <= most * (1 + 1e-9))


MEASURED = 8
"""Degree of the elements on which the bounds below were measured."""

STRAIGHT = 1e-7
"""How near to a whole number an exponent is taken as whole."""

FIRST = 0.2
"""Bound on what a mode's first singular term leaves there, in the units of ``depth``."""

NEXT = 1e-5
"""What the next term of a mode, one order weaker, leaves in the triangles at a corner.

In our trials r^2 log r left 1e-7 of the share, with triangles that follow the bend.
"""


def layers(exponent: float, tolerance: float) -> int:
    """How many layers leave a relative error below ``tolerance`` in the eigenvalues.

    The energy within a radius r of the corner, and so the error, goes like r^(2 exponent).
    """
    return min(max(ceil(log(tolerance) / (2 * exponent * log(ratio(exponent)))), 0), DEEPEST)


def depth(exponent: float, share: float, tolerance: float, degree: int = MEASURED) -> int:
    """How many layers a corner needs whose triangles have not been cut yet.

    share : square of their longest side, as a share of the head's area
    degree : of the elements; of the energy at a corner they miss a share that goes like
        degree^(-4 exponent): I. Babuska & M. Suri, RAIRO M2AN 21 (1987) 199 (from memory)

    Where the exponent is near a whole number k, as at the many corners of a fine polygon,
    r^exponent is r^k but for a part in proportion to the difference: the energy that smooth
    elements miss goes like its square. Measured at degree 8 on polygons of up to 48 sides
    and on the L shape, an uncut corner left at most 0.03 off^2 share^exponent; at slits with
    the exponents 1/2 and 1/4 the layers that follow from it left less than 1e-9 and 1e-8.
    """
    tolerance *= (degree / MEASURED) ** (4 * exponent)
    off = abs(exponent - max(round(exponent), 1))
    if off < STRAIGHT:
        return layers(exponent, tolerance)
    missed = FIRST * off**2 * min(share, 1.0) ** min(exponent, 1.0)
    following = NEXT * min(share, 1.0)
    return max(layers(exponent, tolerance / missed), layers(exponent + 1, tolerance / following))


def graded(
    kernel: Kernel,
    raw: RawMesh,
    corners: tuple[Corner, ...],
    tolerance: float,
    degree: int = MEASURED,
) -> RawMesh:
    """The mesh with every corner's triangles cut into layers that shrink towards it."""
    growing = _Growing(kernel, raw)
    shares = _shares(raw)
    for corner in corners:
        cuts = depth(corner.exponent, float(shares[corner.vertex]), tolerance, degree)
        if cuts == 0:
            continue
        if corner.exponent < STRONG:
            growing.narrow(corner.vertex)
        growing.grade(corner.vertex, cuts, ratio(corner.exponent))
    return growing.raw_mesh()


def _shares(raw: RawMesh) -> Floats:
    """For each vertex the squared longest side of its triangles over the mesh's area."""
    corners = raw.vertices[:, raw.triangles]
    squares = ((np.roll(corners, -1, axis=1) - corners) ** 2).sum(axis=0).max(axis=0)
    longest = np.zeros(raw.vertices.shape[1])
    for row in raw.triangles:
        np.maximum.at(longest, row, squares)
    return np.asarray(longest / raw.areas.sum())


class _Growing:
    """A raw mesh that is being cut, as lists."""

    def __init__(self, kernel: Kernel, raw: RawMesh) -> None:
        self.kernel = kernel
        self.places: list[Floats] = list(raw.vertices.T)
        self.triangles = [tuple(map(int, triangle)) for triangle in raw.triangles.T]
        self.faces = [int(face) for face in raw.face]
        self.touching: dict[int, set[int]] = defaultdict(set)
        for number, triangle in enumerate(self.triangles):
            for vertex in triangle:
                self.touching[vertex].add(number)
        self.segments: dict[tuple[int, int], tuple[int, float, float]] = {}
        sides = zip(raw.segments.T, raw.segment_curve, raw.segment_parameters.T, strict=True)
        for (tail, tip), curve, (start, stop) in sides:
            self._add_segment(int(tail), int(tip), int(curve), float(start), float(stop))

    def narrow(self, vertex: int) -> None:
        """Halve the triangles that are wide at a vertex, which follow r^a worst."""
        for number in sorted(self.touching[vertex]):
            here, left, right = (self.places[v] for v in self._turned(number, vertex))
            (ux, uy), (vx, vy) = left - here, right - here
            if atan2(ux * vy - uy * vx, ux * vx + uy * vy) > WIDEST:
                self._halve(*self._turned(number, vertex)[1:])

    def _halve(self, tail: int, tip: int) -> None:
        """Put a vertex in the middle of a side and halve the triangles beside it."""
        middle = len(self.places)
        segment = self._pop_segment(tail, tip)
        if segment is None:
            self.places.append(0.5 * (self.places[tail] + self.places[tip]))
        else:
            curve, start, stop = segment
            half = 0.5 * (start + stop)
            self.places.append(self.kernel.evaluate(curve, np.array([half]))[:, 0])
            self._add_segment(tail, middle, curve, start, half)
            self._add_segment(middle, tip, curve, half, stop)
        for number in sorted(self.touching[tail] & self.touching[tip]):
            apex = next(v for v in self.triangles[number] if v not in (tail, tip))
            _, left, right = self._turned(number, apex)
            self._replace(number, [(apex, left, middle), (apex, middle, right)])

    def _room(self, vertex: int, shrink: float) -> int:
        """How many layers the rounding of a vertex and of its curves leaves room for."""
        here = self.places[vertex]
        around = {v for number in self.touching[vertex] for v in self.triangles[number]}
        size = min(float(np.linalg.norm(self.places[v] - here)) for v in around - {vertex})
        gap = max((self._gap(vertex, v) for v in around - {vertex}), default=0.0)
        rounding = max(SMALLEST * float(np.linalg.norm(here)), GAPS * gap)
        return max(ceil(log(max(rounding / size, 1e-300)) / log(shrink)), 1)

    def _gap(self, vertex: int, end: int) -> float:
        """How far a vertex lies off the curve under a side that leaves it, metres."""
        segment = self.segments.get((min(vertex, end), max(vertex, end)))
        if segment is None:
            return 0.0
        curve, *parameters = segment
        at = np.array([parameters[0 if vertex < end else 1]])
        away = self.kernel.evaluate(curve, at)[:, 0] - self.places[vertex]
        return float(np.linalg.norm(away))

    def grade(self, vertex: int, depth: int, shrink: float) -> None:
        """Cut the triangles at a vertex into layers, each ``shrink`` times the last one."""
        fractions = np.power(shrink, np.arange(1.0, min(depth, self._room(vertex, shrink)) + 1))
        chains: dict[int, list[int]] = {}
        for number in sorted(self.touching[vertex]):
            here, left, right = self._turned(number, vertex)
            for end in (left, right):
                if end not in chains:
                    chains[end] = self._chain(here, end, fractions)
            self._cut(number, chains[left], chains[right])

    def _turned(self, number: int, vertex: int) -> tuple[int, int, int]:
        a, b, c = self.triangles[number]
        return {a: (a, b, c), b: (b, c, a), c: (c, a, b)}[vertex]

    def _chain(self, corner: int, end: int, fractions: Floats) -> list[int]:
        """Vertices from ``end`` to ``corner``, at falling ``fractions`` of the way between."""
        segment = self._pop_segment(corner, end)
        chain = [end, *range(len(self.places), len(self.places) + fractions.size), corner]
        if segment is None:
            start, stop = self.places[corner], self.places[end]
            self.places.extend(start + f * (stop - start) for f in fractions)
            return chain
        curve, here, there = segment
        parameters = here + fractions * (there - here)
        self.places.extend(self.kernel.evaluate(curve, parameters).T)
        marks = [there, *parameters, here]
        for a, b, s, t in zip(chain, chain[1:], marks, marks[1:], strict=False):
            self._add_segment(a, b, curve, float(s), float(t))
        return chain

    def _cut(self, number: int, left: list[int], right: list[int]) -> None:
        """Replace a triangle by its innermost part and a ring piece for each layer."""
        pieces = [(left[-1], left[-2], right[-2])]
        for k in range(len(left) - 2):
            pieces.extend(self._ring(left[k + 1], left[k], right[k], right[k + 1]))
        self._replace(number, pieces)

    def _replace(self, number: int, pieces: list[tuple[int, int, int]]) -> None:
        face = self.faces[number]
        for vertex in self.triangles[number]:
            self.touching[vertex].discard(number)
        self._put(number, pieces[0], face)
        for piece in pieces[1:]:
            self._put(len(self.triangles), piece, face)

    def _ring(self, a: int, b: int, c: int, d: int) -> list[tuple[int, int, int]]:
        """The quadrilateral a b c d cut along its shorter diagonal."""
        places = self.places
        if np.linalg.norm(places[a] - places[c]) < np.linalg.norm(places[b] - places[d]):
            return [(a, b, c), (a, c, d)]
        return [(a, b, d), (b, c, d)]

    def _put(self, number: int, triangle: tuple[int, int, int], face: int) -> None:
        if number == len(self.triangles):
            self.triangles.append(triangle)
            self.faces.append(face)
        else:
            self.triangles[number] = triangle
        for vertex in triangle:
            self.touching[vertex].add(number)

    def _add_segment(self, tail: int, tip: int, curve: int, start: float, stop: float) -> None:
        key = (tail, tip) if tail < tip else (tip, tail)
        self.segments[key] = (curve, start, stop) if tail < tip else (curve, stop, start)

    def _pop_segment(self, tail: int, tip: int) -> tuple[int, float, float] | None:
        """The curve under a side and its parameters at ``tail`` and ``tip``."""
        found = self.segments.pop((min(tail, tip), max(tail, tip)), None)
        if found is None or tail < tip:
            return found
        curve, start, stop = found
        return curve, stop, start

    def raw_mesh(self) -> RawMesh:
        """The mesh as it stands."""
        values = list(self.segments.values())
        return RawMesh(
            vertices=np.array(self.places).T,
            triangles=np.array(self.triangles).T,
            face=np.array(self.faces),
            segments=np.array(list(self.segments)).T,
            segment_curve=np.array([curve for curve, _, _ in values]),
            segment_parameters=np.array([(start, stop) for _, start, stop in values]).T,
        )
