"""A curve r(theta) about the origin, a mean radius and harmonics; its edge is the rim."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from math import pi
from typing import Any

import numpy as np

from membrane.beziers import draw_closed, follow
from membrane.records.arrays import Floats
from membrane.records.outline import Drawing
from membrane.units import Length, PositiveLength

_EXACT = 1e-12
_KNOTS = 8
"""Knots for each wave of the highest harmonic and one more; a piece between two is exact."""


@dataclass(frozen=True)
class Options:
    """The mean radius, and harmonics [k, a, b] that add a cos(k theta) + b sin(k theta)."""

    mean_radius: PositiveLength
    harmonics: tuple[tuple[int, Length, Length], ...] = ()

    def __post_init__(self) -> None:
        orders = [k for k, _, _ in self.harmonics]
        for k in orders:
            if k < 1:
                raise ValueError(
                    f"the number of a harmonic must be 1 or more, not {k}; "
                    "the mean belongs in mean_radius."
                )
            if orders.count(k) > 1:
                raise ValueError(f"harmonic {k} is given twice; add its two entries up.")
        least, at = _least(self)
        if least <= 1e-3 * self.mean_radius:
            raise ValueError(
                f"the radius falls to {1e3 * least:.3g} mm near {np.degrees(at):.0f} deg; "
                "make the harmonics smaller, so that it stays positive."
            )


def edges(options: Options) -> tuple[str, ...]:
    return ("rim",)


def build(geometry: Any, options: Options) -> Drawing:
    def curve(theta: Floats, order: int) -> Floats:
        r, slope, bend = (_radius(options, theta, n) for n in range(3))
        along = [r, slope + 1j * r, bend + 2j * slope - r][order] * np.exp(1j * theta)
        return np.array([along.real, along.imag])

    quarter = _KNOTS * (_highest(options) + 1) // 4
    corners = np.linspace(0.0, 2 * pi, 5)
    pieces: list[Floats] = []
    for start, stop in pairwise(corners):
        knots = np.linspace(start, stop, quarter + 1)
        pieces += follow(curve, knots, _EXACT * options.mean_radius)
    surface, rim = draw_closed(geometry, pieces)
    return Drawing(surface, {"rim": rim})


def _highest(options: Options) -> int:
    return max((k for k, _, _ in options.harmonics), default=0)


def _radius(options: Options, theta: Floats, order: int) -> Floats:
    """The radius, or its derivative of an order, at angles (n,)."""
    r = np.full(theta.shape, options.mean_radius if order == 0 else 0.0)
    for k, a, b in options.harmonics:
        r += ((a - 1j * b) * (1j * k) ** order * np.exp(1j * k * theta)).real
    return r


def _least(options: Options) -> tuple[float, float]:
    """The smallest radius and its angle, on a grid finer than any wave."""
    theta = np.linspace(0.0, 2 * pi, 64 * (_highest(options) + 1), endpoint=False)
    r = _radius(options, theta, 0)
    at = int(np.argmin(r))
    return float(r[at]), float(theta[at])
