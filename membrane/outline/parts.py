"""Stretches of an edge that are edges of their own: where they end, and what lies on them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import cos, pi, sin

import numpy as np

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline.copies import Copy
from membrane.records.arrays import Floats
from membrane.records.study import Along, EdgePart, Shape

_SAMPLES = 129
_STEPS = 200
# Metres of rounding for each metre from the origin.
_ROUNDING = 1e-12


@dataclass(frozen=True)
class Split:
    """An edge that is split into parts.

    edge : its curves as they were drawn
    origin, axis : of the shape that it bounds; metres and radians
    """

    kernel: Kernel
    parts: Sequence[EdgePart]
    edge: Sequence[Copy]
    origin: Floats
    axis: float

    @classmethod
    def of(
        cls, kernel: Kernel, parts: Sequence[EdgePart], edge: Sequence[Copy], shape: Shape
    ) -> Split:
        """The split of an edge of a placed shape."""
        return cls(kernel, parts, edge, np.array(shape.at), shape.rotate)

    def points(self) -> list[Floats]:
        """Where the parts begin and end, (2,) metres each."""
        found = []
        for part in self.parts:
            if part.along is not Along.CURVES:
                for start, stop in self._stretches(part):
                    found += [self._point(part, start), self._point(part, stop)]
        return found

    def part_at(self, copy: Copy, point: Floats) -> str | None:
        """Name of the part on which a point (2,) of one of the edge's curves lies.

        Raises OutlineError where two parts hold it.
        """
        names = [part.name for part in self.parts if self._holds(part, copy, point)]
        if len(names) > 1:
            raise OutlineError(
                f"The parts {names[0]} and {names[1]} of the edge {copy.name} overlap; "
                "let one end where the other starts."
            )
        return names[0] if names else None

    def _holds(self, part: EdgePart, copy: Copy, point: Floats) -> bool:
        here, period = self._measure(part.along, copy, point), self._period(part)
        extent = part.stop - part.start
        if part.along is Along.ANGLE:
            extent %= period
        return any((here - start) % period < extent for start, _ in self._stretches(part))

    def _stretches(self, part: EdgePart) -> list[tuple[float, float]]:
        steps = [self._period(part) * k / part.repeat for k in range(part.repeat)]
        stretches = [(part.start + step, part.stop + step) for step in steps]
        if part.along is Along.LENGTH:
            self._check_length(part, stretches)
        return stretches

    def _check_length(self, part: EdgePart, stretches: list[tuple[float, float]]) -> None:
        whole = self._period(part)
        if stretches[-1][1] > whole * (1 + _ROUNDING):
            raise OutlineError(
                f"The part {part.name} ends {1e3 * stretches[-1][1]:.6g} mm along the edge "
                f"{part.edge}, which is {1e3 * whole:.6g} mm long; let it end earlier."
            )

    def _period(self, part: EdgePart) -> float:
        if part.along is Along.ANGLE:
            return 2.0 * pi
        if part.along is Along.CURVES:
            return float(len(self.edge))
        return sum(self.kernel.length(copy.tag) for copy in self.edge)

    def _measure(self, along: Along, copy: Copy, point: Floats) -> float:
        """The place of a point of one of the edge's curves, as the part counts it."""
        if along is Along.ANGLE:
            x, y = point - self.origin
            return float(np.arctan2(y, x)) - self.axis
        if along is Along.CURVES:
            return copy.place + 0.5
        before = sum(self.kernel.length(other.tag) for other in self.edge[: copy.place])
        first, _ = self.kernel.bounds(copy.tag)
        at = float(self.kernel.parameters(point[:, None], copy.tag)[0])
        return before + self.kernel.length_between(copy.tag, first, at)

    def _point(self, part: EdgePart, place: float) -> Floats:
        if part.along is Along.ANGLE:
            return self._at_angle(part, place + self.axis)
        return self._at_length(place)

    def _at_length(self, place: float) -> Floats:
        left = place
        for copy in self.edge:
            length = self.kernel.length(copy.tag)
            if left <= length or copy is self.edge[-1]:
                break
            left -= length
        first, last = self.kernel.bounds(copy.tag)

        def short(at: float) -> float:
            return left - self.kernel.length_between(copy.tag, first, at)

        at = last if short(last) >= 0.0 else _bisect(short, first, last)
        return self.kernel.evaluate(copy.tag, np.array([at]))[:, 0]

    def _at_angle(self, part: EdgePart, angle: float) -> Floats:
        """Where the ray at an angle (radians from +x) leaves through the edge."""
        found = [point for copy in self.edge for point in self._crossings(copy.tag, angle)]
        if len(found) != 1:
            shown = f"{np.degrees(angle - self.axis) % 360.0:.6g} deg"
            times = "nowhere" if not found else f"{len(found)} times"
            raise OutlineError(
                f"The part {part.name} ends at {shown}, where the ray from the shape's origin "
                f"meets the edge {part.edge} {times}; "
                "give lengths along the edge instead of angles."
            )
        return found[0]

    def _crossings(self, curve: int, angle: float) -> list[Floats]:
        across = np.array([-sin(angle), cos(angle)])
        along = np.array([cos(angle), sin(angle)])

        def offsets(at: Floats) -> Floats:
            away = self.kernel.evaluate(curve, at) - self.origin[:, None]
            offset = across @ away
            return np.asarray(np.where(np.abs(offset) < _ROUNDING * np.hypot(*away), 0.0, offset))

        def offset(at: float) -> float:
            return float(offsets(np.array([at]))[0])

        samples = np.linspace(*self.kernel.bounds(curve), _SAMPLES)
        above = offsets(samples) > 0.0
        roots = [
            _bisect(offset, float(samples[k]), float(samples[k + 1]))
            for k in np.nonzero(above[1:] != above[:-1])[0]
        ]
        points = self.kernel.evaluate(curve, np.array(roots)) if roots else np.empty((2, 0))
        return [p for p in points.T if along @ (p - self.origin) > 0.0]


def _bisect(f: Callable[[float], float], low: float, high: float) -> float:
    """Where f, which is positive at one end only, changes its sign."""
    rising = f(high) > 0.0
    for _ in range(_STEPS):
        middle = 0.5 * (low + high)
        if middle in (low, high):
            break
        if (f(middle) > 0.0) == rising:
            high = middle
        else:
            low = middle
    return low if abs(f(low)) <= abs(f(high)) else high
