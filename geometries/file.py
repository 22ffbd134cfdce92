"""A closed contour of a DXF or SVG drawing or of a mesh; its edges bear the layers' names."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from membrane.drawings import Found, find_contour
from membrane.drawings.pieces import Bezier, Line, Piece
from membrane.records.outline import Drawing
from membrane.units import File, PositiveLength, UnitOfLength


@dataclass(frozen=True)
class Options:
    """The file, and what to take from it.

    path : from the study file on
    unit : of the drawing, where it does not say or says it wrongly
    contour : a layer, id or tag; without it the contour around all others
    layers : layers, groups or ids to look at; without them all
    tolerance : widest gap between curves that is closed
    """

    path: File
    unit: UnitOfLength | None = None
    contour: str | None = None
    layers: tuple[str, ...] = ()
    tolerance: PositiveLength | None = None

    def __post_init__(self) -> None:
        _found(self)


def edges(options: Options) -> tuple[str, ...]:
    return _found(options).contour.edges


def build(geometry: Any, options: Options) -> Drawing:
    found = _found(options)
    pieces = [stroke.piece for stroke in found.contour.strokes]
    starts = [geometry.add_point(_place(piece.start)) for piece in pieces]
    ends = [*starts[1:], starts[0]]
    curves = [
        _curve(geometry, piece, start, end)
        for piece, start, end in zip(pieces, starts, ends, strict=True)
    ]
    surface = geometry.add_plane_surface(geometry.add_curve_loop(curves))
    named: dict[str, list[Any]] = {name: [] for name in found.contour.edges}
    for name, curve in zip(found.contour.edge_names, curves, strict=True):
        named[name].append(curve)
    return Drawing(surface, named, found.notes)


def _found(options: Options) -> Found:
    o = options
    return find_contour(o.path, o.unit, o.contour, o.layers, o.tolerance)


def _place(point: complex) -> list[float]:
    return [point.real, point.imag]


def _curve(geometry: Any, piece: Piece, start: Any, end: Any) -> Any:
    """The kernel's own curve of the same kind, between points that its neighbours share.

    The kernel finds an elliptic arc from its ends, which does not work for every arc, so
    it gets the conic as a rational Bézier.
    """
    if isinstance(piece, Line):
        return geometry.add_line(start, end)
    if isinstance(piece, Bezier):
        return _bezier(geometry, piece, start, end)
    if piece.is_circle:
        return geometry.add_circle_arc(start, geometry.add_point(_place(piece.centre)), end)
    return _bezier(geometry, piece.conic, start, end)


def _bezier(geometry: Any, bezier: Bezier, start: Any, end: Any) -> Any:
    inner = [geometry.add_point(_place(point)) for point in bezier.points[1:-1]]
    points = [start, *inner, end]
    if bezier.weights:
        return _Rational(geometry.env, points, bezier.weights)
    return geometry.add_bezier(points)


class _Rational:
    """A rational Bézier, which pygmsh does not draw itself."""

    def __init__(self, env: Any, points: list[Any], weights: tuple[float, ...]) -> None:
        degree = len(points) - 1
        whole = [degree + 1] * 2
        tags = [point._id for point in points]
        self._id = env.addBSpline(tags, -1, degree, weights, [0.0, 1.0], whole)
        self.dim_tag = (1, self._id)
        self.points = points
