"""DXF drawings: the curves of the model space, by layer."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, field
from itertools import pairwise
from math import pi, radians
from pathlib import Path
from typing import Any

import numpy as np

from membrane.drawings.pieces import Affine, Arc, Line, Piece
from membrane.drawings.sketch import WHOLE, Sketch, Stroke
from membrane.drawings.splines import beziers
from membrane.errors import DrawingError

METRES = {
    **{1: 0.0254, 2: 0.3048, 3: 1609.344, 4: 1e-3, 5: 1e-2, 6: 1.0, 7: 1e3, 8: 25.4e-9},
    **{9: 25.4e-6, 10: 0.9144, 11: 1e-10, 12: 1e-9, 13: 1e-6, 14: 0.1, 15: 10.0, 16: 100.0},
}
"""Metres of the unit codes of the header's $INSUNITS."""

UNNAMED = "0"
"""The layer of curves that were put on no layer."""

_FLAT = 1e-9
_NOT_DRAWN = ("POINT", "TEXT", "MTEXT", "ATTDEF", "VIEWPORT", "DIMENSION", "LEADER", "MULTILEADER")
"""Entities that nobody takes for a part of an outline; leaving them out is not worth a note."""


def read(path: Path) -> Sketch:
    """The curves of a DXF file. Raises DrawingError where it cannot be read or is not flat."""
    import ezdxf

    try:
        document = ezdxf.readfile(path)  # type: ignore[attr-defined]
        reader = _Reader(_hidden(document))
        reader.read(document.modelspace())
        unit = METRES.get(int(document.header.get("$INSUNITS", 0)))
    except DrawingError:
        raise
    except Exception as failure:  # a broken file makes ezdxf raise anything at all
        raise DrawingError(
            f"{path.name} cannot be read as DXF ({_short(failure)}); export it again."
        ) from failure
    reader.check_flat(path)
    return Sketch({WHOLE: tuple(reader.strokes)}, unit, notes=tuple(reader.notes()))


def _short(failure: Exception) -> str:
    return str(failure).splitlines()[0].rstrip(".") if str(failure) else "it breaks off"


def _hidden(document: Any) -> set[str]:
    """Layers that are switched off or frozen, and so not seen."""
    return {
        layer.dxf.name.lower() for layer in document.layers if layer.is_off() or layer.is_frozen()
    }


@dataclass
class _Reader:
    """Strokes and heights met so far, and what was left out."""

    hidden: set[str]
    strokes: list[Stroke] = field(default_factory=list)
    heights: list[float] = field(default_factory=list)
    left_out: Counter[str] = field(default_factory=Counter)
    unseen: set[str] = field(default_factory=set)
    through_points: int = 0

    def read(self, entities: Iterable[Any], block_layer: str = UNNAMED) -> None:
        """Take in entities; those of a block on no layer lie on the block's own."""
        for entity in entities:
            layer = entity.dxf.get("layer", UNNAMED)
            layer = block_layer if layer == UNNAMED else layer
            if layer.lower() in self.hidden:
                self.unseen.add(layer)
            elif entity.dxftype() == "INSERT":
                for part in entity.multi_insert() if entity.mcount > 1 else (entity,):
                    self.read(part.virtual_entities(), layer)
            elif entity.dxftype() in _READERS:
                self._take(entity, layer)
            elif entity.dxftype() not in _NOT_DRAWN:
                self.left_out[entity.dxftype()] += 1

    def _take(self, entity: Any, layer: str) -> None:
        name = "" if layer == UNNAMED else layer
        for piece in _READERS[entity.dxftype()](self, entity):
            self.strokes.append(Stroke(name, piece, (layer,)))

    def flat(self, point: Any) -> complex:
        """A point in the plane; its height is kept and looked at in the end."""
        x, y, z = point
        self.heights.append(float(z))
        return complex(float(x), float(y))

    def level(self, entity: Any, height: float = 0.0) -> Affine:
        """From the plane that an entity is drawn in to the drawing's own."""
        ocs = entity.ocs()
        origin, right, up = (
            ocs.to_wcs(p) for p in ((0, 0, height), (1, 0, height), (0, 1, height))
        )
        self.heights += [origin.z, right.z, up.z]
        right, up = right - origin, up - origin
        return Affine.matrix(right.x, right.y, up.x, up.y, origin.x, origin.y)

    def check_flat(self, path: Path) -> None:
        ends = [z for s in self.strokes for z in (s.piece.start, s.piece.end)]
        size = max((abs(z - ends[0]) for z in ends), default=0.0)
        if self.heights and np.ptp(self.heights) > _FLAT * max(size, 1.0):
            raise DrawingError(
                f"{path.name} is not flat: its curves lie between z = {min(self.heights):g} and "
                f"z = {max(self.heights):g}; draw the outline in the xy plane."
            )

    def notes(self) -> Iterator[str]:
        if self.left_out:
            found = ", ".join(f"{count} {kind}" for kind, count in sorted(self.left_out.items()))
            yield f"left out what is no curve: {found}"
        if self.unseen:
            yield f"left out the hidden layers {', '.join(sorted(self.unseen))}"
        if self.through_points:
            yield f"drew {self.through_points} splines smoothly through their fit points"


