"""Geometric refinement of the triangles around singular corners."""

from __future__ import annotations

from collections import defaultdict
from math import ceil, log

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.corners import Corner
from membrane.records.arrays import Floats
from membrane.records.raw_mesh import RawMesh

RATIO = 0.3
"""Size of each layer to the one around it; 0.3 to 0.35 costs least in our trials."""

DEEPEST = 24
"""Most layers at one corner: beyond that the corner is below rounding."""

MEASURED = 8
"""Degree of the elements on which the bounds below were measured."""

STRAIGHT = 1e-7
"""How near to a whole number an exponent is taken as whole."""

FIRST = 0.1
"""Bound on what a mode's first singular term leaves there, in the units of ``depth``."""

NEXT = 1e-5
"""What the next term of a mode, one order weaker, leaves in the triangles at a corner.

In our trials r^2 log r left 1e-7 of the share, with triangles that follow the bend.
"""


def layers(exponent: float, tolerance: float) -> int:
    """How many layers leave a relative error below ``tolerance`` in the eigenvalues.

    The energy within a radius r of the corner, and so the error, goes like r^(2 exponent).
    """
    return min(max(ceil(log(tolerance) / (2 * exponent * log(RATIO))), 0), DEEPEST)


def depth(exponent: float, share: float, tolerance: float, degree: int = MEASURED) -> int:
    """How many layers a corner needs whose triangles have not been cut yet.

    share : square of their longest side, as a share of the head's area
    degree : of the elements; of the energy at a corner they miss a share that goes like
        degree^(-4 exponent): I. Babuska & M. Suri, RAIRO M2AN 21 (1987) 199 (from memory)

    Where the exponent is near a whole number k, as at the many corners of a fine polygon,
    r^exponent is r^k but for a part in proportion to the difference: the energy that smooth
    elements miss goes like its square. Measured at degree 8 on polygons of up to 48 sides
    and on the L shape, an uncut corner left at most 0.03 off^2 share^exponent.
    """
    tolerance *= (degree / MEASURED) ** (4 * exponent)
    off = abs(exponent - round(exponent))
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
        if cuts > 0:
            growing.grade(corner.vertex, cuts)
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

    def grade(self, vertex: int, depth: int) -> None:
        """Cut the triangles at a vertex into ``depth`` layers."""
        chains: dict[int, list[int]] = {}
        for number in sorted(self.touching[vertex]):
            here, left, right = self._turned(number, vertex)
            for end in (left, right):
                if end not in chains:
                    chains[end] = self._chain(here, end, depth)
            self._cut(number, chains[left], chains[right])

    def _turned(self, number: int, vertex: int) -> tuple[int, int, int]:
        a, b, c = self.triangles[number]
        return {a: (a, b, c), b: (b, c, a), c: (c, a, b)}[vertex]

    def _chain(self, corner: int, end: int, depth: int) -> list[int]:
        """Vertices from ``end`` to ``corner``, each RATIO times closer than the last."""
        fractions = np.power(RATIO, np.arange(1.0, depth + 1))
        segment = self._pop_segment(corner, end)
        chain = [end, *range(len(self.places), len(self.places) + depth), corner]
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
        face = self.faces[number]
        for vertex in self.triangles[number]:
            self.touching[vertex].discard(number)
        pieces = [(left[-1], left[-2], right[-2])]
        for k in range(len(left) - 2):
            pieces.extend(self._ring(left[k + 1], left[k], right[k], right[k + 1]))
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
