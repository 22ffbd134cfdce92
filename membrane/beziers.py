"""Bézier pieces that follow a smooth closed curve, for geometry scripts."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from math import comb, cos, pi
from typing import Any

import numpy as np

from membrane.records.arrays import Floats

DEGREE = 12
"""Degree of the pieces: few pieces for a curve, and well within what the kernel takes."""

AT_ENDS = 3
"""Control points at each end that position, slope and curvature fix."""

_SAMPLES = 4

Curve = Callable[[Floats, int], Floats]
"""Point (2, n), or its derivative of an order up to 2, at parameters (n,)."""


def follow(curve: Curve, knots: Floats, tolerance: float) -> list[Floats]:
    """Control points (2, DEGREE + 1) of the pieces, from the first knot to the last.

    knots : (n,), rising; the curve is a smooth function between neighbours
    tolerance : how far a piece may leave the curve, metres

    Pieces end at knots, and meet there with the curve's own first two derivatives. A piece
    between neighbouring knots is not cut again, whatever its error.
    """
    piece = _piece(curve, knots[0], knots[-1])
    if len(knots) == 2 or _deviation(curve, knots, piece) <= tolerance:
        return [piece]
    middle = len(knots) // 2
    before = follow(curve, knots[: middle + 1], tolerance)
    return before + follow(curve, knots[middle:], tolerance)


def draw_closed(geometry: Any, pieces: Sequence[Floats]) -> tuple[Any, list[Any]]:
    """The pygmsh surface that pieces end to end enclose, and their curves."""
    starts = [geometry.add_point(piece[:, 0].tolist()) for piece in pieces]
    ends = [*starts[1:], starts[0]]
    curves = []
    for start, piece, end in zip(starts, pieces, ends, strict=True):
        inner = [geometry.add_point(point) for point in piece[:, 1:-1].T.tolist()]
        curves.append(geometry.add_bezier([start, *inner, end]))
    loop = geometry.add_curve_loop(curves)
    return geometry.add_plane_surface(loop), curves


def evaluate(piece: Floats, s: Floats) -> Floats:
    """Points (2, n) of a piece at parameters ``s`` (n,) from 0 to 1."""
    return np.asarray(piece @ _bernstein(piece.shape[1] - 1, s))


def _piece(curve: Curve, start: float, stop: float) -> Floats:
    """Hermite's interpolation at the ends, Lagrange's at Chebyshev points between them."""
    length, ends = stop - start, np.array([start, stop])
    place, slope, bend = (curve(ends, order) * length**order for order in range(3))
    slope, bend = slope / DEGREE, bend / (DEGREE * (DEGREE - 1))
    piece = np.zeros((2, DEGREE + 1))
    piece[:, 0], piece[:, -1] = place.T
    piece[:, 1], piece[:, -2] = (place + slope * [1.0, -1.0]).T
    piece[:, 2], piece[:, -3] = (place + 2 * slope * [1.0, -1.0] + bend).T
    inner = slice(AT_ENDS, DEGREE + 1 - AT_ENDS)
    s = _chebyshev(DEGREE + 1 - 2 * AT_ENDS)
    rest = curve(start + length * s, 0) - evaluate(piece, s)
    piece[:, inner] = np.linalg.solve(_bernstein(DEGREE, s)[inner].T, rest.T).T
    return piece


def _deviation(curve: Curve, knots: Floats, piece: Floats) -> float:
    shares = (np.arange(_SAMPLES) + 0.5) / _SAMPLES
    at = (knots[:-1, None] + np.diff(knots)[:, None] * shares).ravel()
    off = curve(at, 0) - evaluate(piece, (at - knots[0]) / (knots[-1] - knots[0]))
    return float(np.hypot(*off).max())


def _chebyshev(count: int) -> Floats:
    return np.array([(1 - cos(pi * (k + 0.5) / count)) / 2 for k in range(count)])


def _bernstein(degree: int, s: Floats) -> Floats:
    """(degree + 1, n) values of the Bernstein polynomials."""
    powers: Iterable[Floats] = (
        comb(degree, k) * s**k * (1 - s) ** (degree - k) for k in range(degree + 1)
    )
    return np.array(list(powers))
