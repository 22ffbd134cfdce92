"""Layers of triangles that shrink towards singular corners."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from math import atan2

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.corner import Corner, Fan
from membrane.mesh.depth import FAN_POWERS, RATIO, treatment
from membrane.records.arrays import Floats
from membrane.records.raw_mesh import RawMesh

STRONG = 0.6
"""Exponent below which a corner is strong."""

WIDEST, WIDEST_STRONG = 1.4, 1.0
"""Widest angle of a triangle at a corner and at a strong one, radians: wider ones are halved.
They follow r^a worst, and a wide fan's outer side is an arc on which the triangle beyond may
fold."""


def graded(
    kernel: Kernel,
    raw: RawMesh,
    corners: tuple[Corner, ...],
    tolerance: float,
    degree: int,
    powers: Sequence[int] = FAN_POWERS,
) -> tuple[RawMesh, tuple[Fan, ...]]:
    """The mesh with layers around every corner, and the innermost triangles to draw in.

    degree : of the elements
    powers : that may be taken for the fans
    """
    growing = _Growing(kernel, raw)
    shares = _shares(raw)
    fans = []
    for corner in corners:
        share = float(shares[corner.vertex])
        power, layers = treatment(corner.terms, share, tolerance, degree, powers)
        if power > 1 or layers > 0:
            growing.narrow(corner.vertex, WIDEST_STRONG if corner.exponent < STRONG else WIDEST)
        if power > 1:
            fans.append(Fan(raw.vertices[:, corner.vertex], power))
        growing.grade(corner.vertex, layers)
    return growing.raw_mesh(), tuple(fans)


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

    def narrow(self, vertex: int, widest: float) -> None:
        """Halve the triangles that are wider than that at a vertex."""
        for number in sorted(self.touching[vertex]):
            here, left, right = (self.places[v] for v in self._turned(number, vertex))
            (ux, uy), (vx, vy) = left - here, right - here
            if atan2(ux * vy - uy * vx, ux * vx + uy * vy) > widest:
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

    def grade(self, vertex: int, layers: int) -> None:
        """Cut the triangles at a vertex into layers, each ``RATIO`` times the last one."""
        fractions = np.power(RATIO, np.arange(1.0, layers + 1))
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
