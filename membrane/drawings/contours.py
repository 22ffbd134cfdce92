"""The closed contours of a drawing: which is the outline, and which bears what name."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from membrane.drawings.join import Gap, Loop
from membrane.drawings.pieces import Line, Points
from membrane.drawings.sketch import WHOLE, Stroke
from membrane.errors import DrawingError
from membrane.records.arrays import Bools
from membrane.wording import listed, nearest, shown

UNNAMED = "rim"
"""Name of an edge whose curves have none."""

_PER_CURVE = 64
_LOOKED_AT = 24
_FLAT = 1e-10
_TOUCHING = 1e-6


@dataclass(frozen=True)
class Contour:
    """One closed contour.

    strokes : run one after the other, metres
    group : WHOLE, or the region of a mesh that it surrounds
    gaps : that were closed on the way
    """

    strokes: tuple[Stroke, ...]
    group: str
    gaps: tuple[Gap, ...] = ()

    @property
    def edge_names(self) -> tuple[str, ...]:
        """For each stroke the edge that it belongs to."""
        return tuple(stroke.name or UNNAMED for stroke in self.strokes)

    @property
    def edges(self) -> tuple[str, ...]:
        """Names of its edges, in the order in which they follow each other."""
        return tuple(dict.fromkeys(self.edge_names))

    @property
    def names(self) -> tuple[str, ...]:
        """The names that it may be chosen by."""
        return self.edges if self.group == WHOLE else (self.group,)

    @cached_property
    def polygon(self) -> Points:
        """(n,) points along it, close together where it is curved."""
        curve = np.linspace(0.0, 1.0, _PER_CURVE, endpoint=False)
        pieces = [stroke.piece for stroke in self.strokes]
        return np.hstack([p.at(curve[:1] if isinstance(p, Line) else curve) for p in pieces])

    @cached_property
    def area(self) -> float:
        """Square metres, nearly."""
        points = self.polygon
        return abs(0.5 * float(np.imag(np.conj(points) * np.roll(points, -1)).sum()))

    @property
    def is_flat(self) -> bool:
        """Whether it encloses no area, or as much on its left as on its right."""
        reach = float(abs(self.polygon - self.polygon[0]).max())
        return self.area <= _FLAT * reach**2

    def surrounds(self, other: Contour) -> bool:
        """Whether most of the other contour that does not touch this one lies within it."""
        inside = self._inside(other.polygon[:: max(len(other.polygon) // _LOOKED_AT, 1)])
        return inside.size == 0 or float(np.mean(inside)) > 0.5

    def _inside(self, points: Points) -> Bools:
        """For each of the points that are not on the contour, whether it is inside."""
        start = self.polygon
        end = np.roll(start, -1)
        near = _TOUCHING * float(abs(start - start[0]).max())
        free = points[[_distance(point, start, end) > near for point in points]]
        turns = [np.angle((end - point) / (start - point)).sum() for point in free]
        return np.asarray(np.abs(turns) > np.pi)


def _distance(point: complex, start: Points, end: Points) -> float:
    chord = np.where(end == start, 1.0, end - start)
    along = np.clip(np.real((point - start) / chord), 0.0, 1.0)
    return float(abs(point - start - along * (end - start)).min())


def contours(groups: Mapping[str, Sequence[Loop]]) -> tuple[Contour, ...]:
    """All contours of a drawing; of a mesh's region only its outer ones."""
    found = []
    for group, loops in groups.items():
        own = [Contour(loop.strokes, group, loop.gaps) for loop in loops]
        found += own if group == WHOLE else _outermost(own)
    return tuple(found)


def _outermost(found: Sequence[Contour]) -> list[Contour]:
    """The contours that no larger one surrounds."""
    outer: list[Contour] = []
    for contour in sorted(found, key=lambda c: -c.area):
        if not any(larger.surrounds(contour) for larger in outer):
            outer.append(contour)
    return outer


def outline(found: Sequence[Contour]) -> Contour:
    """The contour around all others. Raises DrawingError where there are several."""
    whole = [contour for contour in found if contour.group == WHOLE]
    if not whole:
        raise DrawingError("the drawing has no closed contour; draw the outline with curves.")
    outer = _outermost(whole)
    if len(outer) > 1:
        named = labels(found)
        choices = [name for name, contour in named.items() if contour in outer]
        raise DrawingError(
            f"the drawing has {len(outer)} contours side by side, {listed(choices)}; "
            f"choose one, such as contour = {shown(choices[0])}."
        )
    return outer[0]


def labels(found: Sequence[Contour]) -> dict[str, Contour]:
    """Every contour by each of its names; those that share one are NAME.1, NAME.2, …

    A mesh's region comes before a boundary of the same name.
    """
    bearers: dict[str, list[Contour]] = {}
    for contour in sorted(found, key=lambda c: c.group == WHOLE):
        for name in contour.names:
            others = bearers.setdefault(name, [])
            if not others or (others[0].group == WHOLE) == (contour.group == WHOLE):
                others.append(contour)
    named = {}
    for name, those in bearers.items():
        for k, contour in enumerate(those, 1):
            named[name if len(those) == 1 else f"{name}.{k}"] = contour
    return named


def chosen(found: Sequence[Contour], name: str) -> Contour:
    """The contour of that name. Raises DrawingError where there is none."""
    known = labels(found)
    if name not in known:
        hint = nearest(name, known)
        named = hint if hint != "." else f"; known are {listed(known)}."
        raise DrawingError(f"the drawing has no contour {shown(name)}{named}")
    return known[name]
