"""What outlines are drawn with: straight lines, elliptic arcs and rational Béziers, all exact.

A point (x, y) is the complex number x + iy, so that turning and scaling is one product.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import reduce
from itertools import pairwise
from typing import Any, TypeAlias

import numpy as np
from numpy.typing import NDArray

from membrane.records.arrays import Floats

Points: TypeAlias = NDArray[np.complex128]

_ROUND = 1e-12
"""How far an ellipse's axes may differ, relatively, for it to be a circle."""


@dataclass(frozen=True)
class Affine:
    """The map z -> p z + q conj(z) + r of the plane."""

    p: complex = 1.0
    q: complex = 0.0
    r: complex = 0.0

    @classmethod
    def matrix(cls, a: float, b: float, c: float, d: float, e: float, f: float) -> Affine:
        """x' = a x + c y + e, y' = b x + d y + f."""
        return cls(complex(a + d, b - c) / 2, complex(a - d, b + c) / 2, complex(e, f))

    def __call__(self, z: Any) -> Any:
        return self.turned(z) + self.r

    def turned(self, z: Any) -> Any:
        """The image of a vector, which no shift changes."""
        return self.p * z + self.q * np.conj(z)


@dataclass(frozen=True)
class Line:
    """A straight line."""

    start: complex
    end: complex

    def at(self, t: Floats) -> Points:
        """Points (n,) at shares ``t`` (n,) of the line."""
        return np.asarray(self.start + t * (self.end - self.start))

    def reversed(self) -> Line:
        """The same line, run backwards."""
        return Line(self.end, self.start)

    def mapped(self, affine: Affine) -> Line:
        """The line's image."""
        return Line(complex(affine(self.start)), complex(affine(self.end)))


@dataclass(frozen=True)
class Arc:
    """centre + a cos t + b sin t, for t (radians) from ``first`` to ``last``, either way."""

    centre: complex
    a: complex
    b: complex
    first: float
    last: float

    @classmethod
    def circle(cls, centre: complex, radius: float, first: float, last: float) -> Arc:
        """An arc of a circle; angles in radians, counter-clockwise where they rise."""
        return cls(centre, radius, 1j * radius, first, last)

    @classmethod
    def bulged(cls, start: complex, end: complex, bulge: float) -> Arc:
        """The arc whose ``bulge`` is tan(its angle / 4), positive where it turns left."""
        half = 0.5 * (end - start)
        centre = start + half + 1j * half * (1.0 - bulge**2) / (2.0 * bulge)
        a = start - centre
        return cls(centre, a, 1j * a, 0.0, 4.0 * float(np.arctan(bulge)))

    @property
    def start(self) -> complex:
        return complex(self.at(np.array(0.0)))

    @property
    def end(self) -> complex:
        return complex(self.at(np.array(1.0)))

    @property
    def is_circle(self) -> bool:
        """Whether the axes are equal, up to rounding.

        The arc is u exp(it) + v exp(-it) around its centre; a circle turns one way only.
        """
        one, other = sorted((abs(self.a - 1j * self.b), abs(self.a + 1j * self.b)))
        return one <= _ROUND * other

    @property
    def conic(self) -> Bezier:
        """The same curve, of less than half a turn, as a rational quadratic Bézier.

        G. Farin, Curves and Surfaces for CAGD, on conics (from memory); exact for ellipses,
        as maps of the plane keep the weights.
        """
        middle, half = 0.5 * (self.first + self.last), 0.5 * (self.last - self.first)
        weight = float(np.cos(half))
        tip = self.centre + (self.a * np.cos(middle) + self.b * np.sin(middle)) / weight
        return Bezier((self.start, complex(tip), self.end), (1.0, weight, 1.0))

    def at(self, t: Floats) -> Points:
        """Points (n,) at shares ``t`` (n,) of the angle."""
        angle = self.first + t * (self.last - self.first)
        return np.asarray(self.centre + self.a * np.cos(angle) + self.b * np.sin(angle))

    def between(self, s: float, t: float) -> Arc:
        """The part from share s to share t of the angle."""
        turn = self.last - self.first
        return Arc(self.centre, self.a, self.b, self.first + s * turn, self.first + t * turn)

    def reversed(self) -> Arc:
        """The same arc, run backwards."""
        return Arc(self.centre, self.a, self.b, self.last, self.first)

    def mapped(self, affine: Affine) -> Arc:
        """The arc's image, an elliptic arc again."""
        centre, a, b = affine(self.centre), affine.turned(self.a), affine.turned(self.b)
        return Arc(complex(centre), complex(a), complex(b), self.first, self.last)


@dataclass(frozen=True)
class Bezier:
    """A Bézier of any degree, rational where it has ``weights``."""

    points: tuple[complex, ...]
    weights: tuple[float, ...] = ()

    @property
    def start(self) -> complex:
        return self.points[0]

    @property
    def end(self) -> complex:
        return self.points[-1]

    @property
    def lifted(self) -> Points:
        """(degree + 1, 2): weighted point and weight of each control point."""
        weights = np.asarray(self.weights or np.ones(len(self.points)))
        return np.stack([weights * np.array(self.points), weights], axis=1)

    @classmethod
    def lowered(cls, lifted: Points) -> Bezier:
        """From weighted points and weights; without weights where they are all equal."""
        weights = lifted[:, 1].real
        points = tuple(complex(point) for point in lifted[:, 0] / weights)
        even = bool(np.ptp(weights) <= 1e-14 * abs(weights).max())
        return cls(points, () if even else tuple(float(w) for w in weights / weights[0]))

    def at(self, t: Floats) -> Points:
        """Points (n,) at parameters ``t`` (n,) from 0 to 1."""
        share = np.asarray(t)[..., None]
        level = [row + 0 * share for row in self.lifted]
        while len(level) > 1:
            level = [(1 - share) * a + share * b for a, b in pairwise(level)]
        return np.asarray(level[0][..., 0] / level[0][..., 1].real)

    def between(self, s: float, t: float) -> Bezier:
        """The part from parameter s to parameter t, exactly."""
        degree = len(self.points) - 1
        rows = [polar(self.lifted, [s] * (degree - k) + [t] * k) for k in range(degree + 1)]
        return Bezier.lowered(np.array(rows))

    def reversed(self) -> Bezier:
        """The same curve, run backwards."""
        return Bezier(self.points[::-1], self.weights[::-1])

    def mapped(self, affine: Affine) -> Bezier:
        """The curve's image."""
        return Bezier(tuple(complex(affine(point)) for point in self.points), self.weights)


Piece: TypeAlias = Line | Arc | Bezier


def polar(control: Points, arguments: Sequence[float]) -> Points:
    """The polar form (blossom) of a Bézier at as many arguments as its degree.

    L. Ramshaw, Comput. Aided Geom. Design 6 (1989) 323 (from memory).
    """

    def step(level: list[Points], t: float) -> list[Points]:
        return [(1 - t) * a + t * b for a, b in pairwise(level)]

    return np.asarray(reduce(step, arguments, list(control))[0])


def fitted(piece: Piece, start: complex, end: complex) -> Piece:
    """A piece turned and scaled a little, so that it runs from ``start`` to ``end``.

    A circle stays a circle by this, and an ellipse an ellipse.
    """
    if piece.start == start and piece.end == end:
        return piece
    scale = (end - start) / (piece.end - piece.start)
    return piece.mapped(Affine(p=scale, r=start - scale * piece.start))
