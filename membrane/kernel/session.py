"""The kernel: the one owner of gmsh's process state, for curves, cuts and raw meshes."""

from __future__ import annotations

import threading
from collections.abc import Collection, Iterable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from functools import cache
from math import inf
from types import MappingProxyType
from typing import Any

import numpy as np

from membrane.errors import MeshError, OutlineError
from membrane.kernel.bent_corners import spoilt
from membrane.kernel.failures import gmsh_failures
from membrane.kernel.options import MESH_OPTIONS
from membrane.kernel.raw_checks import check_raw
from membrane.kernel.size_map import SizeMap
from membrane.kernel.sizes import USUAL, Bend, size_map
from membrane.kernel.smooth import smoothed
from membrane.records.arrays import Floats, Ints
from membrane.records.outline import Outline
from membrane.records.raw_mesh import RawMesh, signed_areas

# gmsh keeps everything in one place per process, so one session at a time.
_lock = threading.RLock()

# Gauss points by which lengths are measured; the kernel's own lengths are coarse.
_PANELS, _PER_PANEL = 12, 12

NOTHING: Mapping[int, float] = MappingProxyType({})

# How often a mesh is made anew, and how much shorter its edges then are where a triangle
# could not take the shape of its curves.
_TRIES, _SHORTER = 10, 0.5

# Bits of a curve in which segments are counted without a mesh.
_BITS = 32


