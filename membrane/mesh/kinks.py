"""Vertices at which a varying coefficient has a kink or a cusp, and how strong it is."""

from __future__ import annotations

import numpy as np

from membrane.mesh.corner import Corner, Term
from membrane.records.arrays import Floats
from membrane.records.function import Function
from membrane.records.membrane import Contribution, Field, Membrane
from membrane.records.outline import Outline
from membrane.records.raw_mesh import RawMesh

OF_DENSITY = 1.0
"""Exponent at a kink of the density, the bedding or an edge.

A mode has r^2 and more there, but the mass within r, of which quadrature misses a part, may go
like little more than r^2, as the energy of a term r does.
"""

OF_TENSION = 1.0
"""Exponent at a kink of the tension that does not jump, such as a root of r."""

OF_JUMPING_TENSION = 0.5
"""Exponent where the tension depends on the direction: the weakest that there can be."""

NEAR = 1e-6
"""How far from its vertex a kink may be, as a share of the outline's size."""

FAR = 1e-4
"""At which two shares of the outline's size the growth towards a kink is measured."""

BOUNDED = 0.01
"""Power of the growth below which a coefficient counts as bounded."""

WEAKEST = 0.1
"""Exponent below which layers no longer help."""

DIRECTIONS = np.linspace(-np.pi, np.pi, 24, endpoint=False) + 0.1


def kinks(outline: Outline, membrane: Membrane, raw: RawMesh) -> tuple[Corner, ...]:
    """The vertices at kinks; a kink that is off the head has none."""
    size = np.sqrt(outline.area)
    found = []
    for place in membrane.kinks.T:
        distance = np.hypot(*(raw.vertices - place[:, None]))
        vertex = int(np.argmin(distance))
        if distance[vertex] < NEAR * size:
            found.append(Corner(vertex, (Term(_exponent(membrane, place, size)),)))
    return tuple(found)


def _exponent(membrane: Membrane, place: Floats, size: float) -> float:
    here = [c for c in membrane.contributions if _has_kink(c, place)]
    of_tension = [c for c in here if c.field is Field.TENSION]
    if not of_tension:
        return min((_of_growth(c, place, size) for c in here), default=OF_DENSITY)
    around = _around(place, NEAR * size)
    jumps = any(np.ptp(_numbers(c, around)) > 0.01 * _numbers(c, around).max() for c in of_tension)
    return OF_JUMPING_TENSION if jumps else OF_TENSION


def _of_growth(c: Contribution, place: Floats, size: float) -> float:
    """Of a coefficient other than the tension, which may grow without bounds towards a kink.

    Where it is like r^-n, so is the weight of the modes, and a circle of radius r holds a
    share r^(2 - n) of it: the layers end where that is lost in the tolerance, as r^(2 p) is.
    """
    near, far = (np.median(_numbers(c, _around(place, d * size))) for d in (NEAR, FAR))
    if not near > far > 0.0:
        return OF_DENSITY
    power = float(np.log(near / far) / np.log(FAR / NEAR))
    return max(OF_DENSITY - 0.5 * power, WEAKEST) if power > BOUNDED else OF_DENSITY


def _around(place: Floats, distance: float) -> Floats:
    return place[:, None] + distance * np.array([np.cos(DIRECTIONS), np.sin(DIRECTIONS)])


def _has_kink(c: Contribution, place: Floats) -> bool:
    if not isinstance(c.value, Function):
        return False
    return bool((c.value.places_of_kinks == place[:, None]).all(axis=0).any())


def _numbers(c: Contribution, places: Floats) -> Floats:
    assert isinstance(c.value, Function)
    return c.value.numbers(*places)