def _line(reader: _Reader, entity: Any) -> Iterator[Piece]:
    yield Line(reader.flat(entity.dxf.start), reader.flat(entity.dxf.end))


def _circle(reader: _Reader, entity: Any) -> Iterator[Piece]:
    centre = entity.dxf.center
    arc = Arc.circle(complex(centre.x, centre.y), entity.dxf.radius, 0.0, 2 * pi)
    yield arc.mapped(reader.level(entity, centre.z))


def _arc(reader: _Reader, entity: Any) -> Iterator[Piece]:
    centre = entity.dxf.center
    first = radians(entity.dxf.start_angle)
    turn = (radians(entity.dxf.end_angle) - first) % (2 * pi) or 2 * pi
    arc = Arc.circle(complex(centre.x, centre.y), entity.dxf.radius, first, first + turn)
    yield arc.mapped(reader.level(entity, centre.z))


def _ellipse(reader: _Reader, entity: Any) -> Iterator[Piece]:
    centre = reader.flat(entity.dxf.center)
    major, minor = entity.dxf.major_axis, entity.minor_axis
    reader.heights += [entity.dxf.center.z + major.z, entity.dxf.center.z + minor.z]
    first = entity.dxf.start_param
    turn = (entity.dxf.end_param - first) % (2 * pi) or 2 * pi
    a, b = complex(major.x, major.y), complex(minor.x, minor.y)
    yield Arc(centre, a, b, first, first + turn)


def _spline(reader: _Reader, entity: Any) -> Iterator[Piece]:
    given = len(entity.control_points) > 0
    spline = entity if given else entity.construction_tool()
    weights, knots = entity.weights, entity.knots
    if not given:
        reader.through_points += 1
        weights, knots = spline.weights(), spline.knots()
    points = [reader.flat(point) for point in spline.control_points]
    degree = entity.dxf.degree if given else spline.degree
    yield from beziers(points, list(weights), list(knots), degree)


def _lwpolyline(reader: _Reader, entity: Any) -> Iterator[Piece]:
    level = reader.level(entity, entity.dxf.elevation)
    corners = [(complex(x, y), bulge) for x, y, bulge in entity.get_points("xyb")]
    yield from (piece.mapped(level) for piece in _polyline_pieces(corners, entity.closed))


def _polyline(reader: _Reader, entity: Any) -> Iterator[Piece]:
    if not (entity.is_2d_polyline or entity.is_3d_polyline):
        reader.left_out["POLYLINE mesh"] += 1
        return
    shown = [vertex for vertex in entity.vertices if not vertex.dxf.flags & 16]
    if entity.is_3d_polyline:
        corners = [(reader.flat(vertex.dxf.location), 0.0) for vertex in shown]
        yield from _polyline_pieces(corners, entity.is_closed)
        return
    places = [vertex.dxf.location for vertex in shown]
    level = reader.level(entity, places[0].z if places else 0.0)
    bulges = [vertex.dxf.get("bulge", 0.0) for vertex in shown]
    corners = [(complex(p.x, p.y), b) for p, b in zip(places, bulges, strict=True)]
    yield from (piece.mapped(level) for piece in _polyline_pieces(corners, entity.is_closed))


def _polyline_pieces(corners: list[tuple[complex, float]], closed: bool) -> Iterator[Piece]:
    around = [*corners, corners[0]] if closed and corners else corners
    for (start, bulge), (end, _) in pairwise(around):
        if start != end:
            yield Arc.bulged(start, end, bulge) if bulge else Line(start, end)


_READERS: dict[str, Callable[[_Reader, Any], Iterator[Piece]]] = {
    "LINE": _line,
    "CIRCLE": _circle,
    "ARC": _arc,
    "ELLIPSE": _ellipse,
    "SPLINE": _spline,
    "LWPOLYLINE": _lwpolyline,
    "POLYLINE": _polyline,
}