class Kernel:
    """An open gmsh session; ``geometry`` is what geometry scripts draw with."""

    def __init__(self, gmsh: Any, geometry: Any) -> None:
        self._gmsh = gmsh
        self.geometry = geometry
        self._stop: KeyboardInterrupt | None = None
        self._within: dict[int, int] = {}

    @classmethod
    @contextmanager
    def session(cls) -> Iterator[Kernel]:
        """Open gmsh with nothing but its defaults, and close it whatever happens.

        Other threads wait for their turn. Raises MeshError where gmsh is open already.
        """
        import gmsh
        import pygmsh.occ

        with _lock:
            if gmsh.isInitialized():
                raise MeshError("gmsh is already open in this process; close it first.")
            # interruptible=False leaves the signals alone, and works off the main thread.
            gmsh.initialize([], readConfigFiles=False, run=False, interruptible=False)
            try:
                gmsh.option.setNumber("General.Terminal", 0)
                gmsh.model.add("head")
                yield cls(gmsh, pygmsh.occ.Geometry())
            finally:
                gmsh.finalize()

    # Curves

    def evaluate(self, curve: int, parameters: Floats) -> Floats:
        """Points (2, n) of a curve at its ``parameters`` (n,), metres."""
        return self._plane(self._gmsh.model.getValue(1, curve, np.ravel(parameters)))

    def tangent(self, curve: int, parameters: Floats) -> Floats:
        """Derivative (2, n) of a curve by its parameter, metres."""
        return self._plane(self._gmsh.model.getDerivative(1, curve, np.ravel(parameters)))

    def curvature(self, curve: int, parameters: Floats) -> Floats:
        """Curvature (n,) of a curve, per metre, never negative."""
        found = self._gmsh.model.getCurvature(1, curve, np.ravel(parameters))
        return np.asarray(found, dtype=float)

    def bounds(self, curve: int) -> tuple[float, float]:
        """First and last parameter of a curve."""
        first, last = self._gmsh.model.getParametrizationBounds(1, curve)
        return float(first[0]), float(last[0])

    @staticmethod
    def _plane(coordinates: Iterable[float]) -> Floats:
        return np.reshape(np.asarray(coordinates, dtype=float), (-1, 3))[:, :2].T.copy()

    def length(self, curve: int) -> float:
        """Length of a curve, metres."""
        return self.length_between(curve, *self.bounds(curve))

    def length_between(self, curve: int, first: float, last: float) -> float:
        """Length of a curve between two of its parameters, metres."""
        starts, step = np.linspace(first, last, _PANELS, endpoint=False, retstep=True)
        points, weights = _gauss()
        at = (starts[:, None] + 0.5 * step * (points + 1.0)).ravel()
        speeds = np.hypot(*self.tangent(curve, at)).reshape(_PANELS, -1)
        return float(0.5 * step * (speeds @ weights).sum())

    def ends(self, curve: int) -> tuple[int, int]:
        """The kernel's points at the first and the last parameter of a curve."""
        (_, first), (_, last) = self._gmsh.model.getBoundary([(1, curve)], combined=False)
        return first, last

    def box(self, curve: int) -> tuple[Floats, Floats]:
        """Lower left and upper right corner (2,) of a box around a curve, metres."""
        box = np.array(self._gmsh.model.getBoundingBox(1, curve))
        return box[:2], box[3:5]

    def distance(self, points: Floats, curve: int) -> float:
        """Largest distance, metres, from ``points`` (2, n) to a curve."""
        nearest, _ = self._gmsh.model.getClosestPoint(1, curve, self._deep(points))
        return float(np.hypot(*(self._plane(nearest) - points)).max())

    def parameters(self, points: Floats, curve: int) -> Floats:
        """Parameters (n,) of ``points`` (2, n) on a curve."""
        found = self._gmsh.model.getParametrization(1, curve, self._deep(points))
        return np.asarray(found, dtype=float)

    @staticmethod
    def _deep(points: Floats) -> Floats:
        return np.vstack([points, np.zeros(points.shape[1])]).T.ravel()

    # Faces

    def area(self, face: int) -> float:
        """Area of a face, square metres."""
        return float(self._gmsh.model.occ.getMass(2, face))

    def border(self, face: int) -> list[int]:
        """Curves around a face, those of its holes included."""
        _, loops = self._gmsh.model.occ.getCurveLoops(face)
        return [abs(int(curve)) for loop in loops for curve in loop]

    def copies(self, curves: Iterable[int]) -> list[int]:
        """Copies of curves that no later cut or move of the originals touches."""
        occ = self._gmsh.model.occ
        return [tag for curve in curves for _, tag in occ.copy([(1, curve)])]

    def place(
        self,
        face: int | None,
        curves: Iterable[int],
        rotate: float,
        at: tuple[float, float],
    ) -> None:
        """Turn a face and loose curves about the origin (radians), then shift them."""
        faces = [] if face is None else [(2, face)]
        things = [*faces, *((1, curve) for curve in curves)]
        if rotate != 0.0:
            self._gmsh.model.occ.rotate(things, 0, 0, 0, 0, 0, 1, rotate)
        if at != (0.0, 0.0):
            self._gmsh.model.occ.translate(things, *at, 0)

    def fragment(
        self,
        faces: Sequence[int],
        points: Iterable[tuple[float, float]] = (),
        curves: Iterable[int] = (),
    ) -> list[set[int]]:
        """Cut faces by each other, and by curves: for each face what covers it.

        points : places (x, y), metres, that become vertices of every mesh of the faces
        Raises OutlineError where the kernel cannot cut them.
        """
        occ = self._gmsh.model.occ
        finer = [(1, curve) for curve in curves]
        finer += [(0, occ.addPoint(*point, 0.0)) for point in points]
        if len(faces) > 1 or finer:
            first, *others = [(2, face) for face in faces] + finer
            with gmsh_failures(OutlineError, "The shapes could not be cut by each other"):
                _, covers = self._gmsh.model.occ.fragment([first], others)
        else:
            covers = [[(2, face)] for face in faces]
        self.synchronize()
        return [{tag for dim, tag in cover if dim == 2} for cover in covers[: len(faces)]]

    def neighbours(self, curve: int) -> list[int]:
        """The faces beside a curve; twice the same one for a curve that ends within it."""
        if curve in self._within:
            return 2 * [self._within[curve]]
        return [int(face) for face in self._gmsh.model.getAdjacencies(1, curve)[0]]

    def inner_curves(self, face: int) -> list[int]:
        """Curves within a face that part it nowhere."""
        return [curve for curve, host in self._within.items() if host == face]

    def synchronize(self) -> None:
        """Let the kernel see what has been drawn since the last time."""
        model = self._gmsh.model
        model.occ.synchronize()
        faces = [face for _, face in model.getEntities(2)]
        inside = {face: model.mesh.getEmbedded(2, face) for face in faces}
        self._within = {tag: f for f, found in inside.items() for dim, tag in found if dim == 1}

    def is_inside(self, face: int, point: Floats) -> bool:
        """Whether a point (2,), metres, lies in a face."""
        return bool(self._gmsh.model.isInside(2, face, [*point, 0.0]))

    def keep_only(self, faces: Collection[int]) -> None:
        """Remove all faces but these, and every curve and point that is not of them."""
        model = self._gmsh.model
        kept = {(2, face) for face in faces}
        model.occ.remove([face for face in model.getEntities(2) if face not in kept], True)
        self.synchronize()
        inner = {e for face in faces for e in model.mesh.getEmbedded(2, face)}
        for dim in (1, 0):
            loose = [e for e in model.getEntities(dim) if not len(model.getAdjacencies(*e)[0])]
            model.occ.remove([e for e in loose if e not in inner], True)
            self.synchronize()

    # Mesh

    def triangulate(
        self,
        outline: Outline,
        sizes: Mapping[str, float],
        bend: Bend = USUAL,
        along: Mapping[int, float] = NOTHING,
    ) -> RawMesh:
        """Cover the outline with straight triangles, the same ones every time.

        sizes : region name -> longest wanted edge, metres
        along : curve -> longest wanted edge beside it, where that is shorter
        bend : how edges shorten along bent curves and beside gaps

        Edges are shorter still where a triangle could not take the shape of its curves.
        Raises MeshError where gmsh fails or its mesh is not sound.
        """
        self._set_options()
        nearby = self._size_map(outline, sizes, bend, along)
        for _ in range(_TRIES):
            self._set_sizes(outline, sizes, nearby)
            raw = self._straight_mesh(outline)
            wrong = spoilt(raw, self._tangents(raw))
            if not wrong.any():
                return raw
            nearby = nearby.shortened(raw.vertices[:, np.unique(raw.triangles[:, wrong])], _SHORTER)
        raise MeshError(
            "No mesh follows the curves of the outline; "
            "move apart or leave out shapes that all but touch."
        )

    def segments(
        self, outline: Outline, sizes: Mapping[str, float], bend: Bend = USUAL
    ) -> tuple[Floats, Floats]:
        """How finely a mesh of these sizes follows the curves, without making it.

        returns : for each bit of every curve (n,) how many segments it gets, and how long
            they are over the longest wanted there
        """
        nearby, longest = self._size_map(outline, sizes, bend), self._longest(outline, sizes)
        counts, shares = [], []
        for curve, most in longest.items():
            at = np.linspace(*self.bounds(curve), _BITS + 1)
            places = self.evaluate(curve, at)
            size = np.minimum([nearby.at(x, y) for x, y in places[:, 1:].T], most)
            counts.append(np.hypot(*np.diff(places)) / size)
            shares.append(size / most)
        return np.concatenate(counts), np.concatenate(shares)

    def _straight_mesh(self, outline: Outline) -> RawMesh:
        self._gmsh.model.mesh.clear()
        with gmsh_failures(MeshError, "gmsh could not cover the outline with triangles"):
            self._gmsh.model.mesh.generate(2)
        if self._stop:
            raise self._stop
        triangles, face = self._triangles(outline)
        segments, curve, parameters = self._segments(outline)
        used, corners = np.unique(triangles, return_inverse=True)
        corners = corners.reshape(3, -1)
        fixed = np.isin(used, segments) | np.isin(used, self._gmsh.model.mesh.getNodes(0)[0])
        places = smoothed(self._places(used), corners, ~fixed)
        along = np.searchsorted(used, segments)
        raw = RawMesh(places, corners, face, along, curve, parameters)
        if not np.isin(segments, used).all():
            raise MeshError("gmsh left a curve of the outline without triangles.")
        check_raw(self, raw, outline)
        return raw

    def _tangents(self, raw: RawMesh) -> Floats:
        """(2, 2, n_segments): derivatives at the first and last end of each segment."""
        found = np.empty((2, *raw.segment_parameters.shape))
        for curve in np.unique(raw.segment_curve):
            of_curve = raw.segment_curve == curve
            ends = raw.segment_parameters[:, of_curve]
            found[:, :, of_curve] = self.tangent(curve, ends.ravel()).reshape(2, *ends.shape)
        return found

    def _places(self, nodes: Ints) -> Floats:
        numbers, coordinates, _ = self._gmsh.model.mesh.getNodes()
        order = np.argsort(numbers)
        return self._plane(coordinates)[:, order[np.searchsorted(numbers[order], nodes)]]

    def _set_options(self) -> None:
        for name, value in MESH_OPTIONS.items():
            self._gmsh.option.setNumber(name, value)

    def _size_map(
        self,
        outline: Outline,
        sizes: Mapping[str, float],
        bend: Bend,
        along: Mapping[int, float] = NOTHING,
    ) -> SizeMap:
        longest = self._longest(outline, sizes)
        longest = {curve: min(most, along.get(curve, inf)) for curve, most in longest.items()}
        most = max(sizes.values())
        return size_map(self, longest, self._joined(longest), bend, most)

    def _longest(self, outline: Outline, sizes: Mapping[str, float]) -> dict[int, float]:
        """Longest wanted edge along each curve, metres."""
        wanted = _by_face(outline, sizes)
        return {
            curve.tag: min(wanted[face] for face in self.neighbours(curve.tag))
            for curve in outline.curves
        }

    def _set_sizes(self, outline: Outline, sizes: Mapping[str, float], nearby: SizeMap) -> None:
        wanted = _by_face(outline, sizes)
        least = nearby.least

        def size(dim: int, tag: int, x: float, y: float, z: float, default: float) -> float:
            try:
                longest = wanted[tag] if dim == 2 else default
                return longest if longest <= least else min(longest, nearby.at(x, y))
            except KeyboardInterrupt as stop:  # which gmsh would swallow
                self._stop = stop
                return default

        self._gmsh.model.mesh.setSizeCallback(size)

    def _joined(self, curves: Iterable[int]) -> dict[int, list[int]]:
        """For each curve the curves that share an end with it."""
        ends = {curve: self.ends(curve) for curve in curves}
        meeting: dict[int, set[int]] = {}
        for curve, points in ends.items():
            for point in points:
                meeting.setdefault(point, set()).add(curve)
        return {c: sorted(meeting[first] | meeting[last]) for c, (first, last) in ends.items()}

    def _triangles(self, outline: Outline) -> tuple[Ints, Ints]:
        corners, faces = [], []
        for face in (face for region in outline.regions for face in region.faces):
            _, numbers = self._gmsh.model.mesh.getElementsByType(2, face)
            if len(numbers) == 0:
                raise MeshError("gmsh left a part of the outline without triangles.")
            corners.append(self._counter_clockwise(np.reshape(numbers, (-1, 3)).T))
            faces.append(np.full(corners[-1].shape[1], face, dtype=np.int64))
        return np.hstack(corners), np.hstack(faces)

    def _counter_clockwise(self, corners: Ints) -> Ints:
        """The triangles of one face, turned over where the face looks down."""
        areas = signed_areas(self._places(corners.ravel()).reshape(2, 3, -1))
        return (corners if areas.sum() > 0.0 else corners[[0, 2, 1]]).astype(np.int64)

    def _segments(self, outline: Outline) -> tuple[Ints, Ints, Floats]:
        pairs, tags, parameters = [], [], []
        for curve in outline.curves:
            chain, along = self._chain(curve.tag)
            pairs.append(np.vstack([chain[:-1], chain[1:]]))
            parameters.append(np.vstack([along[:-1], along[1:]]))
            tags.append(np.full(along.size - 1, curve.tag, dtype=np.int64))
        return np.hstack(pairs), np.hstack(tags), np.hstack(parameters)

    def _chain(self, curve: int) -> tuple[Ints, Floats]:
        """Node numbers along a curve and the parameter of each, both rising."""
        mesh = self._gmsh.model.mesh
        inner, _, along = mesh.getNodes(1, curve)
        order = np.argsort(along)
        ends = [self._corner_node(tag) for tag in self.ends(curve)]
        first, last = self.bounds(curve)
        chain = np.concatenate([ends[:1], inner[order].astype(np.int64), ends[1:]])
        return chain, np.concatenate([[first], np.asarray(along)[order], [last]])

    def _corner_node(self, point: int) -> int:
        numbers, _, _ = self._gmsh.model.mesh.getNodes(0, point)
        return int(numbers[0])


def _by_face(outline: Outline, sizes: Mapping[str, float]) -> dict[int, float]:
    return {face: sizes[region.name] for region in outline.regions for face in region.faces}


@cache
def _gauss() -> tuple[Floats, Floats]:
    return np.polynomial.legendre.leggauss(_PER_PANEL)
